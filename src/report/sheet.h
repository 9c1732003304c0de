#pragma once

#include <optional>
#include <string>
#include <vector>

#include "carboy/constants.h"
#include "carboy/date.h"
#include "carboy/plan.h"

namespace carboy {

/// How a sheet is filled in and how much a weighing may miss its target.
struct SheetOptions {
    /// Part of an amount that a weighing or measuring may be off. Common practice, no source: 1 %.
    double tolerance = 0.01;
    bool bench_temperature_assumed = false;  ///< --prepare-at was left out; the sheet says so
    std::optional<Date> made;                ///< none: a blank
    std::optional<Date> expires;
};

/// A recipe sheet in words and figures, whatever it is laid out as: a page for a printer, Markdown or plain text.
/// Blanks to fill in belong to the layout; every text here is unescaped.
struct Sheet {
    /// Something to weigh or to measure.
    struct Portion {
        std::string reagent;
        std::string formula;  ///< empty when the table's formula says nothing more
        std::string target;
        std::string range;   ///< allowed; empty for what the meter decides
        std::string detail;  ///< what it is for, which bottle, which vessel; may be empty
        std::string lot;     ///< of the bottle on the shelf; empty: to be filled in
        bool weighed = true;
    };
    struct Reading {
        std::string after;
        std::string volume;
        std::string ph;
        bool act_on = false;  ///< where the titrant stops
    };
    struct Line {
        std::string term;
        std::string text;
    };
    /// A reagent that the GHS classifies.
    struct Hazard {
        std::string reagent;
        std::string signal_word;  ///< empty when the GHS gives none
        std::vector<Line> statements;
    };

    std::string title;       ///< what is to stand on the bottle
    std::string request_id;  ///< the caller's own; may be empty
    std::string recipe_id;
    std::string volume;
    std::string bench_temperature;
    std::string stop_at;          ///< pH where the titrant stops; empty without one
    std::string in_use;           ///< `pH 7.50 ± 0.04 at 4 °C`
    std::string tolerance;        ///< `1 %`
    std::vector<Portion> stocks;  ///< to make first
    std::vector<Portion> portions;
    std::vector<Reading> readings;
    std::vector<std::string> steps;
    std::vector<Line> result;
    std::vector<std::string> notes;
    std::vector<Hazard> hazards;
    std::vector<std::string> advice;
    std::string made;     ///< date; empty: to be filled in
    std::string expires;  ///< the same
    std::string program;  ///< name and version, constants version
};

Sheet sheet_of(const Plan& plan, const Table& table, const SheetOptions& options);

/// The first digits of a recipe id, for people: enough to tell the recipes of a laboratory apart.
std::string short_recipe_id(const std::string& recipe_id);

/// What is on the label: the line as typed, or the request in the same words when it was spelt out.
std::string label_line_of(const Request& request, const Table& table);

}  // namespace carboy
