#pragma once

#include <string>
#include <string_view>

#include <nlohmann/json.hpp>

#include "carboy/constants.h"
#include "carboy/fit.h"

namespace carboy {

/// The record of data/schema/fit.schema.json. `what` names the data.
nlohmann::ordered_json fit_json(const Fit& fit, const Table& table, std::string_view what);
/// One line a reading; units stand in the header.
std::string fit_csv(const Fit& fit);

/// A constants document (data/schema/constants.schema.json) with every system whose pK was found: its entry as the
/// table has it, the pK replaced, its uncertainty that of the fit and the activity model together, its source the
/// measurement.
nlohmann::ordered_json fitted_constants(const Fit& fit, const Table& table, std::string_view what);

}  // namespace carboy
