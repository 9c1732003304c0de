#pragma once

#include <fstream>
#include <sstream>
#include <string>

namespace carboy::test {

/// A file, whole; empty when it is not there.
inline std::string file_content(const std::string& path) {
    std::ifstream file(path, std::ios::binary);
    std::ostringstream content;
    content << file.rdbuf();
    return content.str();
}

/// A file of the project, whole; for tests that hold the documents against what the program does.
inline std::string project_file(const std::string& name) {
    return file_content(std::string(CARBOY_SOURCE_DIR) + "/" + name);
}

}  // namespace carboy::test
