#include "explore/imposed_ph.h"

#include <algorithm>
#include <cmath>

#include "carboy/equilibrium.h"

namespace carboy {

PH ph_of(const Bench& bench, const Preparation& preparation, Temperature temperature) {
    EquilibriumSolver solver(bench.table, compose(bench.table, preparation).mixture, temperature, bench.model);
    solver.solve();
    return solver.ph();
}

double charge_at(const Bench& bench, const Preparation& preparation, PH ph, Temperature temperature) {
    const Composed composed = compose(bench.table, preparation);
    EquilibriumSolver solver(bench.table, composed.mixture, temperature, bench.model);
    solver.hold_at(ph);
    return solver.charge_residual().mol_per_kg() * composed.water.kg();
}

std::optional<Amount> amount_for(const Bench& bench, const std::function<Preparation(Amount)>& make, PH ph,
                                 Temperature temperature, Amount step, Amount most, bool signed_amounts) {
    constexpr int most_rounds = 60;
    constexpr double converged = 1e-11;
    const auto charge = [&](double mol) { return charge_at(bench, make(Amount::mol(mol)), ph, temperature); };
    double last = 0;
    double last_charge = charge(last);
    double now = step.mol();
    double now_charge = charge(now);
    for (int round = 0; round < most_rounds; ++round) {
        if (now_charge == last_charge) {
            return now_charge == 0 ? std::optional(Amount::mol(now)) : std::nullopt;
        }
        double next = now - now_charge * (now - last) / (now_charge - last_charge);
        if (next < 0 && !signed_amounts) {
            // Rounding noise about none at all is none.
            return Amount::mol(std::abs(next) < converged * step.mol() ? 0 : next);
        }
        if (std::abs(next) > most.mol()) {
            if (std::abs(now) >= most.mol()) {
                return std::nullopt;
            }
            next = std::copysign(most.mol(), next);
        }
        if (std::abs(next - now) <= converged * (std::abs(next) + step.mol())) {
            return Amount::mol(next);
        }
        last = now;
        last_charge = now_charge;
        now = next;
        now_charge = charge(now);
    }
    return std::nullopt;
}

}  // namespace carboy
