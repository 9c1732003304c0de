#pragma once

#include <cstdint>
#include <optional>
#include <string_view>
#include <vector>

#include "carboy/concentration.h"
#include "carboy/constants.h"
#include "carboy/notation.h"

namespace carboy {

/// The reagent with this name, formula or CAS number; nullptr when there is none.
const Reagent* reagent_named(const Table& table, std::string_view name);

/// The reagent by which a system is added: its usual form, or one that brings it with the counter-ion named and nothing
/// else. nullptr when the table has none.
const Reagent* reagent_adding(const Table& table, const NamedBuffer& named);

/// The usual article of each salt of a system with the counter-ion named: `Tris-HCl` as something that was weighed has
/// one, `potassium phosphate` three. Empty when no counter-ion is named.
std::vector<const Reagent*> salts_named(const Table& table, const NamedBuffer& named);

/// The article for an additive. An amount in moles under a name that says nothing of water or strength means any
/// article of that substance: then its usual hydrate or ready-made solution is taken, else the reagent as named.
std::uint16_t article_meant(const Table& table, const Reagent& reagent, std::string_view name, ConcentrationUnit unit);

/// What a reagent stands for when it is asked to hold a pH: the system it brings, with the ion beside it.
struct BroughtBuffer {
    NamedBuffer buffer;
    double count = 1;  ///< moles of the system per mole of the reagent; 4 for borax
};
/// Of two systems, as in NH4HCO3, one of the reagent's names must tell which is the buffer. Empty for what brings no
/// system, more than that, or several spectators.
std::optional<BroughtBuffer> buffer_brought_by(const Table& table, const Reagent& reagent);

/// The article that a buffer's name is the name of, where it says more than which system is meant: a salt (`trisodium
/// citrate`, `Na2HPO4`), or one that is not the usual of several (`L-malic acid`). Empty for the bare system (`HEPES`,
/// `citric acid`) and for a system with its counter-ion (`Tris-HCl`), which leave the choice open.
std::optional<std::uint16_t> form_named(const Table& table, std::string_view name, ComponentId system);

/// True when one of the system's steps lies within 3 of the pH at 25 °C: past that less than a hundredth of the
/// greatest buffer value is left, which no one would call holding a pH.
bool can_hold(const Table& table, ComponentId system, PH ph);

}  // namespace carboy
