#pragma once

#include <cstdint>
#include <vector>

#include "carboy/plan.h"
#include "carboy/request.h"

#include "plan/articles.h"

namespace carboy {

/// One choice of columns for the linear problem.
struct Candidate {
    std::vector<const Chemistry*> forms;  ///< one per buffer of the request, in order
    const Chemistry* extra = nullptr;     ///< the titrant, or the second form of a buffer
    const Chemistry* salt = nullptr;      ///< fills up the ionic strength, when asked for
    Route route = Route::titrated;
    std::size_t set = 0;  ///< counter-ion set it belongs to; earlier ones are more usual
};

/// Counter-ions, one per buffer, that a recipe may use together, and the chemistries they allow.
struct CounterIonSet {
    std::vector<CounterIonChoice> choices;      ///< one per buffer of the request, in order
    std::vector<std::vector<Chemistry>> forms;  ///< per buffer
    std::vector<Chemistry> titrants;
    std::vector<Chemistry> salt;  ///< none or one
};

/// The sets in order of use: as the label names them, else the buffers' usual ions, else those of the other sign.
std::vector<CounterIonSet> counter_ion_sets(const Table& table, const Request& request);

/// Every basic solution worth trying: one form for each buffer and one more column, by the routes allowed.
std::vector<Candidate> candidates(const std::vector<CounterIonSet>& sets, const Request& request);

}  // namespace carboy
