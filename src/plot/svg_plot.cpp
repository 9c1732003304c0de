#include "plot/svg_plot.h"

#include <algorithm>
#include <array>
#include <cmath>

#include <fmt/format.h>

#include "plot/axis.h"
#include "plot/svg_text.h"

namespace carboy {

namespace {

constexpr double width = 640;
constexpr double left = 58;
constexpr double right = 622;
constexpr double panel_height = 250;
constexpr double panel_gap = 44;  // holds the title of the next y axis
constexpr double line_height = 18;
constexpr std::size_t styles = 6;

// Told apart with any common colour vision, on white and on black; the dashes do it without colour.
constexpr std::array<const char*, styles> dashes{"", "9 4", "2 3", "11 3 2 3", "5 2", "14 3 2 3 2 3"};

constexpr auto style_sheet = R"(
text{font-family:system-ui,-apple-system,"Segoe UI","DejaVu Sans",Arial,sans-serif;font-size:13px;fill:#1b1e23}
.title{font-size:15px;font-weight:600}.quiet{fill:#565c66}.paper{fill:#fff}.grid{stroke:#e4e6ea;stroke-width:1}
.axis{stroke:#7d838d;stroke-width:1}.halo{paint-order:stroke;stroke:#fff;stroke-width:4px;stroke-linejoin:round}
.curve{fill:none;stroke-width:2;stroke-linejoin:round;stroke-linecap:butt}.bar{stroke-width:1.2}
.mark{fill:#fff;stroke:#1b1e23;stroke-width:1.6}.drop{stroke:#7d838d;stroke-width:1;stroke-dasharray:1 3}
.s0{stroke:#0072b2}.s1{stroke:#d55e00}.s2{stroke:#007a5a}.s3{stroke:#aa3f8c}.s4{stroke:#7a5c00}.s5{stroke:#444a52}
.f0{fill:#0072b2}.f1{fill:#d55e00}.f2{fill:#007a5a}.f3{fill:#aa3f8c}.f4{fill:#7a5c00}.f5{fill:#444a52}
@media (prefers-color-scheme:dark){text{fill:#e7e9ec}.quiet{fill:#a9b0ba}.paper{fill:#15181d}.grid{stroke:#2b3038}
.axis{stroke:#7d8591}.halo{stroke:#15181d}.mark{fill:#15181d;stroke:#e7e9ec}.drop{stroke:#7d8591}
.s0{stroke:#56b4e9}.s1{stroke:#f0953b}.s2{stroke:#35c79a}.s3{stroke:#e39ac9}.s4{stroke:#e6d74a}.s5{stroke:#c6cbd2}
.f0{fill:#56b4e9}.f1{fill:#f0953b}.f2{fill:#35c79a}.f3{fill:#e39ac9}.f4{fill:#e6d74a}.f5{fill:#c6cbd2}}
)";

/// A marker of the style, centred, about 8 units across.
std::string marker(std::size_t style, double x, double y) {
    const std::size_t s = style % styles;
    switch (s % 4) {
        case 0:
            return fmt::format("<circle class=\"f{}\" cx=\"{:.1f}\" cy=\"{:.1f}\" r=\"3.6\"/>\n", s, x, y);
        case 1:
            return fmt::format("<rect class=\"f{}\" x=\"{:.1f}\" y=\"{:.1f}\" width=\"7\" height=\"7\"/>\n", s, x - 3.5,
                               y - 3.5);
        case 2:
            return fmt::format("<path class=\"f{}\" d=\"M{:.1f} {:.1f}l4.6 8h-9.2z\"/>\n", s, x, y - 5);
        default:
            return fmt::format("<path class=\"f{}\" d=\"M{:.1f} {:.1f}l4.8 4.8l-4.8 4.8l-4.8 -4.8z\"/>\n", s, x,
                               y - 4.8);
    }
}

std::string dash_of(std::size_t style) {
    const char* dash = dashes[style % styles];
    return *dash == '\0' ? std::string() : fmt::format(" stroke-dasharray=\"{}\"", dash);
}

class Drawing {
public:
    explicit Drawing(const Plot& plot) : plot_(plot), x_(x_axis(plot, 9)) {
        for (const PlotPanel& panel : plot.panels) {
            most_series_ = std::max(most_series_, panel.series.size());
        }
    }

    std::string text() {
        head();
        legend();
        for (std::size_t i = 0; i < plot_.panels.size(); ++i) {
            cursor_ += i == 0 ? 40 : panel_gap;
            panel(plot_.panels[i], i + 1 == plot_.panels.size());
        }
        const double height = cursor_ + 52;
        std::string svg = fmt::format(
            "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {0:g} {1:g}\" width=\"{0:g}\" height=\"{1:g}\" "
            "role=\"img\">\n<title>{2}</title>\n<style>{3}</style>\n"
            "<rect class=\"paper\" width=\"{0:g}\" height=\"{1:g}\"/>\n",
            width, height, svg_escaped(plot_.title), style_sheet);
        return svg + body_ + "</svg>\n";
    }

private:
    void words(double x, double y, std::string_view text, std::string_view look, std::string_view anchor = "start") {
        body_ += fmt::format("<text class=\"{}\" x=\"{:.1f}\" y=\"{:.1f}\" text-anchor=\"{}\">{}</text>\n", look, x, y,
                             anchor, svg_escaped(text));
    }
    void stroke(std::string_view look, double x1, double y1, double x2, double y2) {
        body_ += fmt::format("<line class=\"{}\" x1=\"{:.1f}\" y1=\"{:.1f}\" x2=\"{:.1f}\" y2=\"{:.1f}\"/>\n", look, x1,
                             y1, x2, y2);
    }
    double x_at(double value) const { return left + (right - left) * x_.place(value); }

    void head() {
        constexpr double title_size = 15;
        constexpr double text_size = 13;
        cursor_ = 10;
        for (const std::string& line : svg_lines(plot_.title, width - 32, title_size)) {
            cursor_ += line_height;
            words(16, cursor_, line, "title");
        }
        for (const std::string& line : svg_lines(plot_.subtitle, width - 32, text_size)) {
            cursor_ += line_height;
            words(16, cursor_, line, "quiet");
        }
    }

    /// Line, marker and name of every series of the fullest panel, as many in a row as fit.
    void legend() {
        constexpr double sample = 34;
        constexpr double text_size = 13;
        if (most_series_ < 2) {
            return;
        }
        const auto fullest = std::find_if(plot_.panels.begin(), plot_.panels.end(),
                                          [&](const PlotPanel& panel) { return panel.series.size() == most_series_; });
        double x = width;
        cursor_ += 4;
        for (const PlotSeries& series : fullest->series) {
            const double needed = sample + 8 + svg_width(series.name, text_size) + 22;
            if (x + needed > width - 8) {
                x = 16;
                cursor_ += line_height + 2;
            }
            const double middle = cursor_ - 4.5;
            if (series.stroke == Stroke::line) {
                body_ += fmt::format("<path class=\"curve s{}\"{} d=\"M{:.1f} {:.1f}h{}\"/>\n", series.style % styles,
                                     dash_of(series.style), x, middle, sample);
            }
            body_ += marker(series.style, x + sample / 2, middle);
            words(x + sample + 8, cursor_, series.name, "");
            x += needed;
        }
    }

    void panel(const PlotPanel& panel, bool last) {
        const double top = cursor_;
        const double bottom = top + panel_height * panel.height;
        const auto most_ticks = static_cast<std::size_t>(std::max(3.0, (bottom - top) / 34));
        const Axis y = y_axis(panel, most_ticks);
        const auto y_at = [&](double value) { return bottom - (bottom - top) * y.place(value); };
        words(16, top - 12, panel.y_title, "quiet");
        for (const double tick : y.ticks) {
            stroke("grid", left, y_at(tick), right, y_at(tick));
            words(left - 8, y_at(tick) + 4.5, svg_number(y.label(tick)), "quiet", "end");
        }
        for (const double tick : x_.ticks) {
            stroke("axis", x_at(tick), bottom, x_at(tick), bottom + 5);
            if (last) {
                words(x_at(tick), bottom + 20, svg_number(x_.label(tick)), "quiet", "middle");
            }
        }
        stroke("axis", left, bottom, right, bottom);
        if (y.low < 0 && y.high > 0) {
            stroke("axis", left, y_at(0), right, y_at(0));
        }
        for (const PlotMark& mark : panel.marks) {
            stroke("drop", x_at(mark.x), y_at(mark.y), x_at(mark.x), bottom);
        }
        for (std::size_t i = 0; i < panel.series.size(); ++i) {
            series(panel.series[i], i, y_at, y_at(std::clamp(0.0, y.low, y.high)));
        }
        for (const PlotMark& mark : panel.marks) {
            this->mark(panel, mark, y_at);
        }
        cursor_ = bottom;
        if (last) {
            words((left + right) / 2, bottom + 40, plot_.x_title, "quiet", "middle");
        }
    }

    template <class YAt>
    void series(const PlotSeries& series, std::size_t order, const YAt& y_at, double zero) {
        const std::size_t s = series.style % styles;
        if (series.stroke == Stroke::line && series.x.size() > 1) {
            std::string path;
            for (std::size_t i = 0; i < series.x.size(); ++i) {
                path += fmt::format("{}{:.2f} {:.2f}", i == 0 ? 'M' : 'L', x_at(series.x[i]), y_at(series.y[i]));
            }
            body_ += fmt::format("<path class=\"curve s{}\"{} d=\"{}\"/>\n", s, dash_of(series.style), path);
        }
        for (std::size_t i = 0; i < series.x.size(); ++i) {
            const double x = x_at(series.x[i]);
            if (series.stroke == Stroke::stems) {
                stroke(fmt::format("bar s{}", s), x, zero, x, y_at(series.y[i]));
            }
            if (i < series.y_error.size() && series.y_error[i] > 0) {
                const double up = y_at(series.y[i] + series.y_error[i]);
                const double down = y_at(series.y[i] - series.y_error[i]);
                const std::string look = fmt::format("bar s{}", s);
                stroke(look, x, up, x, down);
                stroke(look, x - 3, up, x + 3, up);
                stroke(look, x - 3, down, x + 3, down);
            }
        }
        for (const std::size_t i : marked_points(series, order)) {
            body_ += marker(series.style, x_at(series.x[i]), y_at(series.y[i]));
        }
    }

    /// Data: every point. A curve alone needs no markers; beside others it has about eight, staggered.
    std::vector<std::size_t> marked_points(const PlotSeries& series, std::size_t order) const {
        constexpr double few = 8;
        constexpr std::size_t all_of = 14;
        std::vector<std::size_t> points;
        const bool all = series.stroke != Stroke::line || series.x.size() <= all_of;
        if (!all && most_series_ < 2) {
            return points;
        }
        double next = x_.low + (x_.high - x_.low) * (0.03 + 0.04 * static_cast<double>(order % 3));
        for (std::size_t i = 0; i < series.x.size(); ++i) {
            if (all || series.x[i] >= next) {
                points.push_back(i);
                next = series.x[i] + (x_.high - x_.low) / few;
            }
        }
        return points;
    }

    /// A ring, and its words on the side where the curve is not.
    template <class YAt>
    void mark(const PlotPanel& panel, const PlotMark& mark, const YAt& y_at) {
        constexpr double text_size = 13;
        const double x = x_at(mark.x);
        const double y = y_at(mark.y);
        body_ += fmt::format("<circle class=\"mark\" cx=\"{:.1f}\" cy=\"{:.1f}\" r=\"4.2\"/>\n", x, y);
        const bool rising = !panel.series.empty() && panel.series.front().y.back() > panel.series.front().y.front();
        const bool fits = x + 12 + svg_width(mark.text, text_size) < right;
        const double down = rising == fits ? 10 : -1;
        words(fits ? x + 12 : x - 12, y + down, mark.text, "halo", fits ? "start" : "end");
    }

    const Plot& plot_;
    Axis x_;
    std::size_t most_series_ = 0;
    double cursor_ = 0;
    std::string body_;
};

}  // namespace

std::string svg_plot(const Plot& plot) {
    return Drawing(plot).text();
}

}  // namespace carboy
