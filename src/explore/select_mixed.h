#pragma once

#include <vector>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/selection.h"

namespace carboy {

/// One, two or three systems at equal shares that together give the best buffer value at the weakest point of the range
/// of pH. Systems that a fact excludes are added to `excluded`; those with a drawback are left out unless wanted.
std::vector<MixedBuffer> mixed_buffers(const Table& table, const Job& job, const ActivityModel& model,
                                       std::vector<Excluded>& excluded);

}  // namespace carboy
