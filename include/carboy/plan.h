#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/prediction.h"
#include "carboy/preparation.h"
#include "carboy/quantity.h"
#include "carboy/request.h"
#include "carboy/warning.h"

namespace carboy {

/// What an ingredient is there for.
enum class Purpose : std::uint8_t {
    buffer,         ///< a form of a buffering system
    titrant,        ///< brings the solution to its pH, added to the meter
    additive,       ///< named on the label besides the buffers
    ionic_strength  ///< salt that fills up to the ionic strength asked for
};

/// Something to weigh.
struct Weighing {
    std::uint16_t reagent = 0;
    Purpose purpose = Purpose::buffer;
    Amount amount;  ///< moles of the reagent itself
    Mass mass;      ///< to put on the balance: assay counted
};

/// Something to measure by volume.
struct Measurement {
    std::uint16_t reagent = 0;
    Purpose purpose = Purpose::buffer;
    Amount amount;
    Molarity strength;
    Volume volume;
};

enum class Stage : std::uint8_t { dissolved, titrated, filled };

/// What the meter shows at the bench when a stage is done.
struct Reading {
    Stage stage = Stage::filled;
    Volume volume;
    PH ph;
};

/// The counter-ion a buffer was made with.
struct CounterIonChoice {
    ComponentId system;
    ComponentId counter_ion;
    bool named_by_label = false;
};

/// A recipe: what to put together, and what comes of it. Exact amounts; rounding for people is the report's.
struct Plan {
    Request request;
    Route route = Route::titrated;
    std::vector<CounterIonChoice> counter_ions;
    std::vector<Weighing> weigh;
    std::vector<Measurement> measure;  ///< the titrant last
    Volume dissolve_in;                ///< volume after everything but the titrant
    std::vector<Reading> readings;     ///< in order of the work, all at `Request::prepare_at`
    Preparation preparation;           ///< the same amounts, as the forward calculation takes them
    std::vector<ComponentId> volume_neglected;
    Prediction predicted;           ///< at the temperature of use
    std::vector<Warning> warnings;  ///< of the recipe as a whole; `predicted` has its own
};

/// Finds the best recipe. Every route is the same small linear problem (see DEVELOPERS.md) with other columns allowed.
/// Throws Error `unreachable_target`, `unreachable_ionic_strength`, `no_reagent` (no_recipe) with the reason in the
/// words of the bench, or `bad_amount`, `temperature_out_of_range`, `unusable_unit` (input).
Plan plan_recipe(const Table& table, const Request& request, const ActivityModel& model);

/// True for what gives off a toxic gas with acid (GHS EUH031, EUH032: azide, fluoride, sulfite ...): it goes in after
/// the pH is set and is in none of the readings before.
bool goes_in_last(const Reagent& reagent, const Table& table);

/// Everything the recipe uses, weighed and measured, each reagent once, in order of first use.
std::vector<std::uint16_t> reagents_used(const Plan& plan);

}  // namespace carboy
