#pragma once

#include <string>
#include <string_view>

#include "carboy/error.h"

namespace carboy {

/// A line that a person typed, with the means to point at a part of it.
class Line {
public:
    /// Refuses what cannot be a line of text: empty, longer than 4096 bytes, control characters, broken UTF-8.
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

/// The part without spaces around it (ASCII and no-break).
Part trimmed(const Line& line, Part part);

}  // namespace carboy
