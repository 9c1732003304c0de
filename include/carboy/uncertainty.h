#pragma once

#include "carboy/activity.h"
#include "carboy/equilibrium.h"

namespace carboy {

/// How far a predicted pH may be trusted: standard uncertainties, combined as independent.
struct PHUncertainty {
    double constants = 0;   ///< from the pK values, their enthalpies and pKw
    double activity = 0;    ///< from the activity model at this ionic strength
    double unmodelled = 0;  ///< from what the model is known to leave out here (rules of the table)
    /// Two careful laboratories seldom agree closer than 0.01: certified buffer standards are themselves given with an
    /// expanded uncertainty of 0.01 (k = 2) on the scale of pH (Buck et al., Pure Appl. Chem. 74, 2169 (2002)).
    double reproducibility = 0.005;
    double expanded_k2 = 0;  ///< twice the root of the sum of squares

    /// Sets `expanded_k2` from the others.
    void combine();
};

/// Propagates the table's standard uncertainties through the solver by finite differences. `solver` must be solved;
/// it is left in the same state. Amounts and the meter are not part of this figure.
PHUncertainty ph_uncertainty(EquilibriumSolver& solver, const Table& table, const ActivityModel& model);

}  // namespace carboy
