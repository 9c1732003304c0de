#include "report/explain_text.h"

#include <algorithm>

#include <fmt/format.h>

#include "report/figure_text.h"

namespace carboy {

namespace {

const std::vector<Page::Column> constant_columns{{2}, {18}, {5}, {9, Page::Align::right}, {9, Page::Align::right},
                                                 {2}, {12}, {23}};

std::string_view model_equation(std::string_view model) {
    if (model == "davies") {
        return "log10 γ = -A z² (√I/(1+√I) - 0.3 I). Davies CW, Ion Association, Butterworths (1962).";
    }
    if (model == "debye-huckel") {
        return "log10 γ = -A z² √I/(1 + B a √I), a = 0.4565 nm. Bates RG, Guggenheim EA, Pure Appl. Chem. 1, 163 "
               "(1960).";
    }
    return "γ = 1: molalities are taken for activities.";
}

void sources(Page& page, const std::vector<std::uint16_t>& used, const Table& table) {
    page.heading("SOURCES");
    for (const std::uint16_t source : used) {
        page.paragraph(fmt::format("{}: {}", table.sources[source].key, table.sources[source].citation));
    }
    page.paragraph(
        "water: density Kell GS, J. Chem. Eng. Data 20, 97 (1975); permittivity IAPWS R8-97; ion product IAPWS "
        "R11-07 (Bandura AV, Lvov SN, J. Phys. Chem. Ref. Data 35, 15 (2006)).");
}

}  // namespace

void explain_prediction(Page& page, const Prediction& prediction, const Table& table) {
    const std::string t = temperature_text(prediction.temperature);
    page.heading("CONSTANTS, AT ZERO IONIC STRENGTH");
    page.row(constant_columns, {"", "system", "step", "pK 25 °C", "pK " + t, "", "checked", "source"});
    std::vector<std::uint16_t> used;
    for (const UsedConstant& constant : prediction.constants) {
        const System& system = table.systems[constant.system];
        const Figure& figure = system.steps[constant.step].pK_25C;
        page.row(constant_columns,
                 {"", std::string(system.name), fmt::format("{}", constant.step + 1),
                  fmt::format("{:.3f}", constant.pK_25C), fmt::format("{:.3f}", constant.pK), "",
                  std::string(evidence_word(figure.evidence)), std::string(table.sources[figure.source].key)});
        if (std::find(used.begin(), used.end(), figure.source) == used.end()) {
            used.push_back(figure.source);
        }
    }
    page.row(constant_columns,
             {"", "water", "", "", fmt::format("{:.3f}", prediction.water.pKw), "", "seen", "IAPWS R11-07"});

    page.heading("HOW IT IS WORKED OUT");
    page.paragraph(
        "The pH is the one at which all charges sum to zero, with every form of every system at equilibrium and "
        "activity coefficients that belong to the resulting ionic strength. pH = -log10 a(H+), molality basis.");
    page.paragraph(fmt::format("Activity model {}: {} A = {:.4f} kg^½ mol^-½ at {}.", prediction.activity_model,
                               model_equation(prediction.activity_model), prediction.water.debye_huckel_A, t));
    page.paragraph(
        "pK(T) follows from pK, enthalpy and heat capacity at 25 °C: ln K(T) = ln K - (ΔH/R)(1/T - 1/T0) + "
        "(ΔCp/R)(T0/T - 1 + ln(T/T0)), or from the published expression of the step.");
    page.paragraph(
        fmt::format("Uncertainty: {:.3f} from the constants, {:.3f} from the activity model, {:.3f} from what the "
                    "model leaves out in such a solution and {:.3f} of the scale of pH itself, combined and doubled "
                    "(k = 2).",
                    prediction.uncertainty.constants, prediction.uncertainty.activity,
                    prediction.uncertainty.unmodelled, prediction.uncertainty.reproducibility));
    if (prediction.hand_estimate) {
        page.paragraph(fmt::format("On paper, with pK at 25 °C and no activities, the sum gives pH {:.2f}.",
                                   prediction.hand_estimate->value()));
    }
    sources(page, used, table);
}

void explain_recipe(Page& page, const Plan& plan, const Table& table) {
    page.heading("HOW THE AMOUNTS FOLLOW");
    page.paragraph(
        fmt::format("At the target pH every system has a known mean charge, so that electroneutrality and the "
                    "totals are linear in the amounts. Route: {}.",
                    route_word(plan.route)));
    const double water = compose(table, plan.preparation).water.kg();
    page.paragraph(fmt::format("{} filled at {} holds {} kg of water.", vessel_text(plan.request.volume),
                               temperature_text(plan.request.prepare_at), plain_number(water, 5)));
    std::string neglected;
    for (const ComponentId id : plan.volume_neglected) {
        neglected += neglected.empty() ? "" : ", ";
        neglected += name_of(table, id);
    }
    if (!neglected.empty()) {
        page.paragraph(
            fmt::format("The table has no apparent molar volume for {}; their own volume is neglected.", neglected));
    }
    explain_prediction(page, plan.predicted, table);
}

}  // namespace carboy
