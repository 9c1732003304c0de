#pragma once

#include <cstdint>

#include "carboy/constants.h"

namespace carboy {

/// True for two articles of the same chemistry: hydrates, strengths, bottles.
bool same_supplies(const Reagent& a, const Reagent& b);

/// True for what is measured by volume.
bool is_solution(const Reagent& reagent);

/// The article of the same chemistry that a bench most often has.
std::uint16_t usual_article(const Table& table, std::uint16_t reagent);

/// Mass that holds so much of a solid article, its assay counted.
Mass mass_of(const Reagent& article, Amount amount);

/// Moles of a component in one mole of the reagent.
double count_of(const Reagent& reagent, ComponentId component);

}  // namespace carboy
