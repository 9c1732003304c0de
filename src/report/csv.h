#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace carboy {

/// Comma-separated values by RFC 4180: CRLF, quotes where they must be, `.` as the decimal point.
class Csv {
public:
    explicit Csv(const std::vector<std::string>& header) { row(header); }
    void row(const std::vector<std::string>& cells);
    const std::string& text() const { return text_; }

private:
    std::string text_;
};

/// Shortest text that reads back to the same number, as JSON writes it.
std::string exact_number(double value);

}  // namespace carboy
