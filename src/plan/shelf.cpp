#include "carboy/shelf.h"

namespace carboy {

std::optional<Amount> Shelf::left(const Bottle& bottle) const {
    const Reagent& article = table_.reagents[bottle.reagent];
    if (bottle.volume_left && article.strength_mol_per_L.known()) {
        return Amount::mol(bottle.volume_left->L() * article.strength_mol_per_L.value);
    }
    if (bottle.mass_left) {
        return Amount::mol(bottle.mass_left->g() * article.counted_assay() / article.molar_mass_g_per_mol);
    }
    return std::nullopt;
}

}  // namespace carboy
