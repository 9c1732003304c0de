#include "report/bottle_label.h"

#include <algorithm>
#include <array>

#include <fmt/format.h>

#include "report/cautions.h"
#include "report/figure_text.h"
#include "report/json.h"
#include "report/sheet.h"

namespace carboy {

namespace {

/// Words of the GHS, gravest first.
constexpr std::array<std::string_view, 2> signal_words{"Danger", "Warning"};

void add_hazards(BottleLabel& label, const Reagent& reagent, const Table& table) {
    BottleLabel::Ingredient ingredient{std::string(reagent.name), {}, {}};
    for (const std::uint16_t index : reagent.ghs.statements) {
        const HazardStatement& statement = table.hazards[index];
        ingredient.codes.emplace_back(statement.code);
        ingredient.statements.push_back(fmt::format("{} {}", statement.code, statement.text));
    }
    label.contains.push_back(std::move(ingredient));
    for (const PictogramRule* rule : pictograms_of(reagent, table)) {
        const bool known = std::any_of(label.pictograms.begin(), label.pictograms.end(),
                                       [&](const auto& pictogram) { return pictogram.code == rule->code; });
        if (!known) {
            label.pictograms.push_back({std::string(rule->code), std::string(rule->name)});
        }
    }
}

std::string gravest(const std::vector<std::uint16_t>& reagents, const Table& table) {
    for (const std::string_view word : signal_words) {
        if (std::any_of(reagents.begin(), reagents.end(),
                        [&](std::uint16_t index) { return table.reagents[index].ghs.signal_word == word; })) {
            return std::string(word);
        }
    }
    return {};
}

}  // namespace

BottleLabel bottle_label_of(const Plan& plan, const Table& table, const BottleDates& dates) {
    BottleLabel label;
    const Prediction& predicted = plan.predicted;
    label.name = label_line_of(plan.request, table);
    label.ph =
        fmt::format("pH {} ± {} at {}{}", ph_text(predicted.ph), ph_text(PH(predicted.uncertainty.expanded_k2)),
                    temperature_text(predicted.temperature),
                    plan.request.strength == 1 ? std::string()
                                               : fmt::format(", diluted {} times", number_text(plan.request.strength)));
    label.volume = vessel_text(plan.request.volume);
    label.made = dates.made ? dates.made->text() : "";
    label.expires = dates.expires ? dates.expires->text() : "";
    label.recipe_id = recipe_id(plan, table);
    const std::vector<std::uint16_t> hazardous = cautions_of(plan, table).hazardous;
    label.signal_word = gravest(hazardous, table);
    for (const std::uint16_t index : hazardous) {
        add_hazards(label, table.reagents[index], table);
    }
    std::sort(label.pictograms.begin(), label.pictograms.end(),
              [](const auto& one, const auto& other) { return one.code < other.code; });
    return label;
}

std::string qr_text(const BottleLabel& label) {
    return label.recipe_id + "\n" + label.name;
}

}  // namespace carboy
