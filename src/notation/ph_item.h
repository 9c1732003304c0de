#pragma once

#include <optional>
#include <string_view>
#include <vector>

#include "carboy/constants.h"
#include "carboy/quantity.h"

#include "notation/line.h"

namespace carboy {

/// What a label says of its pH.
struct PhItem {
    PH ph;
    std::optional<Temperature> at;
    std::optional<ComponentId> titrant;  ///< what it is brought to pH with, for buffers that name no counter-ion
    Part titrant_named;
};

/// True for `pH` followed by anything but a letter: `phosphate` is no pH.
bool is_ph_item(std::string_view text);

/// Reads `pH 7.5`, `pH = 7.5 at 4 C`, `pH 7.5 (4 C)`, `pH 7.5 (KOH) at 4 C`, `pH 7.5 at 4 C with KOH`. `at RT` is
/// refused: a pH needs a number of degrees.
PhItem read_ph_item(const Line& line, Part item, const Table& table);

/// `1 M Tris pH 8.0` and `50 mM Tris-HCl (pH 7.5)`: benches leave out the comma before the pH, so it becomes an item of
/// its own.
std::vector<Part> with_ph_apart(const Line& line, const std::vector<Part>& items);

/// What follows a word of `length` bytes at the beginning of an item: `pH 7`, `pH = 7` and `pH: 7` are the same.
Part after_word(const Line& line, Part item, std::size_t length);

}  // namespace carboy
