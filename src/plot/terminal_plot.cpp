#include "plot/terminal_plot.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "plot/axis.h"
#include "plot/canvas.h"

namespace carboy {

namespace {

std::size_t columns_of(std::string_view text) {
    return static_cast<std::size_t>(std::count_if(
        text.begin(), text.end(), [](char c) { return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U; }));
}

/// The beginning of a text, cut between characters.
std::string first_columns(std::string_view text, std::size_t count) {
    std::size_t bytes = 0;
    for (std::size_t columns = 0; bytes < text.size(); ++bytes) {
        const bool begins = (static_cast<unsigned char>(text[bytes]) & 0xC0U) != 0x80U;
        if (begins && columns++ == count) {
            break;
        }
    }
    return std::string(text.substr(0, bytes));
}

/// What a terminal without Unicode can show of our own words.
std::string in_ascii(std::string text) {
    constexpr std::pair<std::string_view, std::string_view> spellings[] = {
        {"°", " deg "}, {"µ", "u"}, {"·", "."}, {"−", "-"}, {"±", "+/-"}, {"×", "x"}, {"→", "->"}};
    for (const auto& [sign, plain] : spellings) {
        for (auto at = text.find(sign); at != std::string::npos; at = text.find(sign)) {
            text.replace(at, sign.size(), plain);
        }
    }
    std::replace_if(
        text.begin(), text.end(), [](char c) { return static_cast<unsigned char>(c) >= 0x80U; }, '?');
    return text;
}

class TerminalDrawing {
public:
    TerminalDrawing(const Plot& plot, const TerminalCanvas& look) : plot_(plot), look_(look) {
        constexpr std::size_t least_width = 40;
        look_.width = std::max(look_.width, least_width);
        for (const PlotPanel& panel : plot.panels) {
            most_series_ = std::max(most_series_, panel.series.size());
            const Axis y = y_axis(panel, rows_of(panel) / 3 + 1);
            for (const double tick : y.ticks) {
                margin_ = std::max(margin_, y.label(tick).size());
            }
        }
        field_ = look_.width - margin_ - 2;
        x_ = x_axis(plot, std::max<std::size_t>(3, field_ / 9));
    }

    std::string text() {
        for (const PlotPanel& panel : plot_.panels) {
            line(std::string(margin_ > 1 ? margin_ - 1 : 0, ' ') + words(panel.y_title));
            this->panel(panel);
        }
        scale();
        legend();
        return text_;
    }

private:
    std::string words(const std::string& text) const { return look_.unicode ? text : in_ascii(text); }
    std::string_view glyph(std::string_view unicode, std::string_view ascii) const {
        return look_.unicode ? unicode : ascii;
    }
    std::size_t rows_of(const PlotPanel& panel) const {
        constexpr double least = 4;
        return static_cast<std::size_t>(std::max(least, std::round(static_cast<double>(look_.height) * panel.height)));
    }
    void line(std::string text) {
        while (text.ends_with(' ')) {
            text.pop_back();
        }
        text_ += text + '\n';
    }
    /// What tells a series apart: its letter, or in ASCII the character it is drawn with.
    std::string sign(std::size_t style) const {
        return look_.unicode ? std::string(1, static_cast<char>('a' + style % 26))
                             : std::string(1, Canvas::ascii_pens[style % Canvas::ascii_pens.size()]);
    }

    void panel(const PlotPanel& panel) {
        const std::size_t rows = rows_of(panel);
        const Axis y = y_axis(panel, rows / 3 + 1);
        Canvas canvas(field_, rows, look_.unicode);
        for (std::size_t i = 0; i < panel.series.size(); ++i) {
            draw(canvas, panel.series[i], y, i);
        }
        for (const PlotMark& mark : panel.marks) {
            canvas.letter(x_.place(mark.x), y.place(mark.y), glyph("◆", "@"), 0);
        }
        for (const PlotMark& mark : panel.marks) {
            canvas.words(x_.place(mark.x), y.place(mark.y), words(mark.text));
        }
        std::vector<std::string> labels(rows);
        for (const double tick : y.ticks) {
            const double row = (1 - y.place(tick)) * static_cast<double>(rows - 1);
            labels[static_cast<std::size_t>(std::lround(row))] = y.label(tick);
        }
        for (std::size_t row = 0; row < rows; ++row) {
            line(fmt::format("{:>{}} {}{}", labels[row], margin_,
                             labels[row].empty() ? glyph("│", "|") : glyph("┤", "+"), canvas.row(row, look_.colour)));
        }
    }

    void draw(Canvas& canvas, const PlotSeries& series, const Axis& y, std::size_t order) const {
        const double zero = y.place(std::clamp(0.0, y.low, y.high));
        for (std::size_t i = 0; i < series.x.size(); ++i) {
            const double x = x_.place(series.x[i]);
            const double here = y.place(series.y[i]);
            if (series.stroke == Stroke::line && i > 0) {
                canvas.line(x_.place(series.x[i - 1]), y.place(series.y[i - 1]), x, here, series.style);
            } else if (series.stroke == Stroke::stems) {
                canvas.line(x, zero, x, here, series.style);
            }
            if (i < series.y_error.size() && series.y_error[i] > 0) {
                canvas.line(x, y.place(series.y[i] - series.y_error[i]), x, y.place(series.y[i] + series.y_error[i]),
                            series.style);
            }
        }
        if (series.stroke != Stroke::line || series.x.size() == 1) {
            for (std::size_t i = 0; i < series.x.size(); ++i) {
                canvas.letter(x_.place(series.x[i]), y.place(series.y[i]),
                              most_series_ > 1 ? sign(series.style) : glyph("●", "o"), series.style);
            }
        } else if (most_series_ > 1 && look_.unicode) {
            letters(canvas, series, y, order);
        }
    }

    /// The curve's letter on it, staggered so that neighbours do not cover each other.
    void letters(Canvas& canvas, const PlotSeries& series, const Axis& y, std::size_t order) const {
        const double shift = static_cast<double>(order) / static_cast<double>(most_series_ + 1);
        for (double at = 0.04 + 0.25 * shift; at < 1; at += 0.25) {
            const double x = x_.low + (x_.high - x_.low) * at;
            const auto next = std::lower_bound(series.x.begin(), series.x.end(), x);
            if (next == series.x.begin() || next == series.x.end()) {
                continue;
            }
            const auto i = static_cast<std::size_t>(next - series.x.begin());
            const double part = (x - series.x[i - 1]) / (series.x[i] - series.x[i - 1]);
            canvas.letter(at, y.place(series.y[i - 1] + part * (series.y[i] - series.y[i - 1])), sign(series.style),
                          series.style);
        }
    }

    void scale() {
        std::string rule(margin_ + 1, ' ');
        std::string labels(look_.width, ' ');
        rule += glyph("└", "+");
        std::size_t taken = 0;
        std::vector<bool> ticked(field_);
        for (const double tick : x_.ticks) {
            const auto column = static_cast<std::size_t>(std::lround(x_.place(tick) * static_cast<double>(field_ - 1)));
            const std::string label = x_.label(tick);
            const std::size_t centre = margin_ + 2 + column;
            const std::size_t from = std::min(centre - std::min(label.size() / 2, centre), look_.width - label.size());
            ticked[column] = true;
            if (from >= taken) {
                labels.replace(from, label.size(), label);
                taken = from + label.size() + 1;
            }
        }
        for (const bool tick : ticked) {
            rule += tick ? glyph("┬", "+") : glyph("─", "-");
        }
        line(rule);
        line(labels);
        const std::string title = words(plot_.x_title);
        const std::size_t room = look_.width - std::min(columns_of(title), look_.width);
        line(std::string(std::min(room, margin_ + 2 + (field_ - std::min(columns_of(title), field_)) / 2), ' ') +
             title);
    }

    void legend() {
        if (most_series_ < 2) {
            return;
        }
        for (const PlotPanel& panel : plot_.panels) {
            if (panel.series.size() != most_series_) {
                continue;
            }
            for (const PlotSeries& series : panel.series) {
                std::string name = words(series.name);
                const std::size_t room = look_.width - 6;
                if (columns_of(name) > room) {
                    name = first_columns(name, room - 1) + std::string(glyph("…", "~"));
                }
                line(fmt::format("   {}  {}", sign(series.style), name));
            }
            return;
        }
    }

    const Plot& plot_;
    TerminalCanvas look_;
    std::size_t most_series_ = 0;
    std::size_t margin_ = 1;
    std::size_t field_ = 0;
    Axis x_;
    std::string text_;
};

}  // namespace

std::string terminal_plot(const Plot& plot, const TerminalCanvas& canvas) {
    return TerminalDrawing(plot, canvas).text();
}

}  // namespace carboy
