#pragma once

#include <optional>
#include <span>
#include <string>
#include <vector>

#include "carboy/concentration.h"
#include "carboy/constants.h"
#include "carboy/quantity.h"

namespace carboy {

/// A system that holds the pH, with its total concentration in the finished volume.
struct BufferItem {
    ComponentId system;
    Concentration concentration;             ///< mol/L or mol/kg
    std::optional<ComponentId> counter_ion;  ///< as the label names it; none: the planner takes the usual one
    /// Article that the label names instead of the system (`Na2HPO4`, `trisodium citrate`): the plan starts from it
    /// where it can. Index into Table::reagents.
    std::optional<std::uint16_t> named_form{};
};

/// A reagent that is simply added: salt, chelator, preservative.
struct AdditiveItem {
    std::uint16_t reagent = 0;  ///< index into Table::reagents
    Concentration concentration;
};

/// Ionic strength asked for, per litre of solution or per kilogram of water.
struct IonicStrengthTarget {
    double value_mol = 0;
    bool per_litre = true;
};

enum class Route : std::uint8_t {
    automatic,  ///< the best that is possible
    titrated,   ///< one weighed form of each buffer, brought to pH with a strong acid or base
    salts,      ///< two weighed forms of a buffer, no titrant
    stocks,     ///< the same forms as stock solutions, measured by volume
    dilution    ///< one concentrated stock of the buffer from the shelf, diluted and trimmed
};
/// `any`, `titrated`, `salts`, `stocks`, `dilution`.
std::string_view route_word(Route route);
/// All the words, `any` first.
std::span<const std::string_view> route_words();
/// The route of that word; none when there is no such word.
std::optional<Route> route_of(std::string_view word);

/// What a recipe must and must not contain, besides what the label says.
struct Constraints {
    std::vector<ComponentId> without;  ///< ions that nothing may bring
    std::vector<std::uint16_t> use;    ///< articles that must be in it
    std::vector<std::uint16_t> avoid;  ///< articles that must not
    /// An ion's total in the finished volume, whatever brings it; mol/L or mol/kg.
    struct Total {
        ComponentId ion;
        Concentration concentration;
    };
    std::vector<Total> totals;
    std::optional<std::size_t> most_weighings;

    bool none() const { return without.empty() && use.empty() && avoid.empty() && totals.empty() && !most_weighings; }
};

/// The balance at hand.
struct Balance {
    Mass readability;
    /// Less than this is not weighed but taken from a stock. Common practice, no source: 100 times the readability.
    Mass minimum;
};

/// What is wanted, whoever asked for it: a label line, a JSON request or a program.
struct Request {
    std::string id;     ///< the caller's own, echoed
    std::string label;  ///< as typed; empty when the request was spelt out
    std::vector<BufferItem> buffers;
    std::vector<AdditiveItem> additives;
    std::optional<PH> ph;
    Temperature use_at;  ///< temperature of the pH target
    std::optional<IonicStrengthTarget> ionic_strength;
    /// How many times the working strength the bottle is (`10x`). Concentrations are those in the bottle; the pH, the
    /// temperature of use and the ionic strength are those after dilution.
    double strength = 1;
    Volume volume = Volume::litres(1);
    Temperature prepare_at;  ///< where volumes are filled and the meter is read
    Route route = Route::automatic;
    Constraints constraints;
    std::optional<Balance> balance;  ///< none: masses are exact
    /// Vessel that volumes are measured with, index into Table::vessels; none: one that fits, when there is a balance.
    std::optional<std::uint16_t> measure_with;
};

}  // namespace carboy
