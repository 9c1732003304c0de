#pragma once

#include <string>
#include <string_view>

#include "carboy/error.h"

namespace carboy {

/// A line that a person typed, with the means to point at a part of it.
class Line {
public:
    /// Refuses what cannot be a line of text: empty, longer than 4096 bytes, control characters, broken UTF-8. These
    /// errors carry no excerpt, because such bytes must not reach a terminal or a JSON document.
    Line(std::string_view text, std::string_view where);

    std::string_view text() const { return text_; }
    std::string_view where() const { return where_; }

    /// Error whose excerpt is the bytes from `begin` to `end`.
    [[noreturn]] void fail(std::string code, const std::string& message, std::size_t begin, std::size_t end,
                           std::string help = {}, ErrorKind kind = ErrorKind::input) const;

private:
    std::string_view text_;
    std::string_view where_;
};

/// A part of a line, by bytes.
struct Part {
    std::size_t begin = 0;
    std::size_t end = 0;
    bool empty() const { return begin >= end; }
};

inline std::string_view text_of(const Line& line, Part part) {
    return line.text().substr(part.begin, part.end - part.begin);
}

/// Bytes of the space at the front of the text: blank, tab, or one of the fixed spaces that typography puts between
/// number and unit; 0 when there is none.
std::size_t space_length(std::string_view text);

/// The text without blanks around it.
std::string_view trimmed(std::string_view text);
/// The part without spaces around it.
Part trimmed(const Line& line, Part part);

/// True when the part begins with this lower-case word, in any case, and the word ends there: a space, a digit or
/// nothing follows.
bool begins_with_word(const Line& line, Part part, std::string_view word);

/// Lower case of the ASCII letters; everything else, and every position, stays.
std::string lower_case(std::string_view text);

}  // namespace carboy
