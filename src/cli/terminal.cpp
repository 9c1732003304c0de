#include "cli/terminal.h"

#include <algorithm>
#include <charconv>
#include <cstdlib>
#include <cstring>
#include <string>
#include <string_view>
#include <sys/ioctl.h>
#include <unistd.h>

namespace carboy::cli {

namespace {

bool locale_has_utf8() {
    for (const char* name : {"LC_ALL", "LC_CTYPE", "LANG"}) {
        const char* value = std::getenv(name);
        if (value != nullptr && *value != '\0') {
            std::string lower(value);
            std::transform(lower.begin(), lower.end(), lower.begin(),
                           [](char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c + 32) : c; });
            return lower.find("utf-8") != std::string::npos || lower.find("utf8") != std::string::npos;
        }
    }
    return false;
}

std::size_t terminal_width(const SharedOptions& options) {
    constexpr std::size_t widest = 160;
    constexpr std::size_t usual = 80;
    std::size_t width = 0;
    if (const char* columns = std::getenv("COLUMNS")) {
        std::from_chars(columns, columns + std::strlen(columns), width);
    }
    winsize size{};
    if (width == 0 && options.output_file.empty() && ioctl(STDOUT_FILENO, TIOCGWINSZ, &size) == 0) {
        width = size.ws_col;
    }
    return width == 0 ? usual : std::min(width, widest);
}

}  // namespace

TerminalCanvas terminal_canvas(const SharedOptions& options, bool ascii) {
    TerminalCanvas canvas;
    canvas.width = terminal_width(options);
    canvas.unicode = !ascii && locale_has_utf8();
    canvas.colour = options.colour();
    return canvas;
}

}  // namespace carboy::cli
