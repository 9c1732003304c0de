#pragma once

#include <compare>
#include <optional>
#include <string>
#include <string_view>

namespace carboy {

/// A day of the calendar. The core knows no clock: every date is one that a user gave.
class Date {
public:
    /// `2026-12-01` (ISO 8601); nothing when it is not written so or there is no such day.
    static std::optional<Date> read(std::string_view text);
    std::string text() const;
    friend constexpr auto operator<=>(const Date&, const Date&) = default;

private:
    constexpr Date(int year, int month, int day) : year_(year), month_(month), day_(day) {}
    int year_;
    int month_;
    int day_;
};

}  // namespace carboy
