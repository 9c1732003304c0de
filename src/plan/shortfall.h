#pragma once

#include <optional>
#include <string>
#include <vector>

#include "carboy/error.h"
#include "carboy/plan.h"

#include "plan/candidates.h"

namespace carboy {

/// Why there is no recipe, in the words of the bench: on which side the pH lies, and what would reach it.
class Shortfall {
public:
    Shortfall(const Stockroom& stockroom, const Request& request, const Preparation& fixed,
              const std::vector<CounterIonSet>& sets, const ActivityModel& model)
        : stockroom_(stockroom),
          table_(stockroom.table()),
          request_(request),
          fixed_(fixed),
          sets_(sets),
          model_(model) {}

    /// `nothing_to_try`: there are not even reagents; else no basic solution is without a negative amount.
    Error explain(bool nothing_to_try) const;

private:
    std::optional<Error> short_on_shelf() const;
    std::string counter_ions_that_would_do(const Shelf& shelf) const;
    Error no_dilution() const;
    Error no_reagents() const;
    std::optional<Error> ion_total_too_low() const;
    std::optional<Error> ionic_strength_too_low() const;
    /// Weakest or strongest form of each buffer with the label's additives and nothing else: what the meter would show.
    struct Limit {
        double ph = 0;
        std::string forms;
    };
    std::optional<Limit> limit(const CounterIonSet& set, bool acid) const;
    std::string buffer_names() const;

    const Stockroom& stockroom_;
    const Table& table_;
    const Request& request_;
    const Preparation& fixed_;
    const std::vector<CounterIonSet>& sets_;
    const ActivityModel& model_;
};

}  // namespace carboy
