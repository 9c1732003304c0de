#pragma once

#include <string>
#include <string_view>

#include "carboy/constants.h"

namespace carboy {

/// What a listing shows.
enum class Listing { systems, reagents, ions, formulas };

std::string constants_list_text(const Table& table, Listing listing, bool colour);
/// Everything the table knows under a name; empty when it knows nothing.
std::string constants_entry_text(const Table& table, std::string_view name, bool colour);
std::string sources_text(const Table& table, bool colour);

}  // namespace carboy
