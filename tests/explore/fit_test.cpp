#include "carboy/fit.h"

#include <algorithm>
#include <cmath>
#include <iostream>
#include <random>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "carboy/constants_file.h"
#include "carboy/error.h"
#include "carboy/measurements.h"
#include "carboy/notation.h"
#include "carboy/prediction.h"

#include "catch_shim.h"
#include "explore/least_squares.h"
#include "explore/measured_curve.h"
#include "report/fit_json.h"
#include "support/csv.h"
#include "support/run_program.h"

using namespace carboy;

namespace {

const Table& table() {
    return bundled_table();
}

/// A titration of acetic acid with NaOH, at the points a bench would take; readings still to be filled in.
FitProblem acetic_acid_titration(const std::vector<std::string>& free) {
    FitProblem problem;
    const Preparation mixture = read_mixture("25 mL of 0.1 M acetic acid, to 50 mL", table(), Temperature{});
    for (const double millilitres : {0.0, 3.0, 6.0, 9.0, 12.0, 15.0, 18.0, 21.0, 23.0, 26.0, 27.0, 28.0, 29.0, 30.0}) {
        problem.points.push_back({mixture, Volume::millilitres(millilitres), 7, 0.01});
    }
    problem.titrant = read_mixture("1 L of 0.1 M NaOH, to 1 L", table(), Temperature{});
    for (const std::string& name : free) {
        problem.free.push_back(read_free_parameter(name, table()));
    }
    return problem;
}

/// What the model itself says at given values of the parameters: data without noise.
std::vector<double> readings_at(const FitProblem& problem, const std::vector<double>& parameters) {
    MeasuredCurve curve(table(), problem, davies_model());
    std::vector<double> readings(problem.points.size());
    curve.evaluate(parameters, readings);
    return readings;
}

/// Per cent of fixed-seed trials in which the 95 % interval of each parameter holds the truth.
std::vector<double> coverage(const std::vector<std::string>& free, const std::vector<double>& truth) {
    constexpr int trials = 1000;
    FitProblem problem = acetic_acid_titration(free);
    const auto exact = readings_at(problem, truth);
    std::mt19937_64 random(20261201);
    // Box and Muller, so that the numbers are the same with every library.
    std::uniform_real_distribution<double> uniform(1e-12, 1.0);
    const auto noise = [&] {
        const double radius = std::sqrt(-2 * std::log(uniform(random)));
        return radius * std::cos(2 * 3.14159265358979323846 * uniform(random));
    };
    std::vector<double> covered(free.size());
    for (int trial = 0; trial < trials; ++trial) {
        for (std::size_t i = 0; i < exact.size(); ++i) {
            problem.points[i].reading = exact[i] + 0.015 * noise();  // more than stated: the scatter must tell
        }
        const Fit fit = fit_measurements(table(), problem, davies_model());
        for (std::size_t p = 0; p < truth.size(); ++p) {
            const FittedParameter& found = fit.parameters[p];
            covered[p] += found.lower_95 <= truth[p] && truth[p] <= found.upper_95 ? 100.0 / trials : 0.0;
        }
    }
    return covered;
}

}  // namespace

TEST_CASE("Student's t: quantiles", "[fit]") {
    // Abramowitz and Stegun, Handbook of Mathematical Functions (1964), table 26.10, A = 0.95.
    const std::vector<std::pair<std::size_t, double>> printed{{1, 12.706}, {2, 4.303},  {3, 3.182},  {4, 2.776},
                                                              {5, 2.571},  {10, 2.228}, {19, 2.093}, {120, 1.980}};
    for (const auto& [freedom, value] : printed) {
        INFO(freedom);
        CHECK(std::abs(student_quantile(0.95, freedom) - value) < 6e-4);
    }
}

TEST_CASE("least squares: a straight line has its closed form", "[fit]") {
    const std::vector<double> x{0, 1, 2, 3, 4};
    const std::vector<double> y{1.1, 2.9, 5.2, 6.8, 9.1};
    LeastSquares line;
    line.readings = x.size();
    line.steps = {1e-3, 1e-3};
    line.residuals = [&](const std::vector<double>& p, std::vector<double>& r) {
        for (std::size_t i = 0; i < x.size(); ++i) {
            r[i] = p[0] + p[1] * x[i] - y[i];
        }
    };
    const auto answer = minimise(line, {0, 0});
    // By hand: n = 5, sum x = 10, sum x^2 = 30, sum y = 25.1, sum xy = 70.1.
    CHECK(answer.converged);
    CHECK(std::abs(answer.parameters[1] - (5 * 70.1 - 10 * 25.1) / 50) < 1e-9);
    CHECK(std::abs(answer.parameters[0] - (25.1 - 10 * answer.parameters[1]) / 5) < 1e-9);
    CHECK(std::abs(answer.covariance[1][1] - 5.0 / 50) < 1e-9);
    CHECK(std::abs(answer.covariance[0][0] - 30.0 / 50) < 1e-9);
    CHECK(std::abs(answer.covariance[0][1] + 10.0 / 50) < 1e-9);
}

TEST_CASE("fit: data without noise give back what made them", "[fit]") {
    const std::vector<std::string> free{"pK acetate", "amount acetic acid", "titrant-strength", "carbonate", "offset"};
    FitProblem problem = acetic_acid_titration(free);
    // All five at once need a curve that sees the carbonate: the points past the equivalence point do.
    const std::vector<double> truth{4.70, 0.97, 1.03, 0.02, -0.04};
    const auto exact = readings_at(problem, truth);
    for (std::size_t i = 0; i < exact.size(); ++i) {
        problem.points[i].reading = exact[i];
    }
    const Fit fit = fit_measurements(table(), problem, davies_model());
    for (std::size_t p = 0; p < truth.size(); ++p) {
        INFO(free[p] << ": " << fit.parameters[p].value << " of " << truth[p]);
        CHECK(std::abs(fit.parameters[p].value - truth[p]) < 1e-6);
    }
    CHECK(fit.chi_square < 1e-9);
    CHECK(fit.parameters[1].stated.value() == Approx(0.0025));
    CHECK(fit.parameters[2].stated.value() == Approx(0.1));
}

TEST_CASE("fit: 95 % intervals hold the truth in 93 to 97 % of 1,000 trials", "[fit][coverage]") {
    const std::vector<std::pair<std::vector<std::string>, std::vector<double>>> cases{
        {{"pK acetate"}, {4.70}},
        {{"pK acetate", "amount acetic acid"}, {4.70, 0.97}},
        {{"pK acetate", "amount acetic acid", "offset"}, {4.70, 0.97, -0.04}},
        {{"pK acetate", "titrant-strength", "offset", "slope"}, {4.70, 1.02, 0.03, 0.98}}};
    for (const auto& [free, truth] : cases) {
        const auto covered = coverage(free, truth);
        for (std::size_t p = 0; p < free.size(); ++p) {
            std::cout << fmt::format("coverage of {} unknowns: {:<20} {:.1f} %\n", free.size(), free[p], covered[p]);
            INFO(free[p] << " of " << free.size());
            CHECK(covered[p] >= 93);
            CHECK(covered[p] <= 97);
        }
    }
}

TEST_CASE("fit: pK2 from the handbook titration tables", "[fit][reference]") {
    // Bower VE, Bates RG, J. Res. Natl. Bur. Stand. 55, 197 (1955), as reprinted: tests/reference/titration_tables.csv.
    struct Case {
        std::string name, mixture, free;
    };
    for (const Case& c : {Case{"KHP-NaOH", "50 mL of 0.1 M potassium hydrogen phthalate, to 100 mL", "pK2 phthalate"},
                          Case{"KH2PO4-NaOH", "50 mL of 0.1 M KH2PO4, to 100 mL", "pK2 phosphate"}}) {
        FitProblem problem;
        const Preparation mixture = read_mixture(c.mixture, table(), Temperature{});
        for (const auto& row : test::read_reference("titration_tables.csv")) {
            if (row.at("table") == c.name) {
                problem.points.push_back(
                    {mixture, Volume::millilitres(std::stod(row.at("titrant_mL"))), std::stod(row.at("pH")), 0.01});
            }
        }
        problem.titrant = read_mixture("1 L of 0.1 M NaOH, to 1 L", table(), Temperature{});
        problem.filled_to = Volume::millilitres(100);
        problem.free.push_back(read_free_parameter(c.free, table()));
        const Fit fit = fit_measurements(table(), problem, davies_model());
        const FittedParameter& found = fit.parameters.front();
        const Figure& known = table().systems[found.parameter.system].steps[found.parameter.step].pK_25C;
        // 95 %: the fit, what the activity model adds, and the table's own uncertainty.
        const double known_u = std::isnan(known.uncertainty) ? 0 : known.uncertainty;
        const double allowed = 2 * std::sqrt(found.standard_error * found.standard_error +
                                             fit.model_uncertainty * fit.model_uncertainty + known_u * known_u);
        std::cout << fmt::format("{}: fitted {:.4f} ± {:.4f}, table {:.4f}, difference {:+.4f}, allowed {:.4f}\n",
                                 c.free, found.pK_25C, found.standard_error, known.value, found.pK_25C - known.value,
                                 allowed);
        CHECK(std::abs(found.pK_25C - known.value) <= allowed);
    }
}

TEST_CASE("fit: a single reading and a degree of dissociation give the constant", "[fit]") {
    // Acetic acid 0.1 mol/kg as the program itself predicts it: the constant must come back.
    const Preparation mixture = read_mixture("0.1 mol/kg acetic acid", table(), Temperature{});
    const Prediction prediction = predict(table(), compose(table(), mixture).mixture, Temperature{}, davies_model());
    double acid = 0;
    double base = 0;
    for (const PredictedSpecies& species : prediction.species) {
        acid = species.formula == "CH3COOH" ? species.molality.mol_per_kg() : acid;
        base = species.formula == "CH3COO-" ? species.molality.mol_per_kg() : base;
    }
    FitProblem problem;
    problem.free.push_back(read_free_parameter("pK acetate", table()));
    const double known = table().systems[problem.free.front().system].steps[0].pK_25C.value;
    problem.points.push_back({mixture, {}, prediction.ph.value(), 0.02});
    CHECK(std::abs(fit_measurements(table(), problem, davies_model()).parameters[0].value - known) < 1e-8);
    problem.reading = ReadingKind::degree;
    problem.points.front() = {mixture, {}, base / (acid + base), 1e-4};
    const Fit fit = fit_measurements(table(), problem, davies_model());
    CHECK(std::abs(fit.parameters[0].value - known) < 1e-8);
    // Ostwald: K = c a^2 / (1 - a), so u(pK) is about 2 u(a) / (a ln 10) for a weak acid.
    const double ostwald = 2 * 1e-4 / (problem.points.front().reading * std::log(10.0));
    CHECK(std::abs(fit.parameters[0].standard_error / ostwald - 1) < 0.05);
}

TEST_CASE("fit: what is written loads, and changes a prediction", "[fit][constants]") {
    FitProblem problem = acetic_acid_titration({"pK acetate"});
    const auto exact = readings_at(problem, {4.60});
    for (std::size_t i = 0; i < exact.size(); ++i) {
        problem.points[i].reading = exact[i] + (i % 2 == 0 ? 0.002 : -0.002);
    }
    const Fit fit = fit_measurements(table(), problem, davies_model());
    const auto overlay = lay_over(table(), fitted_constants(fit, table(), "made-up").dump());
    for (const ConstantsFault& fault : overlay.faults) {
        INFO(fault.path << ": " << fault.message);
        CHECK(false);
    }
    REQUIRE(overlay.faults.empty());
    const auto ph = [](const Table& with) {
        const auto mixture = read_mixture("50 mmol/kg acetic acid, 50 mmol/kg sodium acetate", with, Temperature{});
        return predict(with, compose(with, mixture).mixture, Temperature{}, davies_model()).ph.value();
    };
    CHECK(std::abs(ph(overlay.table) - ph(table()) - (fit.parameters[0].value - 4.756)) < 1e-3);
    // Every system of the table can be written and read again, whatever its entry holds.
    for (std::size_t s = 0; s < table().systems.size(); ++s) {
        Fit other = fit;
        other.parameters[0].parameter.system = static_cast<std::uint16_t>(s);
        other.parameters[0].pK_25C = table().systems[s].steps[0].pK_25C.value;
        other.parameters[0].value = other.parameters[0].start;
        INFO(table().systems[s].name);
        CHECK(lay_over(table(), fitted_constants(other, table(), "made-up").dump()).faults.empty());
    }
}

TEST_CASE("fit: what cannot be told is refused, what is doubtful is warned of", "[fit]") {
    const auto fails_with = [](const FitProblem& p) {
        try {
            fit_measurements(table(), p, davies_model());
        } catch (const Error& error) {
            return error.code();
        }
        return std::string();
    };
    CHECK(fails_with(acetic_acid_titration({"pK2 phosphate"})) == "not_in_the_mixture");
    CHECK(fails_with(acetic_acid_titration({"offset", "offset"})) == "free_twice");
    CHECK(fails_with(acetic_acid_titration({})) == "nothing_free");
    FitProblem problem = acetic_acid_titration({"pK acetate", "offset"});
    problem.points.resize(1);
    CHECK(fails_with(problem) == "too_few_readings");
    problem.points.assign(4, problem.points.front());
    CHECK(fails_with(problem) == "undetermined");

    const auto warns_of = [](const Fit& fit, std::string_view code) {
        return std::any_of(fit.warnings.begin(), fit.warnings.end(),
                           [&](const Warning& warning) { return warning.code == code; });
    };
    // Before the equivalence point little but the ratio of acid and base shows.
    problem = acetic_acid_titration({"amount acetic acid", "titrant-strength"});
    problem.points = {problem.points.begin() + 1, problem.points.begin() + 6};
    const auto early = readings_at(problem, {1, 1});
    for (std::size_t i = 0; i < early.size(); ++i) {
        problem.points[i].reading = early[i];
    }
    CHECK(warns_of(fit_measurements(table(), problem, davies_model()), "hardly_apart"));

    // A wrong titrant strength, not freed, shows in the runs of the residuals and in chi-square.
    problem = acetic_acid_titration({"pK acetate", "titrant-strength"});
    const auto exact = readings_at(problem, {4.756, 1.03});
    problem.free.pop_back();
    for (std::size_t i = 0; i < exact.size(); ++i) {
        problem.points[i].reading = exact[i];
    }
    const Fit fit = fit_measurements(table(), problem, davies_model());
    CHECK(warns_of(fit, "scatters_more_than_stated"));
}

TEST_CASE("fit: millivolt readings, offset and slope", "[fit]") {
    FitProblem problem = acetic_acid_titration({"pK acetate", "offset", "slope"});
    problem.reading = ReadingKind::millivolt;
    for (Point& point : problem.points) {
        point.uncertainty = 0.5;
    }
    const std::vector<double> truth{4.70, 12.0, 0.97};
    const auto exact = readings_at(problem, truth);
    // Acid reads positive; one pH at 25 °C is 59.16 mV for an ideal electrode.
    CHECK(exact.front() > exact.back());
    for (std::size_t i = 0; i < exact.size(); ++i) {
        problem.points[i].reading = exact[i];
    }
    const Fit fit = fit_measurements(table(), problem, davies_model());
    for (std::size_t p = 0; p < truth.size(); ++p) {
        CHECK(std::abs(fit.parameters[p].value - truth[p]) < 1e-5);
    }
}

TEST_CASE("measurements: files are read as benches write them, and faults have a line", "[fit][notation]") {
    const auto read = [](const char* text) {
        return read_measurements(text, table(), Temperature{}, 0.02, "bench.csv");
    };
    const auto plain = read("\xEF\xBB\xBFvolume_mL, pH\r\n0, 2.9\r\n# a pause\r\n1.5 ,3.6\r\n\r\n");
    REQUIRE(plain.points.size() == 2);
    CHECK(plain.points[1].titrant.mL() == Approx(1.5));
    CHECK(plain.points[1].uncertainty == 0.02);
    const auto mixtures = read("mixture,mV,u\n\"25 mmol/kg KH2PO4, 25 mmol/kg Na2HPO4\",8.1,0.3\n");
    CHECK(mixtures.has_mixtures);
    CHECK(mixtures.reading == ReadingKind::millivolt);
    CHECK(mixtures.points.front().mixture.portions.size() == 2);
    for (const char* bad : {"", "volume_mL,pH\n", "volume,pH\n1,2\n", "pH\n7\n", "volume_mL,mixture,pH\n1,x,7\n",
                            "volume_mL,pH\n1\n", "volume_mL,pH\n1,7;2\n", "volume_mL,pH\n-1,7\n",
                            "volume_mL,pH,u\n1,7,0\n", "volume_mL,pH,pH\n1,7,7\n", "volume_mL,pH,mV\n1,7,7\n",
                            "mixture,pH\n\"25 mM KH2PO4,7\n", "volume_mL,pH\n1,nan\n", "volume_mL,pH\n1,1e999\n"}) {
        INFO(bad);
        try {
            read(bad);
            CHECK(false);
        } catch (const Error& error) {
            CHECK(error.kind() == ErrorKind::input);
            CHECK(error.where().find("bench.csv, line ") == 0);
        }
    }
}

TEST_CASE("fit: bad input is told with its place", "[fit][cli]") {
    const test::TemporaryFolder folder;
    const std::string data = folder.write("t.csv", "volume_mL,pH\n0,2.9\n5,4.1\n");
    for (const std::vector<std::string>& words :
         {std::vector<std::string>{data, "--free", "pK acetate"},
          {data, "--mixture", "25 mL of 0.1 M acetic acid, to 50 mL", "--free", "pK acetate"},
          {data, "--mixture", "0.1 M acetic acid", "--with", "0.1 M NaOH", "--free", "pK2 acetate"},
          {data, "--mixture", "0.1 M acetic acid", "--with", "0.1 M NaOH", "--free", "pK fosfate"},
          {data, "--mixture", "0.1 M acetic acid", "--with", "0.1 M NaOH", "--free", "ofset"},
          {data, "--reading", "7", "--free", "pK acetate"},
          {"--mixture", "0.1 M acetic acid", "--free", "pK acetate"},
          {"--mixture", "0.1 M acetic acid", "--degree", "1.2", "--free", "pK acetate"}}) {
        std::vector<std::string> arguments{"fit"};
        arguments.insert(arguments.end(), words.begin(), words.end());
        const auto run = test::run_carboy(arguments);
        INFO(run.err);
        CHECK(run.status == 2);
        CHECK(run.out.empty());
    }
}
