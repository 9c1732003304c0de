#pragma once

#include <optional>

#include "carboy/adjustment.h"

#include "explore/vessel_content.h"

namespace carboy {

/// What two good meters agree to (common practice, no source); taken as an expanded uncertainty, k = 2.
constexpr double meter_ph = 0.02;

/// Strong acid (positive) or base (negative) that the vessel holds beside the plan, so that it reads what the meter
/// reads. Of the planned titrant what is missing is taken away first. Error `impossible_reading` (no_recipe) when no
/// amount of either gives that reading.
Amount acid_in_excess(const Bench& bench, const Plan& plan, const VesselContent& vessel, PH reading);
/// The vessel with so much strong acid (negative: base) more than planned.
Preparation with_excess(const Table& table, const Plan& plan, const Preparation& present, Amount acid);

/// Whether a titrant brings a vessel to the target.
struct Attempt {
    std::optional<Correction> correction;
    bool wrong_side = false;  ///< it moves the pH away from the target; otherwise, without a correction: too weak
};
Attempt attempt(const Bench& bench, const Plan& plan, const VesselContent& vessel, const Titrant& titrant);

}  // namespace carboy
