#pragma once

#include <fstream>
#include <map>
#include <stdexcept>
#include <string>
#include <vector>

// Reads the reference tables beside the tests: comma separated, quoted where needed, `#` lines are comments.

namespace carboy::test {

using Row = std::map<std::string, std::string>;

inline std::vector<std::string> split_csv_line(const std::string& line) {
    std::vector<std::string> cells(1);
    bool quoted = false;
    for (const char c : line) {
        if (c == '"') {
            quoted = !quoted;
        } else if (c == ',' && !quoted) {
            cells.emplace_back();
        } else {
            cells.back() += c;
        }
    }
    return cells;
}

inline std::vector<Row> read_reference(const std::string& name) {
    std::ifstream file(std::string(CARBOY_SOURCE_DIR) + "/tests/reference/" + name);
    if (!file) {
        throw std::runtime_error("reference table missing: " + name);
    }
    std::vector<Row> rows;
    std::vector<std::string> header;
    for (std::string line; std::getline(file, line);) {
        if (line.empty() || line.front() == '#') {
            continue;
        }
        const auto cells = split_csv_line(line);
        if (header.empty()) {
            header = cells;
            continue;
        }
        Row row;
        for (std::size_t i = 0; i < header.size(); ++i) {
            row[header[i]] = i < cells.size() ? cells[i] : "";
        }
        rows.push_back(row);
    }
    return rows;
}

}  // namespace carboy::test
