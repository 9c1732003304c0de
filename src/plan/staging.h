#pragma once

#include "carboy/plan.h"

namespace carboy {

/// Works out the volumes at which the meter is read and what it shows there, at the bench temperature, and the warnings
/// that concern the making-up.
void stage(Plan& plan, const Table& table, const ActivityModel& model);

}  // namespace carboy
