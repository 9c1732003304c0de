#pragma once

#include <string>

#include "carboy/error.h"

namespace carboy {

/// What, where and what to do, for a person at a terminal; the fault itself under a caret.
std::string error_text(const Error& error, bool colour);

/// The exit status that belongs to an error (contract: 1 no recipe, 2 input, 3 file, 4 data, 70 defect).
int exit_status(ErrorKind kind);

}  // namespace carboy
