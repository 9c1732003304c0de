#pragma once

#include <string>

#include "carboy/constants.h"
#include "carboy/plan.h"

namespace carboy {

/// The recipe as a table (RFC 4180 quoting, lines end with a line feed): a header, then a row for each stock to make
/// first, thing to weigh and thing to measure in the order of `recipe_json`, last the water to fill up with. Units
/// stand in the column names, numbers are exact, a cell that does not apply is empty.
std::string recipe_csv(const Plan& plan, const Table& table);

}  // namespace carboy
