#pragma once

#include <vector>

#include "carboy/activity.h"

#include "plan/draft.h"

namespace carboy {

/// Recipes that dilute one bottle which was made as a buffer of the same kind: what it brings of the label's additives
/// is left out, the rest is added, and a strong acid or base trims the pH where dilution alone would miss it. Amounts
/// are exact.
std::vector<Draft> dilutions(const Stockroom& stockroom, const Request& request, const Preparation& fixed,
                             const std::vector<CounterIonSet>& sets, const ActivityModel& model);

}  // namespace carboy
