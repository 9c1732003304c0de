#include "notation/quantity_reader.h"

#include <algorithm>
#include <charconv>
#include <cmath>
#include <string>

#include <fmt/format.h>

namespace carboy {

namespace {

constexpr std::string_view minus_sign = "\u2212";
constexpr const char* percent_help = "write % w/v, % v/v or % w/w";
constexpr std::string_view any_example = "50 mM, 9 g/L, 20 mL, 5 g or 25 C";

bool is_digit(char c) {
    return c >= '0' && c <= '9';
}

/// Bytes of the sign at the front, 0 when there is none.
std::size_t sign_length(std::string_view text) {
    return text.starts_with('-') || text.starts_with('+') ? 1 : text.starts_with(minus_sign) ? minus_sign.size() : 0;
}

bool ends_with_space(std::string_view text) {
    constexpr std::size_t longest_space = 3;  // bytes
    for (std::size_t length = 1; length <= std::min(longest_space, text.size()); ++length) {
        if (space_length(text.substr(text.size() - length)) == length) {
            return true;
        }
    }
    return false;
}

/// `0,5 M` and `1,000 mL` are one number with a comma in it; `pH 7.4,150 mM NaCl` is two items.
void refuse_comma(const Line& line, Part number) {
    const auto text = line.text();
    if (number.end + 1 >= text.size() || text[number.end] != ',' || !is_digit(text[number.end + 1]) ||
        text_of(line, number).find_first_of(".eE") != std::string_view::npos) {
        return;
    }
    const std::size_t after = std::min(text.find_first_not_of("0123456789", number.end + 1), text.size());
    line.fail("decimal_comma", fmt::format("'{}' has a comma in a number", text_of(line, {number.begin, after})),
              number.begin, after,
              "write a decimal point, no thousands separators, and a space after a comma between items");
}

/// The error of a token that stands where the unit of `number` should.
[[noreturn]] void fail_unit(const Line& line, Part number, Part token, std::optional<Expected> expected) {
    const std::string_view typed = text_of(line, token);
    const std::string_view example = expected ? expected->example : any_example;
    if (typed.empty()) {
        line.fail("missing_unit", fmt::format("{} has no unit", text_of(line, number)), number.begin, number.end,
                  fmt::format("write it like {}", example));
    }
    if (typed.find_first_not_of("0123456789.") == std::string_view::npos) {
        line.fail("not_a_number", fmt::format("'{}' is not one number", text_of(line, {number.begin, token.end})),
                  number.begin, token.end, "write no space or separator inside a number, and one decimal point");
    }
    line.fail("unknown_unit", fmt::format("'{}' is no unit known here", typed), token.begin, token.end,
              unit_help(typed, expected ? std::optional(expected->kind) : std::nullopt, example));
}

}  // namespace

bool number_begins(std::string_view text) {
    text.remove_prefix(sign_length(text));
    if (text.starts_with('.')) {
        text.remove_prefix(1);
    }
    return !text.empty() && is_digit(text.front());
}

double read_number(const Line& line, Part& part) {
    const auto text = line.text();
    const std::size_t start = part.begin;
    if (!number_begins(text_of(line, part))) {
        const std::size_t end =
            part.empty() ? part.begin : part.begin + std::max<std::size_t>(unit_length(text_of(line, part)), 1);
        line.fail("not_a_number",
                  part.empty() ? "a number is expected here"
                               : fmt::format("'{}' is not a number", text_of(line, {start, end})),
                  start, end, "write it as 7.4 or 1e-3");
    }
    const bool negative = text[start] != '+' && sign_length(text_of(line, part)) > 0;
    part.begin += sign_length(text_of(line, part));
    double value = 0;
    const auto [end, error] = std::from_chars(text.data() + part.begin, text.data() + part.end, value);
    part.begin = static_cast<std::size_t>(end - text.data());
    const Part number{start, part.begin};
    if (error == std::errc::result_out_of_range || !std::isfinite(value)) {
        line.fail("number_out_of_range", fmt::format("'{}' is too large or too small a number", text_of(line, number)),
                  number.begin, number.end, "write a number such as 7.4 or 1e-3");
    }
    refuse_comma(line, number);
    return negative && value != 0 ? -value : value;
}

PH read_ph_number(const Line& line, Part& part) {
    constexpr double lowest = -2;
    constexpr double highest = 16;
    const std::size_t start = part.begin;
    const double value = read_number(line, part);
    if (!(value >= lowest && value <= highest)) {
        line.fail("ph_out_of_range", fmt::format("pH {:g} is outside {:g} to {:g}", value, lowest, highest), start,
                  part.begin, "write it like pH 7.4");
    }
    return PH(value);
}

ReadQuantity read_quantity(const Line& line, Part& part, std::optional<Expected> expected,
                           std::optional<Expected> likely) {
    ReadQuantity quantity;
    const std::size_t start = part.begin;
    const double value = read_number(line, part);
    quantity.number = {start, part.begin};
    part = trimmed(line, part);
    const Part token{part.begin, part.begin + unit_length(text_of(line, part))};
    const Unit* unit = find_unit(text_of(line, token));
    if (unit == nullptr) {
        fail_unit(line, quantity.number, token, expected ? expected : likely);
    }
    quantity.bare_percent = text_of(line, token) == "%";
    if (quantity.bare_percent && expected) {
        line.fail("unknown_unit", "'%' does not say of what", token.begin, token.end, percent_help);
    }
    part.begin = token.end;
    quantity.whole = {start, token.end};
    quantity.kind = unit->kind;
    quantity.unit = unit->concentration;
    quantity.value = value * unit->factor / unit->divisor;
    if (expected) {
        expect_kind(line, quantity, *expected);
    }
    if (unit->kind != QuantityKind::temperature && value < 0) {
        line.fail("negative_quantity", fmt::format("'{}' is negative", text_of(line, quantity.number)),
                  quantity.number.begin, quantity.number.end, "amounts are zero or more");
    }
    if (unit->kind == QuantityKind::temperature) {
        const Temperature temperature =
            unit->spelling == "K" ? Temperature::kelvin(value) : Temperature::celsius(value);
        quantity.value = temperature.celsius();
        if (!(temperature.kelvin() > 0)) {
            line.fail("temperature_out_of_range",
                      fmt::format("'{}' is not above absolute zero", text_of(line, quantity.whole)),
                      quantity.whole.begin, quantity.whole.end, "write it like 25 C");
        }
    }
    return quantity;
}

std::optional<ReadQuantity> read_trailing_quantity(const Line& line, Part& part, std::optional<Expected> likely) {
    constexpr int longest_quantity = 3;  // words: `0.9 % w/v`
    std::optional<Error> fault;
    int words = 0;
    for (std::size_t begin = part.end; begin-- > part.begin + 1 && words < longest_quantity;) {
        const std::string_view before = line.text().substr(part.begin, begin - part.begin);
        const bool word_begins = space_length(text_of(line, {begin, part.end})) == 0 && ends_with_space(before);
        words += word_begins ? 1 : 0;
        if (!word_begins || !number_begins(text_of(line, {begin, part.end}))) {
            continue;
        }
        Part rest{begin, part.end};
        try {
            const ReadQuantity quantity = read_quantity(line, rest, std::nullopt, likely);
            if (trimmed(line, rest).empty()) {
                part = trimmed(line, {part.begin, begin});
                return quantity;
            }
        } catch (const Error& error) {
            if (!fault) {
                fault = error;
            }
        }
    }
    if (fault) {
        throw Error(*fault);
    }
    return std::nullopt;
}

void expect_kind(const Line& line, const ReadQuantity& quantity, Expected expected) {
    if (quantity.kind != expected.kind) {
        line.fail("wrong_quantity",
                  fmt::format("'{}' is {}; {} is expected here", text_of(line, quantity.whole),
                              kind_phrase(quantity.kind), kind_phrase(expected.kind)),
                  quantity.whole.begin, quantity.whole.end, fmt::format("write it like {}", expected.example));
    }
}

void expect_percent_of_solid(const Line& line, const ReadQuantity& quantity, const Reagent& reagent) {
    if (quantity.bare_percent && reagent.state != State::solid) {
        line.fail("unknown_unit",
                  fmt::format("'{}' does not say of what, and {} is a {}", text_of(line, quantity.whole), reagent.name,
                              reagent.state == State::liquid ? "liquid" : "solution"),
                  quantity.whole.begin, quantity.whole.end, "write % v/v or % w/v");
    }
}

void expect_end(const Line& line, Part rest, std::string_view belongs_to, std::string_view help) {
    rest = trimmed(line, rest);
    if (!rest.empty()) {
        line.fail("trailing_text", fmt::format("'{}' does not belong to {}", text_of(line, rest), belongs_to),
                  rest.begin, rest.end, std::string(help));
    }
}

}  // namespace carboy
