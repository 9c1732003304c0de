#include <array>
#include <cmath>

#include <fmt/format.h>

#include "constants/arena.h"
#include "constants/table_builder.h"

namespace carboy {

namespace {

constexpr std::size_t most_steps = 8;
constexpr int highest_charge = 8;
constexpr std::array expression_terms{"1/T", "1", "T", "lnT", "T^2"};

}  // namespace

void TableBuilder::read_expression(const DocumentNode& node, Step& step) {
    if (!node.is_object_with({"terms", "from_C", "to_C"})) {
        return;
    }
    for (const char* key : {"terms", "from_C", "to_C"}) {
        if (!node.has(key)) {
            node.fault(fmt::format("'{}' is missing", key));
            return;
        }
    }
    const DocumentNode terms = node.at("terms");
    if (!terms.is_object_with({"1/T", "1", "T", "lnT", "T^2"})) {
        return;
    }
    for (std::size_t i = 0; i < expression_terms.size(); ++i) {
        step.expression[i] = terms.has(expression_terms[i]) ? terms.at(expression_terms[i]).number(-1e7, 1e7) : 0.0;
    }
    step.has_expression = true;
    step.expression_from_C = node.at("from_C").number(-50, 150);
    step.expression_to_C = node.at("to_C").number(-50, 150);
    if (!(step.expression_from_C < step.expression_to_C)) {
        node.fault("'from_C' must be below 'to_C'");
    }
    constexpr double reference_K = 298.15;
    constexpr double agreement = 0.05;
    const auto& e = step.expression;
    const double at_25C = e[0] / reference_K + e[1] + e[2] * reference_K + e[3] * std::log(reference_K) +
                          e[4] * reference_K * reference_K;
    if (step.pK_25C.known() && std::abs(at_25C - step.pK_25C.value) > agreement) {
        node.fault(fmt::format("the expression gives {:.3f} at 25 °C, 'pK_25C' says {:g}", at_25C, step.pK_25C.value),
                   "temperatures in the terms are in kelvin");
    }
}

Step TableBuilder::read_step(const DocumentNode& node) {
    Step step{};
    step.pK_25C = step.enthalpy_kJ_per_mol = step.heat_capacity_J_per_K_mol = unknown_figure();
    if (!node.is_object_with({"pK_25C", "enthalpy_kJ_per_mol", "heat_capacity_J_per_K_mol", "expression",
                              "reference_ionic_strength", "source", "evidence", "note"})) {
        return step;
    }
    if (!node.has("source")) {
        node.fault("'source' is missing", "every constant says where it comes from");
    }
    const Provenance provenance = read_provenance(node, {});
    if (!node.has("pK_25C")) {
        node.fault("'pK_25C' is missing");
    }
    step.pK_25C = read_figure(node, "pK_25C", -10, 30, provenance);
    step.enthalpy_kJ_per_mol = read_figure(node, "enthalpy_kJ_per_mol", -200, 200, provenance);
    step.heat_capacity_J_per_K_mol = read_figure(node, "heat_capacity_J_per_K_mol", -1000, 1000, provenance);
    if (node.has("reference_ionic_strength")) {
        step.reference_ionic_strength_mol_per_kg = node.at("reference_ionic_strength").number(0, 1);
    }
    if (node.has("expression")) {
        if (node.has("enthalpy_kJ_per_mol") || node.has("heat_capacity_J_per_K_mol")) {
            node.fault("a step has an expression or an enthalpy, not both");
        }
        read_expression(node.at("expression"), step);
    }
    step.note = keep(node.optional_text("note"));
    return step;
}

void TableBuilder::read_systems(const DocumentNode& document) {
    if (!document.has("systems")) {
        return;
    }
    for (const DocumentNode& node : document.at("systems").elements()) {
        if (!node.is_object_with({"name", "names", "species", "role", "counter_ions", "usual_form", "cautions",
                                  "apparent_molar_volume_cm3_per_mol", "steps", "source", "evidence", "note"})) {
            continue;
        }
        System system{};
        system.name = keep(node.required_text("name"));
        system.names = keep_all(node.optional_texts("names"));
        const std::string role = node.has("role") ? node.at("role").text() : "buffer";
        if (role != "buffer" && role != "additive") {
            node.at("role").fault(fmt::format("'{}' is no role", role), "buffer or additive");
        }
        system.role = role == "additive" ? Role::additive : Role::buffer;
        system.usual_form = keep(node.optional_text("usual_form"));
        system.note = keep(node.optional_text("note"));
        system.cautions = read_cautions_of(node);
        system.apparent_molar_volume_cm3_per_mol =
            read_figure(node, "apparent_molar_volume_cm3_per_mol", -200, 2000, read_provenance(node, {}));

        std::vector<Step> steps;
        if (!node.has("steps")) {
            node.fault("'steps' is missing");
        } else {
            for (const DocumentNode& step : node.at("steps").elements()) {
                steps.push_back(read_step(step));
            }
        }
        if (steps.empty() || steps.size() > most_steps) {
            node.fault(fmt::format("a system has 1 to {} steps, this one {}", most_steps, steps.size()));
        }

        std::vector<Species> species;
        std::optional<Formula> previous;
        for (const std::string& text : node.optional_texts("species")) {
            const auto formula = formula_at(node, text);
            if (!formula) {
                break;
            }
            if (std::abs(formula->charge) > highest_charge) {
                node.fault(fmt::format("the charge of {} is beyond ±{}", text, highest_charge));
            }
            if (previous) {
                Formula lost = difference(*previous, *formula);
                lost.atoms["H"] -= 1;
                if (lost.charge != 1 || !only_water(lost)) {
                    node.fault(fmt::format("from '{}' to '{}' is not the loss of one H+", species.back().formula, text),
                               "list the species from most to least protonated");
                }
            }
            species.push_back({keep(text), static_cast<std::int8_t>(formula->charge), molar_mass(node, *formula)});
            previous = formula;
        }
        if (species.size() != steps.size() + 1) {
            node.fault(
                fmt::format("{} steps need {} species, {} are given", steps.size(), steps.size() + 1, species.size()),
                "list every protonation state under 'species'");
        }
        // A faulty entry keeps a shape that later checks can walk over.
        species.resize(steps.size() + 1, Species{"", 0, 1.0});
        system.steps = keep_array(std::move(steps));
        system.species = keep_array(std::move(species));
        paths_[fmt::format("system {}", system.name)] = node.path();
        const std::size_t index = place(systems_, system, &System::name, "system");
        counter_ion_names_[index] = node.optional_texts("counter_ions");
    }
}

}  // namespace carboy
