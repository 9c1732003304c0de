#pragma once

#include <cstdint>
#include <span>
#include <string_view>
#include <vector>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/mixture.h"
#include "carboy/quantity.h"
#include "carboy/water.h"

namespace carboy {

/// pK of a step at zero ionic strength and a temperature (molality basis).
/// Enthalpy and heat capacity missing from the table count as zero; `step_pK_is_extrapolated` tells.
double thermodynamic_pK(const System& system, std::size_t step, Temperature temperature);

/// The equilibrium of one set of components at one temperature, for as many sets of totals as wanted.
///
/// Constants are resolved and all memory is taken when it is made; `solve` and `hold_at` then allocate nothing, so the
/// object is the right tool for titrations and batches. One thread at a time.
///
///     EquilibriumSolver solver(table, mixture, Temperature::celsius(25), davies_model());
///     solver.solve();
///     double ph = solver.ph().value();
class EquilibriumSolver {
public:
    /// Components and totals are those of `mixture`. Temperature outside 0..100 °C: Error `temperature_out_of_range`.
    EquilibriumSolver(const Table& table, const Mixture& mixture, Temperature temperature, const ActivityModel& model);

    /// Replaces the totals, in the order of `Mixture::parts()`; each must be finite and not negative.
    void set_total(std::size_t part, Molality total) { totals_mol_per_kg_[part] = total.mol_per_kg(); }

    /// Finds the pH at which charges balance, with activity coefficients that belong to the resulting composition.
    /// Converged means: pH moves by less than 1e-12 and the charge residual is under 1e-14 of the ions present.
    /// Any totals from none at all to 10 mol/kg. Never returns unconverged: Error `not_converged` (defect).
    void solve();

    /// The state at a pH that is imposed; charges need not balance, `charge_residual` says by how much.
    void hold_at(PH ph);

    // State after `solve` or `hold_at`.
    PH ph() const { return PH(ph_); }
    Molality ionic_strength() const { return Molality::mol_per_kg(ionic_strength_); }
    /// Van Slyke buffer value: moles of strong base per kg and unit of pH, at constant ionic strength.
    Molality buffer_value() const { return Molality::mol_per_kg(buffer_value_); }
    /// Sum of all charges, mol/kg; zero within rounding after `solve`.
    Molality charge_residual() const { return Molality::mol_per_kg(charge_residual_); }
    /// Mean charge of the system that is part `part` of the mixture; the charge of a spectator.
    double mean_charge(std::size_t part) const { return mean_charge_[part]; }
    /// Mean of z^2 over the species of part `part`.
    double mean_square_charge(std::size_t part) const { return mean_square_charge_[part]; }
    const WaterProperties& water() const { return water_; }
    double water_activity() const { return water_activity_; }

    struct SpeciesState {
        ComponentId component;     ///< meaningful when `part` is not `water_part`
        std::size_t part;          ///< index into Mixture::parts(), or `water_part`
        std::string_view formula;
        int charge;
        Molality molality;
        double activity_coefficient;
    };
    static constexpr std::size_t water_part = static_cast<std::size_t>(-1);
    std::size_t species_count() const { return charge_.size(); }
    /// H+, OH-, then the parts in order, each system from most to least protonated.
    SpeciesState species(std::size_t index) const;

    /// pK at the solver's temperature of step `step` of part `part`, zero ionic strength.
    double pK(std::size_t part, std::size_t step) const;
    /// Shifts one pK, for sensitivities; stays until shifted back.
    void shift_pK(std::size_t part, std::size_t step, double by);
    void shift_pKw(double by);

private:
    struct Block;      // one system's slice of the species arrays
    struct Balance;    // sums and derivatives of one evaluation
    void evaluate_activities();
    Balance evaluate_balance(double log_activity_H);
    double first_guess() const;
    bool newton(double& log_activity_H, int max_iterations);
    void bracketed(double& log_activity_H);
    void finish(double log_activity_H);

    // ... see equilibrium_solver.cpp
public:
    // implementation data
private:
    WaterProperties water_;
    const ActivityModel* model_;
    std::vector<double> totals_mol_per_kg_;
    double ph_ = 7, ionic_strength_ = 0, buffer_value_ = 0, charge_residual_ = 0, water_activity_ = 1;
    std::vector<double> mean_charge_, mean_square_charge_;
    std::vector<std::int8_t> charge_;
};

}  // namespace carboy
