#pragma once

#include <optional>
#include <string>
#include <vector>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/preparation.h"
#include "carboy/warning.h"

#include "cli/options.h"

namespace carboy::cli {

/// A solution named on the command line: a mixture line as made, or a label, which is planned first.
struct Subject {
    Preparation preparation;
    Temperature temperature;      ///< --at, else the label's own, else 25 °C
    std::vector<bool> of_buffer;  ///< of each portion: belongs to the buffer, not to what is added to it
};

/// A line with a pH in it is a label. `volume`: to make of a label; a mixture says its own.
Subject read_subject(const std::string& line, const Table& table, const SharedOptions& options,
                     std::optional<Volume> volume);

}  // namespace carboy::cli
