#include <algorithm>

#include "carboy/constants.h"

namespace carboy {

namespace {

bool has_statement(const Reagent& reagent, const Table& table, std::string_view code) {
    return std::any_of(reagent.ghs.statements.begin(), reagent.ghs.statements.end(),
                       [&](std::uint16_t index) { return table.hazards[index].code == code; });
}

bool calls_for(const Reagent& reagent, const Table& table, const PictogramRule& rule) {
    return std::any_of(rule.statements.begin(), rule.statements.end(),
                       [&](std::string_view code) { return has_statement(reagent, table, code); });
}

/// True when a statement of the article, or a pictogram that one calls for, is among those beside which the rule falls
/// away.
bool falls_away(const Reagent& reagent, const Table& table, const PictogramRule& rule) {
    return std::any_of(rule.unless.begin(), rule.unless.end(), [&](std::string_view code) {
        return has_statement(reagent, table, code) ||
               std::any_of(table.pictograms.begin(), table.pictograms.end(), [&](const PictogramRule& other) {
                   return other.code == code && calls_for(reagent, table, other);
               });
    });
}

}  // namespace

std::vector<const PictogramRule*> pictograms_of(const Reagent& reagent, const Table& table) {
    std::vector<const PictogramRule*> found;
    for (const PictogramRule& rule : table.pictograms) {
        const bool known = std::any_of(found.begin(), found.end(),
                                       [&](const PictogramRule* other) { return other->code == rule.code; });
        if (!known && calls_for(reagent, table, rule) && !falls_away(reagent, table, rule)) {
            found.push_back(&rule);
        }
    }
    std::sort(found.begin(), found.end(),
              [](const PictogramRule* one, const PictogramRule* other) { return one->code < other->code; });
    return found;
}

}  // namespace carboy
