#pragma once

#include <optional>

#include "carboy/plan.h"

namespace carboy {

/// What a stock of this strength and volume takes of its article, by mass or by volume.
Stock stock_of(const Reagent& article, std::uint16_t reagent, Molarity strength, Volume volume);

/// The smallest flask of the table that holds so much; none when there is no such.
std::optional<Volume> flask_for(const Table& table, Volume least);

}  // namespace carboy
