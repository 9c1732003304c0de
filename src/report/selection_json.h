#pragma once

#include <string>

#include <nlohmann/json.hpp>

#include "carboy/constants.h"
#include "carboy/selection.h"

namespace carboy {

/// The record of data/schema/selection.schema.json; every standing, whatever the text shows.
nlohmann::ordered_json selection_json(const Selection& selection, const Table& table);
/// One line a system: the ranked ones, then the excluded ones. Units stand in the header.
std::string selection_csv(const Selection& selection, const Table& table);

}  // namespace carboy
