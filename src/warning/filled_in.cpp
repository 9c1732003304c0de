#include <string>
#include <vector>

#include <fmt/format.h>

#include "warning/circumstances.h"

namespace carboy {

namespace {

/// `calcium` rather than `Ca^2+`, where the table has a word for it.
std::string_view spoken_name(const Table& table, ComponentId id) {
    if (id.kind == ComponentKind::spectator) {
        const Spectator& spectator = table.spectators[id.index];
        const char last = spectator.name.back();
        return (last == '+' || last == '-') && !spectator.names.empty() ? spectator.names.front() : spectator.name;
    }
    return table.systems[id.index].name;
}

/// Names of those members of the condition that are there: `calcium and magnesium`.
std::string names_of(const Observation& observation, std::size_t condition, const Circumstances& seen) {
    std::string names;
    if (condition >= observation.with.size()) {
        return names;
    }
    std::vector<std::string_view> list;
    for (const ComponentId id : observation.with[condition].any_of) {
        for (const Mixture::Part& part : seen.prediction->mixture.parts()) {
            if (part.component == id && part.total.mol_per_kg() > 0) {
                list.push_back(spoken_name(*seen.table, id));
            }
        }
    }
    for (std::size_t i = 0; i < list.size(); ++i) {
        names += i == 0 ? "" : i + 1 == list.size() ? " and " : ", ";
        names += list[i];
    }
    return names;
}

std::string place_filled(std::string_view place, const Observation& observation, const Circumstances& seen,
                         const Match& match) {
    const Prediction& prediction = *seen.prediction;
    const Reagent* reagent = match.reagent != nullptr ? &seen.table->reagents[match.reagent->reagent] : nullptr;
    if (place == "pH") {
        return fmt::format("{:.2f}", match.ph);
    }
    if (place == "temperature") {
        return fmt::format("{:g} °C", prediction.temperature.celsius());
    }
    if (place == "ionic_strength") {
        return fmt::format("{:.2g} mol/kg", prediction.ionic_strength.mol_per_kg());
    }
    if (place == "buffer_value") {
        return fmt::format("{:.2g} mol/kg per pH", seen.buffer_value);
    }
    if (place == "percent" && seen.recipe != nullptr) {
        const bool titrant = !observation.titrant_share.open();
        return fmt::format("{:.0f} %",
                           100 * (titrant ? seen.recipe->titrant_share : seen.recipe->share_of_best_buffering));
    }
    if (place == "subject") {
        return names_of(observation, 0, seen);
    }
    if (place == "partner") {
        return names_of(observation, 1, seen);
    }
    if (place == "rise" && seen.recipe != nullptr) {
        return fmt::format("{:.0f} °C", seen.recipe->temperature_rise_K);
    }
    if (reagent != nullptr && place == "reagent") {
        return std::string(reagent->name);
    }
    if (reagent != nullptr && place == "g_per_L") {
        return fmt::format("{:.3g} g/L", match.reagent->g_per_L);
    }
    if (reagent != nullptr && place == "solubility") {
        return fmt::format("{:g} g/L", reagent->solubility_g_per_L.value);
    }
    return {};
}

}  // namespace

std::string filled_in(const Observation& observation, const Circumstances& seen, const Match& match) {
    std::string text;
    std::string_view rest = observation.text;
    while (!rest.empty()) {
        const std::size_t open = rest.find('{');
        text += rest.substr(0, open);
        if (open == std::string_view::npos) {
            break;
        }
        const std::size_t close = rest.find('}', open);
        text += place_filled(rest.substr(open + 1, close - open - 1), observation, seen, match);
        rest.remove_prefix(close + 1);
    }
    if (!text.empty() && text.front() >= 'a' && text.front() <= 'z' && observation.text.starts_with("{subject}")) {
        text.front() = static_cast<char>(text.front() - 'a' + 'A');
    }
    return text;
}

}  // namespace carboy
