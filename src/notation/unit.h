#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>

#include "carboy/concentration.h"

namespace carboy {

enum class QuantityKind : std::uint8_t { concentration, volume, mass, temperature, strength };
/// `a concentration`, `a volume`, ...: for messages.
std::string_view kind_phrase(QuantityKind kind);

/// A unit of the contract. A number of it is `factor / divisor` times as many mol, g, percent or equivalents (per litre
/// or kilogram), litres, grams or kelvins; both are whole so that `7 mM` is the nearest double to 0.007.
struct Unit {
    std::string_view spelling;
    QuantityKind kind;
    double factor;
    double divisor;
    ConcentrationUnit concentration;
};

/// The unit with exactly this spelling, as the trade writes it or as a UCUM code: case counts (mM, not MM), but `l`
/// serves for litre and both characters that look like a micro sign are one. nullptr when there is none.
const Unit* find_unit(std::string_view token);

/// Bytes at the front of the text that were meant as a unit: up to a space, comma or semicolon; `% w/v` is kept
/// together.
std::size_t unit_length(std::string_view text);

/// What to write in place of a token that is no unit: the nearest unit (of the kind, where one is expected), or an
/// example.
std::string unit_help(std::string_view token, std::optional<QuantityKind> expected, std::string_view example);

}  // namespace carboy
