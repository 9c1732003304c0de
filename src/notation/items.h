#pragma once

#include <vector>

#include "notation/line.h"

namespace carboy {

/// Divides a line at its commas. A comma inside a chemical name (`1,3-propanediol`, `N,N-bis`) does not divide. Empty
/// items are an Error `empty_item`.
std::vector<Part> items_of(const Line& line);

}  // namespace carboy
