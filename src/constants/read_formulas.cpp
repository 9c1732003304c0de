#include <algorithm>
#include <array>
#include <optional>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/concentration.h"

#include "constants/arena.h"
#include "constants/table_builder.h"

namespace carboy {

namespace {

struct UnitKey {
    const char* key;
    ConcentrationUnit unit;
    double divisor;
    double largest;
};
constexpr std::array unit_keys{UnitKey{"mmol_per_L", ConcentrationUnit::mol_per_L, 1000, 20000},
                               UnitKey{"g_per_L", ConcentrationUnit::g_per_L, 1, 2000},
                               UnitKey{"percent_v_v", ConcentrationUnit::percent_v_v, 1, 100}};
constexpr std::array parts{"added", "buffer", "titrant"};

bool has_name(std::string_view name, std::span<const std::string_view> names, std::string_view folded) {
    return fold_name(name) == folded ||
           std::any_of(names.begin(), names.end(), [&](std::string_view other) { return fold_name(other) == folded; });
}

}  // namespace

std::optional<FormulaItem> TableBuilder::read_formula_item(const DocumentNode& node) {
    if (!node.is_object_with({"reagent", "part", "counter_ion", "mmol_per_L", "g_per_L", "percent_v_v"})) {
        return std::nullopt;
    }
    FormulaItem item{};
    const std::string name = node.required_text("reagent");
    const auto reagent = std::find_if(reagents_.begin(), reagents_.end(),
                                      [&](const Reagent& r) { return has_name(r.name, r.names, fold_name(name)); });
    if (reagent == reagents_.end()) {
        node.fault(fmt::format("there is no reagent '{}'", name), "add it under 'reagents'");
        return std::nullopt;
    }
    item.reagent = static_cast<std::uint16_t>(reagent - reagents_.begin());
    const auto units =
        std::count_if(unit_keys.begin(), unit_keys.end(), [&](const UnitKey& u) { return node.has(u.key); });
    if (units != 1) {
        node.fault("an item has one concentration", "give mmol_per_L, g_per_L or percent_v_v");
        return std::nullopt;
    }
    for (const UnitKey& unit : unit_keys) {
        if (node.has(unit.key)) {
            item.unit = unit.unit;
            item.concentration = node.at(unit.key).number(1e-6, unit.largest) / unit.divisor;
        }
    }
    if (item.unit == ConcentrationUnit::percent_v_v && reagent->state == State::solid) {
        node.at("percent_v_v").fault(fmt::format("{} is a solid", reagent->name), "give mmol_per_L or g_per_L");
    }
    const std::string part = node.has("part") ? node.at("part").text() : parts.front();
    const auto* const known = std::find(parts.begin(), parts.end(), part);
    if (known == parts.end()) {
        node.at("part").fault(fmt::format("'{}' is no part of a formula", part),
                              fmt::format("one of: {}", fmt::join(parts, ", ")));
        return std::nullopt;
    }
    item.part = static_cast<FormulaPart>(known - parts.begin());
    const auto systems = std::count_if(reagent->supplies.begin(), reagent->supplies.end(), [](const Supply& supply) {
        return supply.component.kind == ComponentKind::system;
    });
    if (item.part == FormulaPart::buffer && systems != 1) {
        node.fault(fmt::format("{} does not bring one system, as a buffer must", reagent->name));
    }
    if (node.has("counter_ion")) {
        const auto ion = component(node.at("counter_ion").text());
        item.has_counter_ion = ion.has_value();
        item.counter_ion = ion.value_or(ComponentId{});
        if (!ion || item.part != FormulaPart::buffer) {
            node.at("counter_ion")
                .fault(ion ? "only a buffer has a counter-ion" : "there is no ion or system of this name");
        }
    }
    return item;
}

void TableBuilder::read_formulas(const DocumentNode& document) {
    if (!document.has("formulas")) {
        return;
    }
    for (const DocumentNode& node : document.at("formulas").elements()) {
        if (!node.is_object_with({"name", "names", "pH", "items", "source", "evidence", "note"})) {
            continue;
        }
        NamedFormula formula{};
        formula.name = keep(node.required_text("name"));
        formula.names = keep_all(node.optional_texts("names"));
        const Provenance provenance = read_provenance(node, {});
        formula.source = provenance.source;
        formula.evidence = provenance.evidence;
        formula.ph = unknown_figure();
        if (node.has("pH")) {
            formula.ph.value = node.at("pH").number(-2, 16);
            formula.ph.source = provenance.source;
            formula.ph.evidence = provenance.evidence;
        }
        formula.note = keep(node.optional_text("note"));
        std::vector<FormulaItem> items;
        if (node.has("items")) {
            for (const DocumentNode& entry : node.at("items").elements()) {
                if (const auto item = read_formula_item(entry)) {
                    items.push_back(*item);
                }
            }
        }
        const bool buffered = std::any_of(items.begin(), items.end(),
                                          [](const FormulaItem& item) { return item.part == FormulaPart::buffer; });
        if (items.empty() || (formula.ph.known() && !buffered)) {
            node.fault(items.empty() ? "a formula needs 'items'" : "a formula with a pH needs an item that holds it",
                       "give an item \"part\": \"buffer\"");
        }
        formula.items = keep_array(std::move(items));
        paths_[fmt::format("formula {}", formula.name)] = node.path();
        place(formulas_, formula, &NamedFormula::name, "formula");
    }
}

}  // namespace carboy
