#include "notation/range.h"

#include <charconv>
#include <cmath>
#include <string>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy {

namespace {

Error bad_range(std::string_view text, std::string_view where, const char* what) {
    return {ErrorKind::input, "bad_range", fmt::format("'{}' {}", text, what), std::string(where),
            "write it as FROM:TO:STEP, such as 6:8:0.2"};
}

double number(std::string_view part, std::string_view text, std::string_view where) {
    double value = 0;
    const auto [end, error] = std::from_chars(part.data(), part.data() + part.size(), value);
    if (error != std::errc() || end != part.data() + part.size() || !std::isfinite(value)) {
        throw bad_range(text, where, "is no range");
    }
    return value;
}

}  // namespace

std::vector<double> read_range(std::string_view text, std::string_view where) {
    constexpr double most = 1e5;
    std::vector<double> parts;
    for (std::string_view rest = text;;) {
        const auto colon = rest.find(':');
        parts.push_back(number(rest.substr(0, colon), text, where));
        if (colon == std::string_view::npos) {
            break;
        }
        rest.remove_prefix(colon + 1);
    }
    if (parts.size() > 3) {
        throw bad_range(text, where, "has too many parts");
    }
    if (parts.size() == 1) {
        return parts;
    }
    constexpr double parts_without_step = 10;
    const double step = parts.size() == 3 ? std::abs(parts[2]) : std::abs(parts[1] - parts[0]) / parts_without_step;
    if (!(step > 0)) {
        throw bad_range(text, where, parts[0] == parts[1] ? "begins where it ends" : "has no step");
    }
    const double direction = parts[1] < parts[0] ? -1 : 1;
    const double count = std::floor(std::abs(parts[1] - parts[0]) / step + 1e-9) + 1;
    if (count > most) {
        throw bad_range(text, where, "has more than 100,000 values");
    }
    std::vector<double> values;
    for (int i = 0; i < static_cast<int>(count); ++i) {
        // Twelve digits, so that 6 + 7 x 0.2 is 7.4 and not 7.4000000000000004.
        values.push_back(std::round((parts[0] + direction * i * step) * 1e12) / 1e12);
    }
    return values;
}

}  // namespace carboy
