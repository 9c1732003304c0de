#pragma once

#include <string_view>
#include <vector>

namespace carboy {

/// `A:B:STEP`, `A:B` (eleven values) or `A`: evenly spaced values from A to B, both included where the step reaches B.
/// At most 100,000. Error `bad_range` (input) for anything else.
std::vector<double> read_range(std::string_view text, std::string_view where);

}  // namespace carboy
