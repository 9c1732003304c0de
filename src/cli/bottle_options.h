#pragma once

#include <string>

#include "carboy/constants.h"
#include "carboy/plan.h"

#include "report/bottle_label.h"

namespace CLI {
class App;
}

namespace carboy::cli {

/// The bottle that a recipe is for, as typed.
struct BottleOptions {
    std::string label_file;
    std::string label_size;
    std::string made;
    std::string expires;

    /// Throws Error (input) `bad_date`, or `dates_reversed` when it would expire before it is made.
    BottleDates dates() const;
};

/// --bottle-label, --label-size, --made, --expires.
void add_bottle_options(CLI::App& app, BottleOptions& options);

/// Checks what was typed before anything is computed or written. `on_a_sheet`: the dates have somewhere to stand even
/// without a label. Throws Error (input).
void check_bottle_options(const BottleOptions& options, const Table& table, bool on_a_sheet);

/// Writes the label when one is asked for.
void write_bottle_label(const Plan& plan, const Table& table, const BottleOptions& options);

}  // namespace carboy::cli
