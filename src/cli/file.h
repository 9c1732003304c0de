#pragma once

#include <string>
#include <string_view>

namespace carboy::cli {

/// Whole content of a file; `-` is standard input. Throws Error (file) that says what the system said.
std::string read_file(const std::string& path);

/// Writes a result to standard output (`path` empty or `-`), to a device or pipe, or to a file that appears only when
/// complete: written under another name beside it, then renamed. Throws Error (file); an existing file is then as it
/// was.
void write_result(std::string_view text, const std::string& path);

}  // namespace carboy::cli
