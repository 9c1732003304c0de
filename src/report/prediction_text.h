#pragma once

#include <string>
#include <string_view>

#include "carboy/constants.h"
#include "carboy/prediction.h"

#include "report/recipe_text.h"

namespace carboy {

/// pH first, then the speciation. `mixture` is the line as typed.
std::string prediction_text(std::string_view mixture, const Prediction& prediction, const Table& table,
                            const TextStyle& style);

}  // namespace carboy
