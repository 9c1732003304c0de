#include "report/recipe_text.h"

#include <fmt/format.h>

#include "report/cautions.h"
#include "report/explain_text.h"
#include "report/figure_text.h"
#include "report/page.h"
#include "report/steps.h"

namespace carboy {

namespace {

const std::vector<Page::Column> ingredient_columns{{2}, {36}, {1}, {11, Page::Align::right}, {3}, {27}};
const std::vector<Page::Column> result_columns{{2}, {37}, {41}};
const std::vector<Page::Column> reading_columns{{2}, {37}, {11, Page::Align::right}, {11, Page::Align::right}};

std::string_view purpose_word(Purpose purpose) {
    switch (purpose) {
        case Purpose::titrant:
            return "to the meter";
        case Purpose::ionic_strength:
            return "sets the ionic strength";
        default:
            return {};
    }
}

std::string detail(const Reagent& reagent, Purpose purpose) {
    if (const std::string_view word = purpose_word(purpose); !word.empty()) {
        return std::string(word);
    }
    const std::string mass = fmt::format("{:.2f} g/mol", reagent.molar_mass_g_per_mol);
    const std::string whole = fmt::format("{} {}", reagent.formula, mass);
    return display_width(whole) <= ingredient_columns.back().width ? whole : mass;
}

void ingredients(Page& page, const Plan& plan, const Table& table) {
    if (!plan.weigh.empty()) {
        page.heading("WEIGH");
        for (const Weighing& item : plan.weigh) {
            const Reagent& reagent = table.reagents[item.reagent];
            page.row(ingredient_columns,
                     {"", std::string(reagent.name), "", mass_text(item.mass), "", detail(reagent, item.purpose)},
                     true);
        }
    }
    if (!plan.measure.empty()) {
        page.heading("MEASURE");
        for (const Measurement& item : plan.measure) {
            const Reagent& reagent = table.reagents[item.reagent];
            page.row(ingredient_columns,
                     {"", std::string(reagent.name), "", volume_text(item.volume), "", detail(reagent, item.purpose)},
                     true);
        }
    }
    page.row(ingredient_columns,
             {"", "purified water, to", "", vessel_text(plan.request.volume), "",
              "at " + temperature_text(plan.request.prepare_at)},
             true);
}

void readings(Page& page, const Plan& plan) {
    page.heading(fmt::format("THE METER, AT {}", temperature_text(plan.request.prepare_at)));
    for (const Reading& reading : plan.readings) {
        const std::string words = reading.stage == Stage::dissolved  ? "all but the titrant dissolved"
                                  : reading.stage == Stage::titrated ? "titrant added: stop here"
                                                                     : "filled to the mark";
        const bool only = plan.readings.size() == 2 && reading.stage == Stage::dissolved;
        page.row(reading_columns,
                 {"", only ? "dissolved" : words, volume_text(reading.volume), "pH " + ph_text(reading.ph)},
                 reading.stage != Stage::dissolved);
    }
}

std::string with_uncertainty(const Prediction& predicted) {
    return fmt::format("pH {} ± {:.2f}", ph_text(predicted.ph), predicted.uncertainty.expanded_k2);
}

void result(Page& page, const Plan& plan, const Table& table) {
    const Prediction& predicted = plan.predicted;
    page.heading(fmt::format("IN USE, AT {}", temperature_text(predicted.temperature)));
    page.row(result_columns,
             {"", with_uncertainty(predicted), "expanded uncertainty, k = 2; amounts and meter not included"}, true);
    page.row(result_columns, {"", "ionic strength", molality_text(predicted.ionic_strength)});
    page.row(result_columns, {"", "buffer value", molality_text(predicted.buffer_value) + " per pH"});
    for (const CounterIonChoice& choice : plan.counter_ions) {
        page.row(result_columns, {"", fmt::format("counter-ion of {}", name_of(table, choice.system)),
                                  fmt::format("{}{}", name_of(table, choice.counter_ion),
                                              choice.named_by_label ? "" : " (usual one; the label names none)")});
    }
}

void cautions(Page& page, const Plan& plan, const Table& table) {
    const Cautions all = cautions_of(plan, table);
    page.heading("CAUTIONS");
    for (const std::uint16_t index : all.hazardous) {
        const Reagent& reagent = table.reagents[index];
        std::string text =
            fmt::format("{}: {}.", reagent.name, reagent.ghs.signal_word.empty() ? "Caution" : reagent.ghs.signal_word);
        for (const std::uint16_t statement : reagent.ghs.statements) {
            text += fmt::format(" {} {}.", table.hazards[statement].code, table.hazards[statement].text);
        }
        page.paragraph(text);
    }
    for (const Advice& advice : all.advice) {
        page.paragraph(advice_text(advice, table));
    }
}

void warnings(Page& page, const Plan& plan, const TextStyle& style) {
    if (plan.warnings.empty() && plan.predicted.warnings.empty() && !style.bench_temperature_assumed) {
        return;
    }
    page.heading("TAKE NOTE");
    for (const auto* list : {&plan.predicted.warnings, &plan.warnings}) {
        for (const Warning& warning : *list) {
            page.notice(warning.message, "  - ");
        }
    }
    if (style.bench_temperature_assumed) {
        page.paragraph(
            "The bench temperature was not given; 25 °C is assumed for the volumes and the meter "
            "(--prepare-at sets it).",
            "  - ");
    }
}

}  // namespace

std::string recipe_text(const Plan& plan, const Table& table, const TextStyle& style) {
    Page page(style.colour);
    page.title(plan.request.label, vessel_text(plan.request.volume));
    ingredients(page, plan, table);
    readings(page, plan);
    result(page, plan, table);
    warnings(page, plan, style);
    page.heading("STEPS");
    int number = 0;
    for (const std::string& step : steps_of(plan, table)) {
        page.paragraph(step, fmt::format("{:3}. ", ++number));
    }
    cautions(page, plan, table);
    if (style.explain) {
        explain_recipe(page, plan, table);
    }
    return page.text();
}

}  // namespace carboy
