#include <array>
#include <cmath>
#include <cstdint>
#include <numbers>
#include <utility>

#include <benchmark/benchmark.h>
#include <boost/math/tools/toms748_solve.hpp>
#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/notation.h"
#include "carboy/plan.h"

// The forward solve of a phosphate mixture against a general-purpose baseline on the same charge balance: Boost.Math's
// toms748_solve for the pH, nested in substitution for the ionic strength. Same constants, same precision asked for.

using namespace carboy;

namespace {

ComponentId component(const char* name) {
    const Table& table = bundled_table();
    if (const System* system = find_system(table, name)) {
        return id_of(table, *system);
    }
    return id_of(table, *find_spectator(table, name));
}

Mixture phosphate_mixture() {
    Mixture mixture;
    mixture.add(component("phosphate"), Molality::mol_per_kg(0.05));
    mixture.add(component("Na+"), Molality::mol_per_kg(0.05));
    mixture.add(component("K+"), Molality::mol_per_kg(0.025));
    return mixture;
}

/// Sodium between 0.03 and 0.07 mol/kg, so that no two solves in a row are the same problem.
double varied_sodium(int i) {
    return 0.03 + 0.04 * ((i * 37) % 101) / 100.0;
}

/// The textbook way: what a program would do with a general root finder.
class Baseline {
public:
    explicit Baseline(const EquilibriumSolver& solver)
        : a_(solver.water().debye_huckel_A), kw_(std::pow(10.0, -solver.water().pKw)) {
        for (std::size_t step = 0; step < 3; ++step) {
            k_[step] = std::pow(10.0, -solver.pK(0, step));
        }
    }

    double ph(double phosphate, double strong_charge, double spectators_half_squares) const {
        double ionic_strength = spectators_half_squares + 0.5 * std::abs(strong_charge);
        double ph = 7;
        for (int round = 0; round < 100; ++round) {
            const double root = std::sqrt(ionic_strength);
            const double g1 = std::pow(10.0, -a_ * (root / (1 + root) - 0.3 * ionic_strength));
            const double g4 = g1 * g1 * g1 * g1;
            const double g9 = g4 * g4 * g1;
            const auto species = [&](double trial) {
                const double h = std::pow(10.0, -trial);
                const double w1 = k_[0] / (h * g1);
                const double w2 = w1 * k_[1] * g1 / (h * g4);
                const double w3 = w2 * k_[2] * g4 / (h * g9);
                const double scale = phosphate / (1 + w1 + w2 + w3);
                return std::array{h / g1, kw_ / (h * g1), w1 * scale, w2 * scale, w3 * scale};
            };
            const auto charge = [&](double trial) {
                const auto s = species(trial);
                return s[0] - s[1] - s[2] - 2 * s[3] - 3 * s[4] + strong_charge;
            };
            // pH to 1e-12, as the solver gives it: 2^(1 - bits) of a pH near 7.
            constexpr int bits = 44;
            std::uintmax_t iterations = 100;
            const auto bracket = boost::math::tools::toms748_solve(
                charge, 0.0, 14.0, boost::math::tools::eps_tolerance<double>(bits), iterations);
            ph = 0.5 * (bracket.first + bracket.second);
            const auto s = species(ph);
            const double next = spectators_half_squares + 0.5 * (s[0] + s[1] + s[2] + 4 * s[3] + 9 * s[4]);
            if (std::abs(next - ionic_strength) < 1e-12 * next) {
                break;
            }
            ionic_strength = next;
        }
        return ph;
    }

private:
    double a_;
    double kw_;
    std::array<double, 3> k_{};
};

void forward_solve(benchmark::State& state) {
    EquilibriumSolver solver(bundled_table(), phosphate_mixture(), Temperature{}, davies_model());
    int i = 0;
    for (auto _ : state) {
        solver.set_total(1, Molality::mol_per_kg(varied_sodium(++i)));
        solver.solve();
        benchmark::DoNotOptimize(solver.ph());
    }
}
BENCHMARK(forward_solve);

void toms748_nested(benchmark::State& state) {
    const EquilibriumSolver solver(bundled_table(), phosphate_mixture(), Temperature{}, davies_model());
    const Baseline baseline(solver);
    int i = 0;
    for (auto _ : state) {
        const double sodium = varied_sodium(++i);
        benchmark::DoNotOptimize(baseline.ph(0.05, sodium + 0.025, 0.5 * (sodium + 0.025)));
    }
}
BENCHMARK(toms748_nested);

void label_to_plan(benchmark::State& state) {
    const Table& table = bundled_table();
    for (auto _ : state) {
        const Label label = read_label("50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C", table);
        Request request;
        request.buffers = label.buffers;
        request.additives = label.additives;
        request.ph = label.ph;
        request.use_at = *label.ph_at;
        benchmark::DoNotOptimize(plan_recipe(table, request, davies_model()));
    }
}
BENCHMARK(label_to_plan);

/// Real time per iteration of each, in one run, for the ratio.
class Ratio : public benchmark::ConsoleReporter {
public:
    void ReportRuns(const std::vector<Run>& runs) override {
        ConsoleReporter::ReportRuns(runs);
        for (const Run& run : runs) {
            const double nanoseconds = run.GetAdjustedRealTime();
            if (run.run_name.function_name == "forward_solve") {
                ours_ = nanoseconds;
            } else if (run.run_name.function_name == "toms748_nested") {
                baseline_ = nanoseconds;
            }
        }
    }
    void Finalize() override {
        if (ours_ > 0 && baseline_ > 0) {
            fmt::print(
                "\nforward solve {:.0f} ns; Boost.Math toms748_solve nested in ionic strength {:.0f} ns; ratio "
                "{:.1f}\n",
                ours_, baseline_, baseline_ / ours_);
        }
    }

private:
    double ours_ = 0;
    double baseline_ = 0;
};

/// Both must solve the same problem before their times mean anything.
bool agree() {
    EquilibriumSolver solver(bundled_table(), phosphate_mixture(), Temperature{}, davies_model());
    const Baseline baseline(solver);
    for (int i = 0; i < 101; ++i) {
        const double sodium = varied_sodium(i);
        solver.set_total(1, Molality::mol_per_kg(sodium));
        solver.solve();
        if (std::abs(solver.ph().value() - baseline.ph(0.05, sodium + 0.025, 0.5 * (sodium + 0.025))) > 1e-9) {
            return false;
        }
    }
    return true;
}

}  // namespace

int main(int argc, char** argv) {
    if (!agree()) {
        fmt::print(stderr, "the baseline and the solver disagree: nothing to compare\n");
        return 1;
    }
    benchmark::Initialize(&argc, argv);
    Ratio ratio;
    benchmark::RunSpecifiedBenchmarks(&ratio);
    return 0;
}
