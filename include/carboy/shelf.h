#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "carboy/constants.h"
#include "carboy/date.h"
#include "carboy/quantity.h"
#include "carboy/request.h"

namespace carboy {

/// A container in the room: an article of the table with its own assay or strength, or a solution that somebody made.
struct Bottle {
    std::string id;             ///< unique on the shelf
    std::uint16_t reagent = 0;  ///< the bottle as an article: index into the reagents of Shelf::table
    /// The article of the table that it is; none for a solution of several reagents.
    std::optional<std::uint16_t> article;
    /// What the solution was made as, when it was given as a label or a mixture of several reagents; amounts per litre.
    std::optional<Request> made_as;
    double doubt = 0;  ///< expanded uncertainty of the pH from which `made_as` was worked out; 0 without one
    std::string lot;
    std::string location;
    std::optional<Date> opened;
    std::optional<Date> expires;
    std::optional<Mass> mass_left;      ///< of a solid; none: not stated
    std::optional<Volume> volume_left;  ///< of a liquid or solution; none: not stated
};

/// What is there to make things from. Each bottle is one more article beside those of the table, so that the planner
/// needs no other words for it.
class Shelf {
public:
    /// Bottles refer to the reagents of `table`, which begin with those of the constants table.
    Shelf(Table table, std::vector<Bottle> bottles, bool complete)
        : table_(std::move(table)), bottles_(std::move(bottles)), complete_(complete) {}

    const Table& table() const { return table_; }
    const std::vector<Bottle>& bottles() const { return bottles_; }
    /// True: nothing else may be used, as with a list of all that the room has. False: the bottles are merely
    /// preferred.
    bool complete() const { return complete_; }
    /// The bottle that this article is; nullptr for one of the constants table.
    const Bottle* bottle(std::uint16_t reagent) const {
        const std::size_t first = table_.reagents.size() - bottles_.size();
        return reagent < first ? nullptr : &bottles_[reagent - first];
    }
    /// Day by which expiry is judged; none: it is not judged.
    std::optional<Date> today;
    /// Hash of the file, so that a recipe's id tells which shelf it was made from.
    std::string sha256;

    bool expired(const Bottle& bottle) const { return today && bottle.expires && *bottle.expires < *today; }
    /// How much of its article a bottle still holds; none: not stated.
    std::optional<Amount> left(const Bottle& bottle) const;

private:
    Table table_;
    std::vector<Bottle> bottles_;
    bool complete_;
};

}  // namespace carboy
