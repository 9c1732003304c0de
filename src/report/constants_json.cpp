#include "report/constants_json.h"

#include <cmath>

#include "carboy/concentration.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

ordered_json number_or_null(double value) {
    return std::isnan(value) ? ordered_json(nullptr) : ordered_json(value);
}

ordered_json figure_json(const Figure& figure, const Table& table) {
    if (!figure.known()) {
        return nullptr;
    }
    return {{"value", figure.value},
            {"uncertainty", number_or_null(figure.uncertainty)},
            {"source", table.sources[figure.source].key},
            {"evidence", evidence_word(figure.evidence)}};
}

ordered_json words_json(std::span<const std::string_view> words) {
    ordered_json list = ordered_json::array();
    for (const std::string_view word : words) {
        list.push_back(word);
    }
    return list;
}

ordered_json cautions_json(std::span<const std::uint16_t> cautions, const Table& table) {
    ordered_json list = ordered_json::array();
    for (const std::uint16_t caution : cautions) {
        list.push_back(table.cautions[caution].text);
    }
    return list;
}

ordered_json traits_json(const System& system, const Table& table) {
    const std::uint16_t index = id_of(table, system).index;
    ordered_json list = ordered_json::array();
    for (const Fact& fact : table.facts) {
        if (fact.system == index) {
            list.push_back({{"trait", trait_word(fact.trait)},
                            {"holds", fact.holds},
                            {"wavelength_nm", number_or_null(fact.wavelength_nm)},
                            {"text", fact.text},
                            {"source", table.sources[fact.source].key},
                            {"evidence", evidence_word(fact.evidence)}});
        }
    }
    return list;
}

ordered_json step_json(const System& system, std::size_t index, const Table& table) {
    const Step& step = system.steps[index];
    ordered_json record{{"step", index + 1},
                        {"acid", system.species[index].formula},
                        {"base", system.species[index + 1].formula},
                        {"pK_25C", figure_json(step.pK_25C, table)},
                        {"reference_ionic_strength_mol_per_kg", step.reference_ionic_strength_mol_per_kg},
                        {"enthalpy_kJ_per_mol", figure_json(step.enthalpy_kJ_per_mol, table)},
                        {"heat_capacity_J_per_K_mol", figure_json(step.heat_capacity_J_per_K_mol, table)}};
    if (step.has_expression) {
        const auto& e = step.expression;
        record["expression"] = {{"terms", {{"1/T", e[0]}, {"1", e[1]}, {"T", e[2]}, {"lnT", e[3]}, {"T^2", e[4]}}},
                                {"from_C", step.expression_from_C},
                                {"to_C", step.expression_to_C}};
    }
    record["note"] = step.note;
    return record;
}

}  // namespace

ordered_json system_json(const System& system, const Table& table) {
    ordered_json steps = ordered_json::array();
    for (std::size_t i = 0; i < system.steps.size(); ++i) {
        steps.push_back(step_json(system, i, table));
    }
    ordered_json ions = ordered_json::array();
    for (const ComponentId ion : system.counter_ions) {
        ions.push_back(name_of(table, ion));
    }
    return {{"entry", "system"},
            {"name", system.name},
            {"names", words_json(system.names)},
            {"role", system.role == Role::buffer ? "buffer" : "additive"},
            {"counter_ions", std::move(ions)},
            {"usual_form", system.usual_form},
            {"apparent_molar_volume_cm3_per_mol", figure_json(system.apparent_molar_volume_cm3_per_mol, table)},
            {"steps", std::move(steps)},
            {"cautions", cautions_json(system.cautions, table)},
            {"traits", traits_json(system, table)},
            {"note", system.note}};
}

ordered_json spectator_json(const Spectator& spectator, const Table& table) {
    return {{"entry", "spectator"},
            {"name", spectator.name},
            {"names", words_json(spectator.names)},
            {"formula", spectator.formula},
            {"charge", static_cast<int>(spectator.charge)},
            {"molar_mass_g_per_mol", spectator.molar_mass_g_per_mol},
            {"apparent_molar_volume_cm3_per_mol", figure_json(spectator.apparent_molar_volume_cm3_per_mol, table)}};
}

ordered_json reagent_json(const Reagent& reagent, const Table& table) {
    ordered_json supplies = ordered_json::object();
    for (const Supply& supply : reagent.supplies) {
        supplies[std::string(name_of(table, supply.component))] = supply.count;
    }
    ordered_json statements = ordered_json::array();
    for (const std::uint16_t statement : reagent.ghs.statements) {
        statements.push_back(table.hazards[statement].code);
    }
    const ordered_json signal =
        reagent.ghs.signal_word.empty() ? ordered_json(nullptr) : ordered_json(reagent.ghs.signal_word);
    return {{"entry", "reagent"},
            {"name", reagent.name},
            {"names", words_json(reagent.names)},
            {"formula", reagent.formula},
            {"cas", reagent.cas.empty() ? ordered_json(nullptr) : ordered_json(reagent.cas)},
            {"cas_evidence", evidence_word(reagent.cas_evidence)},
            {"molar_mass_g_per_mol", reagent.molar_mass_g_per_mol},
            {"supplies", std::move(supplies)},
            {"state", reagent.state == State::solid    ? "solid"
                      : reagent.state == State::liquid ? "liquid"
                                                       : "solution"},
            {"usual", reagent.usual},
            {"rarely_stocked", reagent.rarely_stocked},
            {"assay", figure_json(reagent.assay, table)},
            {"assay_minimum", number_or_null(reagent.assay_minimum)},
            {"mass_percent", figure_json(reagent.mass_percent, table)},
            {"strength_mol_per_L", figure_json(reagent.strength_mol_per_L, table)},
            {"density_g_per_mL", figure_json(reagent.density_g_per_mL, table)},
            {"solubility_g_per_L", figure_json(reagent.solubility_g_per_L, table)},
            {"ghs",
             {{"signal_word", signal},
              {"statements", std::move(statements)},
              {"source", table.sources[reagent.ghs.source].key},
              {"evidence", evidence_word(reagent.ghs.evidence)}}},
            {"cautions", cautions_json(reagent.cautions, table)},
            {"note", reagent.note}};
}

ordered_json formula_json(const NamedFormula& formula, const Table& table) {
    ordered_json items = ordered_json::array();
    for (const FormulaItem& item : formula.items) {
        const char* unit = item.unit == ConcentrationUnit::g_per_L       ? "g_per_L"
                           : item.unit == ConcentrationUnit::percent_v_v ? "percent_v_v"
                                                                         : "mol_per_L";
        items.push_back({{"reagent", table.reagents[item.reagent].name},
                         {unit, item.concentration},
                         {"part", item.part == FormulaPart::buffer    ? "buffer"
                                  : item.part == FormulaPart::titrant ? "titrant"
                                                                      : "added"},
                         {"counter_ion", item.has_counter_ion ? ordered_json(name_of(table, item.counter_ion))
                                                              : ordered_json(nullptr)}});
    }
    return {{"entry", "formula"},
            {"name", formula.name},
            {"names", words_json(formula.names)},
            {"pH", number_or_null(formula.ph.value)},
            {"items", std::move(items)},
            {"source", table.sources[formula.source].key},
            {"evidence", evidence_word(formula.evidence)},
            {"note", formula.note}};
}

ordered_json constants_list_json(const Table& table, Listing listing) {
    ordered_json entries = ordered_json::array();
    if (listing == Listing::systems) {
        for (const System& system : table.systems) {
            entries.push_back(system_json(system, table));
        }
    } else if (listing == Listing::reagents) {
        for (const Reagent& reagent : table.reagents) {
            entries.push_back(reagent_json(reagent, table));
        }
    } else if (listing == Listing::formulas) {
        for (const NamedFormula& formula : table.formulas) {
            entries.push_back(formula_json(formula, table));
        }
    } else {
        for (const Spectator& spectator : table.spectators) {
            entries.push_back(spectator_json(spectator, table));
        }
    }
    return {{"kind", "constants_list"}, {"constants_version", table.version}, {"entries", std::move(entries)}};
}

ordered_json constants_entry_json(const Table& table, std::string_view name) {
    ordered_json entries = ordered_json::array();
    if (const System* system = find_system(table, name)) {
        entries.push_back(system_json(*system, table));
    }
    if (const Spectator* spectator = find_spectator(table, name)) {
        entries.push_back(spectator_json(*spectator, table));
    }
    if (const NamedFormula* formula = find_named_formula(table, name)) {
        entries.push_back(formula_json(*formula, table));
    }
    const Reagent* reagent = find_reagent(table, name);
    if (reagent == nullptr) {
        reagent = find_reagent_by_cas(table, name);
    }
    if (reagent != nullptr) {
        entries.push_back(reagent_json(*reagent, table));
    }
    if (entries.empty()) {
        return nullptr;
    }
    return {{"kind", "constants_entry"}, {"constants_version", table.version}, {"entries", std::move(entries)}};
}

ordered_json sources_json(const Table& table) {
    ordered_json list = ordered_json::array();
    for (const Source& source : table.sources) {
        list.push_back({{"key", source.key}, {"citation", source.citation}, {"note", source.note}});
    }
    return {{"kind", "constants_sources"}, {"constants_version", table.version}, {"sources", std::move(list)}};
}

}  // namespace carboy
