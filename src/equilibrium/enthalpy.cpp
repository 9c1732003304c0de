#include "carboy/enthalpy.h"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace carboy {

namespace {

constexpr double gas_constant_kJ_per_K_mol = 8.314462618e-3;
constexpr double reference_K = 298.15;

/// From the most protonated species to the one that has lost so many protons; between two species in proportion.
double ladder(const System& system, double protons_lost, Temperature temperature) {
    double sum = 0;
    for (std::size_t step = 0; step < system.steps.size(); ++step) {
        const double share = std::clamp(protons_lost - static_cast<double>(step), 0.0, 1.0);
        sum += share > 0 ? share * step_enthalpy_kJ_per_mol(system.steps[step], temperature) : 0.0;
    }
    return sum;
}

}  // namespace

double step_enthalpy_kJ_per_mol(const Step& step, Temperature temperature) {
    const double kelvin = temperature.kelvin();
    if (step.has_expression) {
        const auto& e = step.expression;
        const double slope = -e[0] / (kelvin * kelvin) + e[2] + e[3] / kelvin + 2 * e[4] * kelvin;
        return -gas_constant_kJ_per_K_mol * std::numbers::ln10 * kelvin * kelvin * slope;
    }
    if (!step.enthalpy_kJ_per_mol.known()) {
        return 0;
    }
    const double capacity = step.heat_capacity_J_per_K_mol.known() ? step.heat_capacity_J_per_K_mol.value : 0.0;
    return step.enthalpy_kJ_per_mol.value + capacity * 1e-3 * (kelvin - reference_K);
}

double water_ionisation_enthalpy_kJ_per_mol(Temperature temperature) {
    return 55.81 - 0.224 * (temperature.kelvin() - reference_K);
}

double reaction_enthalpy_kJ_per_kg(const Table& table, const EquilibriumSolver& solver) {
    constexpr std::size_t hydroxide = 1;  // the solver's species begin with H+ and OH-
    const Temperature temperature = solver.water().temperature;
    double sum = solver.species(hydroxide).molality.mol_per_kg() * water_ionisation_enthalpy_kJ_per_mol(temperature);
    std::size_t index = 2;
    for (std::size_t part = 0; part < solver.part_count(); ++part) {
        const ComponentId id = solver.component(part);
        if (id.kind == ComponentKind::spectator) {
            ++index;
            continue;
        }
        const System& system = table.systems[id.index];
        double level = 0;
        for (std::size_t k = 0; k < system.species.size(); ++k) {
            sum += solver.species(index++).molality.mol_per_kg() * level;
            level += k < system.steps.size() ? step_enthalpy_kJ_per_mol(system.steps[k], temperature) : 0.0;
        }
    }
    return sum;
}

double reaction_enthalpy_kJ_per_mol(const Table& table, const Reagent& reagent, Temperature temperature) {
    double systems = 0;
    for (const Supply& supply : reagent.supplies) {
        systems += supply.component.kind == ComponentKind::system ? supply.count : 0.0;
    }
    if (systems == 0) {
        // A strong base brings OH-, a strong acid H+.
        return std::max(reagent.strong_charge, 0.0) * water_ionisation_enthalpy_kJ_per_mol(temperature);
    }
    double sum = 0;
    for (const Supply& supply : reagent.supplies) {
        if (supply.component.kind == ComponentKind::system) {
            const System& system = table.systems[supply.component.index];
            const double charge = -reagent.strong_charge / systems;
            sum += supply.count * ladder(system, system.species.front().charge - charge, temperature);
        }
    }
    return sum;
}

double temperature_rise_K(double enthalpy_lost_kJ, Mass contents) {
    constexpr double water_kJ_per_K_kg = 4.18;
    return enthalpy_lost_kJ / (contents.kg() * water_kJ_per_K_kg);
}

}  // namespace carboy
