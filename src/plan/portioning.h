#pragma once

#include "carboy/plan.h"

#include "plan/draft.h"

namespace carboy {

/// Turns the ingredients of a draft into what is weighed, measured and made first, and into the plan's preparation.
/// With a balance, masses are rounded to what it reads, volumes to what the vessel delivers, and what is too little to
/// weigh is taken from a stock.
void portion(Plan& plan, const Draft& draft, const Stockroom& stockroom);

}  // namespace carboy
