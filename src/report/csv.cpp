#include "report/csv.h"

#include <nlohmann/json.hpp>

namespace carboy {

void Csv::row(const std::vector<std::string>& cells) {
    for (std::size_t i = 0; i < cells.size(); ++i) {
        text_ += i == 0 ? "" : ",";
        if (cells[i].find_first_of(",\"\r\n") == std::string::npos) {
            text_ += cells[i];
            continue;
        }
        text_ += '"';
        for (const char c : cells[i]) {
            text_ += c == '"' ? "\"\"" : std::string(1, c);
        }
        text_ += '"';
    }
    text_ += "\r\n";
}

std::string exact_number(double value) {
    return nlohmann::json(value).dump();
}

}  // namespace carboy
