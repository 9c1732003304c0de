#include "carboy/mixture.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy {

void Mixture::add(ComponentId component, Molality total) {
    if (!std::isfinite(total.mol_per_kg()) || total.mol_per_kg() < 0) {
        throw Error(ErrorKind::input, "bad_amount",
                    fmt::format("{} mol/kg is not an amount of anything", total.mol_per_kg()));
    }
    const auto place = std::lower_bound(parts_.begin(), parts_.end(), component,
                                        [](const Part& part, ComponentId id) { return part.component < id; });
    if (place != parts_.end() && place->component == component) {
        place->total += total;
    } else {
        parts_.insert(place, Part{component, total});
    }
}

}  // namespace carboy
