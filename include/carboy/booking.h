#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/date.h"

namespace carboy {

/// One amount that a booking takes from a bottle, as the recipe states it.
struct Taking {
    std::string bottle;
    std::string amount;  ///< `12.11 g` or `94 mL`
    std::string left;    ///< afterwards; empty when the shelf does not say how much there is
};

/// A shelf file with a booking added or undone.
struct Booked {
    std::string shelf_json;  ///< the new content, whole; empty when nothing changes
    std::vector<Taking> takings;
    std::size_t number = 0;  ///< of the booking in the file's journal, from 1
    bool already = false;    ///< these recipes are in the journal: nothing is booked again
};

/// Books what recipes (JSON, one a line, as `recipe --format json` writes them) take off a shelf, all of it or nothing.
/// The journal is part of the shelf file, so that amounts and journal can never disagree. The same set of recipes is
/// booked once, unless `again`. Errors: invalid_json, not_a_recipe, unknown_bottle (input), short_on_shelf (no_recipe).
Booked book(std::string_view shelf_json, std::string_view recipes_json, std::optional<Date> on, bool again);

/// Puts back what the last booking took that is not undone yet. `nothing_to_undo` (no_recipe) when there is none.
Booked undo_booking(std::string_view shelf_json);

}  // namespace carboy
