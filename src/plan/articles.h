#pragma once

#include <cstdint>
#include <optional>
#include <vector>

#include "carboy/constants.h"
#include "carboy/quantity.h"

namespace carboy {

/// Reagents that are the same chemistry (hydrates, strengths): equal supplies. The planner decides between chemistries
/// first and between the articles on the shelf afterwards.
struct Chemistry {
    std::vector<std::uint16_t> articles;  ///< the usual one first
};

/// Chemistries that bring `system`, with nothing beside it but, possibly, `counter_ion`.
std::vector<Chemistry> forms_of(const Table& table, ComponentId system, std::optional<ComponentId> counter_ion);

/// Chemistry that brings `component` alone: the strong acid or base of a spectator, the free acid or base of a system.
std::optional<Chemistry> alone(const Table& table, ComponentId component);

/// Neutral salt of two spectators, one to one.
std::optional<Chemistry> salt_of(const Table& table, ComponentId cation, ComponentId anion);

/// The article of the same chemistry that a bench most often has.
std::uint16_t usual_article(const Table& table, std::uint16_t reagent);

/// The article whose volume for this amount is the best to measure into `total`: 0.5 to 10 % of it where one can, else
/// the nearest to that. Solids, which have no volume, come last.
std::uint16_t article_to_titrate_with(const Table& table, const Chemistry& chemistry, Amount amount, Volume total);

}  // namespace carboy
