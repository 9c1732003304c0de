#pragma once

#include <string_view>

#include <nlohmann/json.hpp>

namespace carboy {

/// Parses a document and refuses doubled keys, of which the library would silently keep the last. Throws Error of kind
/// `input`, code `invalid_json` (with line and column) or `duplicate_key`; `where` is the caller's name for the text.
nlohmann::json parse_strictly(std::string_view text, std::string_view where);

}  // namespace carboy
