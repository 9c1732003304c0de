#pragma once

#include <optional>
#include <string>

#include <nlohmann/json.hpp>

#include "carboy/sweep.h"

#include "plot/plot.h"
#include "plot/terminal_plot.h"
#include "report/recipe_text.h"

namespace carboy {

/// How the condition is written: its name, its unit and what a number of it is multiplied by to be printed (mol/L
/// small enough are shown in mmol/L).
struct ConditionWords {
    std::string name;
    std::string unit;
    double scale = 1;
    std::string key;  ///< of the exact value in JSON and CSV, with its unit
};
ConditionWords words_of(const SweepCondition& condition, const Table& table);

/// Curves and a table for each solution. `canvas`: none leaves the curves out.
std::string sweep_text(const Sweep& sweep, const Table& table, const TextStyle& style,
                       const std::optional<TerminalCanvas>& canvas);
/// data/schema/sweep.schema.json
nlohmann::ordered_json sweep_json(const Sweep& sweep, const Table& table);
/// One row a solution and value.
std::string sweep_csv(const Sweep& sweep, const Table& table);
/// pH above buffer value and ionic strength, all solutions together.
Plot sweep_plot(const Sweep& sweep, const Table& table);

}  // namespace carboy
