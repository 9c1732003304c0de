#pragma once

#include "carboy/constants.h"
#include "carboy/plan.h"
#include "carboy/prediction.h"

#include "report/page.h"

namespace carboy {

/// Constants, equations and sources behind a prediction.
void explain_prediction(Page& page, const Prediction& prediction, const Table& table);
/// The same behind a recipe: how the amounts follow, the route, the volumes neglected.
void explain_recipe(Page& page, const Plan& plan, const Table& table);

}  // namespace carboy
