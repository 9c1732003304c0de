#include "carboy/titration.h"

#include <cmath>
#include <iostream>

#include <fmt/format.h>

#include "carboy/notation.h"
#include "carboy/sweep.h"

#include "catch_shim.h"
#include "support/csv.h"

using namespace carboy;

namespace {

TitrationCurve curve_of(const char* sample, const char* titrant, std::optional<Volume> to = std::nullopt) {
    const Table& table = bundled_table();
    TitrationRequest request;
    request.sample = read_mixture(sample, table, Temperature{});
    request.titrant = read_mixture(titrant, table, Temperature{});
    request.to_volume = to;
    request.shifts = {0.1};
    return titrate(table, request, davies_model());
}

}  // namespace

TEST_CASE("equivalence points lie where the moles say", "[explore][titration]") {
    struct Known {
        const char* sample;
        const char* titrant;
        std::vector<double> millilitres;  // n(protons) / c, by hand
    };
    for (const Known& known :
         {Known{"10 mM HCl, to 100 mL", "0.1 M NaOH", {10}}, Known{"10 mM NaOH, to 100 mL", "0.1 M HCl", {10}},
          Known{"0.1 M acetic acid, to 50 mL", "0.1 M NaOH", {50}},
          Known{"10 mM Na2CO3, to 100 mL", "0.1 M HCl", {10, 20}}}) {
        const TitrationCurve curve = curve_of(known.sample, known.titrant);
        std::vector<double> seen;
        for (const EquivalencePoint& point : curve.equivalence) {
            if (point.steepest) {
                std::cout << fmt::format("{} with {}: {:.6f} mL, steepest {:+.6f} mL from it\n", known.sample,
                                         known.titrant, point.volume.mL(), (*point.steepest - point.volume).mL());
                seen.push_back(point.volume.mL());
            }
        }
        INFO(known.sample);
        REQUIRE(seen.size() == known.millilitres.size());
        for (std::size_t i = 0; i < seen.size(); ++i) {
            CHECK(seen[i] == Approx(known.millilitres[i]).epsilon(1e-9));
        }
    }
}

TEST_CASE("a handbook titration table through the titration itself", "[explore][reference]") {
    // Bower VE, Bates RG, J. Res. Natl. Bur. Stand. 55, 197 (1955). The base solution and water first, so that the
    // titrant fills it up to 100 mL.
    double worst = 0;
    int rows = 0;
    for (const auto& row : test::read_reference("titration_tables.csv")) {
        if (row.at("table") != "KH2PO4-NaOH" && row.at("table") != "KCl-HCl") {
            continue;
        }
        const double added = std::stod(row.at("titrant_mL"));
        const std::string sample = fmt::format("{}, to {} mL", row.at("base_solution"), 100 - added);
        const TitrationCurve curve = curve_of(sample.c_str(), row.at("titrant").c_str(), Volume::millilitres(added));
        const double residual = curve.points.back().ph.value() - std::stod(row.at("pH"));
        worst = std::max(worst, std::abs(residual));
        CHECK(std::abs(residual) <= 0.04);
        ++rows;
    }
    std::cout << fmt::format("titration tables through titrate: {} rows, largest residual {:.3f}\n", rows, worst);
    CHECK(rows == 36);
}

TEST_CASE("dilution values of standards", "[explore][reference]") {
    // pH(1:1 with water) - pH at 25 °C: Bates RG, Determination of pH, 2nd ed. (1973); from memory.
    const Table& table = bundled_table();
    const std::pair<const char*, double> known[] = {{"0.05 mol/kg potassium hydrogen phthalate", 0.052},
                                                    {"0.025 mol/kg KH2PO4, 0.025 mol/kg Na2HPO4", 0.080},
                                                    {"0.01 mol/kg Na2B4O7.10H2O", 0.01}};
    for (const auto& [line, value] : known) {
        SweepSubject subject{line, read_mixture(line, table, Temperature{}), Temperature{}, {}};
        const Sweep result = sweep(table, {subject}, {Condition::dilution, {1, 2}, false, 0}, davies_model());
        const auto& points = result.curves.front().points;
        const double change = points[1].ph.value() - points[0].ph.value();
        std::cout << fmt::format("dilution value of {}: {:+.3f}, published {:+.3f}\n", line, change, value);
        CHECK(std::abs(change - value) <= 0.02);
    }
}
