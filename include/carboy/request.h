#pragma once

#include <optional>
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
    /// The reagent that the label names, where it names a stocked article: `sodium acetate`, `Na2HPO4`, `HEPES sodium
    /// salt`, not `HEPES` or `Tris-HCl`. Index into Table::reagents.
    std::optional<std::uint16_t> named_form = std::nullopt;
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
    salts       ///< two weighed forms of a buffer, no titrant
};
/// `any`, `titrated`, `salts`.
std::string_view route_word(Route route);

/// What is wanted, whoever asked for it: a label line, a JSON request or a program.
struct Request {
    std::string id;     ///< the caller's own, echoed
    std::string label;  ///< as typed; empty when the request was spelt out
    std::vector<BufferItem> buffers;
    std::vector<AdditiveItem> additives;
    std::optional<PH> ph;
    Temperature use_at;  ///< temperature of the pH target
    std::optional<IonicStrengthTarget> ionic_strength;
    Volume volume = Volume::litres(1);
    Temperature prepare_at;  ///< where volumes are filled and the meter is read
    Route route = Route::automatic;
};

}  // namespace carboy
