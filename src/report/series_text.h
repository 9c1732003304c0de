#pragma once

#include <string>

#include <nlohmann/json.hpp>

#include "carboy/series.h"

#include "report/recipe_text.h"

namespace carboy {

/// The stocks and the mixing table of a series.
std::string series_text(const Series& series, const Table& table, const TextStyle& style);
nlohmann::ordered_json series_json(const Series& series, const Table& table);
/// One row a buffer: pH, volumes of the stocks by letter, what was predicted. RFC 4180.
std::string series_csv(const Series& series);

}  // namespace carboy
