#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "carboy/activity.h"
#include "carboy/equilibrium.h"
#include "carboy/preparation.h"
#include "carboy/quantity.h"
#include "carboy/warning.h"

namespace carboy {

/// A solution with its volume, so that portions of it can be poured together.
struct Solution {
    Mixture mixture;  ///< per kilogram of its water
    Mass water;
    Volume volume;  ///< where the preparation was filled
    std::vector<ComponentId> volume_neglected;
};

/// The solution that a preparation makes. Without a filled volume it is made with one kilogram of water, whose volume
/// and that of what is dissolved (apparent molar volumes) add up. Errors as `compose`.
Solution solution_of(const Table& table, const Preparation& preparation);

/// One state on the way of a titration.
struct TitrationPoint {
    Volume added;
    PH ph;
    double slope_per_mL = 0;  ///< d pH / d V, dilution and ionic strength counted
    Molality buffer_value;    ///< van Slyke's, at constant ionic strength
    Molality ionic_strength;
};

/// A solution poured into another, drop by drop. Volumes and water add up, so that the change of volume counts; what
/// is volatile stays. The solver is made once: `at` allocates nothing.
class Titration {
public:
    /// `sample` is all that is titrated. Temperature outside 0..100 °C: Error `temperature_out_of_range`.
    Titration(const Table& table, const Solution& sample, const Solution& titrant, Temperature temperature,
              const ActivityModel& model);

    /// The state after so much titrant, from none on.
    TitrationPoint at(Volume added);
    /// The pH alone, and the solver left there.
    PH ph_at(Volume added);
    /// How much titrant brings it to a pH; none when no amount up to 1000 times the sample does.
    std::optional<Volume> volume_to(PH ph);
    /// +1 when the first drops raise the pH, -1 when they lower it.
    int direction();
    Volume sample_volume() const { return sample_volume_; }
    /// Everything in it after so much titrant.
    Mixture mixture_at(Volume added) const;
    EquilibriumSolver& solver() { return solver_; }

    /// Amounts at which acid and base have taken each other up exactly, by counting protons: `taken` is the system and
    /// step that is then complete, none for a strong acid or base.
    struct Equivalent {
        Volume volume;
        std::optional<ComponentId> system;
        std::size_t step = 0;  ///< 0 = first proton to leave
        /// How far apart in pK the step before and the step after are, water's own limits 0 and pKw included. Under
        /// about 3 no jump of pH can be seen between them.
        double gap_pK = 0;
    };
    /// In order of volume, all above zero.
    std::vector<Equivalent> equivalents() const;

private:
    struct Part {
        ComponentId component;
        double sample_mol = 0;
        double titrant_mol_per_L = 0;
        int top_charge = 0;  ///< of the most protonated form; a spectator's own
    };
    std::vector<Part> parts_;
    const Table* table_;
    double sample_water_kg_;
    double titrant_water_kg_per_L_;
    Volume sample_volume_;
    EquilibriumSolver solver_;
};

/// Where acid and base have taken each other up.
struct EquivalencePoint {
    Volume volume;                      ///< by stoichiometry
    std::optional<Volume> steepest;     ///< where |d pH / d V| has its maximum; none: no jump is seen
    PH ph;                              ///< at `steepest`, or at `volume` without one
    PH ph_past;                         ///< with a tenth more titrant
    std::optional<ComponentId> system;  ///< whose step is complete; none: strong acid or base
    std::size_t step = 0;               ///< 0 = first proton
};

/// What it takes to move the pH.
struct ShiftCost {
    double shift = 0;             ///< pH units from the start, signed
    PH ph;                        ///< reached
    std::optional<Volume> added;  ///< none: the titrant cannot move it so far
};

/// What is asked of a titration.
struct TitrationRequest {
    Preparation sample;
    std::optional<Volume> sample_volume;  ///< how much of it is titrated; none: all that is made
    Preparation titrant;                  ///< one reagent in water
    Temperature temperature;
    std::optional<Volume> to_volume;  ///< of titrant
    std::optional<PH> to_ph;          ///< used when there is no volume; none of both: past the last equivalence point
    std::optional<Volume> step;       ///< of a table for people; none: a round one, about twenty to the end
    std::vector<double> shifts;       ///< pH units, unsigned
};

/// A titration from the first drop to the last.
struct TitrationCurve {
    Volume sample_volume;
    std::uint16_t titrant = 0;  ///< index into Table::reagents
    Molarity titrant_strength;
    Temperature temperature;
    std::string_view activity_model;
    Volume step;                         ///< of a table for people: every multiple of it is a point
    std::vector<TitrationPoint> points;  ///< equal steps, finer where the pH jumps
    std::vector<double> ph_expanded_k2;  ///< of each point; amounts and meter not included
    std::vector<EquivalencePoint> equivalence;
    std::vector<ShiftCost> shifts;
    std::vector<Warning> warnings;
};

/// Errors: `usage` (input) for a titrant that is not one reagent in water or steps too many to count;
/// `unreachable_target` (no_recipe) for a pH that no amount of the titrant reaches.
TitrationCurve titrate(const Table& table, const TitrationRequest& request, const ActivityModel& model);

/// The points alone: every `spacing` up to `to`, and between them where the pH moves by more than 0.2 at once.
std::vector<TitrationPoint> curve_points(Titration& titration, Volume to, Volume spacing);

}  // namespace carboy
