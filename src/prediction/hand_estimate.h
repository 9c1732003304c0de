#pragma once

#include <optional>

#include "carboy/constants.h"
#include "carboy/mixture.h"
#include "carboy/quantity.h"

namespace carboy {

/// The sum a person would do on paper: Henderson-Hasselbalch with the pK at 25 °C and the ratio of what was put
/// together; for a single form alone the usual half sums; for a strong acid or base its concentration. Empty where none
/// applies.
std::optional<PH> hand_estimate(const Table& table, const Mixture& mixture);

}  // namespace carboy
