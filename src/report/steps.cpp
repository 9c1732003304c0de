#include "report/steps.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "report/figure_text.h"

namespace carboy {

namespace {

std::string joined(const std::vector<std::string>& parts) {
    std::string text;
    for (std::size_t i = 0; i < parts.size(); ++i) {
        text += i == 0 ? "" : i + 1 == parts.size() ? " and " : ", ";
        text += parts[i];
    }
    return text;
}

/// Two significant digits: what one reads off a beaker.
Volume roughly(Volume volume) {
    const double digit = std::pow(10.0, std::floor(std::log10(volume.mL())) - 1);
    return Volume::millilitres(std::round(volume.mL() / digit) * digit);
}

std::string from_bottle(const Bottle* bottle) {
    return bottle == nullptr ? std::string() : fmt::format(" ({})", bottle->id);
}

/// The weighed solids: those that go in at the start, or those that go in after the pH is set.
std::vector<std::string> solids_to_dissolve(const Plan& plan, const Table& table, bool last) {
    std::vector<std::string> parts;
    for (const Weighing& item : plan.weigh) {
        if (item.purpose != Purpose::titrant && goes_in_last(table.reagents[item.reagent], table) == last) {
            parts.push_back(fmt::format("{} of {}{}", mass_text(item.mass), table.reagents[item.reagent].name,
                                        from_bottle(item.bottle)));
        }
    }
    return parts;
}

std::vector<std::string> liquids_to_add(const Plan& plan, const Table& table) {
    std::vector<std::string> parts;
    for (const Measurement& item : plan.measure) {
        if (item.purpose != Purpose::titrant) {
            parts.push_back(fmt::format("{} of {}{}", volume_text(item.volume), source_of(item, plan, table),
                                        from_bottle(item.bottle)));
        }
    }
    return parts;
}

struct Titrant {
    std::string name;
    std::string all;   ///< the planned amount
    std::string most;  ///< what may go in at once
};

/// The titrant's words, whether it is measured or weighed; empty name when there is none.
Titrant titrant_of(const Plan& plan, const Table& table) {
    constexpr double at_once = 0.9;  // common practice, no source: the last tenth in small portions
    if (!plan.measure.empty() && plan.measure.back().purpose == Purpose::titrant) {
        const Measurement& item = plan.measure.back();
        return {std::string(table.reagents[item.reagent].name), volume_text(item.volume),
                volume_text(at_once * item.volume)};
    }
    if (!plan.weigh.empty() && plan.weigh.back().purpose == Purpose::titrant) {
        const Weighing& item = plan.weigh.back();
        return {std::string(table.reagents[item.reagent].name), mass_text(item.mass), mass_text(at_once * item.mass)};
    }
    return {};
}

std::string shown(const Reading& reading) {
    return reading_text(reading.ph, reading.uncertainty_k2);
}

const Reading& reading_at(const Plan& plan, Stage stage) {
    return *std::find_if(plan.readings.begin(), plan.readings.end(),
                         [&](const Reading& reading) { return reading.stage == stage; });
}

std::string stock_step(const Stock& stock, const Table& table) {
    const Reagent& reagent = table.reagents[stock.reagent];
    const bool solid = stock.mass.g() > 0;
    return fmt::format("Make a stock first: {} of {}{} in purified water to {} ({}). Mix and label it.",
                       solid ? mass_text(stock.mass) : volume_text(stock.liquid), reagent.name,
                       from_bottle(stock.bottle), vessel_text(stock.volume), strength_text(stock.strength));
}

}  // namespace

std::string source_of(const Measurement& item, const Plan& plan, const Table& table) {
    const Reagent& reagent = table.reagents[item.reagent];
    return item.stock ? fmt::format("{} stock {}", reagent.name, strength_text(plan.stocks[*item.stock].strength))
                      : std::string(reagent.name);
}

std::string_view stage_word(Stage stage) {
    switch (stage) {
        case Stage::dissolved:
            return "solids dissolved";
        case Stage::nearly:
            return "nine tenths of the titrant";
        case Stage::titrated:
            return "titrant";
        case Stage::filled:
            return "filled to mark";
        case Stage::diluted:
            return "diluted to working strength";
    }
    return {};
}

std::string_view reading_words(Stage stage, bool titrated) {
    switch (stage) {
        case Stage::dissolved:
            return titrated ? "all but the titrant dissolved" : "dissolved";
        case Stage::nearly:
            return "nine tenths of the titrant: slow down";
        case Stage::titrated:
            return "titrant added: stop here";
        case Stage::filled:
            return "filled to the mark";
        case Stage::diluted:
            return "diluted to working strength";
    }
    return {};
}

std::vector<std::string> steps_of(const Plan& plan, const Table& table) {
    const std::string bench = temperature_text(plan.request.prepare_at);
    const auto solids = solids_to_dissolve(plan, table, false);
    const auto last_solids = solids_to_dissolve(plan, table, true);
    const auto liquids = liquids_to_add(plan, table);
    const Titrant titrant = titrant_of(plan, table);
    std::vector<std::string> steps;

    for (const Stock& stock : plan.stocks) {
        steps.push_back(stock_step(stock, table));
    }
    if (plan.start_with.mL() > 0.02 * plan.request.volume.mL()) {
        steps.push_back(fmt::format("Start with about {} of purified water in the vessel, stirring.",
                                    vessel_text(roughly(plan.start_with))));
    }
    if (!liquids.empty()) {
        steps.push_back(fmt::format("Add {}.", joined(liquids)));
    }
    if (!solids.empty()) {
        steps.push_back(fmt::format("Weigh {}; add and stir until dissolved.", joined(solids)));
    }
    const bool solutions_only = titrant.name.empty() && solids.empty();  // nothing to wait for
    if (!solutions_only) {
        steps.push_back(fmt::format("Add water to about {} and let it come to {}. The meter should read about {}.",
                                    volume_text(plan.dissolve_in), bench, shown(plan.readings.front())));
    }
    if (!titrant.name.empty()) {
        const Reading& target = reading_at(plan, Stage::titrated);
        steps.push_back(
            fmt::format("Calibrate the meter at {} with two standards that bracket pH {}.", bench, ph_text(target.ph)));
        steps.push_back(fmt::format(
            "Add {}: about {} at once, which brings the meter to about {}; then the rest in small portions "
            "until it reads {} (about {} in all). Let any heat go before you read.",
            titrant.name, titrant.most, shown(reading_at(plan, Stage::nearly)), shown(target), titrant.all));
        constexpr double doubtful = 0.1;
        if (plan.request.strength != 1 && target.uncertainty_k2 > doubtful) {
            steps.push_back(
                fmt::format("The stock's own reading is uncertain. Decide on a sample: 1 part of it with water to {:g} "
                            "parts, as it "
                            "will be in the end, should read {} at {}; correct the stock by that.",
                            plan.request.strength * (plan.request.volume / target.volume),
                            shown(reading_at(plan, Stage::diluted)), bench));
        }
    }
    if (!last_solids.empty()) {
        steps.push_back(
            fmt::format("Only now, with the pH set, add {} and stir until dissolved: with acid it gives off toxic gas.",
                        joined(last_solids)));
    }
    steps.push_back(fmt::format("Transfer with rinsing, fill to {} at {} and mix. The meter should read {}.",
                                vessel_text(plan.request.volume), bench, shown(reading_at(plan, Stage::filled))));
    const std::string use = temperature_text(plan.request.use_at);
    if (plan.request.strength != 1) {
        steps.push_back(fmt::format("Do not correct the stock: diluted {:g} times it reads {} at {}{}.",
                                    plan.request.strength, shown(reading_at(plan, Stage::diluted)), bench,
                                    plan.request.use_at == plan.request.prepare_at
                                        ? std::string()
                                        : fmt::format(" and has pH {} at {}", ph_text(plan.predicted.ph), use)));
    } else if (plan.request.use_at != plan.request.prepare_at) {
        steps.push_back(
            fmt::format("Do not correct it further: at {} this buffer has pH {}.", use, ph_text(plan.predicted.ph)));
    }
    steps.push_back(fmt::format(
        "Label: contents, pH {} at {}{}, date, initials, lots, expiry, hazards.", ph_text(plan.predicted.ph), use,
        plan.request.strength != 1 ? fmt::format(" when diluted {:g} times", plan.request.strength) : std::string()));
    return steps;
}

}  // namespace carboy
