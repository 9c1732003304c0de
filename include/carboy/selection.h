#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "carboy/activity.h"
#include "carboy/concentration.h"
#include "carboy/constants.h"
#include "carboy/quantity.h"
#include "carboy/request.h"
#include "carboy/shelf.h"

namespace carboy {

/// What a buffer is wanted for. Only pH and temperature must be said.
struct Job {
    PH ph;
    std::optional<PH> ph_to;  ///< the other end, when one buffer is to serve a range of pH
    Temperature at;           ///< temperature of use
    Temperature prepare_at;   ///< bench temperature, where volumes are filled
    Concentration concentration{0.05, ConcentrationUnit::mol_per_L};  ///< total of the buffer; mol/L or mol/kg
    std::optional<std::pair<Temperature, Temperature>> range;         ///< it is used between these
    std::optional<Molarity> acid;                                     ///< strong acid set free in it, per litre
    std::optional<Molarity> base;                                     ///< strong base set free in it, per litre
    std::optional<double> hold_ph;                                    ///< pH may move so much under that load
    std::optional<IonicStrengthTarget> most_ionic_strength;
    std::vector<Trait> avoid;
    std::vector<Trait> want;
    std::optional<double> clear_from_nm;  ///< it must not absorb at this wavelength and above
};

/// How one system would do the job, made up at the pH and the concentration with its usual counter-ion.
struct Standing {
    std::uint16_t system = 0;  ///< index into Table::systems
    ComponentId counter_ion;
    double working_pK = 0;  ///< of the nearest step, at the temperature and ionic strength of use
    Molality buffer_value;
    Molality ionic_strength;
    double ph_per_kelvin = 0;
    double ph_on_dilution = 0;  ///< shift of pH when diluted with the same volume of water
    PH after_acid;
    PH after_base;
    std::optional<std::pair<PH, PH>> over_range;  ///< pH at the ends of the temperature range
    double ph_expanded_k2 = 0;                    ///< uncertainty of the predicted pH

    double moves_by_load = 0;  ///< pH, the larger of the two
    double moves_by_temperature = 0;
    double moves_by_dilution = 0;
    double moves = 0;  ///< sum of the three: what the ranking goes by

    std::vector<std::string> doubts;     ///< demands or figures that the table cannot confirm
    std::vector<std::string> drawbacks;  ///< what most work would rather avoid
    std::vector<std::uint16_t> facts;    ///< indices into Table::facts
    std::string reason;                  ///< why it stands where it does
};

/// A system that will not do, and by which fact.
struct Excluded {
    std::uint16_t system = 0;
    /// `too_far_from_pK`, `trait`, `trait_not_known`, `absorbs`, `drawback`, `moves_too_much`, `too_much_salt`,
    /// `not_on_shelf`, `no_recipe`.
    std::string code;
    std::string reason;  ///< in words
    std::string source;  ///< citation behind the fact
    Evidence evidence = Evidence::computed;
};

/// Two or three systems together, at equal shares of the concentration, for a range of pH.
struct MixedBuffer {
    std::vector<std::uint16_t> systems;
    Molality least_buffer_value;  ///< anywhere in the range
    PH weakest_at;
    std::string reason;
};

struct Selection {
    Job job;
    Molarity acid;                 ///< the load compared under
    Molarity base;                 ///< the same
    bool load_assumed = false;     ///< none was stated
    std::vector<Standing> ranked;  ///< best first
    std::vector<Excluded> excluded;
    std::vector<MixedBuffer> mixed;  ///< for a range of pH only, best first
    std::string_view activity_model;
};

/// Tries every buffering system of the table: plans it with its usual counter-ion and solves it as made, warmed,
/// cooled, diluted, and with acid and base. Ranked by how far its pH moves in all, those with a doubt after those
/// without, those with a drawback last. Without a stated load, 5 % of the concentration each way; without a temperature
/// range, 5 K from the temperature of use.
/// With a shelf, only what can be made from it. Error `temperature_out_of_range`, `bad_amount`, `bad_range` (input).
Selection select_buffers(const Table& table, const Job& job, const ActivityModel& model, const Shelf* shelf = nullptr);

}  // namespace carboy
