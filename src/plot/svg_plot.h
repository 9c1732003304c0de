#pragma once

#include <string>

#include "plot/plot.h"

namespace carboy {

/// The plot as a self-contained SVG 1.1 document, 640 units wide: no script, no font, no link. Colours follow the
/// reader's light or dark preference; dashes and markers tell the curves apart without colour.
std::string svg_plot(const Plot& plot);

}  // namespace carboy
