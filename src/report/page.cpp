#include "report/page.h"

#include <algorithm>

#include "report/figure_text.h"

namespace carboy {

namespace {

constexpr std::string_view strong = "\x1b[1m";
constexpr std::string_view caution = "\x1b[33m";
constexpr std::string_view plain = "\x1b[0m";

std::string spaces(std::size_t count) {
    return std::string(count, ' ');
}

/// Longest beginning of a word that fits, cut between characters.
std::size_t bytes_that_fit(std::string_view word, std::size_t width) {
    std::size_t bytes = 0;
    for (std::size_t columns = 0; bytes < word.size(); ++bytes) {
        const bool begins_character = (static_cast<unsigned char>(word[bytes]) & 0xC0U) != 0x80U;
        if (begins_character && ++columns > width) {
            break;
        }
    }
    return bytes;
}

/// Lines of at most `width` columns, broken at spaces; a word longer than a line is cut.
std::vector<std::string> wrapped(std::string_view text, std::size_t width) {
    std::vector<std::string> lines(1);
    while (!text.empty()) {
        const std::size_t end = std::min(text.find(' '), text.size());
        std::string_view word = text.substr(0, end);
        text.remove_prefix(std::min(end + 1, text.size()));
        if (word.empty()) {
            continue;
        }
        if (!lines.back().empty() && display_width(lines.back()) + 1 + display_width(word) > width) {
            lines.emplace_back();
        }
        while (display_width(word) > width) {
            const std::size_t fits = bytes_that_fit(word, width);
            lines.back() += word.substr(0, fits);
            lines.emplace_back();
            word.remove_prefix(fits);
        }
        std::string& current = lines.back();
        current += current.empty() ? "" : " ";
        current += word;
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
    std::vector<std::vector<std::string>> pieces;
    std::size_t height = 1;
    for (std::size_t i = 0; i < cells.size(); ++i) {
        pieces.push_back(wrapped(cells[i], columns[i].width));
        height = std::max(height, pieces.back().size());
    }
    for (std::size_t y = 0; y < height; ++y) {
        std::string text;
        for (std::size_t i = 0; i < cells.size(); ++i) {
            const std::string piece = y < pieces[i].size() ? pieces[i][y] : std::string();
            const std::size_t taken = display_width(piece);
            const std::string padding = spaces(columns[i].width > taken ? columns[i].width - taken : 0);
            text += columns[i].align == Align::right ? padding + piece : piece + padding;
        }
        line(text, emphasised ? strong : std::string_view{});
    }
}

}  // namespace carboy
