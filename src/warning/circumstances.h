#pragma once

#include <array>
#include <cstdint>
#include <span>
#include <string>

#include "carboy/constants.h"
#include "carboy/prediction.h"

namespace carboy {

/// A reagent that is weighed, as the rules look at it.
struct ReagentInUse {
    std::uint16_t reagent = 0;
    double g_per_L = 0;          ///< in the finished solution
    double share_dissolved = 0;  ///< of its solubility, when all but the titrant is in; 0 where there is no titrant
    double share_filled = 0;     ///< of its solubility, in the finished solution, if it stays in its form; else 0
};

/// What only a recipe has.
struct RecipeFacts {
    std::span<const ReagentInUse> reagents;
    std::array<double, 4> ph{};          ///< in the order of Moment; NaN where there is no such moment
    double share_of_best_buffering = 0;  ///< NaN when no buffer was asked to hold a pH
    double temperature_rise_K = 0;
    double titrant_share = 0;
};

/// All that an observation's conditions look at.
struct Circumstances {
    const Table* table = nullptr;
    const Prediction* prediction = nullptr;
    const RecipeFacts* recipe = nullptr;  ///< none for a mixture alone
    std::uint64_t marks = 0;              ///< of the mixture's components
    double buffer_value = 0;              ///< without water's own, mol/kg
};

/// What made an observation apply; what its text is filled in with.
struct Match {
    double ph = 0;
    const ReagentInUse* reagent = nullptr;
};

Circumstances circumstances_of(const Table& table, const Prediction& prediction, const RecipeFacts* recipe);

/// True when every condition holds. Allocates nothing.
bool applies(const Observation& observation, const Circumstances& seen, Match& match);

/// The text with its places filled in.
std::string filled_in(const Observation& observation, const Circumstances& seen, const Match& match);

}  // namespace carboy
