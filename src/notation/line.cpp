#include "notation/line.h"

#include <algorithm>
#include <array>

#include <fmt/format.h>

namespace carboy {

namespace {

constexpr std::size_t longest_line = 4096;

/// The character at the front of a text.
struct Character {
    char32_t code = 0;
    std::size_t length = 0;  ///< bytes; 0 when they are not well-formed UTF-8
};

/// RFC 3629: no overlong forms, no surrogates, nothing above U+10FFFF.
Character first_character(std::string_view text) {
    const auto lead = static_cast<unsigned char>(text.front());
    if (lead < 0x80) {
        return {lead, 1};
    }
    const std::size_t length = lead >= 0xF0 ? 4 : lead >= 0xE0 ? 3 : 2;
    if (lead < 0xC2 || lead > 0xF4 || text.size() < length) {
        return {};
    }
    char32_t code = lead & (0xFFU >> (length + 1));
    for (std::size_t i = 1; i < length; ++i) {
        const auto next = static_cast<unsigned char>(text[i]);
        if ((next & 0xC0U) != 0x80U) {
            return {};
        }
        code = (code << 6U) | (next & 0x3FU);
    }
    const bool overlong = (length == 3 && code < 0x800) || (length == 4 && code < 0x10000);
    const bool surrogate = code >= 0xD800 && code <= 0xDFFF;
    return overlong || surrogate || code > 0x10FFFF ? Character{} : Character{code, length};
}

/// What moves the cursor, ends the line or turns the direction of writing: the caret could not point at anything any
/// more.
bool is_control(char32_t code) {
    return (code < 0x20 && code != '\t') || (code >= 0x7F && code <= 0x9F) || (code >= 0x2028 && code <= 0x202E) ||
           (code >= 0x2066 && code <= 0x2069);
}

std::size_t column_of(std::string_view text, std::size_t byte) {
    const std::string_view before = text.substr(0, byte);
    return 1 + static_cast<std::size_t>(std::count_if(before.begin(), before.end(), [](char c) {
               return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U;
           }));
}

}  // namespace

Line::Line(std::string_view text, std::string_view where) : text_(text), where_(where) {
    if (text.size() > longest_line) {
        throw Error(ErrorKind::input, "line_too_long",
                    fmt::format("the text has {} bytes, more than {} are not read", text.size(), longest_line),
                    std::string(where), "divide it");
    }
    bool blank = true;
    for (std::size_t i = 0; i < text.size();) {
        const Character character = first_character(text.substr(i));
        if (character.length == 0 || is_control(character.code)) {
            throw Error(ErrorKind::input, character.length == 0 ? "not_utf8" : "control_character",
                        character.length == 0 ? fmt::format("byte {} is not valid UTF-8", i + 1)
                                              : fmt::format("byte {} is a control character", i + 1),
                        fmt::format("{}, column {}", where, column_of(text, i)), "type the line as plain text");
        }
        blank = blank && space_length(text.substr(i)) > 0;
        i += character.length;
    }
    if (blank) {
        throw Error(ErrorKind::input, "empty_line", "nothing is written here", std::string(where));
    }
}

void Line::fail(std::string code, const std::string& message, std::size_t begin, std::size_t end, std::string help,
                ErrorKind kind) const {
    begin = std::min(begin, text_.size());
    end = std::clamp(end, begin, text_.size());
    Error error(kind, std::move(code), message, fmt::format("{}, column {}", where_, column_of(text_, begin)),
                std::move(help));
    error.with_excerpt({std::string(text_), begin, std::max<std::size_t>(end - begin, 1)});
    throw error;
}

std::size_t space_length(std::string_view text) {
    // No-break, narrow no-break and thin space.
    constexpr std::array fixed{std::string_view("\u00A0"), std::string_view("\u202F"), std::string_view("\u2009")};
    if (text.empty() || static_cast<unsigned char>(text.front()) < 0x80) {
        return text.starts_with(' ') || text.starts_with('\t') ? 1 : 0;
    }
    const auto* found =
        std::find_if(fixed.begin(), fixed.end(), [&](std::string_view s) { return text.starts_with(s); });
    return found == fixed.end() ? 0 : found->size();
}

std::string_view trimmed(std::string_view text) {
    while (!text.empty() && text.front() == ' ') {
        text.remove_prefix(1);
    }
    while (!text.empty() && text.back() == ' ') {
        text.remove_suffix(1);
    }
    return text;
}

Part trimmed(const Line& line, Part part) {
    while (!part.empty()) {
        const std::size_t length = space_length(text_of(line, part));
        if (length == 0) {
            break;
        }
        part.begin += length;
    }
    std::size_t end = part.begin;
    for (std::size_t at = part.begin; at < part.end;) {
        const std::size_t length = space_length(text_of(line, {at, part.end}));
        at += std::max<std::size_t>(length, 1);
        end = length == 0 ? at : end;
    }
    part.end = end;
    return part;
}

bool begins_with_word(const Line& line, Part part, std::string_view word) {
    const std::string_view text = text_of(line, part);
    if (lower_case(text.substr(0, word.size())) != word) {
        return false;
    }
    const std::string_view after = text.substr(word.size());
    return after.empty() || space_length(after) > 0 || (after.front() >= '0' && after.front() <= '9');
}

std::string lower_case(std::string_view text) {
    std::string lowered(text);
    std::transform(lowered.begin(), lowered.end(), lowered.begin(),
                   [](char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; });
    return lowered;
}

}  // namespace carboy
