#include <cmath>
#include <iostream>
#include <set>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/notation.h"
#include "carboy/prediction.h"

#include "catch_shim.h"
#include "plan/linear_problem.h"
#include "support/csv.h"
#include "support/document.h"

using namespace carboy;

namespace {

// titration_tables.csv: Bower VE, Bates RG, J. Res. Natl. Bur. Stand. 55, 197 (1955); Bates RG, Bower VE, Anal. Chem.
// 28, 1322 (1956), as reprinted in handbooks.

double ph_of(const std::string& base, const std::string& titrant, double millilitres) {
    const Table& table = bundled_table();
    const std::string line = fmt::format("{}, {} mL of {}, to 100 mL", base, millilitres, titrant);
    const auto preparation = read_mixture(line, table, Temperature{});
    return predict(table, compose(table, preparation).mixture, Temperature{}, davies_model()).ph.value();
}

/// The recipe direction, by the planner's linear problem: the base solution is given, the titrant is its one column.
double millilitres_to(const std::string& base, const std::string& titrant, double ph) {
    const Table& table = bundled_table();
    const Preparation fixed = read_mixture(base + ", to 100 mL", table, Temperature{});
    const Preparation one_litre = read_mixture("1 L of " + titrant + ", to 1 L", table, Temperature{});
    const Portion& portion = one_litre.portions.front();
    LinearProblem problem(table, fixed, {}, {portion.reagent}, PH(ph), Temperature{}, davies_model());
    const auto answer = problem.solve({portion.reagent}, 1e-12).value();
    return 1000.0 * answer.amounts_mol.front() / portion.amount->mol();
}

std::string written(const std::string& base) {
    const auto at = base.find("KHphthalate");
    return at == std::string::npos ? base : base.substr(0, at) + "potassium hydrogen phthalate";
}

}  // namespace

TEST_CASE("handbook titration tables", "[reference][titration]") {
    // A proton-only model with Davies is right for these. The others are shown, and explained in DEVELOPERS.md: 0.1
    // mol/L boron holds polyborate ions; NaCO3- pairs shift the carbonate table.
    const std::set<std::string> held{"KCl-HCl", "KCl-NaOH", "KHP-NaOH", "KH2PO4-NaOH"};
    struct Summary {
        int rows = 0;
        double lowest = 0, highest = 0, sum = 0;
        double volume_lowest = 0, volume_highest = 0;
    };
    std::map<std::string, Summary> summaries;
    for (const auto& row : test::read_reference("titration_tables.csv")) {
        const std::string base = written(row.at("base_solution"));
        const double printed = std::stod(row.at("pH"));
        const double millilitres = std::stod(row.at("titrant_mL"));
        const double residual = ph_of(base, row.at("titrant"), millilitres) - printed;
        const double volume_residual = millilitres_to(base, row.at("titrant"), printed) - millilitres;
        if (held.count(row.at("table")) != 0) {
            INFO(row.at("table") << " pH " << printed << ": residual " << residual);
            CHECK(std::abs(residual) <= 0.04);
        }
        Summary& s = summaries[row.at("table")];
        s.lowest = s.rows == 0 ? residual : std::min(s.lowest, residual);
        s.highest = s.rows == 0 ? residual : std::max(s.highest, residual);
        s.volume_lowest = s.rows == 0 ? volume_residual : std::min(s.volume_lowest, volume_residual);
        s.volume_highest = s.rows == 0 ? volume_residual : std::max(s.volume_highest, volume_residual);
        s.sum += residual * residual;
        ++s.rows;
        std::cout << fmt::format("{:<12} pH {:5.2f}  predicted {:+.3f}   {:5.1f} mL, planned {:+.2f} mL\n",
                                 row.at("table"), printed, residual, millilitres, volume_residual);
    }
    std::string table =
        "| table | rows | predicted - printed pH | rms | planned - printed volume, mL |\n|---|---|---|---|---|\n";
    for (const auto& [name, s] : summaries) {
        table += fmt::format("| {} | {} | {:+.3f} to {:+.3f} | {:.3f} | {:+.2f} to {:+.2f} |\n", name, s.rows, s.lowest,
                             s.highest, std::sqrt(s.sum / s.rows), s.volume_lowest, s.volume_highest);
    }
    std::cout << "\n" << table << "\n";
    INFO("DEVELOPERS.md must carry this table as printed");
    CHECK(test::project_file("DEVELOPERS.md").find(table) != std::string::npos);
}
