#include "carboy/water.h"

#include <array>
#include <cmath>
#include <numbers>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy {

namespace {

// CODATA 2018 (exact SI values; the permittivity of vacuum as measured then).
constexpr double avogadro_per_mol = 6.02214076e23;
constexpr double elementary_charge_C = 1.602176634e-19;
constexpr double boltzmann_J_per_K = 1.380649e-23;
constexpr double vacuum_permittivity_F_per_m = 8.8541878128e-12;

/// Kell GS, J. Chem. Eng. Data 20, 97 (1975): 0..150 °C, 101.325 kPa.
double density_kg_per_m3(double t) {
    const double numerator =
        999.83952 +
        t * (16.945176 + t * (-7.9870401e-3 + t * (-46.170461e-6 + t * (105.56302e-9 + t * -280.54253e-12))));
    return numerator / (1.0 + 16.879850e-3 * t);
}

/// IAPWS R8-97, Release on the Static Dielectric Constant of Ordinary Water Substance, eqs. 1-3 and tables 1-2;
/// constants are the release's own, so that its check values are met.
double relative_permittivity(double density, double kelvin) {
    constexpr double critical_K = 647.096;
    constexpr double critical_density = 322.0;
    constexpr double molar_mass_kg = 0.018015268;
    constexpr double polarizability = 1.636e-40;
    constexpr double dipole = 6.138e-30;
    constexpr double k = 1.380658e-23;
    constexpr double na = 6.0221367e23;
    constexpr double eps0 = 8.854187817e-12;
    struct Term {
        double n;
        int i;
        double j;
    };
    constexpr std::array<Term, 11> terms{{{0.978224486826, 1, 0.25},
                                          {-0.957771379375, 1, 1},
                                          {0.237511794148, 1, 2.5},
                                          {0.714692244396, 2, 1.5},
                                          {-0.298217036956, 3, 1.5},
                                          {-0.108863472196, 3, 2.5},
                                          {0.0949327488264, 4, 2},
                                          {-0.00980469816509, 5, 2},
                                          {1.65167634970e-5, 6, 5},
                                          {9.37359795772e-5, 7, 0.5},
                                          {-1.23179218720e-10, 10, 10}}};
    const double reduced_density = density / critical_density;
    const double reduced_T = critical_K / kelvin;
    double g = 1.0 + 0.00196096504426 * reduced_density * std::pow(kelvin / 228.0 - 1.0, -1.2);
    for (const auto& [n, i, j] : terms) {
        g += n * std::pow(reduced_density, i) * std::pow(reduced_T, j);
    }
    const double a = na * dipole * dipole * density * g / (molar_mass_kg * eps0 * k * kelvin);
    const double b = na * polarizability * density / (3.0 * molar_mass_kg * eps0);
    return (1.0 + a + 5.0 * b + std::sqrt(9.0 + 2.0 * a + 18.0 * b + a * a + 10.0 * a * b + 9.0 * b * b)) /
           (4.0 - 4.0 * b);
}

/// IAPWS R11-07, Release on the Ionization Constant of H2O (Bandura AV, Lvov SN, J. Phys. Chem. Ref. Data 35, 15
/// (2006)), with the coefficients that give the release's check value, 13.906565 at 300 K and 1000 kg/m3. Another set
/// is in circulation that differs by 0.002 at 100 °C and misses the check value.
double ion_product_pKw(double density, double kelvin) {
    constexpr double coordination = 6;
    constexpr double molar_mass = 18.015268;
    const double rho = density / 1000.0;
    const double q =
        rho * std::exp(-0.864671 + 8659.19 / kelvin - 22786.2 * std::pow(rho, 2.0 / 3.0) / (kelvin * kelvin));
    const double ideal_gas =
        0.61415 + 48251.33 / kelvin - 67707.93 / (kelvin * kelvin) + 10102100.0 / (kelvin * kelvin * kelvin);
    return -2.0 * coordination *
               (std::log10(1.0 + q) - q / (1.0 + q) * rho * (0.642044 - 56.8534 / kelvin - 0.375754 * rho)) +
           ideal_gas + 2.0 * std::log10(molar_mass / 1000.0);
}

}  // namespace

Mass water_in(Volume volume, const WaterProperties& water) {
    return Mass::kilograms(volume.L() * water.density_kg_per_L);
}

WaterProperties water_at(Temperature temperature) {
    const double t = temperature.celsius();
    if (!(t >= 0.0 && t <= 100.0)) {
        throw Error(
            ErrorKind::input, "temperature_out_of_range",
            fmt::format("{:g} °C is outside 0 to 100 °C, where liquid water at normal pressure is described", t),
            "temperature", "give a temperature from 0 to 100 °C");
    }
    const double kelvin = temperature.kelvin();
    const double density = density_kg_per_m3(t);
    const double permittivity = relative_permittivity(density, kelvin);

    WaterProperties water;
    water.temperature = temperature;
    water.density_kg_per_L = density / 1000.0;
    water.relative_permittivity = permittivity;
    water.pKw = ion_product_pKw(density, kelvin);
    // Limiting law: A = (2 pi N rho)^1/2 (e^2 / 4 pi eps kT)^3/2 / ln 10; B = (2 e^2 N rho / eps kT)^1/2.
    const double screening = elementary_charge_C * elementary_charge_C /
                             (vacuum_permittivity_F_per_m * permittivity * boltzmann_J_per_K * kelvin);
    water.debye_huckel_A = std::sqrt(2.0 * std::numbers::pi * avogadro_per_mol * density) *
                           std::pow(screening / (4.0 * std::numbers::pi), 1.5) / std::numbers::ln10;
    water.debye_huckel_B_per_nm = std::sqrt(2.0 * screening * avogadro_per_mol * density) * 1e-9;
    return water;
}

}  // namespace carboy
