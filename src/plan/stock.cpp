#include "plan/stock.h"

#include <algorithm>

#include "plan/articles.h"

namespace carboy {

Stock stock_of(const Reagent& article, std::uint16_t reagent, Molarity strength, Volume volume) {
    Stock stock;
    stock.reagent = reagent;
    stock.strength = strength;
    stock.volume = volume;
    stock.amount = Amount::mol(strength.mol_per_L() * volume.L());
    if (is_solution(article)) {
        stock.liquid = Volume::litres(stock.amount.mol() / article.strength_mol_per_L.value);
    } else {
        stock.mass = mass_of(article, stock.amount);
    }
    return stock;
}

std::optional<Volume> flask_for(const Table& table, Volume least) {
    std::optional<Volume> smallest;
    for (const Vessel& vessel : table.vessels) {
        const Volume capacity = Volume::millilitres(vessel.capacity_mL.value);
        if (vessel.kind == VesselKind::flask && capacity >= least) {
            smallest = std::min(smallest.value_or(capacity), capacity);
        }
    }
    return smallest;
}

}  // namespace carboy
