#pragma once

#include <string>

#include "carboy/constants.h"
#include "carboy/plan.h"

namespace carboy {

struct TextStyle {
    bool colour = false;
    bool explain = false;                    ///< the constants, equations and sources behind the figures
    bool bench_temperature_assumed = false;  ///< --prepare-at was left out; the sheet says so
};

/// The sheet for the bench.
std::string recipe_text(const Plan& plan, const Table& table, const TextStyle& style);

}  // namespace carboy
