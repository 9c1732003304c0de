#pragma once

#include <cstddef>
#include <string>

#include "plot/plot.h"

namespace carboy {

/// What a terminal can show.
struct TerminalCanvas {
    std::size_t width = 80;   ///< columns; taken as at least 40
    std::size_t height = 16;  ///< lines of a panel of height 1
    bool unicode = true;      ///< braille dots and box lines; else plain ASCII
    bool colour = false;
};

/// The plot as lines of text, each ended by a newline, none wider than the canvas. Curves are told apart by their
/// letter in a braille plot and by their character in an ASCII one; colour only repeats it.
std::string terminal_plot(const Plot& plot, const TerminalCanvas& canvas);

}  // namespace carboy
