#pragma once

#include <optional>
#include <string_view>

#include "carboy/constants.h"
#include "carboy/notation.h"

namespace carboy {

/// The formula of this name, with or without the word `buffer` or `solution` after it; nullptr when there is none.
const NamedFormula* formula_named(const Table& table, std::string_view name);

/// Adds what is in a formula, at `times` its working strength, to what the label says. With a pH on the label its
/// buffers hold it, brought there with `titrant` where that is named, and its titrants are left to the plan; without
/// one everything goes in as written. What the label names as well is added up.
void add_formula(Label& label, const NamedFormula& formula, double times, std::optional<ComponentId> titrant,
                 const Table& table);

}  // namespace carboy
