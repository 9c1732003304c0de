#pragma once

#include <cstdint>
#include <optional>
#include <string_view>

#include "carboy/concentration.h"

#include "notation/line.h"

namespace carboy {

enum class QuantityKind : std::uint8_t { concentration, volume, mass, temperature, strength };
/// `concentration`, `volume`, `mass`, `temperature`, `strength`, with an article for messages.
std::string_view kind_phrase(QuantityKind kind);

/// A number with its unit: in mol (or g, percent, equivalents) per unit, litres, grams, °C.
struct ReadQuantity {
    QuantityKind kind = QuantityKind::concentration;
    double value = 0;
    ConcentrationUnit unit = ConcentrationUnit::mol_per_L;
    Part number;
    Part whole;  ///< number and unit
};

/// True when a number begins here (digit, sign or point before a digit).
bool number_begins(std::string_view text);

/// Reads a number at the beginning of `part` and moves `part` past it. Errors: `not_a_number`, `negative_quantity`,
/// `number_out_of_range`, `decimal_comma`.
double read_number(const Line& line, Part& part, bool may_be_negative = false);

/// Reads number and unit at the beginning of `part` and moves `part` past them. Errors as above, `missing_unit`,
/// `unknown_unit`.
ReadQuantity read_quantity(const Line& line, Part& part);

/// Looks for a quantity that ends the part, as in `NaCl 150 mM`; `part` then ends before it. Empty when there is none.
std::optional<ReadQuantity> read_trailing_quantity(const Line& line, Part& part);

/// Fails with `wrong_quantity` unless the kind is the expected one.
void expect_kind(const Line& line, const ReadQuantity& quantity, QuantityKind expected, std::string_view example);

}  // namespace carboy
