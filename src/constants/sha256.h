#pragma once

#include <string>
#include <string_view>

namespace carboy {

/// SHA-256 (FIPS 180-4) of the bytes, as 64 hexadecimal digits.
std::string sha256_hex(std::string_view bytes);

}  // namespace carboy
