#include <cmath>
#include <numbers>

#include "explore/mistakes.h"

namespace carboy {

double prior(MistakeKind kind) {
    // Common practice, no source: what benches are known to do wrong (wrong temperature, titrant and hydrate before all
    // else), ordered and weighed by judgement. Alternatives of one kind share its weight.
    switch (kind) {
        case MistakeKind::meter:
            return 0.20;
        case MistakeKind::titrant_off:
            return 0.30;
        case MistakeKind::set_at_bench:
            return 0.20;
        case MistakeKind::other_hydrate:
        case MistakeKind::other_form:
            return 0.15;
        case MistakeKind::titrant_forgotten:
        case MistakeKind::titrant_other_strength:
        case MistakeKind::read_at_other_temperature:
            return 0.10;
        case MistakeKind::left_out:
        case MistakeKind::mass_tenfold:
        case MistakeKind::set_at_other_temperature:
            return 0.08;
        case MistakeKind::forms_swapped:
        case MistakeKind::wrong_volume:
        case MistakeKind::set_before_dilution:
        case MistakeKind::titrant_wrong_kind:
            return 0.05;
    }
    return 0;
}

double titrant_factor_share(double low, double high) {
    // Cauchy's distribution about 1: heavy tails, since a titrant may be off by anything.
    constexpr double half_width = 0.10;
    const auto below = [&](double factor) { return std::atan((factor - 1) / half_width) / std::numbers::pi; };
    return below(high) - below(low);
}

}  // namespace carboy
