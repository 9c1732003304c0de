#pragma once

#include <optional>
#include <string>
#include <string_view>

#include <nlohmann/json.hpp>

#include "carboy/titration.h"

#include "plot/plot.h"
#include "plot/terminal_plot.h"
#include "report/recipe_text.h"

namespace carboy {

/// What was titrated with what, as typed.
struct TitrationWords {
    std::string_view sample;
    std::string_view titrant;
};

/// The answer, the curve and a table of round volumes. `canvas`: none leaves the curve out.
std::string titration_text(const TitrationCurve& curve, const TitrationWords& words, const Table& table,
                           const TextStyle& style, const std::optional<TerminalCanvas>& canvas);
/// Every point of the curve (data/schema/titration.schema.json).
nlohmann::ordered_json titration_json(const TitrationCurve& curve, const TitrationWords& words, const Table& table);
/// The same points, one a row.
std::string titration_csv(const TitrationCurve& curve);
/// pH above buffer value, equivalence points marked.
Plot titration_plot(const TitrationCurve& curve, const TitrationWords& words);

}  // namespace carboy
