#pragma once

#include <deque>
#include <memory>
#include <string>
#include <vector>

#include "carboy/activity.h"
#include "carboy/shelf.h"

namespace carboy {

/// Lays bottles over a table: each becomes one more article. Text and arrays of the new entries live as long as the
/// table that is made.
class ShelfBuilder {
public:
    ShelfBuilder(const Table& base, const ActivityModel& model);
    /// Goes on from a shelf that is there.
    ShelfBuilder(const Shelf& shelf, const Table& base, const ActivityModel& model);

    /// An article of the table as bottled. Assay as mass fraction, water content counted; none: the table's.
    Reagent solid(std::uint16_t article, std::optional<double> assay);
    /// A solution of one article at its own strength.
    Reagent solution(std::uint16_t article, Molarity strength, std::string_view strength_as_written);
    /// What somebody made: a label with a pH, which is planned, or a mixture of concentrations. Throws Error (input,
    /// no_recipe) as those readers and the planner do.
    Reagent made(std::string_view line, std::string_view where, Bottle& bottle);

    void add(const Reagent& reagent, Bottle bottle);
    Shelf finish(bool complete);

private:
    struct Text;
    std::string_view keep(std::string text);
    std::span<const Supply> keep(std::vector<Supply> supplies);

    Table base_;
    const ActivityModel& model_;
    std::shared_ptr<Text> text_;
    std::vector<Reagent> reagents_;
    std::vector<Bottle> bottles_;
};

}  // namespace carboy
