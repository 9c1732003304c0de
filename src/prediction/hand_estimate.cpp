#include "prediction/hand_estimate.h"

#include <algorithm>
#include <cmath>
#include <vector>

#include "carboy/equilibrium.h"

namespace carboy {

namespace {

struct PaperStep {
    double pK;
    double total;  ///< mol/kg of the system
    ComponentId system;
};

constexpr double whole = 1e-3;   ///< a ratio beyond 1000 to 1 counts as one form alone
constexpr double traces = 1e-6;  ///< mol/kg; below it water decides and no sum on paper holds

}  // namespace

std::optional<PH> hand_estimate(const Table& table, const Mixture& mixture) {
    double charge = 0;
    std::vector<PaperStep> steps;
    for (const auto& [component, total] : mixture.parts()) {
        const double amount = total.mol_per_kg();
        if (component.kind == ComponentKind::spectator) {
            charge += amount * table.spectators[component.index].charge;
            continue;
        }
        const System& system = table.systems[component.index];
        charge += amount * system.species[0].charge;
        for (std::size_t step = 0; step < system.steps.size(); ++step) {
            steps.push_back({thermodynamic_pK(system, step, Temperature{}), amount, component});
        }
    }
    std::erase_if(steps, [](const PaperStep& step) { return step.total < traces; });
    std::stable_sort(steps.begin(), steps.end(), [](const auto& a, const auto& b) { return a.pK < b.pK; });

    std::size_t next = 0;  // first step whose protons are not all gone
    while (next < steps.size() && charge > (1 - whole) * steps[next].total) {
        charge -= steps[next++].total;
    }
    if (next < steps.size() && charge > whole * steps[next].total) {
        const double ratio = charge / (steps[next].total - charge);
        return PH(steps[next].pK + std::log10(ratio));
    }
    if (charge < -traces && next == 0) {
        return PH(-std::log10(-charge));
    }
    if (charge > traces && next == steps.size()) {
        return PH(14 + std::log10(charge));
    }
    const double nearest = next < steps.size() ? steps[next].total : next > 0 ? steps[next - 1].total : 0.0;
    if (nearest <= 0 || std::abs(charge) > whole * nearest) {
        return std::nullopt;
    }
    if (next == 0) {
        return PH(0.5 * (steps[0].pK - std::log10(steps[0].total)));
    }
    if (next == steps.size()) {
        return PH(0.5 * (14 + steps.back().pK + std::log10(steps.back().total)));
    }
    if (steps[next].system == steps[next - 1].system) {
        return PH(0.5 * (steps[next - 1].pK + steps[next].pK));
    }
    return std::nullopt;
}

}  // namespace carboy
