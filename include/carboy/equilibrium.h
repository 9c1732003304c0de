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

/// pK of a step (0 = first proton to leave) at zero ionic strength and a temperature, molality basis.
/// An enthalpy or heat capacity that the table does not hold counts as zero; see `pK_is_extrapolated`.
double thermodynamic_pK(const System& system, std::size_t step, Temperature temperature);

/// True when the table cannot say how the step moves with temperature: no enthalpy and more than 1 K from 25 °C, or
/// outside the range of its published expression.
bool pK_is_extrapolated(const System& system, std::size_t step, Temperature temperature);

/// The equilibrium of one set of components at one temperature, for as many sets of totals as wanted.
///
/// Constants are resolved and all memory is taken when it is made; `solve` and `hold_at` then allocate nothing, so the
/// object is the right tool for titrations and batches. Used by one thread at a time.
///
///     EquilibriumSolver solver(table, mixture, Temperature::celsius(25), davies_model());
///     solver.solve();
///     double ph = solver.ph().value();
class EquilibriumSolver {
public:
    /// Components and totals are those of `mixture`. Temperature outside 0..100 °C: Error `temperature_out_of_range`.
    EquilibriumSolver(const Table& table, const Mixture& mixture, Temperature temperature, const ActivityModel& model);

    /// Replaces the total of one part, in the order of `Mixture::parts()`; finite and not negative.
    void set_total(std::size_t part, Molality total) { parts_[part].total = total.mol_per_kg(); }

    /// Finds the pH at which charges balance, with activity coefficients that belong to the resulting composition.
    /// Converged means: pH moves by less than 1e-12 and the charge residual is under 1e-14 of the ions present.
    /// Any totals from none at all to 10 mol/kg. Never returns unconverged: Error `not_converged` (defect).
    void solve();

    /// The state at a pH that is imposed: charges need not balance, `charge_residual` says by how much.
    void hold_at(PH ph);

    // State after `solve` or `hold_at`.
    PH ph() const;
    Molality ionic_strength() const { return Molality::mol_per_kg(ionic_strength_); }
    /// Van Slyke's buffer value: moles of strong base per kg of water and unit of pH, at constant ionic strength.
    Molality buffer_value() const;
    /// Sum of all charges; zero within rounding after `solve`.
    Molality charge_residual() const { return Molality::mol_per_kg(balance_.charge); }
    /// Mean charge of what is part `part` of the mixture; the charge itself for a spectator.
    double mean_charge(std::size_t part) const;
    /// Mean of the squared charge over the species of part `part`.
    double mean_square_charge(std::size_t part) const;
    const WaterProperties& water() const { return water_; }
    double water_activity() const { return water_activity_; }

    /// One species of the state.
    struct SpeciesState {
        std::size_t part;  ///< index into Mixture::parts(), or `water_part` for H+ and OH-
        std::string_view formula;
        int charge;
        Molality molality;
        double activity_coefficient;
    };
    static constexpr std::size_t water_part = static_cast<std::size_t>(-1);
    std::size_t species_count() const { return charge_.size(); }
    /// H+, OH-, then the parts in order, each system from most to least protonated.
    SpeciesState species(std::size_t index) const;

    std::size_t part_count() const { return parts_.size(); }
    ComponentId component(std::size_t part) const { return parts_[part].component; }
    /// pK at zero ionic strength and the solver's temperature.
    double pK(std::size_t part, std::size_t step) const;
    /// Moves a pK by so much, for sensitivities; stays until moved back.
    void shift_pK(std::size_t part, std::size_t step, double by);
    void shift_pKw(double by);

private:
    /// A component's slice of the species arrays.
    struct Part {
        ComponentId component;
        std::size_t first = 0;
        std::size_t count = 0;
        double total = 0;
    };
    /// Where a step stands when all steps of all systems are lined up by pK.
    struct StepPlace {
        std::size_t part;
        std::size_t species;  ///< index of the step's base form
        double pK;
    };
    /// Between which steps the charges cross zero when protons leave in the order of the pK.
    struct Crossing {
        std::size_t step = 0;  ///< index into steps_, or their number when all are gone
        double charge = 0;     ///< left over before that step, mol/kg
        double ionic_strength = 0;
    };
    /// Charge and ionic strength of a trial state, with derivatives in x = ln a(H+) and in I.
    struct Balance {
        double charge = 0;  ///< mol/kg
        double ionic_strength = 0;
        double charge_by_x = 0;
        double charge_by_I = 0;
        double ionic_strength_by_x = 0;
        double ionic_strength_by_I = 0;
    };

    void line_up_steps();
    void evaluate_activities();
    void evaluate_balance();
    void add_system(const Part& part, double inverse_activity);
    void take_totals();
    double ions() const;
    Crossing find_crossing() const;
    double first_guess(const Crossing& crossing) const;
    bool converge_jointly(int most_iterations);
    void bracket_at_fixed_activities();
    void converge_nested();

    WaterProperties water_;
    const ActivityModel* model_;
    std::vector<Part> parts_;
    int highest_charge_ = 0;
    std::size_t system_count_ = 0;
    std::size_t system_species_end_ = 0;
    std::vector<StepPlace> steps_;

    // One entry per species: H+, OH-, then the parts.
    std::vector<std::string_view> formula_;
    std::vector<std::int8_t> charge_;
    std::vector<double> dissociation_;  ///< K of the step that makes the species; 0 where no step does
    std::vector<double> gamma_;
    std::vector<double> log_slope_;
    std::vector<double> ratio_;  ///< conditional K: m(base) a(H+) / m(acid)
    std::vector<double> molality_;

    double ion_product_ = 0;
    double activity_H_ = 1e-7;
    double ionic_strength_ = 0;
    double water_activity_ = 1;
    Balance spectators_;
    Balance balance_;
    double deviation_ = 0;  ///< running sum of charges beyond the dominant species, while a balance is evaluated
};

}  // namespace carboy
