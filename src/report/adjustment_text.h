#pragma once

#include <string>

#include "carboy/adjustment.h"
#include "carboy/constants.h"

#include "report/recipe_text.h"

namespace carboy {

/// What to do with a batch that went wrong, the number to act on first.
std::string adjustment_text(const Adjustment& adjustment, const Table& table, const TextStyle& style);

/// `hydrochloric acid 1 mol/L`, `HCl 2.5 mol/L`, `sodium hydroxide pellets`.
std::string titrant_text(const Titrant& titrant, const Table& table);
/// So much of it, as it is measured: `12.3 mL`, `402.1 mg`.
std::string titrant_amount_text(const Titrant& titrant, Amount amount, const Table& table);
/// What went in, or on the balance.
Volume titrant_volume(const Titrant& titrant, Amount amount);
Mass titrant_mass(const Titrant& titrant, Amount amount, const Table& table);

/// `sodium acetate trihydrate was weighed as sodium acetate`: what happened, if it is this.
std::string mistake_text(const Mistake& mistake, const Adjustment& adjustment, const Table& table);

}  // namespace carboy
