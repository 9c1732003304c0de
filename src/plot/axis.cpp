#include "plot/axis.h"

#include <algorithm>
#include <cmath>
#include <limits>

#include <fmt/format.h>

namespace carboy {

namespace {

struct Extent {
    double low = std::numeric_limits<double>::infinity();
    double high = -std::numeric_limits<double>::infinity();
    void take(double value) {
        if (std::isfinite(value)) {
            low = std::min(low, value);
            high = std::max(high, value);
        }
    }
};

/// The least of 1, 2, 5 times a power of ten that is not below `least`, with its decimals.
struct RoundStep {
    double size;
    int decimals;
};
RoundStep round_step(double least) {
    const double exponent = std::floor(std::log10(least) + 1e-9);
    const double power = std::pow(10.0, exponent);
    for (const double digit : {1.0, 2.0, 5.0}) {
        if (digit * power >= least * (1 - 1e-9)) {
            return {digit * power, std::max(0, -static_cast<int>(exponent))};
        }
    }
    return {10 * power, std::max(0, -static_cast<int>(exponent) - 1)};
}

}  // namespace

std::string Axis::label(double tick) const {
    std::string text = fmt::format("{:.{}f}", tick, std::min(decimals, 15));
    const bool zero = text.find_first_of("123456789") == std::string::npos;
    if (zero && text.front() == '-') {
        text.erase(0, 1);
    }
    return text;
}

Axis axis_for(double low, double high, std::size_t most_ticks, bool widen) {
    if (!std::isfinite(low) || !std::isfinite(high)) {
        low = 0;
        high = 1;
    }
    if (!(high - low > 1e-12 * std::max(std::abs(low), std::abs(high)))) {
        const double about = low == 0 ? 1 : std::abs(low) * 0.05;
        low -= about;
        high += about;
    }
    const auto intervals = static_cast<double>(std::max<std::size_t>(most_ticks, 2) - 1);
    RoundStep step = round_step((high - low) / intervals);
    Axis axis;
    // Widening may add a tick at either end; the step then grows until they fit.
    for (double growth = 1;; growth *= 1.5) {
        step = round_step((high - low) / intervals * growth);
        axis.low = widen ? std::floor(low / step.size + 1e-9) * step.size : low;
        axis.high = widen ? std::ceil(high / step.size - 1e-9) * step.size : high;
        if (!widen || (axis.high - axis.low) / step.size <= intervals + 1e-6) {
            break;
        }
    }
    axis.decimals = step.decimals;
    const double first = std::ceil(axis.low / step.size - 1e-9);
    for (double k = first; k * step.size <= axis.high + 1e-9 * step.size; ++k) {
        axis.ticks.push_back(k * step.size);
    }
    return axis;
}

Axis x_axis(const Plot& plot, std::size_t most_ticks) {
    Extent extent;
    for (const PlotPanel& panel : plot.panels) {
        for (const PlotSeries& series : panel.series) {
            std::for_each(series.x.begin(), series.x.end(), [&](double x) { extent.take(x); });
        }
    }
    return axis_for(extent.low, extent.high, most_ticks, false);
}

Axis y_axis(const PlotPanel& panel, std::size_t most_ticks) {
    Extent extent;
    if (panel.from_zero) {
        extent.take(0);
    }
    for (const PlotSeries& series : panel.series) {
        for (std::size_t i = 0; i < series.y.size(); ++i) {
            const double error = i < series.y_error.size() ? series.y_error[i] : 0;
            extent.take(series.y[i] - error);
            extent.take(series.y[i] + error);
        }
    }
    for (const PlotMark& mark : panel.marks) {
        extent.take(mark.y);
    }
    return axis_for(extent.low, extent.high, most_ticks, true);
}

}  // namespace carboy
