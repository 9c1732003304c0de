#include <algorithm>
#include <cmath>

#include "warning/circumstances.h"
#include "warning/observe.h"

namespace carboy {

void observe_mixture(Prediction& prediction, const Table& table) {
    const Circumstances seen = circumstances_of(table, prediction, nullptr);
    double unmodelled = 0;
    for (const Observation& observation : table.observations) {
        Match match;
        if (observation.of_recipe || !applies(observation, seen, match)) {
            continue;
        }
        prediction.warnings.push_back(
            {std::string(observation.code), filled_in(observation, seen, match), observation.weight});
        unmodelled = std::hypot(unmodelled, observation.pH_standard_uncertainty);
    }
    std::stable_sort(prediction.warnings.begin(), prediction.warnings.end(),
                     [](const Warning& a, const Warning& b) { return a.weight > b.weight; });
    if (unmodelled > 0) {
        prediction.uncertainty.unmodelled = unmodelled;
        prediction.uncertainty.combine();
    }
}

}  // namespace carboy
