#pragma once

#include <fstream>
#include <sstream>
#include <string>

namespace carboy::test {

/// A file of the project, whole; for tests that hold the documents against what the program does.
inline std::string project_file(const std::string& name) {
    std::ifstream file(std::string(CARBOY_SOURCE_DIR) + "/" + name);
    std::ostringstream content;
    content << file.rdbuf();
    return content.str();
}

}  // namespace carboy::test
