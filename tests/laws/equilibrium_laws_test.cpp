#include <algorithm>
#include <cmath>
#include <vector>

#include "carboy/equilibrium.h"

#include "catch_shim.h"
#include "laws/random_mixture.h"

using namespace carboy;

namespace {

ComponentId spectator(const char* name) {
    return id_of(bundled_table(), *find_spectator(bundled_table(), name));
}

double solved_ph(const Mixture& mixture, Temperature temperature, const ActivityModel& model) {
    EquilibriumSolver solver(bundled_table(), mixture, temperature, model);
    solver.solve();
    return solver.ph().value();
}

}  // namespace

TEST_CASE("electroneutrality and mass balance hold for any mixture", "[laws]") {
    const Table& table = bundled_table();
    std::mt19937_64 random(20261201);
    const ActivityModel* models[] = {&davies_model(), &debye_huckel_model(), &ideal_model()};
    for (int trial = 0; trial < 6000; ++trial) {
        const Mixture mixture = test::random_mixture(random, table, trial % 4 == 0 ? 10.0 : 0.5);
        EquilibriumSolver solver(table, mixture, test::random_temperature(random), *models[trial % 3]);
        solver.solve();
        INFO("trial " << trial);

        double charge = 0;
        double ions = 0;
        double half_squares = 0;
        std::vector<double> totals(solver.part_count(), 0.0);
        for (std::size_t i = 0; i < solver.species_count(); ++i) {
            const auto species = solver.species(i);
            const double m = species.molality.mol_per_kg();
            REQUIRE(std::isfinite(m));
            REQUIRE(m >= 0);
            REQUIRE(species.activity_coefficient > 0);
            charge += species.charge * m;
            ions += std::abs(species.charge) * m;
            half_squares += 0.5 * species.charge * species.charge * m;
            if (species.part != EquilibriumSolver::water_part) {
                totals[species.part] += m;
            }
        }
        // Summing again in another order costs a few units in the last place more than the solver's own residual.
        REQUIRE(std::abs(charge) <= 2e-14 * ions);
        REQUIRE(std::abs(solver.charge_residual().mol_per_kg()) <= 1e-14 * ions);
        REQUIRE(solver.ionic_strength().mol_per_kg() == Approx(half_squares).epsilon(1e-11));
        for (std::size_t part = 0; part < totals.size(); ++part) {
            const double wanted = mixture.parts()[part].total.mol_per_kg();
            REQUIRE(std::abs(totals[part] - wanted) <= 1e-14 * wanted);
        }
    }
}

TEST_CASE("mass action holds for every step", "[laws]") {
    const Table& table = bundled_table();
    std::mt19937_64 random(7);
    for (int trial = 0; trial < 500; ++trial) {
        const Mixture mixture = test::random_mixture(random, table, 0.3);
        EquilibriumSolver solver(table, mixture, test::random_temperature(random), davies_model());
        solver.solve();
        const double a = std::pow(10.0, -solver.ph().value());
        std::size_t step = 0;
        for (std::size_t i = 3; i < solver.species_count(); ++i) {
            const auto base = solver.species(i);
            const auto acid = solver.species(i - 1);
            step = base.part == acid.part ? step + 1 : 0;
            if (step == 0 || acid.molality.mol_per_kg() < 1e-250 || base.molality.mol_per_kg() < 1e-250) {
                continue;
            }
            const double pK = -std::log10(a * base.molality.mol_per_kg() * base.activity_coefficient /
                                          (acid.molality.mol_per_kg() * acid.activity_coefficient));
            INFO("trial " << trial << ", " << acid.formula << " / " << base.formula);
            REQUIRE(pK == Approx(solver.pK(base.part, step - 1)).margin(1e-9));
        }
        const auto hydrogen = solver.species(0);
        const auto hydroxide = solver.species(1);
        REQUIRE(-std::log10(hydrogen.molality.mol_per_kg() * hydroxide.molality.mol_per_kg() *
                            hydrogen.activity_coefficient * hydroxide.activity_coefficient / solver.water_activity()) ==
                Approx(solver.water().pKw).margin(1e-9));
    }
}

TEST_CASE("pH falls strictly with every drop of strong acid", "[laws]") {
    const Table& table = bundled_table();
    std::mt19937_64 random(11);
    for (int trial = 0; trial < 400; ++trial) {
        // Davies' equation loses its meaning, and with it this law, far beyond its range: see DEVELOPERS.md.
        Mixture mixture = test::random_mixture(random, table, 0.1);
        const Temperature temperature = test::random_temperature(random);
        double before = solved_ph(mixture, temperature, davies_model());
        for (int drop = 0; drop < 12; ++drop) {
            mixture.add(spectator("Cl-"), Molality::mol_per_kg(0.02));
            const double after = solved_ph(mixture, temperature, davies_model());
            INFO("trial " << trial << ", drop " << drop);
            REQUIRE(after < before);
            before = after;
        }
    }
}

TEST_CASE("the order of ingredients leaves no trace", "[laws]") {
    const Table& table = bundled_table();
    std::mt19937_64 random(13);
    for (int trial = 0; trial < 300; ++trial) {
        const Mixture mixture = test::random_mixture(random, table, 1.0);
        std::vector<Mixture::Part> parts(mixture.parts().begin(), mixture.parts().end());
        std::shuffle(parts.begin(), parts.end(), random);
        Mixture shuffled;
        for (const auto& part : parts) {
            shuffled.add(part.component, part.total);
        }
        const Temperature temperature = test::random_temperature(random);
        REQUIRE(solved_ph(shuffled, temperature, davies_model()) == solved_ph(mixture, temperature, davies_model()));
    }
}

TEST_CASE("holding at the solved pH is the solved state", "[laws]") {
    const Table& table = bundled_table();
    std::mt19937_64 random(17);
    for (int trial = 0; trial < 300; ++trial) {
        const Mixture mixture = test::random_mixture(random, table, 0.5);
        EquilibriumSolver solver(table, mixture, test::random_temperature(random), davies_model());
        solver.solve();
        const double ionic_strength = solver.ionic_strength().mol_per_kg();
        const double buffer_value = solver.buffer_value().mol_per_kg();
        solver.hold_at(solver.ph());
        REQUIRE(solver.ionic_strength().mol_per_kg() == Approx(ionic_strength).epsilon(1e-9));
        REQUIRE(solver.buffer_value().mol_per_kg() == Approx(buffer_value).epsilon(1e-6));
    }
}

TEST_CASE("the buffer value is the slope of the titration curve at constant ionic strength", "[laws]") {
    // With the ideal model ionic strength does not matter, so the finite difference may simply add strong base.
    const Table& table = bundled_table();
    std::mt19937_64 random(19);
    for (int trial = 0; trial < 200; ++trial) {
        Mixture mixture = test::random_mixture(random, table, 0.1);
        const Temperature temperature = test::random_temperature(random);
        EquilibriumSolver solver(table, mixture, temperature, ideal_model());
        solver.solve();
        const double slope = solver.buffer_value().mol_per_kg();
        const double step = 1e-4 * slope;
        const double before = solver.ph().value();
        mixture.add(spectator("Na+"), Molality::mol_per_kg(step));
        const double after = solved_ph(mixture, temperature, ideal_model());
        REQUIRE(step / (after - before) == Approx(slope).epsilon(2e-3));
    }
}
