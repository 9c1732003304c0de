#include "notation/formula_item.h"

#include <algorithm>

#include <fmt/format.h>

#include "carboy/concentration.h"

#include "notation/line.h"
#include "notation/reagent_name.h"

namespace carboy {

namespace {

double mol_per_L(const Concentration& concentration, const Reagent& reagent, const Table& table) {
    return amount_in(concentration, Volume::litres(1), reagent, table).mol();
}

/// Per litre and per kilogram of water do not add up before the recipe is known.
[[noreturn]] void fail_to_add_molality(std::string_view name) {
    throw Error(ErrorKind::input, "unusable_unit",
                fmt::format("{} is in the formula as well, and an amount in mol/kg cannot be added to it", name),
                "label", "write it in mol/L");
}

bool is_cation(const Table& table, ComponentId id) {
    return id.kind == ComponentKind::spectator ? table.spectators[id.index].charge > 0
                                               : table.systems[id.index].species.back().charge >= 0;
}

bool same_sign(const Table& table, ComponentId left, ComponentId right) {
    return is_cation(table, left) == is_cation(table, right);
}

void add_additive(Label& label, std::uint16_t index, const Concentration& concentration, const Table& table) {
    const Reagent& reagent = table.reagents[index];
    const auto known = std::find_if(label.additives.begin(), label.additives.end(),
                                    [&](const AdditiveItem& item) { return item.reagent == index; });
    if (known == label.additives.end()) {
        label.additives.push_back({index, concentration});
        return;
    }
    if (known->concentration.unit == ConcentrationUnit::mol_per_kg) {
        fail_to_add_molality(reagent.name);
    }
    known->concentration = {mol_per_L(known->concentration, reagent, table) + mol_per_L(concentration, reagent, table),
                            ConcentrationUnit::mol_per_L};
}

void add_buffer(Label& label, const FormulaItem& item, const Concentration& concentration,
                std::optional<ComponentId> titrant, const Table& table) {
    const Reagent& reagent = table.reagents[item.reagent];
    const auto brought = buffer_brought_by(table, reagent);
    if (!brought) {
        throw Error(ErrorKind::data, "invalid_constants",
                    fmt::format("{} cannot be the buffer of a formula", reagent.name), "formulas", {});
    }
    const auto system = brought->buffer.system;
    const double total = mol_per_L(concentration, reagent, table) * brought->count;
    const auto known = std::find_if(label.buffers.begin(), label.buffers.end(),
                                    [&](const BufferItem& buffer) { return buffer.system == system; });
    if (known != label.buffers.end()) {
        if (known->concentration.unit == ConcentrationUnit::mol_per_kg) {
            fail_to_add_molality(name_of(table, system));
        }
        known->concentration.value += total;
        known->named_form.reset();
        return;
    }
    BufferItem buffer{system, {total, ConcentrationUnit::mol_per_L}, brought->buffer.counter_ion};
    if (item.has_counter_ion) {
        buffer.counter_ion = item.counter_ion;
    }
    // An acid takes the place of an acid only: what the formula's salts bring stays.
    if (titrant && *titrant != system && (!buffer.counter_ion || same_sign(table, *titrant, *buffer.counter_ion))) {
        buffer.counter_ion = titrant;
    }
    if (reagent.supplies.size() > 1) {
        buffer.named_form = item.reagent;
    }
    label.buffers.push_back(buffer);
}

}  // namespace

const NamedFormula* formula_named(const Table& table, std::string_view name) {
    if (const NamedFormula* formula = find_named_formula(table, name)) {
        return formula;
    }
    const std::string lowered = lower_case(name);
    for (const std::string_view word : {" buffer", " solution"}) {
        if (lowered.ends_with(word)) {
            return find_named_formula(table, name.substr(0, name.size() - word.size()));
        }
    }
    return nullptr;
}

void add_formula(Label& label, const NamedFormula& formula, double times, std::optional<ComponentId> titrant,
                 const Table& table) {
    for (const FormulaItem& item : formula.items) {
        const Concentration concentration{item.concentration * times, item.unit};
        if (label.ph && item.part == FormulaPart::buffer) {
            add_buffer(label, item, concentration, titrant, table);
        } else if (!label.ph || item.part != FormulaPart::titrant) {
            add_additive(label, item.reagent, concentration, table);
        }
    }
}

}  // namespace carboy
