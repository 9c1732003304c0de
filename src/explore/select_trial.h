#pragma once

#include <cstdint>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/selection.h"
#include "carboy/shelf.h"

namespace carboy {

/// The load that standings are compared under.
struct Load {
    Molarity acid;
    Molarity base;
};

/// Temperatures between which a standing's drift counts.
struct Span {
    Temperature coldest;
    Temperature warmest;
};

/// Makes up one system for the job, from the shelf when there is one, and moves it about. Error (no_recipe) when there
/// is no such recipe. Words, doubts and drawbacks but those of the recipe are the caller's.
Standing try_system(const Table& table, const Job& job, std::uint16_t system, const Load& load, const Span& span,
                    const ActivityModel& model, const Shelf* shelf);

/// Share of the best buffer value that its concentration allows (0.576 of it) which the system itself gives; water's
/// own part is left out.
double share_of_best(const Table& table, const Job& job, std::uint16_t system, const ActivityModel& model);

}  // namespace carboy
