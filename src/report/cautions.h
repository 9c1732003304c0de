#pragma once

#include <cstdint>
#include <vector>

#include "carboy/constants.h"
#include "carboy/plan.h"

namespace carboy {

/// What a sheet must say about hazards: the classified reagents, and the advice attached to reagents and systems in use,
/// each once. The advice that every sheet carries comes last.
struct Cautions {
    std::vector<std::uint16_t> hazardous;  ///< indices into Table::reagents
    std::vector<std::uint16_t> advice;     ///< indices into Table::cautions
};
Cautions cautions_of(const Plan& plan, const Table& table);

}  // namespace carboy
