#include <cmath>

#include "carboy/equilibrium.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

ComponentId spectator(const char* name) {
    return id_of(bundled_table(), *find_spectator(bundled_table(), name));
}
ComponentId buffer(const char* name) {
    return id_of(bundled_table(), *find_system(bundled_table(), name));
}

EquilibriumSolver solved(const Mixture& mixture, double celsius, const ActivityModel& model) {
    EquilibriumSolver solver(bundled_table(), mixture, Temperature::celsius(celsius), model);
    solver.solve();
    return solver;
}

}  // namespace

TEST_CASE("pure water is neutral: pH = pKw / 2, less the activity of its own ions", "[laws][limits]") {
    for (double t = 0; t <= 100; t += 5) {
        const auto ideal = solved({}, t, ideal_model());
        CHECK(ideal.ph().value() == Approx(ideal.water().pKw / 2).epsilon(1e-13));
        // gamma(H+) = gamma(OH-) in the Davies model, so the same holds for activities.
        const auto davies = solved({}, t, davies_model());
        CHECK(davies.ph().value() == Approx(davies.water().pKw / 2).epsilon(1e-13));
    }
}

TEST_CASE("strong acid so dilute that water matters", "[laws][limits]") {
    // h - Kw/h = C, so h = (C + sqrt(C^2 + 4 Kw)) / 2: pH 6.98 for 1e-8, not 8.
    for (const double c : {1e-10, 1e-9, 1e-8, 1e-7, 1e-6, 1e-4, 1e-2}) {
        Mixture acid;
        acid.add(spectator("Cl-"), Molality::mol_per_kg(c));
        const auto solver = solved(acid, 25, ideal_model());
        const double kw = std::pow(10, -solver.water().pKw);
        CHECK(solver.ph().value() == Approx(-std::log10(0.5 * (c + std::sqrt(c * c + 4 * kw)))).epsilon(1e-12));
        Mixture base;
        base.add(spectator("Na+"), Molality::mol_per_kg(c));
        const auto mirror = solved(base, 25, ideal_model());
        CHECK(mirror.ph().value() == Approx(mirror.water().pKw - solver.ph().value()).epsilon(1e-12));
    }
}

TEST_CASE("a buffer at infinite dilution goes to its pK, then to water's neutrality", "[laws][limits]") {
    // 1:1 phosphate: by Davies, pH -> pK2 as I -> 0 while the buffer still outweighs water's own ions.
    const double pK2 = thermodynamic_pK(*find_system(bundled_table(), "phosphate"), 1, Temperature{});
    double previous = 1;
    for (const double total : {0.05, 0.005, 5e-4}) {
        Mixture mixture;
        mixture.add(buffer("phosphate"), Molality::mol_per_kg(total));
        mixture.add(spectator("Na+"), Molality::mol_per_kg(1.5 * total));
        const double gap = std::abs(solved(mixture, 25, davies_model()).ph().value() - pK2);
        CHECK(gap < 0.5 * previous);
        previous = gap;
    }
    Mixture traces;
    traces.add(buffer("phosphate"), Molality::mol_per_kg(1e-13));
    traces.add(spectator("Na+"), Molality::mol_per_kg(1.5e-13));
    const auto solver = solved(traces, 25, davies_model());
    CHECK(solver.ph().value() == Approx(solver.water().pKw / 2).margin(1e-5));
}

TEST_CASE("ideal weak acid against its cubic", "[laws][limits]") {
    // h^3 + K h^2 - (K C + Kw) h - K Kw = 0, worked by Cardano for acetic acid.
    const double k = std::pow(10, -thermodynamic_pK(*find_system(bundled_table(), "acetate"), 0, Temperature{}));
    for (const double c : {1e-7, 1e-6, 1e-5, 1e-3, 0.1, 1.0}) {
        Mixture mixture;
        mixture.add(buffer("acetate"), Molality::mol_per_kg(c));
        const auto solver = solved(mixture, 25, ideal_model());
        const double kw = std::pow(10, -solver.water().pKw);
        const double b = k, p = -(k * c + kw), q = -k * kw;
        // Depressed cubic, three real roots, trigonometric form; the largest is the positive one.
        const double shift = b / 3;
        const double r = (b * b - 3 * p) / 9;
        const double s = (2 * b * b * b - 9 * b * p + 27 * q) / 54;
        const double h =
            -2 * std::sqrt(r) * std::cos((std::acos(s / std::sqrt(r * r * r)) + 2 * std::acos(-1.0)) / 3) - shift;
        INFO("C = " << c);
        CHECK(solver.ph().value() == Approx(-std::log10(h)).margin(2e-7));
        CHECK(h * h * h + b * h * h + p * h + q == Approx(0).margin(1e-9 * h * h * (h + b)));
    }
}

TEST_CASE("nothing but salt is neutral", "[laws][limits]") {
    for (const double c : {1e-9, 1e-3, 0.1, 1.0, 10.0}) {
        Mixture salt;
        salt.add(spectator("Na+"), Molality::mol_per_kg(c));
        salt.add(spectator("Cl-"), Molality::mol_per_kg(c));
        const auto solver = solved(salt, 25, davies_model());
        CHECK(solver.ph().value() == Approx(solver.water().pKw / 2).epsilon(1e-12));
        CHECK(solver.ionic_strength().mol_per_kg() >= c);
    }
}
