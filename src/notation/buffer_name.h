#pragma once

#include <optional>
#include <string_view>
#include <utility>

#include "carboy/constants.h"
#include "carboy/notation.h"

namespace carboy {

/// `Tris buffer` as `Tris`.
std::string_view without_the_word_buffer(std::string_view text);

/// A system, or a system with its counter-ion beside it: `read_buffer_name` without the pairs of articles.
std::optional<NamedBuffer> buffer_with_ion(std::string_view text, const Table& table);

/// Two systems in one name of which neither can be the other's counter-ion, as in `citrate-phosphate`: the bench means
/// a mixture of both, but the label does not say how much of each. Empty for any other name.
std::optional<std::pair<ComponentId, ComponentId>> two_systems_named(std::string_view text, const Table& table);

}  // namespace carboy
