#pragma once

#include "carboy/plan.h"

#include "plan/stockroom.h"

namespace carboy {

/// Warns of bottles that are past their date, that this recipe nearly empties, and of dates that nobody judged.
void warn_of_bottles(Plan& plan, const Stockroom& stockroom);

/// What the plan takes from a bottle.
Amount taken_from(const Plan& plan, const Bottle& bottle);

}  // namespace carboy
