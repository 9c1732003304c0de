#include "report/steps.h"

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

/// The weighed solids: those that go in at the start, or those that go in after the pH is set.
std::vector<std::string> solids_to_dissolve(const Plan& plan, const Table& table, bool last) {
    std::vector<std::string> parts;
    for (const Weighing& item : plan.weigh) {
        if (item.purpose != Purpose::titrant && goes_in_last(table.reagents[item.reagent], table) == last) {
            parts.push_back(fmt::format("{} of {}", mass_text(item.mass), table.reagents[item.reagent].name));
        }
    }
    return parts;
}

std::vector<std::string> liquids_to_add(const Plan& plan, const Table& table) {
    std::vector<std::string> parts;
    for (const Measurement& item : plan.measure) {
        if (item.purpose != Purpose::titrant) {
            parts.push_back(fmt::format("{} of {}", volume_text(item.volume), table.reagents[item.reagent].name));
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

}  // namespace

std::string_view stage_word(Stage stage) {
    switch (stage) {
        case Stage::dissolved:
            return "solids dissolved";
        case Stage::titrated:
            return "titrant";
        case Stage::filled:
            return "filled to mark";
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

    steps.push_back(fmt::format("Start with about {} of purified water in the vessel, stirring.",
                                vessel_text(roughly(0.875 * plan.dissolve_in))));
    if (!liquids.empty()) {
        steps.push_back(fmt::format("Add {}.", joined(liquids)));
    }
    if (!solids.empty()) {
        steps.push_back(fmt::format("Weigh {}; add and stir until dissolved.", joined(solids)));
    }
    steps.push_back(fmt::format("Add water to about {} and let it come to {}. The meter should read about {}.",
                                volume_text(plan.dissolve_in), bench, ph_text(plan.readings.front().ph)));
    if (!titrant.name.empty()) {
        const PH target = plan.readings[1].ph;
        steps.push_back(
            fmt::format("Calibrate the meter at {} with two standards that bracket pH {}.", bench, ph_text(target)));
        steps.push_back(
            fmt::format("Add {}: about {} at once, then the rest in small portions until the meter reads {} "
                        "(about {} in all). Let any heat go before you read.",
                        titrant.name, titrant.most, ph_text(target), titrant.all));
    }
    if (!last_solids.empty()) {
        steps.push_back(
            fmt::format("Only now, with the pH set, add {} and stir until dissolved: with acid it gives off toxic gas.",
                        joined(last_solids)));
    }
    steps.push_back(fmt::format("Transfer with rinsing, fill to {} at {} and mix. The meter should read {}.",
                                vessel_text(plan.request.volume), bench, ph_text(plan.readings.back().ph)));
    if (plan.request.use_at != plan.request.prepare_at) {
        steps.push_back(fmt::format("Do not correct it further: at {} this buffer has pH {}.",
                                    temperature_text(plan.request.use_at), ph_text(plan.predicted.ph)));
    }
    steps.push_back(fmt::format("Label: contents, pH {} at {}, date, initials, lots, expiry, hazards.",
                                ph_text(plan.predicted.ph), temperature_text(plan.request.use_at)));
    return steps;
}

}  // namespace carboy
