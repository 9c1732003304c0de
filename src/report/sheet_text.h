#pragma once

#include <string>

#include "report/sheet.h"

namespace carboy {

/// The sheet as plain text, 80 columns, with blanks to fill in by pen: for a line printer or a terminal.
std::string sheet_text(const Sheet& sheet);

}  // namespace carboy
