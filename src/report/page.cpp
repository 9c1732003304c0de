#include "report/page.h"

#include <algorithm>

#include "report/figure_text.h"

namespace carboy {

namespace {

constexpr std::string_view strong = "\x1b[1m";
constexpr std::string_view caution = "\x1b[33m";
constexpr std::string_view plain = "\x1b[0m";

std::string spaces(std::size_t count) { return std::string(count, ' '); }

/// Lines of at most `width` columns, broken at spaces; a word longer than that keeps its line.
std::vector<std::string> wrapped(std::string_view text, std::size_t width) {
    std::vector<std::string> lines(1);
    while (!text.empty()) {
        const std::size_t end = std::min(text.find(' '), text.size());
        const std::string_view word = text.substr(0, end);
        text.remove_prefix(std::min(end + 1, text.size()));
        if (word.empty()) {
            continue;
        }
        std::string& current = lines.back();
        if (!current.empty() && display_width(current) + 1 + display_width(word) > width) {
            lines.emplace_back(word);
        } else {
            current += current.empty() ? "" : " ";
            current += word;
        }
    }
    return lines;
}

}  // namespace

void Page::line(std::string_view text, std::string_view style) {
    while (text.ends_with(' ')) {
        text.remove_suffix(1);
    }
    if (colour_ && !style.empty() && !text.empty()) {
        text_ += style;
        text_ += text;
        text_ += plain;
    } else {
        text_ += text;
    }
    text_ += '\n';
}

void Page::title(std::string_view left, std::string_view right) {
    const std::size_t room = width - std::min(display_width(right) + 2, width / 2);
    auto lines = wrapped(left, room);
    lines.front() += spaces(width - display_width(lines.front()) - display_width(right));
    lines.front() += right;
    for (const std::string& text : lines) {
        line(text, strong);
    }
}

void Page::heading(std::string_view text) {
    text_ += '\n';
    line(text, strong);
}

void Page::paragraph(std::string_view text, std::string_view first) {
    const std::size_t indent = display_width(first);
    std::string prefix(first);
    for (const std::string& piece : wrapped(text, width - indent)) {
        line(prefix + piece, {});
        prefix = spaces(indent);
    }
}

void Page::notice(std::string_view text, std::string_view first) {
    const std::size_t indent = display_width(first);
    std::string prefix(first);
    for (const std::string& piece : wrapped(text, width - indent)) {
        line(prefix + piece, caution);
        prefix = spaces(indent);
    }
}

void Page::row(const std::vector<Column>& columns, const std::vector<std::string>& cells, bool emphasised) {
    std::string text;
    std::size_t edge = 0;
    for (std::size_t i = 0; i < cells.size(); ++i) {
        const std::size_t cell = display_width(cells[i]);
        const std::size_t room = columns[i].width;
        if (cell > room && i + 1 < cells.size() && columns[i].align == Align::left) {
            line(text + cells[i], emphasised ? strong : std::string_view{});
            text = spaces(edge + room);
        } else {
            const std::string padding = spaces(room > cell ? room - cell : 0);
            text += columns[i].align == Align::right ? padding + cells[i] : cells[i] + padding;
        }
        edge += room;
    }
    line(text, emphasised ? strong : std::string_view{});
}

}  // namespace carboy
