#pragma once

#include <nlohmann/json.hpp>

#include "carboy/adjustment.h"

namespace carboy {

/// The record of `data/schema/adjustment.schema.json`.
nlohmann::ordered_json adjustment_json(const Adjustment& adjustment, const Table& table);

}  // namespace carboy
