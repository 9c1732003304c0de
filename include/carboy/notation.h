#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/concentration.h"
#include "carboy/constants.h"
#include "carboy/date.h"
#include "carboy/preparation.h"
#include "carboy/quantity.h"
#include "carboy/request.h"

namespace carboy {

// Reading what people type. Every function throws Error (kind `input`) whose excerpt points at the offending bytes,
// whose message says what was expected and whose help offers the nearest spelling. `where` is the caller's name for the
// line, e.g. `label` or `--volume`; the error's place becomes `label, column 7` (columns count characters, from 1).

/// `2 L`, `500mL`, `250 µL`. Strictly positive and finite.
Volume read_volume(std::string_view text, std::string_view where);
/// `4 C`, `25°C`, `37 Cel`, `310.15 K`. Any finite value above absolute zero; ranges belong to the callers.
Temperature read_temperature(std::string_view text, std::string_view where);
/// `10 g`, `250 mg`. Strictly positive and finite.
Mass read_mass(std::string_view text, std::string_view where);
/// `50 mM`, `0.1 mol/kg`, `0.9 % w/v`, `1 N`. Zero or positive and finite.
Concentration read_concentration(std::string_view text, std::string_view where);
/// `2026-12-01`, ISO 8601: a day of the calendar. Error `bad_date`.
Date read_date(std::string_view text, std::string_view where);
/// `7.4`. Finite, -2 to 16.
PH read_ph(std::string_view text, std::string_view where);

/// What a label line says; volume, bench temperature and route come from elsewhere.
struct Label {
    std::vector<BufferItem> buffers;
    std::vector<AdditiveItem> additives;
    std::optional<PH> ph;
    std::optional<Temperature> ph_at;
    std::optional<IonicStrengthTarget> ionic_strength;
    /// How many times the working strength the bottle is, by its formula (`10x PBS`); never below 1, since what is made
    /// weaker than the formula is used as it is.
    double strength = 1;
};
Label read_label(std::string_view line, const Table& table, std::string_view where = "label");

/// What a mixture line says was put together. `filled_at` is where its volumes were measured.
/// Without `to V` every item must be a concentration: then mol/L items refer to one litre, mol/kg items to one kilogram
/// of water.
Preparation read_mixture(std::string_view line, const Table& table, Temperature filled_at,
                         std::string_view where = "mixture");

/// Reads one of the names of a system, with or without its counter-ion: `Tris-HCl`, `sodium phosphate`, `HEPES`.
struct NamedBuffer {
    ComponentId system;
    std::optional<ComponentId> counter_ion;
};
std::optional<NamedBuffer> read_buffer_name(std::string_view text, const Table& table);

/// Up to `at_most` known names nearest to what was typed, nearest first; empty when nothing is near.
std::vector<std::string> nearest_names(std::string_view text, const Table& table, std::size_t at_most = 3);
/// The same for a label, where a misspelt buffer may carry its counter-ion: `Trs-HCl` is near `Tris-HCl`.
std::vector<std::string> nearest_buffer_names(std::string_view text, const Table& table, std::size_t at_most = 3);
/// The same among the names of formulas.
std::vector<std::string> nearest_formulas(std::string_view text, const Table& table, std::size_t at_most = 3);
/// The same over a list of words.
std::vector<std::string> nearest_words(std::string_view text, const std::vector<std::string>& words,
                                       std::size_t at_most = 1);

}  // namespace carboy
