#include <cmath>
#include <iostream>

#include <fmt/format.h>

#include "carboy/notation.h"
#include "carboy/prediction.h"

#include "catch_shim.h"
#include "support/csv.h"
#include "support/document.h"

using namespace carboy;

namespace {

// certified.csv: Buck RP et al., Measurement of pH, IUPAC Recommendations 2002, Pure Appl. Chem. 74, 2169 (2002); Bates
// RG, Determination of pH, 2nd ed. (1973).

std::string mixture_of(const std::string& composition) {
    static const std::map<std::string, std::string> reagents{{"KHtartrate", "potassium hydrogen tartrate"},
                                                             {"KH2citrate", "potassium dihydrogen citrate"},
                                                             {"KHphthalate", "potassium hydrogen phthalate"},
                                                             {"KH2PO4", "KH2PO4"},
                                                             {"Na2HPO4", "Na2HPO4"},
                                                             {"Na2B4O7.10H2O", "Na2B4O7.10H2O"},
                                                             {"NaHCO3", "NaHCO3"},
                                                             {"Na2CO3", "Na2CO3"},
                                                             {"Ca(OH)2", "calcium hydroxide"}};
    std::string line;
    std::string rest = composition;
    while (!rest.empty()) {
        const std::string item = rest.substr(0, rest.find(';'));
        rest = item.size() < rest.size() ? rest.substr(item.size() + 1) : "";
        const auto colon = item.find(':');
        line += line.empty() ? "" : ", ";
        line += item.substr(colon + 1) + " mol/kg " + reagents.at(item.substr(0, colon));
    }
    return line;
}

double predicted(const std::string& composition, double t) {
    const Table& table = bundled_table();
    const auto preparation = read_mixture(mixture_of(composition), table, Temperature{});
    return predict(table, compose(table, preparation).mixture, Temperature::celsius(t), davies_model()).ph.value();
}

/// Calcium hydroxide is a secondary standard: CaOH+ pairs form in it, which no protons-only model holds.
bool primary(const std::string& standard) {
    return standard.rfind("calcium", 0) != 0;
}

std::string short_name(const std::string& standard) {
    return standard.substr(0, standard.find(','));
}

}  // namespace

TEST_CASE("certified pH standards from 5 to 50 °C", "[reference][certified]") {
    std::map<std::string, std::map<int, double>> residuals;
    double sum = 0;
    double worst = 0;
    int count = 0;
    for (const auto& row : test::read_reference("certified.csv")) {
        const double t = std::stod(row.at("t_C"));
        const double residual = predicted(row.at("composition_mol_per_kg"), t) - std::stod(row.at("pH"));
        residuals[short_name(row.at("standard"))][static_cast<int>(t)] = residual;
        if (primary(row.at("standard")) && t >= 5 && t <= 50) {
            INFO(row.at("standard") << " at " << t << " °C: residual " << residual);
            CHECK(std::abs(residual) <= 0.02);
            sum += residual * residual;
            worst = std::max(worst, std::abs(residual));
            ++count;
        }
    }
    const double rms = std::sqrt(sum / count);
    CHECK(count >= 50);
    CHECK(rms <= 0.012);

    // Markdown, so that the documents carry it as it is.
    const int temperatures[] = {0, 5, 10, 15, 20, 25, 30, 35, 37, 40, 50};
    std::string table = "| predicted - certified pH |";
    std::string rule = "|---|";
    for (const int t : temperatures) {
        table += fmt::format(" {} °C |", t);
        rule += "---|";
    }
    table += "\n" + rule + "\n";
    for (const auto& [standard, by_temperature] : residuals) {
        table += fmt::format("| {} |", standard);
        for (const int t : temperatures) {
            const auto at = by_temperature.find(t);
            table += at == by_temperature.end() ? " |" : fmt::format(" {:+.3f} |", at->second);
        }
        table += "\n";
    }
    table += fmt::format("\nPrimary standards, 5 to 50 °C: {} values, root mean square {:.4f}, largest {:.3f}.\n",
                         count, rms, worst);
    std::cout << "\n" << table << "\n";
    INFO("DEVELOPERS.md must carry this table as printed");
    CHECK(test::project_file("DEVELOPERS.md").find(table) != std::string::npos);
}
