#pragma once

#include <string>

#include "carboy/constants.h"
#include "carboy/selection.h"

#include "report/recipe_text.h"

namespace carboy {

/// The ranking with its reasons, then what was excluded and why. `most` rows; `explain` adds every fact with its
/// source.
std::string selection_text(const Selection& selection, const Table& table, const TextStyle& style, std::size_t most);

}  // namespace carboy
