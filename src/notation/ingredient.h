#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/constants.h"

#include "notation/line.h"
#include "notation/quantity_reader.h"

namespace carboy {

/// An item of a line as far as its words go: how much, and the name that it was given.
struct Ingredient {
    Part whole;
    Part name;
    ReadQuantity quantity;
};

/// What items of a line look like, for the help of errors.
struct ItemForm {
    std::string_view example;
    std::optional<Expected> likely;  ///< where one kind of quantity is usual: its units are suggested
};

/// Reads `50 mM Tris-HCl`, `50 mL of NaOH` or `NaCl 150 mM`; empty when no number stands in the item. Errors: those of
/// `read_quantity`, `missing_name`, `missing_quantity`, and `misplaced_temperature` for a temperature alone.
std::optional<Ingredient> find_ingredient(const Line& line, Part item, const Table& table, const ItemForm& form);

/// The same where an ingredient must stand: `missing_quantity` after a known name, else `unreadable_item`.
Ingredient read_ingredient(const Line& line, Part item, const Table& table, const ItemForm& form);

/// Where a lower-case word (`ph`, `to`) with a number after it stands behind a name in one item: its first byte.
std::optional<std::size_t> find_behind_name(const Line& line, Part part, std::string_view word);

/// Fails with `missing_comma` when a pH, an ionic strength or a `to 1 L` stands behind a name in one item: to be asked
/// before a name is called unknown.
void expect_no_missing_comma(const Line& line, Part part);

/// Fails with `unknown_name`, offering the nearest names.
[[noreturn]] void fail_unknown_name(const Line& line, Part name, const std::vector<std::string>& nearest);

}  // namespace carboy
