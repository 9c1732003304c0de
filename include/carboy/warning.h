#pragma once

#include <string>

namespace carboy {

/// Something the user should know about a result that was computed all the same.
struct Warning {
    std::string code;     ///< stable snake_case identifier
    std::string message;  ///< what was seen, what it may do, what to try
    int weight = 50;      ///< 0 to 100: the heaviest is said first
};

}  // namespace carboy
