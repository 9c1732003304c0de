#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "carboy/activity.h"
#include "carboy/constants_file.h"
#include "carboy/shelf.h"

namespace carboy {

/// A shelf as read from its file, with every fault of it.
struct ShelfReading {
    Shelf shelf;  ///< meaningful only when there are no faults
    std::vector<ConstantsFault> faults;
};

/// Reads a list of what is there (data/schema/shelf.schema.json). Solutions that are given by a label are planned with
/// the table's articles to know what is in them. Never throws for a faulty document.
ShelfReading read_shelf(const Table& table, std::string_view json_text, const ActivityModel& model,
                        std::string_view where = "shelf");

/// Adds stocks that stand on no list, each as a label or as a mixture of concentrations (`0.2 M NaH2PO4`), as bottles
/// to prefer. `shelf` may be null: then everything of the table may be used besides. Throws Error (input).
Shelf with_stocks(const Table& table, const Shelf* shelf, const std::vector<std::string>& stocks,
                  const ActivityModel& model);

}  // namespace carboy
