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
#include "carboy/shelf.h"
#include "carboy/warning.h"

namespace carboy {

/// What an ingredient is there for.
enum class Purpose : std::uint8_t {
    buffer,          ///< a form of a buffering system
    titrant,         ///< brings the solution to its pH, added to the meter
    additive,        ///< named on the label besides the buffers
    ionic_strength,  ///< salt that fills up to the ionic strength asked for
    ion_total        ///< salt that fills up to an ion's total
};

/// Something to weigh.
struct Weighing {
    std::uint16_t reagent = 0;
    Purpose purpose = Purpose::buffer;
    Amount amount;                   ///< moles of the reagent itself
    Mass mass;                       ///< to put on the balance: assay counted
    const Bottle* bottle = nullptr;  ///< where it comes from, on the shelf that the plan was made with
};

/// Something to measure by volume.
struct Measurement {
    std::uint16_t reagent = 0;
    Purpose purpose = Purpose::buffer;
    Amount amount;
    Molarity strength;
    Volume volume;
    const Bottle* bottle = nullptr;
    std::optional<std::size_t> stock;     ///< index into Plan::stocks, when it is made for this recipe
    std::optional<std::uint16_t> vessel;  ///< index into Table::vessels, when volumes are rounded
};

/// A solution to make first, because its reagent is too little to weigh or the route asks for it.
struct Stock {
    std::uint16_t reagent = 0;
    Amount amount;
    Mass mass;      ///< of a solid; zero for a liquid
    Volume liquid;  ///< of a liquid or stronger solution; zero for a solid
    Volume volume;  ///< to fill to
    Molarity strength;
    const Bottle* bottle = nullptr;  ///< what it is made from
};

enum class Stage : std::uint8_t { dissolved, nearly, titrated, filled, diluted };

/// What the meter shows at the bench when a stage is done.
struct Reading {
    Stage stage = Stage::filled;
    Volume volume;
    PH ph;
    double uncertainty_k2 = 0;  ///< expanded, of the activity model at this ionic strength
};

/// The counter-ion a buffer was made with.
struct CounterIonChoice {
    ComponentId system;
    ComponentId counter_ion;
    bool named_by_label = false;
};

/// What rounding to balance and glassware does, if nothing is corrected at the meter.
struct Rounding {
    double ph = 0;                ///< predicted pH as rounded less as exact
    double largest_relative = 0;  ///< largest change of an ingredient's amount, with its sign
    std::uint16_t largest_reagent = 0;
};

/// One way of making the same thing, and how it compares.
struct Way {
    Route route = Route::titrated;
    std::string reason;  ///< why it stands where it does, or why it is not possible
    bool possible = true;
};

/// A recipe: what to put together, and what comes of it. Amounts are exact, or as rounded to balance and glassware when
/// the request has a balance; rounding for people is the report's.
struct Plan {
    Request request;
    Route route = Route::titrated;
    std::vector<CounterIonChoice> counter_ions;
    std::vector<Stock> stocks;  ///< to make first
    std::vector<Weighing> weigh;
    std::vector<Measurement> measure;  ///< the titrant last
    Volume start_with;                 ///< water to begin with
    Volume dissolve_in;                ///< volume after everything but the titrant
    double temperature_rise_K = 0;     ///< of the vessel, if the titrant went in at once; 0 without a titrant
    std::vector<Reading> readings;     ///< in order of the work, all at `Request::prepare_at`
    Preparation preparation;           ///< the same amounts, as the forward calculation takes them
    std::vector<ComponentId> volume_neglected;
    Prediction predicted;  ///< at the temperature of use and at working strength
    /// As bottled, at the temperature of use; only when that is not working strength.
    std::optional<Prediction> as_bottled;
    std::optional<Rounding> rounding;
    std::vector<Way> ways;          ///< the routes ranked, the chosen one first; empty when a route was asked for
    std::string shelf_sha256;       ///< of the shelf it was made from; empty without one
    std::vector<Warning> warnings;  ///< of the making-up and those of `predicted`, each once, the heaviest first
};

/// Finds the best recipe. Every route is the same small linear problem (see DEVELOPERS.md) with other columns allowed.
/// Throws Error `unreachable_target`, `unreachable_ionic_strength`, `no_reagent` (no_recipe) with the reason in the
/// words of the bench, or `bad_amount`, `temperature_out_of_range`, `unusable_unit` (input).
Plan plan_recipe(const Table& table, const Request& request, const ActivityModel& model);
/// The same from what is on a shelf, which must outlive the plan; reagents of the plan are those of `Shelf::table()`.
/// `short_on_shelf` (no_recipe) tells what is short and what else would do.
Plan plan_recipe(const Shelf& shelf, const Request& request, const ActivityModel& model);

/// True for what gives off a toxic gas with acid (GHS EUH031, EUH032: azide, fluoride, sulfite ...): it goes in after
/// the pH is set and is in none of the readings before.
bool goes_in_last(const Reagent& reagent, const Table& table);

/// Everything the recipe uses, weighed and measured, each reagent once, in order of first use.
std::vector<std::uint16_t> reagents_used(const Plan& plan);

}  // namespace carboy
