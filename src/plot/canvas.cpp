#include "plot/canvas.h"

#include <algorithm>
#include <array>
#include <cmath>

#include <fmt/format.h>

namespace carboy {

namespace {

constexpr std::array colours{"\x1b[34m", "\x1b[33m", "\x1b[32m", "\x1b[35m", "\x1b[36m", "\x1b[31m"};
constexpr std::string_view plain = "\x1b[0m";

/// Braille dots by column and row of a cell, Unicode 2800 to 28FF.
constexpr std::uint8_t braille_dot[2][4] = {{0x01, 0x02, 0x04, 0x40}, {0x08, 0x10, 0x20, 0x80}};

std::string braille(std::uint8_t dots) {
    // U+2800 + dots in UTF-8.
    return {'\xE2', static_cast<char>(0xA0 + (dots >> 6U)), static_cast<char>(0x80 + (dots & 0x3FU))};
}

std::size_t clamped(double place, std::size_t count) {
    return static_cast<std::size_t>(std::clamp(place, 0.0, static_cast<double>(count) - 1));
}

}  // namespace

Canvas::Canvas(std::size_t columns, std::size_t rows, bool unicode)
    : columns_(columns), rows_(rows), unicode_(unicode), cells_(columns * rows) {}

std::size_t Canvas::column_of(double x) const {
    return clamped(std::round(x * static_cast<double>(columns_ - 1)), columns_);
}

std::size_t Canvas::row_of(double y) const {
    return clamped(std::round((1 - y) * static_cast<double>(rows_ - 1)), rows_);
}

void Canvas::dot(double x, double y, std::size_t series) {
    if (!unicode_) {
        cell(column_of(x), row_of(y)) = {1, static_cast<std::uint8_t>(series), {}};
        return;
    }
    // The first row's and last row's middles are where the ticks of the axis stand.
    const double across = x * static_cast<double>(columns_ - 1) * 2 + 0.5;
    const double down = (1 - y) * static_cast<double>(rows_ - 1) * 4 + 1.5;
    const std::size_t dot_column = clamped(std::round(across), columns_ * 2);
    const std::size_t dot_row = clamped(std::round(down), rows_ * 4);
    Cell& place = cell(dot_column / 2, dot_row / 4);
    place.dots |= braille_dot[dot_column % 2][dot_row % 4];
    place.series = static_cast<std::uint8_t>(series);
}

void Canvas::line(double x1, double y1, double x2, double y2, std::size_t series) {
    const double across = std::abs(x2 - x1) * static_cast<double>(columns_) * (unicode_ ? 2 : 1);
    const double down = std::abs(y2 - y1) * static_cast<double>(rows_) * (unicode_ ? 4 : 1);
    const double steps = std::max(1.0, std::ceil(std::max(across, down) * 1.5));
    for (double i = 0; i <= steps; ++i) {
        dot(x1 + (x2 - x1) * i / steps, y1 + (y2 - y1) * i / steps, series);
    }
}

void Canvas::letter(double x, double y, std::string_view character, std::size_t series) {
    Cell& place = cell(column_of(x), row_of(y));
    place.over = character;
    place.series = static_cast<std::uint8_t>(series);
}

void Canvas::words(double x, double y, std::string_view text) {
    std::vector<std::string> characters;
    for (const char c : text) {
        const bool begins = (static_cast<unsigned char>(c) & 0xC0U) != 0x80U;
        if (begins) {
            characters.emplace_back();
        }
        characters.back() += c;
    }
    const std::size_t row = row_of(y);
    const std::size_t middle = column_of(x);
    const auto free = [&](std::size_t from) {
        for (std::size_t i = 0; i < characters.size(); ++i) {
            const Cell& place = cell(from + i, row);
            if (place.dots != 0 || !place.over.empty()) {
                return false;
            }
        }
        return true;
    };
    for (const std::size_t apart : {2U, 3U, 4U}) {
        const bool room_right = middle + apart + characters.size() <= columns_;
        const bool room_left = middle + 1 >= apart + characters.size();
        std::size_t from = columns_;
        if (room_right && free(middle + apart)) {
            from = middle + apart;
        } else if (room_left && free(middle + 1 - apart - characters.size())) {
            from = middle + 1 - apart - characters.size();
        }
        if (from < columns_) {
            for (std::size_t i = 0; i < characters.size(); ++i) {
                cell(from + i, row).over = characters[i];
            }
            return;
        }
    }
}

std::string Canvas::row(std::size_t index, bool colour) const {
    std::string text;
    std::size_t blanks = 0;
    std::uint8_t pen = no_series;
    for (std::size_t column = 0; column < columns_; ++column) {
        const Cell& place = cells_[index * columns_ + column];
        if (place.dots == 0 && place.over.empty()) {
            ++blanks;
            continue;
        }
        text.append(blanks, ' ');
        blanks = 0;
        if (colour && place.series != pen) {
            text += place.series == no_series ? plain : std::string_view(colours[place.series % colours.size()]);
            pen = place.series;
        }
        if (!place.over.empty()) {
            text += place.over;
        } else if (unicode_) {
            text += braille(place.dots);
        } else {
            text += ascii_pens[place.series % ascii_pens.size()];
        }
    }
    return pen == no_series ? text : text + std::string(plain);
}

}  // namespace carboy
