#include "report/sheet.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "report/cautions.h"
#include "report/figure_text.h"
#include "report/json.h"
#include "report/steps.h"

namespace carboy {

namespace {

std::string joined(const std::vector<std::string>& parts) {
    return fmt::format("{}", fmt::join(parts, ", "));
}

/// What a sheet says under the name of an ingredient.
std::string detail_of(Purpose purpose, const Bottle* bottle) {
    std::vector<std::string> parts;
    if (bottle != nullptr) {
        parts.push_back("bottle " + bottle->id);
        if (!bottle->location.empty()) {
            parts.push_back(bottle->location);
        }
    }
    if (purpose == Purpose::titrant) {
        parts.emplace_back("titrant: the meter decides");
    } else if (purpose == Purpose::ionic_strength) {
        parts.emplace_back("sets the ionic strength");
    } else if (purpose == Purpose::ion_total) {
        parts.emplace_back("fills up the ion's total");
    }
    return joined(parts);
}

Sheet::Portion named(const Reagent& reagent, const Bottle* bottle) {
    Sheet::Portion portion;
    portion.reagent = reagent.name;
    portion.formula = reagent.formula == reagent.name ? "" : reagent.formula;
    portion.lot = bottle != nullptr ? bottle->lot : "";
    return portion;
}

Sheet::Portion weighing(const Weighing& item, const Plan& plan, const Table& table, double tolerance) {
    Sheet::Portion portion = named(table.reagents[item.reagent], item.bottle);
    const auto readability = plan.request.balance ? std::optional(plan.request.balance->readability) : std::nullopt;
    portion.target = readability ? weighed_text(item.mass, *readability) : mass_text(item.mass);
    portion.detail = detail_of(item.purpose, item.bottle);
    if (item.purpose != Purpose::titrant) {
        portion.range = mass_range_text(item.mass, tolerance, readability);
    }
    return portion;
}

Sheet::Portion measurement(const Measurement& item, const Plan& plan, const Table& table, double tolerance) {
    Sheet::Portion portion = named(table.reagents[item.reagent], item.bottle);
    portion.reagent = source_of(item, plan, table);
    portion.weighed = false;
    portion.target = volume_text(item.volume);
    portion.detail = detail_of(item.purpose, item.bottle);
    if (item.stock) {
        portion.formula.clear();
        portion.detail += portion.detail.empty() ? "from the stock above" : ", from the stock above";
    }
    if (item.vessel) {
        portion.detail += fmt::format("{}{}", portion.detail.empty() ? "" : ", ", table.vessels[*item.vessel].name);
    }
    if (item.purpose != Purpose::titrant) {
        portion.range = volume_range_text(item.volume, tolerance);
    }
    return portion;
}

Sheet::Portion stock_to_make(const Stock& stock, const Table& table, double tolerance) {
    Sheet::Portion portion = named(table.reagents[stock.reagent], stock.bottle);
    portion.weighed = stock.mass.g() > 0;
    portion.target = portion.weighed ? mass_text(stock.mass) : volume_text(stock.liquid);
    portion.range =
        portion.weighed ? mass_range_text(stock.mass, tolerance) : volume_range_text(stock.liquid, tolerance);
    portion.detail =
        fmt::format("fill to {} with purified water: {}", vessel_text(stock.volume), strength_text(stock.strength));
    if (stock.bottle != nullptr) {
        portion.detail += ", " + detail_of(Purpose::buffer, stock.bottle);
    }
    return portion;
}

std::string ph_with_uncertainty(const Prediction& predicted) {
    return fmt::format("pH {} ± {}", ph_text(predicted.ph), ph_text(PH(predicted.uncertainty.expanded_k2)));
}

void add_readings(Sheet& sheet, const Plan& plan) {
    const bool titrated = std::any_of(plan.readings.begin(), plan.readings.end(),
                                      [](const Reading& reading) { return reading.stage == Stage::titrated; });
    for (const Reading& reading : plan.readings) {
        const bool act_on = reading.stage == Stage::titrated;
        sheet.readings.push_back({std::string(reading_words(reading.stage, titrated)), volume_text(reading.volume),
                                  reading_text(reading.ph, reading.uncertainty_k2), act_on});
        if (act_on) {
            sheet.stop_at = reading_text(reading.ph, reading.uncertainty_k2);
        }
    }
}

void add_result(Sheet& sheet, const Plan& plan, const Table& table) {
    const Prediction& predicted = plan.predicted;
    const std::string when = plan.request.strength == 1
                                 ? std::string()
                                 : fmt::format(", diluted {} times", number_text(plan.request.strength));
    sheet.in_use =
        fmt::format("{} at {}{}", ph_with_uncertainty(predicted), temperature_text(predicted.temperature), when);
    sheet.result.push_back(
        {fmt::format("pH at {}{}", temperature_text(predicted.temperature), when),
         fmt::format("{} ± {}", ph_text(predicted.ph), ph_text(PH(predicted.uncertainty.expanded_k2)))});
    if (plan.as_bottled) {
        sheet.result.push_back({"as bottled", ph_with_uncertainty(*plan.as_bottled)});
    }
    sheet.result.push_back({"ionic strength", molality_text(predicted.ionic_strength)});
    sheet.result.push_back({"buffer value", molality_text(predicted.buffer_value) + " per pH"});
    for (const CounterIonChoice& choice : plan.counter_ions) {
        sheet.result.push_back(
            {fmt::format("counter-ion of {}", name_of(table, choice.system)),
             fmt::format("{}{}", name_of(table, choice.counter_ion), choice.named_by_label ? "" : ", the usual one")});
    }
}

void add_notes(Sheet& sheet, const Plan& plan, const SheetOptions& options) {
    for (const Warning& warning : plan.warnings) {
        sheet.notes.push_back(warning.message);
    }
    if (options.bench_temperature_assumed) {
        sheet.notes.push_back(
            fmt::format("The bench temperature was not given; {} is assumed for the volumes and the meter.",
                        sheet.bench_temperature));
    }
}

void add_cautions(Sheet& sheet, const Plan& plan, const Table& table) {
    const Cautions all = cautions_of(plan, table);
    for (const std::uint16_t index : all.hazardous) {
        const Reagent& reagent = table.reagents[index];
        Sheet::Hazard hazard{std::string(reagent.name), std::string(reagent.ghs.signal_word), {}};
        for (const std::uint16_t statement : reagent.ghs.statements) {
            hazard.statements.push_back(
                {std::string(table.hazards[statement].code), std::string(table.hazards[statement].text)});
        }
        sheet.hazards.push_back(std::move(hazard));
    }
    for (const Advice& advice : all.advice) {
        sheet.advice.push_back(advice_text(advice, table));
    }
}

}  // namespace

std::string short_recipe_id(const std::string& recipe_id) {
    return recipe_id.substr(0, 12);
}

std::string label_line_of(const Request& request, const Table& table) {
    if (!request.label.empty()) {
        return request.label;
    }
    std::vector<std::string> items;
    for (const BufferItem& item : request.buffers) {
        items.push_back(fmt::format("{} {}", concentration_text(item.concentration), name_of(table, item.system)));
        if (item.counter_ion) {
            items.back() += fmt::format(" ({})", name_of(table, *item.counter_ion));
        }
    }
    for (const AdditiveItem& item : request.additives) {
        items.push_back(
            fmt::format("{} {}", concentration_text(item.concentration), table.reagents[item.reagent].name));
    }
    if (request.ph) {
        items.push_back(fmt::format("pH {} at {}", ph_text(*request.ph), temperature_text(request.use_at)));
    }
    if (request.ionic_strength) {
        items.push_back(fmt::format("ionic strength {} {}", number_text(request.ionic_strength->value_mol),
                                    request.ionic_strength->per_litre ? "M" : "mol/kg"));
    }
    return joined(items);
}

Sheet sheet_of(const Plan& plan, const Table& table, const SheetOptions& options) {
    Sheet sheet;
    sheet.title = label_line_of(plan.request, table);
    sheet.request_id = plan.request.id;
    sheet.recipe_id = recipe_id(plan, table);
    sheet.volume = vessel_text(plan.request.volume);
    sheet.bench_temperature = temperature_text(plan.request.prepare_at);
    sheet.tolerance = fmt::format("{} %", number_text(100 * options.tolerance));
    for (const Stock& stock : plan.stocks) {
        sheet.stocks.push_back(stock_to_make(stock, table, options.tolerance));
    }
    for (const Weighing& item : plan.weigh) {
        sheet.portions.push_back(weighing(item, plan, table, options.tolerance));
    }
    for (const Measurement& item : plan.measure) {
        sheet.portions.push_back(measurement(item, plan, table, options.tolerance));
    }
    add_readings(sheet, plan);
    sheet.steps = steps_of(plan, table);
    add_result(sheet, plan, table);
    add_notes(sheet, plan, options);
    add_cautions(sheet, plan, table);
    sheet.made = options.made ? options.made->text() : "";
    sheet.expires = options.expires ? options.expires->text() : "";
    sheet.program = fmt::format("carboy {}, constants {} ({})", CARBOY_VERSION, table.version,
                                std::string(table.sha256.substr(0, 12)));
    return sheet;
}

}  // namespace carboy
