#pragma once

#include <string_view>

namespace carboy {

/// The style sheet of `sheet_html`. On paper everything scales with the size of the root.
extern const std::string_view sheet_style;

}  // namespace carboy
