#pragma once

#include "carboy/constants.h"
#include "carboy/plan.h"
#include "carboy/prediction.h"

namespace carboy {

/// Adds what the table's observations have to say of a mixture, and what they add to the uncertainty of its pH.
void observe_mixture(Prediction& prediction, const Table& table);

/// Adds what they have to say of the making-up to the plan's warnings, then those of its predictions: each once, the
/// heaviest first, and of light ones no more than make five. Call it when all else of the plan is there.
void observe_recipe(Plan& plan, const Table& table);

}  // namespace carboy
