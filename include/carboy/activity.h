#pragma once

#include <cstdint>
#include <optional>
#include <span>
#include <string_view>

#include "carboy/quantity.h"
#include "carboy/water.h"

namespace carboy {

/// Everything dissolved, as an activity model sees it. All spans have one entry per species and the same order.
/// Models that need only the ionic strength ignore the rest; a specific-ion model needs all of it.
struct Composition {
    std::span<const std::int8_t> charge;          ///< in units of e
    std::span<const double> molality_mol_per_kg;  ///< per kg of water
    std::span<const std::string_view> formula;    ///< e.g. `HPO4^2-`; identifies the species in parameter tables
    double ionic_strength_mol_per_kg = 0;         ///< of this composition
    int highest_charge = 8;                       ///< no species carries more, of either sign
};

/// What a model says of a composition; spans are provided by the caller, one entry per species.
struct Activities {
    std::span<double> coefficient;  ///< gamma on the molality scale
    /// d ln(gamma) / dI. Exact for models of ionic strength only; a specific-ion model gives its Debye-Hückel part,
    /// which is enough to steer the solver (it converges on `coefficient`, not on this).
    std::span<double> log_slope_kg_per_mol;
    double water_activity = 1;
};

/// One of the two seams of the program: models of the activity coefficients stand beside each other here.
class ActivityModel {
public:
    virtual ~ActivityModel() = default;
    /// The word used on the command line and in JSON.
    virtual std::string_view name() const = 0;
    /// Highest ionic strength (mol/kg) at which the model's own authors would use it; past it callers warn.
    virtual double trusted_to_mol_per_kg() const = 0;
    /// Standard uncertainty of a predicted pH that comes from the model itself, at this ionic strength.
    virtual double ph_uncertainty(Molality ionic_strength) const = 0;
    /// Fills `out`. Any composition is accepted: I from 0 to far beyond the trusted range gives finite numbers.
    virtual void evaluate(const WaterProperties& water, const Composition& composition, Activities& out) const = 0;
};

/// log10 g = -A z^2 (sqrt I / (1 + sqrt I) - 0.3 I). Davies CW, Ion Association (1962), eq. 3.13.
const ActivityModel& davies_model();
/// log10 g = -A z^2 sqrt I / (1 + B a sqrt I) with one ion size a = 0.4565 nm, so that B a = 1.5 at 25 °C:
/// Bates RG, Guggenheim EA, Pure Appl. Chem. 1, 163 (1960).
const ActivityModel& debye_huckel_model();
/// g = 1.
const ActivityModel& ideal_model();

/// Model by its `name()`; nullptr when there is none.
const ActivityModel* find_activity_model(std::string_view name);

}  // namespace carboy
