#include <cmath>

#include <fmt/format.h>

#include "carboy/notation.h"

#include "notation/quantity_reader.h"

// Single quantities, as options and JSON carry them.

namespace carboy {

namespace {

/// A text that is one quantity and nothing else.
ReadQuantity read_only(const Line& line, QuantityKind expected, std::string_view example) {
    Part part = trimmed(line, {0, line.text().size()});
    const ReadQuantity quantity = read_quantity(line, part);
    expect_kind(line, quantity, expected, example);
    part = trimmed(line, part);
    if (!part.empty()) {
        line.fail("trailing_text",
                  fmt::format("'{}' does not belong to {}", text_of(line, part), kind_phrase(expected)), part.begin,
                  part.end, fmt::format("write it like {}", example));
    }
    return quantity;
}

void expect_positive(const Line& line, const ReadQuantity& quantity) {
    if (!(quantity.value > 0)) {
        line.fail("zero_quantity", fmt::format("{} must be more than zero", kind_phrase(quantity.kind)),
                  quantity.whole.begin, quantity.whole.end);
    }
}

}  // namespace

Volume read_volume(std::string_view text, std::string_view where) {
    const Line line(text, where);
    const ReadQuantity quantity = read_only(line, QuantityKind::volume, "500 mL");
    expect_positive(line, quantity);
    constexpr double largest_L = 1e5;
    constexpr double smallest_L = 1e-9;
    if (quantity.value > largest_L || quantity.value < smallest_L) {
        line.fail("number_out_of_range", fmt::format("a volume of {:g} L is outside 1 nL to 100000 L", quantity.value),
                  quantity.whole.begin, quantity.whole.end);
    }
    return Volume::litres(quantity.value);
}

Temperature read_temperature(std::string_view text, std::string_view where) {
    const Line line(text, where);
    return Temperature::celsius(read_only(line, QuantityKind::temperature, "25 C").value);
}

Mass read_mass(std::string_view text, std::string_view where) {
    const Line line(text, where);
    const ReadQuantity quantity = read_only(line, QuantityKind::mass, "10 g");
    expect_positive(line, quantity);
    return Mass::grams(quantity.value);
}

Concentration read_concentration(std::string_view text, std::string_view where) {
    const Line line(text, where);
    const ReadQuantity quantity = read_only(line, QuantityKind::concentration, "50 mM");
    return {quantity.value, quantity.unit};
}

PH read_ph(std::string_view text, std::string_view where) {
    const Line line(text, where);
    Part part = trimmed(line, {0, text.size()});
    const std::size_t start = part.begin;
    const double value = read_number(line, part, true);
    const std::size_t end = part.begin;
    part = trimmed(line, part);
    if (!part.empty()) {
        line.fail("trailing_text", fmt::format("'{}' does not belong to a pH", text_of(line, part)), part.begin,
                  part.end, "a pH has no unit: 7.4");
    }
    if (!(value >= -2 && value <= 16)) {
        line.fail("ph_out_of_range", fmt::format("pH {:g} is outside -2 to 16", value), start, end);
    }
    return PH(value);
}

}  // namespace carboy
