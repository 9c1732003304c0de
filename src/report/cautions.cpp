#include "report/cautions.h"

#include <algorithm>
#include <array>

namespace carboy {

namespace {

void add_once(std::vector<std::uint16_t>& list, std::span<const std::uint16_t> more) {
    for (const std::uint16_t index : more) {
        if (std::find(list.begin(), list.end(), index) == list.end()) {
            list.push_back(index);
        }
    }
}

}  // namespace

Cautions cautions_of(const Plan& plan, const Table& table) {
    Cautions cautions;
    for (const std::uint16_t index : reagents_used(plan)) {
        const Reagent& reagent = table.reagents[index];
        if (!reagent.ghs.statements.empty()) {
            cautions.hazardous.push_back(index);
        }
        add_once(cautions.advice, reagent.cautions);
        for (const Supply& supply : reagent.supplies) {
            if (supply.component.kind == ComponentKind::system) {
                add_once(cautions.advice, table.systems[supply.component.index].cautions);
            }
        }
    }
    for (std::size_t i = 0; i < table.cautions.size(); ++i) {
        if (table.cautions[i].key.starts_with("always-")) {
            add_once(cautions.advice, std::array{static_cast<std::uint16_t>(i)});
        }
    }
    return cautions;
}

}  // namespace carboy
