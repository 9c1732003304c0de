#pragma once

#include <vector>

#include "notation/line.h"

namespace carboy {

/// Divides a line at its commas and semicolons, and at a `+` or `and` with spaces around it. A comma between the
/// locants of a chemical name (`1,3-propanediol`, `N,N-bis`, `2,2',2''-nitrilo`, `(2R,3R)-`) does not divide: both
/// sides must be whole locants, and the last one must be followed by a hyphen or bracket. So `KH2PO4,25 mM NaCl` and
/// `pH 7.4,150mM NaCl` are divided. An empty item is an Error `empty_item`.
std::vector<Part> items_of(const Line& line);

/// True when the text begins with a locant and a hyphen, as `2-mercaptoethanol` or `1,4-dithiothreitol`, or with a CAS
/// number: a name, though it begins with a digit.
bool begins_with_locant(std::string_view text);

}  // namespace carboy
