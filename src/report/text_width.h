#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace carboy {

/// Width of a line of sans-serif text in units of its font size, as Helvetica sets it; wide enough for its like.
double text_width(std::string_view text, bool bold);

/// Lines of at most `width` (in units of the font size), broken at spaces; a word that is longer stands alone.
std::vector<std::string> broken_to(std::string_view text, double width, bool bold);

}  // namespace carboy
