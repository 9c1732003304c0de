#include "report/error_text.h"

#include <algorithm>
#include <string_view>

#include <fmt/format.h>

#include "report/figure_text.h"
#include "report/page.h"

namespace carboy {

namespace {

/// The window of a long line that shows the fault, and where in it the fault begins.
struct Window {
    std::string text;
    std::size_t begin = 0;
    std::size_t length = 0;
};

/// With a full stop, unless it ends in a mark of its own.
std::string sentence(const std::string& text) {
    return text.empty() || std::string_view(".?!").find(text.back()) != std::string_view::npos ? text : text + ".";
}

bool continues_character(char c) {
    return (static_cast<unsigned char>(c) & 0xC0U) == 0x80U;
}

Window window_of(const Error::Excerpt& excerpt) {
    constexpr std::size_t room = 76;
    const std::string& line = excerpt.text;
    const std::size_t begin = std::min(excerpt.begin, line.size());
    const std::size_t length = std::min(excerpt.length, line.size() - begin);
    if (display_width(line) <= room) {
        return {line, begin, length};
    }
    std::size_t from = begin > room / 2 ? begin - room / 2 : 0;
    while (from > 0 && continues_character(line[from])) {
        --from;
    }
    std::size_t to = std::min(from + room - 6, line.size());
    while (to < line.size() && continues_character(line[to])) {
        ++to;
    }
    const std::string_view lead = from > 0 ? "..." : "";
    return {fmt::format("{}{}{}", lead, std::string_view(line).substr(from, to - from), to < line.size() ? "..." : ""),
            lead.size() + begin - from, std::min(length, to - begin)};
}

}  // namespace

std::string error_text(const Error& error, bool colour) {
    Page page(colour);
    const std::string where = error.where().empty() ? "" : error.where() + ": ";
    page.notice(where + sentence(error.message()), error.kind() == ErrorKind::defect ? "defect: " : "error: ");
    std::string text = page.text();
    if (!error.excerpt().text.empty()) {
        const Window window = window_of(error.excerpt());
        const std::size_t before = display_width(std::string_view(window.text).substr(0, window.begin));
        const std::size_t marks = display_width(std::string_view(window.text).substr(window.begin, window.length));
        text += fmt::format("    {}\n    {}{}\n", window.text, std::string(before, ' '),
                            std::string(std::max<std::size_t>(marks, 1), '^'));
    }
    if (!error.help().empty()) {
        Page help(false);
        help.paragraph(sentence(error.help()), "  try: ");
        text += help.text();
    }
    return text;
}

int exit_status(ErrorKind kind) {
    switch (kind) {
        case ErrorKind::no_recipe:
            return 1;
        case ErrorKind::input:
            return 2;
        case ErrorKind::file:
            return 3;
        case ErrorKind::data:
            return 4;
        case ErrorKind::defect:
            return 70;
    }
    return 70;
}

}  // namespace carboy
