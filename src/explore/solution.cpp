#include "carboy/titration.h"
#include "carboy/water.h"

namespace carboy {

Solution solution_of(const Table& table, const Preparation& preparation) {
    const Composed composed = compose(table, preparation);
    Solution solution{composed.mixture, composed.water, {}, composed.volume_neglected};
    if (preparation.filled_to) {
        solution.volume = *preparation.filled_to;
        return solution;
    }
    double litres = composed.water.kg() / water_at(preparation.filled_at).density_kg_per_L;
    for (const Portion& portion : preparation.portions) {
        litres += volume_per_mole(table, table.reagents[portion.reagent]).L() *
                  portion.molality.value_or(Molality{}).mol_per_kg() * composed.water.kg();
    }
    solution.volume = Volume::litres(litres);
    return solution;
}

}  // namespace carboy
