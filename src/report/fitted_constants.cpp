#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "report/fit_json.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

constexpr auto own_source = "own-measurement";

ordered_json figure_json(const Figure& figure, const Table& table) {
    ordered_json entry{{"value", figure.value}};
    if (!std::isnan(figure.uncertainty)) {
        entry["uncertainty"] = figure.uncertainty;
    }
    entry["source"] = table.sources[figure.source].key;
    entry["evidence"] = evidence_word(figure.evidence);
    return entry;
}

void add_text(ordered_json& entry, const char* key, std::string_view text) {
    if (!text.empty()) {
        entry[key] = text;
    }
}

const FittedParameter* fitted(const Fit& fit, std::uint16_t system, std::size_t step) {
    const auto found = std::find_if(fit.parameters.begin(), fit.parameters.end(), [&](const FittedParameter& p) {
        return p.parameter == FreeParameter{Unknown::pK, system, step, 0};
    });
    return found == fit.parameters.end() ? nullptr : &*found;
}

/// An expression that goes through the new value: its constant term moves by as much.
ordered_json expression_json(const Step& step, double moved) {
    const auto& e = step.expression;
    return {{"terms", {{"1/T", e[0]}, {"1", e[1] + moved}, {"T", e[2]}, {"lnT", e[3]}, {"T^2", e[4]}}},
            {"from_C", step.expression_from_C},
            {"to_C", step.expression_to_C}};
}

ordered_json step_json(const Step& step, const FittedParameter* found, const Fit& fit, const Table& table) {
    ordered_json entry;
    if (found != nullptr) {
        // Scatter of the readings, and what the activity model adds to any pK taken from a pH.
        entry["pK_25C"] = {{"value", found->pK_25C},
                           {"uncertainty", std::hypot(found->standard_error, fit.model_uncertainty)},
                           {"source", own_source},
                           {"evidence", "computed"}};
    } else {
        entry["pK_25C"] = figure_json(step.pK_25C, table);
    }
    if (step.enthalpy_kJ_per_mol.known()) {
        entry["enthalpy_kJ_per_mol"] = figure_json(step.enthalpy_kJ_per_mol, table);
    }
    if (step.heat_capacity_J_per_K_mol.known()) {
        entry["heat_capacity_J_per_K_mol"] = figure_json(step.heat_capacity_J_per_K_mol, table);
    }
    if (step.has_expression) {
        entry["expression"] = expression_json(step, found == nullptr ? 0.0 : found->value - found->start);
    }
    if (step.reference_ionic_strength_mol_per_kg > 0) {
        entry["reference_ionic_strength"] = step.reference_ionic_strength_mol_per_kg;
    }
    entry["source"] = table.sources[step.pK_25C.source].key;
    entry["evidence"] = evidence_word(step.pK_25C.evidence);
    add_text(
        entry, "note",
        found == nullptr
            ? std::string(step.note)
            : fmt::format("Fitted: {:.4f} at {:g} °C and zero ionic strength, standard error {:.2g}; the table had "
                          "{:g} at 25 °C. Moves with temperature as the table says.",
                          found->value, fit.problem.at.celsius(), found->standard_error, step.pK_25C.value));
    return entry;
}

ordered_json system_json(std::uint16_t index, const Fit& fit, const Table& table) {
    const System& system = table.systems[index];
    ordered_json entry{{"name", system.name}};
    if (!system.names.empty()) {
        entry["names"] = system.names;
    }
    ordered_json species = ordered_json::array();
    for (const Species& one : system.species) {
        species.push_back(one.formula);
    }
    entry["species"] = std::move(species);
    entry["role"] = system.role == Role::buffer ? "buffer" : "additive";
    ordered_json ions = ordered_json::array();
    for (const ComponentId ion : system.counter_ions) {
        ions.push_back(name_of(table, ion));
    }
    if (!ions.empty()) {
        entry["counter_ions"] = std::move(ions);
    }
    add_text(entry, "usual_form", system.usual_form);
    ordered_json cautions = ordered_json::array();
    for (const std::uint16_t caution : system.cautions) {
        cautions.push_back(table.cautions[caution].key);
    }
    if (!cautions.empty()) {
        entry["cautions"] = std::move(cautions);
    }
    if (system.apparent_molar_volume_cm3_per_mol.known()) {
        entry["apparent_molar_volume_cm3_per_mol"] = figure_json(system.apparent_molar_volume_cm3_per_mol, table);
    }
    ordered_json steps = ordered_json::array();
    for (std::size_t step = 0; step < system.steps.size(); ++step) {
        steps.push_back(step_json(system.steps[step], fitted(fit, index, step), fit, table));
    }
    entry["steps"] = std::move(steps);
    add_text(entry, "note", system.note);
    return entry;
}

}  // namespace

ordered_json fitted_constants(const Fit& fit, const Table& table, std::string_view what) {
    std::string found;
    std::vector<std::uint16_t> systems;
    for (const FittedParameter& p : fit.parameters) {
        found += fmt::format("{}{} {:.6g} ± {:.2g}", found.empty() ? "" : ", ", parameter_name(p.parameter, table),
                             p.value, p.standard_error);
        const bool is_pK = p.parameter.unknown == Unknown::pK;
        if (is_pK && std::find(systems.begin(), systems.end(), p.parameter.system) == systems.end()) {
            systems.push_back(p.parameter.system);
        }
    }
    ordered_json entries = ordered_json::array();
    for (const std::uint16_t system : systems) {
        entries.push_back(system_json(system, fit, table));
    }
    return {{"schema", "carboy-constants/1"},
            {"sources",
             {{own_source,
               {{"citation", fmt::format("Own measurement: {}, {} readings at {:g} °C", what, fit.residuals.size(),
                                         fit.problem.at.celsius())},
                {"note", fmt::format("Fitted by carboy {} with the {} model over constants {} (sha-256 {:.12}): {}; "
                                     "chi-square {:.4g} with {} degrees of freedom. The uncertainty of a pK is that of "
                                     "the fit and of the activity model ({:.3f}) together.",
                                     CARBOY_VERSION, fit.activity_model, table.version, table.sha256, found,
                                     fit.chi_square, fit.degrees_of_freedom, fit.model_uncertainty)}}}}},
            {"systems", std::move(entries)}};
}

}  // namespace carboy
