#pragma once

#include <string_view>

#include <nlohmann/json.hpp>

#include "carboy/constants.h"

#include "report/constants_text.h"

namespace carboy {

nlohmann::ordered_json system_json(const System& system, const Table& table);
nlohmann::ordered_json spectator_json(const Spectator& spectator, const Table& table);
nlohmann::ordered_json reagent_json(const Reagent& reagent, const Table& table);
nlohmann::ordered_json formula_json(const NamedFormula& formula, const Table& table);
/// `{"kind":"constants_list", ...}` with the entries whole.
nlohmann::ordered_json constants_list_json(const Table& table, Listing listing);
/// `{"kind":"constants_entry", "name":..., ...}`; null when the table knows nothing under the name.
nlohmann::ordered_json constants_entry_json(const Table& table, std::string_view name);
nlohmann::ordered_json sources_json(const Table& table);

}  // namespace carboy
