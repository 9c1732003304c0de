#pragma once

#include <optional>
#include <vector>

#include "carboy/constants.h"
#include "carboy/mixture.h"
#include "carboy/quantity.h"

namespace carboy {

/// So much of one reagent: by moles, or by molality in the finished solution.
struct Portion {
    std::uint16_t reagent = 0;  ///< index into Table::reagents
    std::optional<Amount> amount;
    std::optional<Molality> molality;
};

/// What was really put together: reagents, and the volume they were filled to.
struct Preparation {
    std::vector<Portion> portions;
    std::optional<Volume> filled_to;  ///< none: every portion is a molality
    Temperature filled_at;            ///< where the volume holds
};

/// What a preparation is, per kilogram of water.
struct Composed {
    Mixture mixture;
    Mass water;                                 ///< in the filled volume; 1 kg when there is none
    std::vector<ComponentId> volume_neglected;  ///< components whose own volume the table does not know
};

/// Water is the filled volume less the apparent molar volumes of what is dissolved, at the density of water there.
/// Water of hydration and of neutralisation belongs to the water. Error `no_room_for_water` (input) when solutes fill
/// it all.
Composed compose(const Table& table, const Preparation& preparation);

/// Volume that one mole of a reagent takes up in solution: the sum of its components' apparent molar volumes, those
/// that the table does not know counted as zero.
Volume volume_per_mole(const Table& table, const Reagent& reagent);

}  // namespace carboy
