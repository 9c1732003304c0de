#pragma once

#include "carboy/constants.h"
#include "carboy/equilibrium.h"
#include "carboy/quantity.h"

namespace carboy {

/// Enthalpy of a proton leaving, kJ/mol, at zero ionic strength: from the table's enthalpy and heat capacity at 25 °C,
/// or from the slope of its published expression (van 't Hoff). 0 where the table knows neither.
double step_enthalpy_kJ_per_mol(const Step& step, Temperature temperature);

/// H2O -> H+ + OH-, kJ/mol: 55.81 at 25 °C with -224 J/(K mol) (Olofsson G and Hepler LG, J. Solution Chem. 4, 127
/// (1975); from memory). Good to 0.3 kJ/mol from 0 to 60 °C. Calorimetry, not the
/// slope of the equation for pKw, which gives 56.4 at 25 °C.
double water_ionisation_enthalpy_kJ_per_mol(Temperature temperature);

/// Enthalpy of all species of a solved state, kJ per kg of water, counted from the most protonated form of each system
/// with H+ and H2O at zero. Differences of it, mass by mass, are heats of reaction; heats of dilution are not in it.
double reaction_enthalpy_kJ_per_kg(const Table& table, const EquilibriumSolver& solver);

/// The same for one mole of an article as it stands on the shelf.
double reaction_enthalpy_kJ_per_mol(const Table& table, const Reagent& reagent, Temperature temperature);

/// By how much a vessel warms when its contents lose so much enthalpy: water's heat capacity, 4.18 J/(g K), no loss to
/// the room.
double temperature_rise_K(double enthalpy_lost_kJ, Mass contents);

}  // namespace carboy
