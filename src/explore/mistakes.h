#pragma once

#include <vector>

#include "carboy/adjustment.h"

#include "explore/vessel_content.h"

namespace carboy {

/// A batch as a mistake would have made it.
struct Suspect {
    Mistake mistake;
    VesselContent vessel;
    Temperature read_at;  ///< the batch's temperature at the meter
};

/// Every single mistake worth trying with this recipe, but for a titrant that is off by some share: that one fits any
/// reading and is worked out from it (`titrant_off_by`). In a fixed order.
std::vector<Suspect> single_mistakes(const Bench& bench, const Plan& plan, const VesselContent& vessel);

/// The recipe with so many times its titrant.
Suspect titrant_off_by(const Plan& plan, const VesselContent& vessel, const PlannedTitrant& titrant, double factor);

/// How often a bench makes each kind of mistake, relative to the others, before any reading is looked at.
double prior(MistakeKind kind);
/// Share of titrant errors with a factor from `low` to `high`: half of them are within 10 %, gross ones are rare.
double titrant_factor_share(double low, double high);

}  // namespace carboy
