#pragma once

#include <vector>

#include "carboy/activity.h"
#include "carboy/plan.h"

namespace carboy {

/// One buffer of a series.
struct SeriesRow {
    PH target;
    std::vector<Volume> volumes;  ///< of each stock of the series, rounded as printed
    PH at_bench;                  ///< what the meter shows at the bench temperature
    PH ph;                        ///< predicted for the rounded volumes, at the temperature of use
    Molality ionic_strength;
    Molality buffer_value;
    Molality osmolality;        ///< ideal, the sum of particles
    double uncertainty_k2 = 0;  ///< expanded uncertainty of the pH, k = 2
};

/// Buffers of one concentration and ionic strength across a range of pH, mixed from the same stocks.
struct Series {
    Request request;  ///< the label; without a pH
    IonicStrengthTarget ionic_strength;
    bool ionic_strength_chosen = false;  ///< the label names none: the least that every row can have
    std::vector<Stock> stocks;           ///< the two forms, then salt, then additives
    std::vector<CounterIonChoice> counter_ions;
    Volume graduation;  ///< volumes are rounded to it
    std::vector<SeriesRow> rows;
};

/// Works out the series by the planner's linear problem, one row a pH, and verifies every row by the forward
/// calculation. The two forms are the pair that reaches the whole range; else one form and a strong acid or base.
/// Errors: `unreachable_target`, `unreachable_ionic_strength`, `no_reagent`, `stocks_too_dilute` (no_recipe), each with
/// the pH at which it fails; `bad_amount` (input) for an empty or unordered list of pH.
Series plan_series(const Table& table, const Request& request, const std::vector<PH>& phs, const ActivityModel& model);

}  // namespace carboy
