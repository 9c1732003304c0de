#include <cmath>
#include <numbers>

#include "carboy/uncertainty.h"

namespace carboy {

namespace {

// Where the table states no uncertainty. Own estimates: calorimetric and electrochemical enthalpies of the same step
// differ by about this much (zwitterionic buffers), and enthalpies of all steps spread over about 40 kJ/mol.
constexpr double unstated_pK_uncertainty = 0.05;
constexpr double unstated_enthalpy_uncertainty_kJ = 0.5;
constexpr double unknown_enthalpy_spread_kJ = 20.0;

constexpr double gas_constant_kJ_per_K_mol = 8.314462618e-3;
constexpr double reference_K = 298.15;

double step_uncertainty(const Step& step, Temperature temperature) {
    const double at_25C = std::isnan(step.pK_25C.uncertainty) ? unstated_pK_uncertainty : step.pK_25C.uncertainty;
    if (step.has_expression) {
        return at_25C;
    }
    double enthalpy = unknown_enthalpy_spread_kJ;
    if (step.enthalpy_kJ_per_mol.known()) {
        enthalpy = std::isnan(step.enthalpy_kJ_per_mol.uncertainty) ? unstated_enthalpy_uncertainty_kJ
                                                                    : step.enthalpy_kJ_per_mol.uncertainty;
    }
    const double from_enthalpy =
        enthalpy * (1.0 / temperature.kelvin() - 1.0 / reference_K) / (gas_constant_kJ_per_K_mol * std::numbers::ln10);
    return std::hypot(at_25C, from_enthalpy);
}

/// Spread of the published expressions for pKw: 0.003 from 10 to 40 °C, 0.015 at 100 °C.
double ion_product_uncertainty(Temperature temperature) {
    const double t = temperature.celsius();
    if (t < 10) {
        return 0.003 + 0.0003 * (10 - t);
    }
    return t <= 40 ? 0.003 : 0.003 + 0.0002 * (t - 40);
}

}  // namespace

void PHUncertainty::combine() {
    expanded_k2 = 2.0 * std::hypot(std::hypot(constants, activity), std::hypot(unmodelled, reproducibility));
}

PHUncertainty ph_uncertainty(EquilibriumSolver& solver, const Table& table, const ActivityModel& model) {
    constexpr double shift = 1e-3;
    const double ph = solver.ph().value();
    const Temperature temperature = solver.water().temperature;
    const Molality ionic_strength = solver.ionic_strength();
    double sum = 0;
    const auto add = [&](double uncertainty) {
        const double sensitivity = (solver.ph().value() - ph) / shift;
        sum += sensitivity * sensitivity * uncertainty * uncertainty;
    };
    for (std::size_t part = 0; part < solver.part_count(); ++part) {
        if (solver.component(part).kind != ComponentKind::system) {
            continue;
        }
        const System& system = table.systems[solver.component(part).index];
        for (std::size_t step = 0; step < system.steps.size(); ++step) {
            solver.shift_pK(part, step, shift);
            solver.solve();
            add(step_uncertainty(system.steps[step], temperature));
            solver.shift_pK(part, step, -shift);
        }
    }
    solver.shift_pKw(shift);
    solver.solve();
    add(ion_product_uncertainty(temperature));
    solver.shift_pKw(-shift);
    solver.solve();

    PHUncertainty uncertainty;
    uncertainty.constants = std::sqrt(sum);
    uncertainty.activity = model.ph_uncertainty(ionic_strength);
    uncertainty.combine();
    return uncertainty;
}

}  // namespace carboy
