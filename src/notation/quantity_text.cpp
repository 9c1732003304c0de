#include <fmt/format.h>

#include "carboy/notation.h"

#include "notation/quantity_reader.h"

// Single quantities, as options and JSON carry them.

namespace carboy {

namespace {

/// A text that is one quantity and nothing else.
ReadQuantity read_only(const Line& line, Expected expected) {
    Part part = trimmed(line, {0, line.text().size()});
    const ReadQuantity quantity = read_quantity(line, part, expected);
    expect_end(line, part, kind_phrase(expected.kind), fmt::format("write it like {}", expected.example));
    return quantity;
}

void expect_positive(const Line& line, const ReadQuantity& quantity, std::string_view example) {
    if (!(quantity.value > 0)) {
        line.fail(
            "zero_quantity",
            fmt::format("'{}': {} must be more than zero", text_of(line, quantity.whole), kind_phrase(quantity.kind)),
            quantity.whole.begin, quantity.whole.end, fmt::format("write it like {}", example));
    }
}

}  // namespace

Volume read_volume(std::string_view text, std::string_view where) {
    constexpr Expected expected{QuantityKind::volume, "500 mL"};
    constexpr double largest_L = 1e5;
    constexpr double smallest_L = 1e-9;
    const Line line(text, where);
    const ReadQuantity quantity = read_only(line, expected);
    expect_positive(line, quantity, expected.example);
    if (quantity.value > largest_L || quantity.value < smallest_L) {
        line.fail("number_out_of_range", fmt::format("a volume of {:g} L is outside 1 nL to 100000 L", quantity.value),
                  quantity.whole.begin, quantity.whole.end, "write it like 500 mL");
    }
    return Volume::litres(quantity.value);
}

Temperature read_temperature(std::string_view text, std::string_view where) {
    const Line line(text, where);
    return Temperature::celsius(read_only(line, {QuantityKind::temperature, "25 C"}).value);
}

Mass read_mass(std::string_view text, std::string_view where) {
    constexpr Expected expected{QuantityKind::mass, "10 g"};
    const Line line(text, where);
    const ReadQuantity quantity = read_only(line, expected);
    expect_positive(line, quantity, expected.example);
    return Mass::grams(quantity.value);
}

Concentration read_concentration(std::string_view text, std::string_view where) {
    const Line line(text, where);
    const ReadQuantity quantity = read_only(line, {QuantityKind::concentration, "50 mM"});
    return {quantity.value, quantity.unit};
}

PH read_ph(std::string_view text, std::string_view where) {
    const Line line(text, where);
    Part part = trimmed(line, {0, text.size()});
    const PH ph = read_ph_number(line, part);
    expect_end(line, part, "a pH", "a pH has no unit: 7.4");
    return ph;
}

Date read_date(std::string_view text, std::string_view where) {
    const auto date = Date::read(text);
    if (!date) {
        throw Error(ErrorKind::input, "bad_date", fmt::format("'{}' is no date", text), std::string(where),
                    "write it as 2026-12-31");
    }
    return *date;
}

}  // namespace carboy
