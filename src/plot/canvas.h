#pragma once

#include <cstddef>
#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

namespace carboy {

/// A field of character cells to draw on: braille dots, two across and four down in a cell, or one ASCII character a
/// cell. Positions are fractions of the field, 0 at the left and at the bottom.
class Canvas {
public:
    Canvas(std::size_t columns, std::size_t rows, bool unicode);

    /// A straight line in the pen of a series.
    void line(double x1, double y1, double x2, double y2, std::size_t series);
    /// One character over whatever is there.
    void letter(double x, double y, std::string_view character, std::size_t series);
    /// Words right of a place, else left of it, where nothing is drawn; left out when there is no room.
    void words(double x, double y, std::string_view text);
    /// One row, top first; with colour every series in its own.
    std::string row(std::size_t index, bool colour) const;

    static constexpr std::string_view ascii_pens = "*+xo#%";

private:
    static constexpr std::uint8_t no_series = 255;
    struct Cell {
        std::uint8_t dots = 0;
        std::uint8_t series = no_series;
        std::string over;
    };
    Cell& cell(std::size_t column, std::size_t row) { return cells_[row * columns_ + column]; }
    void dot(double x, double y, std::size_t series);
    std::size_t column_of(double x) const;
    std::size_t row_of(double y) const;

    std::size_t columns_;
    std::size_t rows_;
    bool unicode_;
    std::vector<Cell> cells_;
};

}  // namespace carboy
