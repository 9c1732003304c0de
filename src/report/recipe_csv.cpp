#include "report/recipe_csv.h"

#include <array>

#include <fmt/format.h>

#include "report/json.h"

namespace carboy {

namespace {

/// Quoted when it must be.
std::string cell(std::string_view text) {
    if (text.find_first_of(",\"\r\n") == std::string_view::npos) {
        return std::string(text);
    }
    std::string quoted = "\"";
    for (const char c : text) {
        quoted += c == '"' ? "\"\"" : std::string(1, c);
    }
    return quoted + '"';
}

/// A value of the JSON record as a cell: text unquoted, null and missing as nothing.
std::string cell(const nlohmann::ordered_json& record, const char* key) {
    const auto found = record.find(key);
    if (found == record.end() || found->is_null()) {
        return {};
    }
    return cell(found->is_string() ? found->get<std::string>() : found->dump());
}

constexpr std::array columns{"reagent",
                             "formula",
                             "cas",
                             "molar_mass_g_per_mol",
                             "assay",
                             "mass_g",
                             "concentration_mol_per_L",
                             "volume_mL",
                             "fill_to_mL",
                             "role",
                             "shelf_id"};

/// What is done with a row, and where the record lists such rows.
constexpr std::array actions{"make_first", "weigh", "measure"};

void add_row(std::string& text, const std::string& recipe, std::string_view action,
             const nlohmann::ordered_json& item) {
    text += fmt::format("{},{}", recipe, action);
    for (const char* column : columns) {
        text += ',' + cell(item, column);
    }
    text += '\n';
}

}  // namespace

std::string recipe_csv(const Plan& plan, const Table& table) {
    const nlohmann::ordered_json record = recipe_json(plan, table);
    std::string text = "id,recipe_id,label,action";
    for (const char* column : columns) {
        text += ',';
        text += column;
    }
    text += '\n';
    const std::string recipe =
        fmt::format("{},{},{}", cell(record, "id"), cell(record, "recipe_id"), cell(record, "label"));
    for (const char* action : actions) {
        if (record.contains(action)) {
            for (const auto& item : record.at(action)) {
                add_row(text, recipe, action, item);
            }
        }
    }
    add_row(text, recipe, "fill", {{"reagent", "purified water"}, {"fill_to_mL", record.at("fill_to_mL")}});
    return text;
}

}  // namespace carboy
