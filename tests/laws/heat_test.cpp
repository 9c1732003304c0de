// Heat of reaction against published calorimetry.

#include "carboy/enthalpy.h"
#include "carboy/plan.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

/// Enthalpy of so many moles per kg of reagents in water, solved.
double state(std::initializer_list<std::pair<const char*, double>> reagents) {
    const Table& table = bundled_table();
    Mixture mixture;
    for (const auto& [name, molality] : reagents) {
        for (const Supply& supply : find_reagent(table, name)->supplies) {
            mixture.add(supply.component, Molality::mol_per_kg(supply.count * molality));
        }
    }
    EquilibriumSolver solver(table, mixture, Temperature{}, davies_model());
    solver.solve();
    return reaction_enthalpy_kJ_per_kg(table, solver);
}

}  // namespace

TEST_CASE("heat: strong acid and strong base give the heat of formation of water", "[heat]") {
    // 55.8 kJ/mol at 25 °C: Olofsson and Hepler, J. Solution Chem. 4, 127 (1975); from memory.
    const double before = state({{"HCl 1 mol/L", 0.1}}) + state({{"NaOH 1 mol/L", 0.1}});
    const double after = state({{"HCl 1 mol/L", 0.1}, {"NaOH 1 mol/L", 0.1}});
    CHECK((before - after) / 0.1 == Approx(55.8).margin(0.1));
}

TEST_CASE("heat: Tris with hydrochloric acid", "[heat]") {
    // 47.45 kJ/mol at 25 °C: Goldberg, Kishore and Lennen, J. Phys. Chem. Ref. Data 31, 231 (2002), for TrisH+ -> Tris
    // + H+; the free base leaves a trace of OH-, whose heat is in the margin.
    const double before = state({{"Tris", 0.1}}) + state({{"HCl 1 mol/L", 0.05}});
    const double after = state({{"Tris", 0.1}, {"HCl 1 mol/L", 0.05}});
    CHECK((before - after) / 0.05 == Approx(47.45).margin(0.2));
}

TEST_CASE("heat: an article's own enthalpy is that of what it brings", "[heat]") {
    const Table& table = bundled_table();
    const Temperature at25;
    CHECK(reaction_enthalpy_kJ_per_mol(table, *find_reagent(table, "NaOH 1 mol/L"), at25) == Approx(55.81));
    CHECK(reaction_enthalpy_kJ_per_mol(table, *find_reagent(table, "HCl 1 mol/L"), at25) == Approx(0).margin(1e-12));
    CHECK(reaction_enthalpy_kJ_per_mol(table, *find_reagent(table, "Tris"), at25) == Approx(47.45).margin(0.1));
    CHECK(reaction_enthalpy_kJ_per_mol(table, *find_reagent(table, "Tris hydrochloride"), at25) ==
          Approx(0).margin(1e-12));
    CHECK(temperature_rise_K(4.18, Mass::kilograms(1)) == Approx(1));
    CHECK(temperature_rise_K(-4.18, Mass::kilograms(2)) == Approx(-0.5));
}
