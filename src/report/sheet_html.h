#pragma once

#include <string>

#include "report/sheet.h"

namespace carboy {

/// The sheet as one self-contained HTML page: nothing to fetch, no script. Prints on one A4 or Letter page (a very long
/// one on two), reads on a phone, follows the reader's light or dark, and can be filled in by pen or by keyboard.
std::string sheet_html(const Sheet& sheet);

}  // namespace carboy
