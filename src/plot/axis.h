#pragma once

#include <string>
#include <vector>

#include "plot/plot.h"

namespace carboy {

/// A scale with ticks at round numbers (1, 2 or 5 times a power of ten apart).
struct Axis {
    double low = 0;
    double high = 1;
    std::vector<double> ticks;
    int decimals = 0;  ///< that tell the ticks apart

    /// 0 at `low`, 1 at `high`.
    double place(double value) const { return (value - low) / (high - low); }
    std::string label(double tick) const;
};

/// The axis from `low` to `high` with at most `most_ticks` ticks. `widen`: to the next ticks outside. Equal or
/// non-finite ends are spread apart so that there is always an axis.
Axis axis_for(double low, double high, std::size_t most_ticks, bool widen);

/// The x axis that holds all series of a plot, exactly as long as the data.
Axis x_axis(const Plot& plot, std::size_t most_ticks);
/// The y axis that holds a panel's series, error bars and marks.
Axis y_axis(const PlotPanel& panel, std::size_t most_ticks);

}  // namespace carboy
