#pragma once

#include <optional>
#include <vector>

#include "carboy/adjustment.h"

#include "explore/imposed_ph.h"

namespace carboy {

/// What stands on the bench: what is in it now, what is still to go in, and the mark it is filled to in the end.
struct VesselContent {
    Preparation present;           ///< at the bench temperature, in its present volume
    std::vector<Portion> to_come;  ///< goes in after the pH is set (azide and its like)
    Volume mark;

    /// After so much titrant: its volume comes on top.
    Preparation with(const Table& table, const Titrant& titrant, Amount amount) const;
    /// The same, with everything in it and filled to the mark, if it is not over it already.
    Preparation finished(const Table& table, const Titrant& titrant, Amount amount) const;
};

/// The batch as the recipe makes it.
VesselContent planned_vessel(const Table& table, const Plan& plan, std::optional<Volume> not_filled);

/// The vessel as it was before the titrant: in the volume that the recipe dissolves in, without what goes in last.
Preparation before_titrant(const Table& table, const Plan& plan, const Preparation& present);

/// The titrant of a recipe, if it has one.
struct PlannedTitrant {
    std::size_t portion = 0;  ///< index into Plan::preparation.portions
    Titrant titrant;
    Amount amount;
    int charge = 0;  ///< of the strong ion it brings: -1 an acid, +1 a base, 0 neither
};
std::optional<PlannedTitrant> titrant_of(const Table& table, const Plan& plan);

/// The strong acid (`sign` -1) or base (+1) that goes with the label's counter-ions, at about 1 mol/L.
Titrant strong_titrant(const Table& table, const Plan& plan, int sign);

}  // namespace carboy
