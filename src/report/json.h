#pragma once

#include <string>

#include <nlohmann/json.hpp>

#include "carboy/constants.h"
#include "carboy/error.h"
#include "carboy/plan.h"
#include "carboy/prediction.h"

namespace carboy {

// The records of the contract; schemas in `data/schema/`. Keys keep their order, numbers are exact (shortest text that
// reads back to the same double), nothing depends on clock, locale or chance.

nlohmann::ordered_json prediction_json(const Prediction& prediction, const Table& table);
nlohmann::ordered_json recipe_json(const Plan& plan, const Table& table);
/// What every record ends with: which program and which constants made it.
nlohmann::ordered_json program_json(const Table& table);
nlohmann::ordered_json warnings_json(const std::vector<Warning>& warnings);
/// `id` is the caller's; left out when empty.
nlohmann::ordered_json error_json(const Error& error, std::string_view id);

/// SHA-256 of the request as understood, the activity model and the constants: equal ids mean equal recipes.
std::string recipe_id(const Plan& plan, const Table& table);

}  // namespace carboy
