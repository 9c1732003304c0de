#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/preparation.h"
#include "carboy/quantity.h"
#include "carboy/warning.h"

namespace carboy {

/// What the measurements are to tell.
enum class Unknown : std::uint8_t {
    pK,                ///< of one step of a system, at zero ionic strength
    titrant_strength,  ///< as a multiple of what is stated
    amount,            ///< of one reagent of the mixture, as a multiple of what is stated
    carbonate,         ///< moles of carbonate in the titrant per mole of it, its alkali having taken up CO2
    offset,            ///< of the electrode at pH 7: in pH, or in mV for readings in mV
    slope              ///< of the electrode, as a multiple of the ideal one
};

struct FreeParameter {
    Unknown unknown = Unknown::pK;
    std::uint16_t system = 0;   ///< of a pK: index into Table::systems
    std::size_t step = 0;       ///< of a pK: 0 = first proton to leave
    std::uint16_t reagent = 0;  ///< of an amount: index into Table::reagents
    friend bool operator==(const FreeParameter&, const FreeParameter&) = default;
};

enum class ReadingKind : std::uint8_t {
    pH,
    millivolt,
    degree  ///< share of the step that has let go of its proton, 0 to 1; needs a free pK, which says of which step
};

/// One reading and what was in the vessel.
struct Point {
    Preparation mixture;     ///< before titrant
    Volume titrant;          ///< added; zero without one
    double reading = 0;      ///< pH, mV or degree of dissociation
    double uncertainty = 0;  ///< standard uncertainty of the reading, above zero
};

struct FitProblem {
    std::vector<Point> points;
    ReadingKind reading = ReadingKind::pH;
    std::optional<Preparation> titrant;  ///< one litre of it
    std::optional<Volume> filled_to;     ///< every point was filled to this; none: volumes add up
    std::vector<FreeParameter> free;
    Temperature at;
};

struct FittedParameter {
    FreeParameter parameter;
    double start = 0;  ///< what table and statement say
    double value = 0;
    double standard_error = 0;
    double lower_95 = 0;
    double upper_95 = 0;
    double pK_25C = 0;  ///< of a pK: what the table would say at 25 °C, moved by the same
    /// What the value multiplies: mol/L of the titrant, mol of a reagent in the vessel. None where points differ, or
    /// the value is no multiple.
    std::optional<double> stated{};
};

struct FitResidual {
    Volume titrant;
    double reading = 0;
    double fitted = 0;
    double weighted = 0;  ///< (reading - fitted) / uncertainty
};

struct Fit {
    FitProblem problem;
    std::vector<FittedParameter> parameters;  ///< in the order of FitProblem::free
    std::vector<std::vector<double>> correlation;
    std::vector<FitResidual> residuals;
    double chi_square = 0;
    std::size_t degrees_of_freedom = 0;
    /// True: standard errors carry the scatter seen, sqrt(chi² / degrees of freedom), and intervals Student's t. False,
    /// when nothing is left over to judge scatter by: they carry the stated uncertainties, and intervals the normal
    /// law.
    bool scaled_by_scatter = false;
    double t_quantile = 0;  ///< two-sided, 95 %
    double highest_ionic_strength_mol_per_kg = 0;
    double model_uncertainty = 0;  ///< of a predicted pH, from the activity model, at that ionic strength
    int iterations = 0;
    std::string_view activity_model;
    std::vector<Warning> warnings;
};

/// Weighted non-linear least squares by Levenberg's and Marquardt's method on the equilibrium solver.
/// Levenberg K, Quart. Appl. Math. 2, 164 (1944); Marquardt DW, J. Soc. Ind. Appl. Math. 11, 431 (1963). Derivatives
/// are central differences on the converged solver (pH to 1e-12, so the derivatives are good to about 1e-8). Errors:
/// `too_few_readings`, `not_in_the_mixture`, `free_twice`, `bad_amount` (input); `undetermined`, `no_fit` (no_recipe)
/// when the readings do not settle what was asked.
Fit fit_measurements(const Table& table, const FitProblem& problem, const ActivityModel& model);

/// `pK1 of acetate`, `amount of acetic acid`, `titrant strength`, `carbonate in the titrant`, `electrode offset` ...
std::string parameter_name(const FreeParameter& parameter, const Table& table);

}  // namespace carboy
