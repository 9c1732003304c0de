#pragma once

#include "carboy/fit.h"

namespace carboy {

/// What a user should know of a fit before using it.
void add_warnings(Fit& fit, const Table& table, const ActivityModel& model);

/// How far chi-square is from what the stated uncertainties lead to expect, in standard deviations (Wilson EB, Hilferty
/// MM, Proc. Natl. Acad. Sci. USA 17, 684 (1931)). Needs a degree of freedom.
double chi_square_score(const Fit& fit);

}  // namespace carboy
