#include "carboy/date.h"

#include <chrono>

#include <fmt/format.h>

namespace carboy {

namespace {

/// All of `text` as digits, or -1.
int digits(std::string_view text) {
    int value = 0;
    for (const char c : text) {
        if (c < '0' || c > '9') {
            return -1;
        }
        value = 10 * value + (c - '0');
    }
    return value;
}

}  // namespace

std::optional<Date> Date::read(std::string_view text) {
    if (text.size() != 10 || text[4] != '-' || text[7] != '-') {
        return std::nullopt;
    }
    const int year = digits(text.substr(0, 4));
    const int month = digits(text.substr(5, 2));
    const int day = digits(text.substr(8, 2));
    if (year < 0 || month < 0 || day < 0) {
        return std::nullopt;
    }
    const std::chrono::year_month_day date{std::chrono::year(year), std::chrono::month(static_cast<unsigned>(month)),
                                           std::chrono::day(static_cast<unsigned>(day))};
    return date.ok() ? std::optional(Date(year, month, day)) : std::nullopt;
}

std::string Date::text() const {
    return fmt::format("{:04}-{:02}-{:02}", year_, month_, day_);
}

}  // namespace carboy
