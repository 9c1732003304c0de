#pragma once

#include <cstdint>

#include "carboy/constants.h"
#include "carboy/quantity.h"

namespace carboy {

/// The ways a bench states how much of something is in a solution.
enum class ConcentrationUnit : std::uint8_t {
    mol_per_L,
    mol_per_kg,   ///< molality, per kilogram of water
    g_per_L,      ///< also mg/mL, and % w/v as 10 g/L per percent
    percent_w_w,  ///< grams per 100 g of solution; stocks only, needs the article's density
    percent_v_v,  ///< mL of the liquid article per 100 mL of solution
    normal        ///< moles of H+ or OH- per litre; strong acids and bases only
};

/// A stated strength: the number as given (in mol, g or percent of the unit) and what it means.
struct Concentration {
    double value = 0;
    ConcentrationUnit unit = ConcentrationUnit::mol_per_L;
};

/// Moles of `reagent` in `volume` of a solution of this strength. mol/kg is not a volume strength and N asks for a
/// strong acid or base, % v/v for a liquid article, % w/w for a density: otherwise Error `unusable_unit` (input).
Amount amount_in(const Concentration& concentration, Volume volume, const Reagent& reagent, const Table& table);

/// Moles of H+ (positive) or OH- (negative) that one mole of a strong acid or base sets free; 0 for anything else.
/// A system counts as far as it is a strong enough acid for the trade's normality (sulfuric acid: 2).
double equivalents_per_mole(const Reagent& reagent, const Table& table);

}  // namespace carboy
