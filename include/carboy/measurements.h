#pragma once

#include <string_view>
#include <vector>

#include "carboy/fit.h"

namespace carboy {

// Reading what was measured. Errors are of kind `input` and name the line of the file or the option.

/// `pK2 phosphate`, `pK acetate`, `amount acetic acid`, `titrant-strength`, `carbonate`, `offset`, `slope`.
FreeParameter read_free_parameter(std::string_view text, const Table& table);

/// What a file of measurements holds, before the mixture that was titrated is known.
struct Measurements {
    ReadingKind reading = ReadingKind::pH;
    std::vector<Point> points;  ///< `mixture` is empty when the file has no such column
    bool has_mixtures = false;
};

/// Comma-separated, a header with units first, `#` for comments. Columns: `volume_mL` (titrant added; also `volume_L`,
/// `volume_uL`) or `mixture` (a mixture line, quoted); `pH`, `mV` or `degree`; `u` (standard uncertainty of the
/// reading, in its unit), which may be left out: then `uncertainty` is taken. Error `bad_measurements` with the line.
Measurements read_measurements(std::string_view csv, const Table& table, Temperature filled_at, double uncertainty,
                               std::string_view where);

}  // namespace carboy
