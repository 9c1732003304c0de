#pragma once

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/constants.h"
#include "carboy/plan.h"

namespace carboy {

/// A caution and what it is about; about nothing in particular when every sheet carries it.
struct Advice {
    std::uint16_t caution = 0;  ///< index into Table::cautions
    std::vector<std::string_view> subjects;
};

/// What a sheet must say about hazards: the classified reagents, and the advice attached to reagents and systems in
/// use, each once. The advice that every sheet carries comes last.
struct Cautions {
    std::vector<std::uint16_t> hazardous;  ///< indices into Table::reagents
    std::vector<Advice> advice;
};
Cautions cautions_of(const Plan& plan, const Table& table);

/// `Tris, glycine: ...`
std::string advice_text(const Advice& advice, const Table& table);

}  // namespace carboy
