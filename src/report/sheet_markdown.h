#pragma once

#include <string>

#include "report/sheet.h"

namespace carboy {

/// The sheet as Markdown with pipe tables: readable as it is, rendered by wikis and electronic notebooks.
std::string sheet_markdown(const Sheet& sheet);

}  // namespace carboy
