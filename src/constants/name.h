#pragma once

#include <string>
#include <string_view>

namespace carboy {

/// The form in which names are compared: lower case, typographic dashes and the middle dot as ASCII, subscript digits
/// as digits, without spaces, hyphens and underscores. `Na2HPO4·7H2O` and `na2hpo4.7h2o` fold to the same text.
std::string fold_name(std::string_view text);

}  // namespace carboy
