#pragma once

#include <cstdint>
#include <string>
#include <vector>

namespace carboy {

/// How a series is drawn.
enum class Stroke : std::uint8_t {
    line,    ///< a curve; markers too when it has few points
    points,  ///< markers, with error bars where `y_error` has them
    stems    ///< markers on stems from zero: residuals
};

/// One curve or cloud of points. All vectors have one entry per point, `y_error` may be empty.
struct PlotSeries {
    std::string name;  ///< for the legend; with one series alone it is not shown
    std::vector<double> x;
    std::vector<double> y;
    std::vector<double> y_error;  ///< half the length of the error bar, same unit as y
    Stroke stroke = Stroke::line;
    /// Series of one colour, dash and marker belong together: data and the curve fitted to them.
    std::size_t style = 0;
};

/// A single place worth a word.
struct PlotMark {
    double x = 0;
    double y = 0;
    std::string text;  ///< short; beside the mark
};

/// One pair of axes; panels of a plot share the x axis.
struct PlotPanel {
    std::string y_title;  ///< quantity and unit
    std::vector<PlotSeries> series;
    std::vector<PlotMark> marks;
    bool from_zero = false;  ///< the axis begins at 0, or has a line there
    double height = 1;       ///< relative to the other panels
};

/// What is drawn, whatever it is drawn with.
struct Plot {
    std::string title;
    std::string subtitle;
    std::string x_title;
    std::vector<PlotPanel> panels;  ///< from top to bottom
};

}  // namespace carboy
