#include "notation/line.h"

#include <algorithm>

#include <fmt/format.h>

namespace carboy {

namespace {

constexpr std::size_t longest_line = 4096;
constexpr std::string_view no_break_space = "\u00A0";

/// Length of the well-formed UTF-8 sequence at the front, 0 when there is none (RFC 3629: no overlong forms, no
/// surrogates).
std::size_t sequence_length(std::string_view text) {
    const auto byte = [&](std::size_t i) { return i < text.size() ? static_cast<unsigned char>(text[i]) : 0U; };
    const auto continues = [&](std::size_t i) { return (byte(i) & 0xC0U) == 0x80U; };
    const unsigned lead = byte(0);
    if (lead < 0x80) {
        return 1;
    }
    if (lead >= 0xC2 && lead <= 0xDF && continues(1)) {
        return 2;
    }
    if (lead >= 0xE0 && lead <= 0xEF && continues(1) && continues(2)) {
        const bool overlong = lead == 0xE0 && byte(1) < 0xA0;
        const bool surrogate = lead == 0xED && byte(1) > 0x9F;
        return overlong || surrogate ? 0 : 3;
    }
    if (lead >= 0xF0 && lead <= 0xF4 && continues(1) && continues(2) && continues(3)) {
        const bool outside = (lead == 0xF0 && byte(1) < 0x90) || (lead == 0xF4 && byte(1) > 0x8F);
        return outside ? 0 : 4;
    }
    return 0;
}

std::size_t column_of(std::string_view text, std::size_t byte) {
    return 1 + static_cast<std::size_t>(
                   std::count_if(text.begin(), text.begin() + static_cast<std::ptrdiff_t>(std::min(byte, text.size())),
                                 [](char c) { return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U; }));
}

}  // namespace

Line::Line(std::string_view text, std::string_view where) : text_(text), where_(where) {
    if (text.size() > longest_line) {
        throw Error(ErrorKind::input, "line_too_long",
                    fmt::format("the text has {} bytes, more than {} are not read", text.size(), longest_line),
                    std::string(where));
    }
    for (std::size_t i = 0; i < text.size();) {
        const std::size_t length = sequence_length(text.substr(i));
        const bool control = static_cast<unsigned char>(text[i]) < 0x20 || text[i] == 0x7F;
        if (length == 0 || (control && text[i] != '\t')) {
            throw Error(ErrorKind::input, length == 0 ? "not_utf8" : "control_character",
                        length == 0 ? fmt::format("byte {} is not valid UTF-8", i + 1)
                                    : fmt::format("byte {} is a control character", i + 1),
                        fmt::format("{}, column {}", where, column_of(text, i)), "type the line as plain text");
        }
        i += length;
    }
    if (std::all_of(text.begin(), text.end(), [](char c) { return c == ' ' || c == '\t'; })) {
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

Part trimmed(const Line& line, Part part) {
    const auto text = line.text();
    for (bool more = true; more && !part.empty();) {
        more = false;
        if (text[part.begin] == ' ' || text[part.begin] == '\t') {
            ++part.begin;
            more = true;
        } else if (text_of(line, part).starts_with(no_break_space)) {
            part.begin += no_break_space.size();
            more = true;
        } else if (text[part.end - 1] == ' ' || text[part.end - 1] == '\t') {
            --part.end;
            more = true;
        } else if (text_of(line, part).ends_with(no_break_space)) {
            part.end -= no_break_space.size();
            more = true;
        }
    }
    return part;
}

}  // namespace carboy
