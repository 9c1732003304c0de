#pragma once

#include <vector>

#include "explore/mistakes.h"

namespace carboy {

/// Which single mistakes could be behind a reading, most plausible first: those the reading fits, or, when it fits
/// none, the nearest few. A reading from before the titrant counts as well. Bayes' rule over the mistakes tried; see
/// `prior`.
std::vector<Suspect> suspects(const Bench& bench, const Plan& plan, const VesselContent& vessel, const OffBatch& batch);

/// Beyond what any amount of the recipe's titrant can do: further off than none of it, or than twenty times as much.
bool impossible_for_titrant(const Bench& bench, const Plan& plan, const VesselContent& vessel, PH reading);

}  // namespace carboy
