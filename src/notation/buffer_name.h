#pragma once

#include <optional>
#include <string_view>
#include <utility>

#include "carboy/constants.h"

namespace carboy {

/// Two systems in one name of which neither can be the other's counter-ion, as in `citrate-phosphate`: the bench means
/// a mixture of both, but the label does not say how much of each. Empty for any other name.
std::optional<std::pair<ComponentId, ComponentId>> two_systems_named(std::string_view text, const Table& table);

}  // namespace carboy
