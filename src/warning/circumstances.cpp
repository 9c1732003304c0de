#include "warning/circumstances.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>

namespace carboy {

namespace {

double total_of(const Presence& presence, const Mixture& mixture) {
    double total = 0;
    for (const Mixture::Part& part : mixture.parts()) {
        if (std::find(presence.any_of.begin(), presence.any_of.end(), part.component) != presence.any_of.end()) {
            total += part.total.mol_per_kg();
        }
    }
    return total;
}

bool present(const Observation& observation, const Prediction& prediction) {
    return std::all_of(observation.with.begin(), observation.with.end(), [&](const Presence& presence) {
        const double total = total_of(presence, prediction.mixture);
        return total > 0 && total >= presence.least_mol_per_kg;
    });
}

/// Logarithm of the activity of a factor's species; H+, OH- and then the parts in order are the prediction's species.
double log_activity(const ProductFactor& factor, const Circumstances& seen) {
    const Prediction& prediction = *seen.prediction;
    std::size_t index = factor.of == ProductFactor::Of::hydrogen_ion ? 0 : 1;
    if (factor.of == ProductFactor::Of::component) {
        index = 2;
        for (const Mixture::Part& part : prediction.mixture.parts()) {
            if (part.component == factor.component) {
                index += factor.species;
                break;
            }
            index += part.component.kind == ComponentKind::spectator
                         ? 1
                         : seen.table->systems[part.component.index].species.size();
        }
    }
    const PredictedSpecies& species = prediction.species[index];
    return std::log10(species.molality.mol_per_kg() * species.activity_coefficient);
}

bool exceeds_product(const Observation& observation, const Circumstances& seen) {
    double sum = 0;
    for (const ProductFactor& factor : observation.product) {
        sum += factor.power * log_activity(factor, seen);
    }
    return observation.product.empty() || sum > observation.log10_product_above;
}

double nearest_pK(const Prediction& prediction) {
    double nearest = std::numeric_limits<double>::infinity();
    for (const UsedConstant& used : prediction.constants) {
        nearest = std::min(nearest, std::abs(used.pK - prediction.ph.value()));
    }
    return nearest;
}

/// The pH must be in range at one of the moments; the recipe's later ones count first.
bool ph_is_in_range(const Observation& observation, const Circumstances& seen, Match& match) {
    if (seen.recipe == nullptr) {
        match.ph = seen.prediction->ph.value();
        return observation.pH.holds(match.ph);
    }
    for (std::size_t i = seen.recipe->ph.size(); i-- > 0;) {
        const double ph = seen.recipe->ph[i];
        if ((observation.moments >> i & 1U) != 0 && ph == ph && observation.pH.holds(ph)) {
            match.ph = ph;
            return true;
        }
    }
    return false;
}

bool bears(const Observation& observation, const Reagent& reagent) {
    return std::any_of(observation.statements.begin(), observation.statements.end(), [&](std::uint16_t statement) {
        return std::find(reagent.ghs.statements.begin(), reagent.ghs.statements.end(), statement) !=
               reagent.ghs.statements.end();
    });
}

bool reagent_matches(const Observation& observation, const Circumstances& seen, Match& match) {
    const RecipeFacts& recipe = *seen.recipe;
    if (observation.reagents.empty() && observation.statements.empty() && observation.solubility_share.open()) {
        return true;
    }
    const bool while_dissolving = (observation.moments & static_cast<unsigned>(Moment::dissolved)) != 0;
    for (const ReagentInUse& item : recipe.reagents) {
        const bool named = observation.reagents.empty() ||
                           std::find(observation.reagents.begin(), observation.reagents.end(), item.reagent) !=
                               observation.reagents.end();
        const double share = while_dissolving ? item.share_dissolved : item.share_filled;
        const bool classified =
            observation.statements.empty() || bears(observation, seen.table->reagents[item.reagent]);
        if (named && classified && observation.solubility_share.holds(share)) {
            match.reagent = &item;
            return true;
        }
    }
    return false;
}

/// A range on a figure that may not exist holds only when there is one.
bool holds_if_asked(const Range& range, double value) {
    return range.open() || (value == value && range.holds(value));
}

}  // namespace

Circumstances circumstances_of(const Table& table, const Prediction& prediction, const RecipeFacts* recipe) {
    Circumstances seen;
    seen.table = &table;
    seen.prediction = &prediction;
    seen.recipe = recipe;
    for (const Mixture::Part& part : prediction.mixture.parts()) {
        seen.marks |= mark_of(part.component);
    }
    const double water = prediction.species[0].molality.mol_per_kg() + prediction.species[1].molality.mol_per_kg();
    seen.buffer_value = std::max(prediction.buffer_value.mol_per_kg() - std::numbers::ln10 * water, 0.0);
    return seen;
}

bool applies(const Observation& observation, const Circumstances& seen, Match& match) {
    for (const Presence& presence : observation.with) {
        if ((presence.marks & seen.marks) == 0) {
            return false;
        }
    }
    const Prediction& prediction = *seen.prediction;
    if (!observation.temperature_C.holds(prediction.temperature.celsius()) ||
        !observation.ionic_strength_mol_per_kg.holds(prediction.ionic_strength.mol_per_kg()) ||
        !observation.buffer_value_mol_per_kg.holds(seen.buffer_value) || !ph_is_in_range(observation, seen, match)) {
        return false;
    }
    if (const RecipeFacts* recipe = seen.recipe) {
        if (!holds_if_asked(observation.share_of_best_buffering, recipe->share_of_best_buffering) ||
            !observation.temperature_rise_K.holds(recipe->temperature_rise_K) ||
            !observation.titrant_share.holds(recipe->titrant_share) || !reagent_matches(observation, seen, match)) {
            return false;
        }
    }
    return present(observation, prediction) &&
           (observation.pK_distance.open() || observation.pK_distance.holds(nearest_pK(prediction))) &&
           exceeds_product(observation, seen);
}

}  // namespace carboy
