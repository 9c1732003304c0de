#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/mixture.h"
#include "carboy/quantity.h"
#include "carboy/uncertainty.h"
#include "carboy/warning.h"

namespace carboy {

/// One species of a predicted state.
struct PredictedSpecies {
    std::string_view owner;  ///< system or spectator it belongs to; `water` for H+ and OH-
    std::string_view formula;
    int charge = 0;
    Molality molality;
    double activity_coefficient = 1;
};

/// One pK that the prediction rests on.
struct UsedConstant {
    std::uint16_t system = 0;  ///< index into Table::systems
    std::size_t step = 0;      ///< 0 = first proton to leave
    double pK_25C = 0;         ///< at zero ionic strength
    double pK = 0;             ///< the same at the temperature of the prediction
};

/// All that is said of a mixture at one temperature.
struct Prediction {
    Temperature temperature;
    PH ph;
    Molality ionic_strength;
    Molality buffer_value;  ///< per unit of pH, at constant ionic strength
    Molality charge_residual;
    Molality particles;  ///< sum over all species: the ideal osmolality, a few per cent above that of a real salt
    /// Sum on paper: textbook pK at 25 °C and the ratio of what was put together, no activities, no water. Empty where
    /// such a sum does not apply.
    std::optional<PH> hand_estimate;
    std::string_view activity_model;
    WaterProperties water;
    double water_activity = 1;
    std::vector<PredictedSpecies> species;
    std::vector<UsedConstant> constants;
    PHUncertainty uncertainty;
    std::vector<Warning> warnings;
};

/// Solves the mixture and gathers what a user wants to know of it. Temperature outside 0..100 °C: Error
/// `temperature_out_of_range`.
Prediction predict(const Table& table, const Mixture& mixture, Temperature temperature, const ActivityModel& model);

}  // namespace carboy
