#pragma once

#include <cstdint>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/constants.h"
#include "carboy/plan.h"

#include "report/page.h"

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
Cautions cautions_of(std::span<const std::uint16_t> reagents, const Table& table);
/// Of all that a recipe uses.
Cautions cautions_of(const Plan& plan, const Table& table);

/// `Tris, glycine: ...`
std::string advice_text(const Advice& advice, const Table& table);

/// The part of a page that every sheet ends with.
void print_cautions(Page& page, const Cautions& cautions, const Table& table);
/// TAKE NOTE: warnings, and last a word on a temperature that was assumed (empty: none was). Nothing without either.
void print_warnings(Page& page, const std::vector<Warning>& warnings, std::string_view assumed);

}  // namespace carboy
