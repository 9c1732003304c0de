#pragma once

#include <cstdint>
#include <vector>

#include "carboy/plan.h"
#include "carboy/request.h"

#include "plan/stockroom.h"

namespace carboy {

/// One choice of columns for the linear problem.
struct Candidate {
    std::vector<const Chemistry*> forms;  ///< one per buffer of the request, in order
    const Chemistry* extra = nullptr;     ///< the titrant, or the second form of a buffer
    std::vector<const Chemistry*> salts;  ///< one for each ion total and for the ionic strength, when asked for
    bool titrated = true;                 ///< `extra` is a strong acid or base
    std::size_t set = 0;                  ///< counter-ion set it belongs to; earlier ones are more usual
    int strangers = 0;                    ///< buffers whose label names an article that is not among the forms

    /// Articles that stand for the columns: forms, extra, salts. Which article of a chemistry makes no difference.
    std::vector<std::uint16_t> columns() const;
};

/// Counter-ions, one per buffer, that a recipe may use together, and the chemistries they allow.
struct CounterIonSet {
    std::vector<CounterIonChoice> choices;      ///< one per buffer of the request, in order
    std::vector<std::vector<Chemistry>> forms;  ///< per buffer
    std::vector<Chemistry> titrants;
    std::vector<Chemistry> salts;  ///< as Candidate::salts
    bool lacks_salt = false;       ///< a total or ionic strength is asked for and nothing brings it
};

/// The sets in order of use: as the label names them, else the buffers' usual ions, else those of the other sign.
std::vector<CounterIonSet> counter_ion_sets(const Stockroom& stockroom, const Request& request);

/// Every basic solution worth trying: one form for each buffer, one more column, and the salts.
std::vector<Candidate> candidates(const std::vector<CounterIonSet>& sets, const Request& request, const Table& table);

}  // namespace carboy
