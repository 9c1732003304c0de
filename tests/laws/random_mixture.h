#pragma once

#include <cmath>
#include <random>

#include "carboy/constants.h"
#include "carboy/mixture.h"

namespace carboy::test {

/// Amount from 1e-9 to `most` mol/kg, evenly spread over the decades.
inline double random_molality(std::mt19937_64& random, double most) {
    std::uniform_real_distribution<double> exponent(-9.0, std::log10(most));
    return std::pow(10.0, exponent(random));
}

/// Up to three systems and four strong ions of the bundled table.
inline Mixture random_mixture(std::mt19937_64& random, const Table& table, double most) {
    Mixture mixture;
    const std::size_t systems = std::uniform_int_distribution<std::size_t>(0, 3)(random);
    const std::size_t spectators = std::uniform_int_distribution<std::size_t>(0, 4)(random);
    const auto pick = [&](std::size_t count) {
        return static_cast<std::uint16_t>(std::uniform_int_distribution<std::size_t>(0, count - 1)(random));
    };
    for (std::size_t i = 0; i < systems; ++i) {
        mixture.add({ComponentKind::system, pick(table.systems.size())},
                    Molality::mol_per_kg(random_molality(random, most)));
    }
    for (std::size_t i = 0; i < spectators; ++i) {
        mixture.add({ComponentKind::spectator, pick(table.spectators.size())},
                    Molality::mol_per_kg(random_molality(random, most)));
    }
    return mixture;
}

inline Temperature random_temperature(std::mt19937_64& random) {
    return Temperature::celsius(std::uniform_real_distribution<double>(0.0, 100.0)(random));
}

}  // namespace carboy::test
