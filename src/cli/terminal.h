#pragma once

#include "cli/options.h"
#include "plot/terminal_plot.h"

namespace carboy::cli {

/// What the terminal on standard output can show: its width (COLUMNS, else what it says itself, else 80), Unicode when
/// the locale of the environment (LC_ALL, LC_CTYPE, LANG) names UTF-8 and `ascii` does not forbid it.
TerminalCanvas terminal_canvas(const SharedOptions& options, bool ascii);

}  // namespace carboy::cli
