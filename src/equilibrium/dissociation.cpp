#include <cmath>
#include <numbers>

#include "carboy/equilibrium.h"

namespace carboy {

namespace {

constexpr double gas_constant_J_per_K_mol = 8.314462618;  // CODATA 2018
constexpr double reference_K = 298.15;

/// What turns a concentration constant in a medium of ionic strength I into the thermodynamic one, by Davies at 25 °C:
/// pK° = pKc + A f(I) (1 + z_base^2 - z_acid^2).
double to_zero_ionic_strength(const Step& step, int acid_charge) {
    const double ionic_strength = step.reference_ionic_strength_mol_per_kg;
    if (ionic_strength <= 0) {
        return 0;
    }
    static const double a = water_at(Temperature::celsius(25)).debye_huckel_A;
    const double root = std::sqrt(ionic_strength);
    const int base_charge = acid_charge - 1;
    return a * (root / (1 + root) - 0.3 * ionic_strength) * (1 + base_charge * base_charge - acid_charge * acid_charge);
}

}  // namespace

bool pK_is_extrapolated(const System& system, std::size_t step, Temperature temperature) {
    const Step& s = system.steps[step];
    if (s.has_expression) {
        return temperature.celsius() < s.expression_from_C || temperature.celsius() > s.expression_to_C;
    }
    return !s.enthalpy_kJ_per_mol.known() && std::abs(temperature.kelvin() - reference_K) > 1.0;
}

double thermodynamic_pK(const System& system, std::size_t step, Temperature temperature) {
    const Step& s = system.steps[step];
    const double kelvin = temperature.kelvin();
    const double correction = to_zero_ionic_strength(s, system.species[step].charge);
    if (s.has_expression) {
        const auto& e = s.expression;
        return e[0] / kelvin + e[1] + e[2] * kelvin + e[3] * std::log(kelvin) + e[4] * kelvin * kelvin + correction;
    }
    // ln K(T) = ln K0 - (dH/R)(1/T - 1/T0) + (dCp/R)(T0/T - 1 + ln(T/T0)): van 't Hoff with constant heat capacity.
    const double enthalpy = s.enthalpy_kJ_per_mol.known() ? s.enthalpy_kJ_per_mol.value * 1000.0 : 0.0;
    const double heat_capacity = s.heat_capacity_J_per_K_mol.known() ? s.heat_capacity_J_per_K_mol.value : 0.0;
    const double shift = enthalpy * (1.0 / kelvin - 1.0 / reference_K) -
                         heat_capacity * (reference_K / kelvin - 1.0 + std::log(kelvin / reference_K));
    return s.pK_25C.value + correction + shift / (gas_constant_J_per_K_mol * std::numbers::ln10);
}

}  // namespace carboy
