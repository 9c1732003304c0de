#pragma once

#include <string>
#include <string_view>

#include "carboy/constants.h"
#include "carboy/fit.h"

#include "report/recipe_text.h"

namespace carboy {

/// What was found, how well it fits, how the unknowns hang together, and every residual. `what` names the data.
std::string fit_text(const Fit& fit, const Table& table, std::string_view what, const TextStyle& style);

}  // namespace carboy
