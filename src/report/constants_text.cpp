#include "report/constants_text.h"

#include <cmath>
#include <vector>

#include <fmt/format.h>

#include "carboy/concentration.h"

#include "report/figure_text.h"
#include "report/page.h"

namespace carboy {

namespace {

using Columns = std::vector<Page::Column>;

std::string joined(std::span<const std::string_view> words) {
    std::string text;
    for (const std::string_view word : words) {
        text += text.empty() ? "" : "; ";
        text += word;
    }
    return text;
}

std::string provenance(const Figure& figure, const Table& table) {
    return fmt::format("{} ({})", table.sources[figure.source].key, evidence_word(figure.evidence));
}

/// `7.198 ± 0.003`, `-` when the table does not hold it.
std::string figure_with_uncertainty(const Figure& figure) {
    if (!figure.known()) {
        return "-";
    }
    return std::isnan(figure.uncertainty) ? fmt::format("{:g}", figure.value)
                                          : fmt::format("{:g} ± {:g}", figure.value, figure.uncertainty);
}

void fact(Page& page, std::string_view name, std::string_view value) {
    if (!value.empty()) {
        page.paragraph(value, fmt::format("  {:<22}", name));
    }
}

void figure_fact(Page& page, std::string_view name, const Figure& figure, std::string_view unit, const Table& table) {
    if (figure.known()) {
        fact(page, name, fmt::format("{} {}  {}", figure_with_uncertainty(figure), unit, provenance(figure, table)));
    }
}

void step_text(Page& page, const System& system, std::size_t index, const Table& table) {
    const Step& step = system.steps[index];
    page.blank();
    page.paragraph(
        fmt::format("step {}: {} -> {}", index + 1, system.species[index].formula, system.species[index + 1].formula));
    figure_fact(page, "pK at 25 °C", step.pK_25C, "", table);
    if (step.reference_ionic_strength_mol_per_kg > 0) {
        fact(page, "",
             fmt::format("concentration constant at ionic strength {:g} mol/kg; turned into one at zero ionic "
                         "strength by the Davies equation",
                         step.reference_ionic_strength_mol_per_kg));
    }
    if (step.has_expression) {
        const auto& e = step.expression;
        fact(page, "pK(T)",
             fmt::format("{:g}/T + {:g} + {:g} T + {:g} ln T + {:g} T², {:g} to {:g} °C", e[0], e[1], e[2], e[3], e[4],
                         step.expression_from_C, step.expression_to_C));
    }
    figure_fact(page, "enthalpy", step.enthalpy_kJ_per_mol, "kJ/mol", table);
    figure_fact(page, "heat capacity", step.heat_capacity_J_per_K_mol, "J/(K mol)", table);
    fact(page, "note", step.note);
}

void cautions_text(Page& page, std::span<const std::uint16_t> cautions, const Table& table) {
    for (const std::uint16_t caution : cautions) {
        fact(page, "caution", table.cautions[caution].text);
    }
}

void traits_text(Page& page, const System& system, const Table& table) {
    const std::uint16_t index = id_of(table, system).index;
    for (const Fact& one : table.facts) {
        if (one.system == index) {
            fact(page, trait_word(one.trait),
                 fmt::format("{}{}  {} ({})", one.holds ? "" : "not so: ", one.text, table.sources[one.source].key,
                             evidence_word(one.evidence)));
        }
    }
}

void system_text(Page& page, const System& system, const Table& table) {
    page.heading(fmt::format("SYSTEM {}", system.name));
    fact(page, "also called", joined(system.names));
    fact(page, "used as", system.role == Role::buffer ? "buffer" : "additive");
    std::string ions;
    for (const ComponentId ion : system.counter_ions) {
        ions += ions.empty() ? "" : ", ";
        ions += name_of(table, ion);
    }
    fact(page, "counter-ions", ions);
    fact(page, "usual form", system.usual_form);
    figure_fact(page, "molar volume", system.apparent_molar_volume_cm3_per_mol, "cm³/mol", table);
    fact(page, "note", system.note);
    cautions_text(page, system.cautions, table);
    traits_text(page, system, table);
    for (std::size_t step = 0; step < system.steps.size(); ++step) {
        step_text(page, system, step, table);
    }
}

void spectator_text(Page& page, const Spectator& spectator, const Table& table) {
    page.heading(fmt::format("ION OR SOLUTE {}", spectator.name));
    fact(page, "also called", joined(spectator.names));
    fact(page, "charge", fmt::format("{:+d}", spectator.charge));
    fact(page, "molar mass", fmt::format("{:.4f} g/mol, from the formula", spectator.molar_mass_g_per_mol));
    figure_fact(page, "molar volume", spectator.apparent_molar_volume_cm3_per_mol, "cm³/mol", table);
}

std::string supplies_text(const Reagent& reagent, const Table& table) {
    std::string text;
    for (const Supply& supply : reagent.supplies) {
        text += fmt::format("{}{:g} {}", text.empty() ? "" : " + ", supply.count, name_of(table, supply.component));
    }
    return text;
}

void reagent_text(Page& page, const Reagent& reagent, const Table& table) {
    page.heading(fmt::format("REAGENT {}", reagent.name));
    fact(page, "also called", joined(reagent.names));
    fact(page, "formula", reagent.formula);
    if (!reagent.cas.empty()) {
        fact(page, "CAS number", fmt::format("{} ({})", reagent.cas, evidence_word(reagent.cas_evidence)));
    }
    fact(page, "molar mass", fmt::format("{:.4f} g/mol, from the formula", reagent.molar_mass_g_per_mol));
    fact(page, "supplies, per mole", supplies_text(reagent, table));
    figure_fact(page, "assay used", reagent.assay, "", table);
    figure_fact(page, "mass percent", reagent.mass_percent, "% w/w", table);
    figure_fact(page, "strength", reagent.strength_mol_per_L, "mol/L", table);
    figure_fact(page, "density", reagent.density_g_per_mL, "g/mL", table);
    figure_fact(page, "solubility", reagent.solubility_g_per_L, "g/L at 20 to 25 °C", table);
    std::string hazards(reagent.ghs.signal_word);
    for (const std::uint16_t statement : reagent.ghs.statements) {
        hazards += fmt::format("{}{} {}", hazards.empty() ? "" : "; ", table.hazards[statement].code,
                               table.hazards[statement].text);
    }
    fact(page, "GHS",
         fmt::format("{}  {} ({})", hazards.empty() ? "not classified" : hazards, table.sources[reagent.ghs.source].key,
                     evidence_word(reagent.ghs.evidence)));
    cautions_text(page, reagent.cautions, table);
    fact(page, "note", reagent.note);
}

std::string formula_amount(const FormulaItem& item) {
    constexpr double milli = 1000;
    return item.unit == ConcentrationUnit::g_per_L       ? fmt::format("{:g} g/L", item.concentration)
           : item.unit == ConcentrationUnit::percent_v_v ? fmt::format("{:g} % v/v", item.concentration)
                                                         : fmt::format("{:g} mmol/L", item.concentration * milli);
}

void formula_text(Page& page, const NamedFormula& formula, const Table& table) {
    page.heading(fmt::format("FORMULA {}", formula.name));
    fact(page, "also called", joined(formula.names));
    for (const FormulaItem& item : formula.items) {
        std::string text = fmt::format("{} {}", formula_amount(item), table.reagents[item.reagent].name);
        if (item.part == FormulaPart::buffer) {
            text += item.has_counter_ion ? fmt::format("; holds the pH, with {}", name_of(table, item.counter_ion))
                                         : "; holds the pH";
        } else if (item.part == FormulaPart::titrant) {
            text += "; with a pH on the label, as much as that takes";
        }
        fact(page, &item == formula.items.data() ? "1x holds" : "", text);
    }
    fact(page, "pH",
         formula.ph.known() ? fmt::format("{:g} at 25 °C and 1x, when the label gives none", formula.ph.value)
                            : "as written, when the label gives none");
    fact(page, "evidence",
         fmt::format("{} ({})", table.sources[formula.source].citation, evidence_word(formula.evidence)));
    fact(page, "note", formula.note);
}

void list_systems(Page& page, const Table& table) {
    const Columns columns{{26}, {10}, {44}};
    page.row(columns, {"system", "used as", "pK at 25 °C, zero ionic strength"}, true);
    for (const System& system : table.systems) {
        std::string steps;
        for (const Step& step : system.steps) {
            steps += fmt::format("{}{:g}", steps.empty() ? "" : ", ", step.pK_25C.value);
        }
        page.row(columns, {std::string(system.name), system.role == Role::buffer ? "buffer" : "additive", steps});
    }
    page.blank();
    page.paragraph(
        fmt::format("{} systems; 'carboy constants list reagents' and 'list ions' show the rest, 'show NAME' one entry "
                    "whole. Constants {}.",
                    table.systems.size(), table.version),
        "");
}

void list_reagents(Page& page, const Table& table) {
    const Columns columns{{40}, {14}, {15, Page::Align::right}, {2}, {9}};
    page.row(columns, {"reagent", "CAS number", "g/mol", "", "as"}, true);
    for (const Reagent& reagent : table.reagents) {
        const std::string_view state = reagent.state == State::solid    ? "solid"
                                       : reagent.state == State::liquid ? "liquid"
                                                                        : "solution";
        page.row(columns, {std::string(reagent.name), std::string(reagent.cas),
                           fmt::format("{:.3f}", reagent.molar_mass_g_per_mol), "", std::string(state)});
    }
    page.blank();
    page.paragraph(fmt::format("{} reagents. Constants {}.", table.reagents.size(), table.version), "");
}

void list_ions(Page& page, const Table& table) {
    const Columns columns{{26}, {10}, {12, Page::Align::right}};
    page.row(columns, {"ion or neutral solute", "charge", "g/mol"}, true);
    for (const Spectator& spectator : table.spectators) {
        page.row(columns, {std::string(spectator.name), fmt::format("{:+d}", spectator.charge),
                           fmt::format("{:.3f}", spectator.molar_mass_g_per_mol)});
    }
}

void list_formulas(Page& page, const Table& table) {
    const Columns columns{{44}, {36}};
    page.row(columns, {"formula", "also called"}, true);
    for (const NamedFormula& formula : table.formulas) {
        page.row(columns, {std::string(formula.name), joined(formula.names)});
    }
    page.blank();
    page.paragraph(fmt::format("{} formulas; a label takes them as '10x NAME'. Constants {}.", table.formulas.size(),
                               table.version),
                   "");
}

}  // namespace

std::string constants_list_text(const Table& table, Listing listing, bool colour) {
    Page page(colour);
    switch (listing) {
        case Listing::systems:
            list_systems(page, table);
            break;
        case Listing::reagents:
            list_reagents(page, table);
            break;
        case Listing::ions:
            list_ions(page, table);
            break;
        case Listing::formulas:
            list_formulas(page, table);
            break;
    }
    return page.text();
}

std::string constants_entry_text(const Table& table, std::string_view name, bool colour) {
    Page page(colour);
    if (const System* system = find_system(table, name)) {
        system_text(page, *system, table);
    }
    if (const Spectator* spectator = find_spectator(table, name)) {
        spectator_text(page, *spectator, table);
    }
    if (const NamedFormula* formula = find_named_formula(table, name)) {
        formula_text(page, *formula, table);
    }
    const Reagent* reagent = find_reagent(table, name);
    if (reagent == nullptr) {
        reagent = find_reagent_by_cas(table, name);
    }
    if (reagent != nullptr) {
        reagent_text(page, *reagent, table);
    }
    return page.text();
}

std::string sources_text(const Table& table, bool colour) {
    Page page(colour);
    for (const Source& source : table.sources) {
        page.paragraph(source.citation, fmt::format("{:<24}", source.key));
        if (!source.note.empty()) {
            page.paragraph(source.note, std::string(24, ' '));
        }
    }
    return page.text();
}

}  // namespace carboy
