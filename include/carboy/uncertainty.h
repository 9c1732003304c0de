#pragma once

#include "carboy/activity.h"
#include "carboy/equilibrium.h"

namespace carboy {

/// How far a predicted pH may be trusted: standard uncertainties, combined as independent.
struct PHUncertainty {
    double constants = 0;    ///< from the pK values, their enthalpies and pKw
    double activity = 0;     ///< from the activity model at this ionic strength
    double expanded_k2 = 0;  ///< twice the root of the sum of squares
};

/// Propagates the table's standard uncertainties through the solver by finite differences. `solver` must be solved;
/// it is left in the same state. Amounts and the meter are not part of this figure.
PHUncertainty ph_uncertainty(EquilibriumSolver& solver, const Table& table, const ActivityModel& model);

}  // namespace carboy
