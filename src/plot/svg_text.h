#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace carboy {

/// Text as XML holds it.
std::string svg_escaped(std::string_view text);
/// A number with a minus sign as it is printed.
std::string svg_number(std::string_view text);
/// About how wide a line of text is in a plain sans serif, rather too wide than too narrow.
double svg_width(std::string_view text, double size);
/// The text in lines that are no wider; none for no text. A word that is wider stands alone.
std::vector<std::string> svg_lines(std::string_view text, double width, double size);

}  // namespace carboy
