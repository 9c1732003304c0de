#pragma once

#include <string>
#include <vector>

#include "carboy/constants.h"
#include "carboy/plan.h"

namespace carboy {

/// The work at the bench, one sentence or two a step, in order.
std::vector<std::string> steps_of(const Plan& plan, const Table& table);

/// `dissolved` and so on, as the sheet and JSON name a reading.
std::string_view stage_word(Stage stage);

/// What a measurement is taken from: the article, or a stock that is made for the recipe.
std::string source_of(const Measurement& item, const Plan& plan, const Table& table);

}  // namespace carboy
