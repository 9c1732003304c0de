#pragma once

#include "carboy/quantity.h"

namespace carboy {

/// Properties of liquid water at 0.1 MPa that the equilibrium needs at one temperature.
struct WaterProperties {
    Temperature temperature;
    double density_kg_per_L = 0;       ///< Kell 1975
    double relative_permittivity = 0;  ///< static; IAPWS R8-97
    double pKw = 0;                    ///< -log10(m_H m_OH gamma^2 / a_w), molality basis; IAPWS R11-07
    double debye_huckel_A = 0;         ///< log10 basis, kg^0.5 mol^-0.5
    double debye_huckel_B_per_nm = 0;  ///< kg^0.5 mol^-0.5 nm^-1
};

/// Mass of water in a volume of pure water.
Mass water_in(Volume volume, const WaterProperties& water);

/// Evaluates the published equations (sources in `src/water/`).
/// Range 0 to 100 °C, both ends included; throws Error `temperature_out_of_range` (input) outside or for NaN.
WaterProperties water_at(Temperature temperature);

}  // namespace carboy
