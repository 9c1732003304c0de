#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/constants.h"
#include "carboy/request.h"

namespace carboy {

// Reading what narrows a recipe, from an option or a JSON member. `where` is the caller's name for it. Every function
// throws Error (input) that offers the nearest name.

/// `Na+`, `sodium`, `acetate`: an ion of the table.
ComponentId read_ion(std::string_view name, const Table& table, std::string_view where);
/// A reagent by name, formula or CAS number.
std::uint16_t read_reagent(std::string_view name, const Table& table, std::string_view where);
/// `Na+ = 150 mM`: an ion's total.
Constraints::Total read_ion_total(std::string_view text, const Table& table, std::string_view where);
/// Adds to `constraints.without` every strong ion of the same charge but this one.
void allow_only(Constraints& constraints, ComponentId ion, const Table& table);
/// `0.1 mg`, with the least mass to weigh where it is given, else 100 times as much.
Balance read_balance(std::string_view readability, std::optional<std::string_view> minimum, std::string_view where);
/// A vessel by name.
std::uint16_t read_vessel(std::string_view name, const Table& table, std::string_view where);

}  // namespace carboy
