#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "carboy/constants.h"

namespace carboy {

/// One fault of a constants document.
struct ConstantsFault {
    std::string path;  ///< JSON path, e.g. `/systems/3/steps/1/pK_25C/value`; empty for the document itself
    std::string message;
    std::string help;  ///< may be empty
};

/// One entry that a document adds or replaces.
struct ConstantsChange {
    std::string kind;  ///< `system`, `reagent`, `spectator`, `source`, `element`, `hazard`, `caution`, `trait`
    std::string name;
    bool replaced = false;
};

struct ConstantsOverlay {
    Table table;  ///< meaningful only when there are no faults
    std::vector<ConstantsChange> changes;
    std::vector<ConstantsFault> faults;  ///< every fault, not only the first
};

/// A document and its name for messages.
struct ConstantsDocument {
    std::string name;
    std::string text;
};

/// Lays documents (data/schema/constants.schema.json) over a base table, entry by entry: an entry of the same name and
/// kind is replaced in its place, others are added, so that indices into the base stay valid. Never throws for a faulty
/// document.
ConstantsOverlay lay_over(const Table& base, const std::vector<ConstantsDocument>& documents);
ConstantsOverlay lay_over(const Table& base, std::string_view json_text);

}  // namespace carboy
