#include <algorithm>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/preparation.h"
#include "carboy/water.h"

namespace carboy {

namespace {

const Figure& apparent_molar_volume(const Table& table, ComponentId id) {
    return id.kind == ComponentKind::system ? table.systems[id.index].apparent_molar_volume_cm3_per_mol
                                            : table.spectators[id.index].apparent_molar_volume_cm3_per_mol;
}

}  // namespace

Volume volume_per_mole(const Table& table, const Reagent& reagent) {
    double litres = 0;
    for (const auto& [component, count] : reagent.supplies) {
        const Figure& volume = apparent_molar_volume(table, component);
        litres += volume.known() ? count * volume.value / 1000.0 : 0.0;
    }
    return Volume::litres(litres);
}

Composed compose(const Table& table, const Preparation& preparation) {
    Composed composed;
    double litres_fixed = 0;         // taken by portions given in moles
    double litres_per_kg_water = 0;  // taken by portions given as molalities, per kilogram of water
    for (const Portion& portion : preparation.portions) {
        const Reagent& reagent = table.reagents[portion.reagent];
        const double each = volume_per_mole(table, reagent).L();
        for (const Supply& supply : reagent.supplies) {
            auto& neglected = composed.volume_neglected;
            if (!apparent_molar_volume(table, supply.component).known() &&
                std::find(neglected.begin(), neglected.end(), supply.component) == neglected.end()) {
                neglected.push_back(supply.component);
            }
        }
        if (portion.amount) {
            litres_fixed += each * portion.amount->mol();
        } else if (portion.molality) {
            litres_per_kg_water += each * portion.molality->mol_per_kg();
        }
    }
    if (preparation.filled_to) {
        const double density = water_at(preparation.filled_at).density_kg_per_L;
        const double litres = preparation.filled_to->L() - litres_fixed;
        const double kilograms = litres * density / (1.0 + litres_per_kg_water * density);
        // Less than a tenth of it water is no longer a solution that any of this describes.
        if (!(kilograms > 0.1 * preparation.filled_to->L() * density)) {
            throw Error(ErrorKind::input, "no_room_for_water",
                        fmt::format("what is dissolved would fill {:g} L by itself and leave no room for water",
                                    preparation.filled_to->L()),
                        {}, "check the amounts and the final volume");
        }
        composed.water = Mass::kilograms(kilograms);
    } else {
        composed.water = Mass::kilograms(1.0);
    }
    for (const Portion& portion : preparation.portions) {
        const double molality = portion.amount ? portion.amount->mol() / composed.water.kg()
                                               : portion.molality.value_or(Molality{}).mol_per_kg();
        for (const auto& [component, count] : table.reagents[portion.reagent].supplies) {
            composed.mixture.add(component, Molality::mol_per_kg(molality * count));
        }
    }
    return composed;
}

}  // namespace carboy
