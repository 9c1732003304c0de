#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "carboy/activity.h"
#include "carboy/preparation.h"
#include "carboy/quantity.h"
#include "carboy/warning.h"

namespace carboy {

/// What is varied.
enum class Condition : std::uint8_t {
    temperature,   ///< °C; the composition stays
    dilution,      ///< factor of the volume: 2 is the same amounts in twice the volume, by water
    salt,          ///< salt added to the finished solution's recipe, the final volume kept
    concentration  ///< total of the acid-base systems, with their counter-ions in proportion; added salts stay
};

/// The values that a condition takes.
struct SweepCondition {
    Condition what = Condition::temperature;
    std::vector<double> values;  ///< °C, a factor, or moles per litre or kilogram
    bool per_kg_water = false;   ///< salt and concentration: per kilogram of water, else per litre of solution
    std::uint16_t salt = 0;      ///< index into Table::reagents
};

/// One of the solutions swept together.
struct SweepSubject {
    std::string name;  ///< as typed
    Preparation preparation;
    Temperature temperature;  ///< when it is not the condition
    /// Portions that go with the total when the concentration is varied; one entry per portion.
    std::vector<bool> scales;
};

struct SweepPoint {
    double condition = 0;  ///< in the unit of `SweepCondition::values`
    PH ph;
    double ph_expanded_k2 = 0;  ///< amounts and meter not included
    Molality buffer_value;
    Molality ionic_strength;
};

struct SweepCurve {
    std::string name;
    Temperature temperature;
    std::vector<SweepPoint> points;
};

/// pH against a condition, for one or several solutions.
struct Sweep {
    SweepCondition condition;
    std::string_view activity_model;
    std::vector<SweepCurve> curves;  ///< in the order of the subjects
    std::vector<Warning> warnings;
};

/// True for a portion that belongs to the buffer itself: it brings an acid-base system, or strong acid or alkali.
bool belongs_to_buffer(const Table& table, const Reagent& reagent);

/// Errors: `temperature_out_of_range` (input); `bad_amount` (input) for a factor below or at 0 or a negative amount;
/// `unusable_unit` (input) for an amount per litre of a mixture that is given per kilogram; `no_buffer` (input) when
/// the concentration of a mixture without an acid-base system is varied.
Sweep sweep(const Table& table, const std::vector<SweepSubject>& subjects, const SweepCondition& condition,
            const ActivityModel& model);

}  // namespace carboy
