#pragma once

#include <optional>
#include <string_view>

#include "carboy/concentration.h"
#include "carboy/constants.h"
#include "carboy/quantity.h"

#include "notation/line.h"
#include "notation/unit.h"

namespace carboy {

/// A number with its unit: in mol (or g, percent, equivalents) per litre or kilogram, litres, grams, °C.
struct ReadQuantity {
    QuantityKind kind = QuantityKind::concentration;
    double value = 0;
    ConcentrationUnit unit = ConcentrationUnit::mol_per_L;
    bool bare_percent = false;  ///< `%` alone, read as % w/v: right for solids only
    Part number;
    Part whole;  ///< number and unit
};

/// What a place in a line takes, with an example for the help of its errors.
struct Expected {
    QuantityKind kind;
    std::string_view example;
};

/// True when a number begins here (digit, or sign or point before a digit).
bool number_begins(std::string_view text);

/// Reads a number of either sign at the beginning of `part` and moves `part` past it. Errors: `not_a_number`,
/// `number_out_of_range`, `decimal_comma`.
double read_number(const Line& line, Part& part);

/// The same for a pH, which has no unit; outside -2 to 16: `ph_out_of_range`.
PH read_ph_number(const Line& line, Part& part);

/// Reads number and unit at the beginning of `part` and moves `part` past them. Errors as above, `missing_unit`,
/// `unknown_unit`, `wrong_quantity` where a kind is expected, `negative_quantity` and, below absolute zero,
/// `temperature_out_of_range`. Where no kind is expected, units of the `likely` one are suggested for a misspelt unit.
ReadQuantity read_quantity(const Line& line, Part& part, std::optional<Expected> expected = std::nullopt,
                           std::optional<Expected> likely = std::nullopt);

/// Reads a quantity that ends the part, as in `NaCl 150 mM`; `part` then ends before it. Empty when no number stands
/// there. A number that was meant as one but cannot be read is its own error, the last one of the part first.
std::optional<ReadQuantity> read_trailing_quantity(const Line& line, Part& part, std::optional<Expected> likely);

/// Fails with `wrong_quantity` unless the kind is the expected one.
void expect_kind(const Line& line, const ReadQuantity& quantity, Expected expected);

/// Fails with `unknown_unit` for a `%` of anything but a solid: of a liquid it may be by volume or by mass.
void expect_percent_of_solid(const Line& line, const ReadQuantity& quantity, const Reagent& reagent);

/// Fails with `trailing_text` unless nothing but spaces is left of a part whose beginning was read.
void expect_end(const Line& line, Part rest, std::string_view belongs_to, std::string_view help);

}  // namespace carboy
