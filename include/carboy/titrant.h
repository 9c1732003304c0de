#pragma once

#include <optional>
#include <string_view>

#include "carboy/constants.h"
#include "carboy/quantity.h"

namespace carboy {

/// An acid or base at hand: a solution of so much in a litre, or a solid that is weighed.
struct Titrant {
    std::uint16_t reagent = 0;         ///< index into Table::reagents
    std::optional<Molarity> strength;  ///< none: weighed
};

/// Reads `1 M HCl`, `NaOH 10 mol/L`, `hydrochloric acid 37 %`, `NaOH` (weighed); strengths as in a mixture line. Where
/// the table has an article of that chemistry and strength, that one is taken. Error (input) as for a mixture line.
Titrant read_titrant(std::string_view text, const Table& table, std::string_view where = "--with");

}  // namespace carboy
