#include "report/recipe_text.h"

#include <algorithm>
#include <cmath>

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
const std::vector<Page::Column> way_columns{{2}, {11}, {67}};
const std::vector<Page::Column> reading_columns{{2}, {37}, {11, Page::Align::right}, {15, Page::Align::right}};

std::string_view purpose_word(Purpose purpose) {
    switch (purpose) {
        case Purpose::titrant:
            return "to the meter";
        case Purpose::ionic_strength:
            return "sets the ionic strength";
        case Purpose::ion_total:
            return "fills up the ion's total";
        default:
            return {};
    }
}

std::string detail(const Reagent& reagent, Purpose purpose, const Bottle* bottle) {
    if (bottle != nullptr) {
        return fmt::format("{}{}", bottle->id, bottle->location.empty() ? "" : ", " + bottle->location);
    }
    if (const std::string_view word = purpose_word(purpose); !word.empty()) {
        return std::string(word);
    }
    const std::string mass = fmt::format("{:.2f} g/mol", reagent.molar_mass_g_per_mol);
    const std::string whole = fmt::format("{} {}", reagent.formula, mass);
    return display_width(whole) <= ingredient_columns.back().width ? whole : mass;
}

/// Where a measured liquid comes from, what it is for, and what it is measured with.
std::string measured_detail(const Measurement& item, const Table& table) {
    std::string text =
        item.stock ? "from the stock above" : detail(table.reagents[item.reagent], item.purpose, item.bottle);
    if (item.bottle != nullptr && item.purpose == Purpose::titrant) {
        text += ", to the meter";
    }
    if (item.vessel) {
        text = fmt::format("{}{}", table.vessels[*item.vessel].name,
                           item.purpose == Purpose::titrant ? ", to the meter" : "");
    }
    return text;
}

void stocks(Page& page, const Plan& plan, const Table& table) {
    if (plan.stocks.empty()) {
        return;
    }
    page.heading("MAKE FIRST");
    for (const Stock& stock : plan.stocks) {
        const bool solid = stock.mass.g() > 0;
        page.row(ingredient_columns,
                 {"", std::string(table.reagents[stock.reagent].name), "",
                  solid ? mass_text(stock.mass) : volume_text(stock.liquid), "",
                  fmt::format("to {}, {}", vessel_text(stock.volume), strength_text(stock.strength))},
                 true);
    }
}

void ingredients(Page& page, const Plan& plan, const Table& table) {
    stocks(page, plan, table);
    if (!plan.weigh.empty()) {
        page.heading("WEIGH");
        for (const Weighing& item : plan.weigh) {
            const Reagent& reagent = table.reagents[item.reagent];
            const std::string mass = plan.request.balance ? weighed_text(item.mass, plan.request.balance->readability)
                                                          : mass_text(item.mass);
            page.row(ingredient_columns,
                     {"", std::string(reagent.name), "", mass, "", detail(reagent, item.purpose, item.bottle)}, true);
        }
    }
    if (!plan.measure.empty()) {
        page.heading("MEASURE");
        for (const Measurement& item : plan.measure) {
            page.row(ingredient_columns,
                     {"", source_of(item, plan, table), "", volume_text(item.volume), "", measured_detail(item, table)},
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
    const bool titrated = std::any_of(plan.readings.begin(), plan.readings.end(),
                                      [](const Reading& reading) { return reading.stage == Stage::titrated; });
    for (const Reading& reading : plan.readings) {
        page.row(reading_columns,
                 {"", std::string(reading_words(reading.stage, titrated)), volume_text(reading.volume),
                  "pH " + reading_text(reading.ph, reading.uncertainty_k2)},
                 reading.stage != Stage::dissolved && reading.stage != Stage::nearly);
    }
}

std::string with_uncertainty(const Prediction& predicted) {
    return fmt::format("pH {} ± {:.2f}", ph_text(predicted.ph), predicted.uncertainty.expanded_k2);
}

std::string rounding_words(const Rounding& rounding, const Table& table) {
    const std::string ph =
        std::abs(rounding.ph) < 0.0005 ? std::string("pH unchanged") : fmt::format("pH {:+.3f}", rounding.ph);
    return fmt::format("{}; {} {:+.2f} % at most", ph, table.reagents[rounding.largest_reagent].name,
                       100 * rounding.largest_relative);
}

void result(Page& page, const Plan& plan, const Table& table) {
    const Prediction& predicted = plan.predicted;
    page.heading(plan.request.strength != 1 ? fmt::format("IN USE, DILUTED {:g} TIMES, AT {}", plan.request.strength,
                                                          temperature_text(predicted.temperature))
                                            : fmt::format("IN USE, AT {}", temperature_text(predicted.temperature)));
    page.row(result_columns,
             {"", with_uncertainty(predicted), "expanded uncertainty, k = 2; amounts and meter not included"}, true);
    page.row(result_columns, {"", "ionic strength", molality_text(predicted.ionic_strength)});
    page.row(result_columns, {"", "buffer value", molality_text(predicted.buffer_value) + " per pH"});
    page.row(result_columns, {"", "osmolality, sum of particles", osmolality_text(predicted.particles)});
    if (plan.rounding) {
        page.row(result_columns, {"", "rounding to balance and glassware", rounding_words(*plan.rounding, table)});
    }
    for (const CounterIonChoice& choice : plan.counter_ions) {
        page.row(result_columns, {"", fmt::format("counter-ion of {}", name_of(table, choice.system)),
                                  fmt::format("{}{}", name_of(table, choice.counter_ion),
                                              choice.named_by_label ? "" : " (usual one; the label names none)")});
    }
}

void other_ways(Page& page, const Plan& plan) {
    if (plan.ways.size() < 2) {
        return;
    }
    page.heading("OTHER WAYS");
    for (const Way& way : plan.ways) {
        const bool chosen = way.possible && way.route == plan.route;
        page.row(way_columns, {"", fmt::format("{}", route_word(way.route)),
                               fmt::format("{}{}",
                                           chosen         ? "this sheet: "
                                           : way.possible ? ""
                                                          : "not possible: ",
                                           way.reason)});
    }
}

}  // namespace

std::string recipe_text(const Plan& plan, const Table& table, const TextStyle& style) {
    Page page(style.colour);
    page.title(plan.request.label, vessel_text(plan.request.volume));
    ingredients(page, plan, table);
    readings(page, plan);
    result(page, plan, table);
    print_warnings(page, plan.warnings,
                   style.bench_temperature_assumed ? "The bench temperature was not given; 25 °C is assumed for the "
                                                     "volumes and the meter (--prepare-at sets it)."
                                                   : "");
    page.heading("STEPS");
    int number = 0;
    for (const std::string& step : steps_of(plan, table)) {
        page.paragraph(step, fmt::format("{:3}. ", ++number));
    }
    other_ways(page, plan);
    print_cautions(page, cautions_of(plan, table), table);
    if (style.explain) {
        explain_recipe(page, plan, table);
    }
    return page.text();
}

}  // namespace carboy
