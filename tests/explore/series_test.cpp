#include "carboy/series.h"

#include <cmath>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/request_json.h"

#include "catch_shim.h"
#include "notation/range.h"
#include "support/run_program.h"

using namespace carboy;

namespace {

Series series_of(const std::string& label, const std::string& range, double mL = 100, double use_C = 25) {
    Request request = request_from_label(label + ", pH 7", bundled_table());
    request.ph.reset();
    request.use_at = Temperature::celsius(use_C);
    request.volume = Volume::millilitres(mL);
    std::vector<PH> phs;
    for (const double value : read_range(range, "test")) {
        phs.emplace_back(value);
    }
    return plan_series(bundled_table(), request, phs, davies_model());
}

std::string refusal(const std::string& label, const std::string& range) {
    try {
        series_of(label, range);
    } catch (const Error& error) {
        return error.code();
    }
    return "made";
}

}  // namespace

TEST_CASE("series: every row within 0.005 pH and 1 % of the ionic strength", "[series]") {
    struct Case {
        const char* label;
        const char* range;
        double use_C;
    };
    double worst_ph = 0;
    double worst_ionic = 0;
    for (const Case& c :
         {Case{"50 mM sodium phosphate", "6:8:0.1", 25},
          Case{"20 mM sodium phosphate, ionic strength 0.2 M", "6:8:0.25", 37},
          Case{"50 mM Tris-HCl, ionic strength 0.1 M", "7.2:9:0.2", 25},
          Case{"20 mM HEPES-NaOH, 5 mM MgCl2, ionic strength 0.15 M", "6.8:8.2:0.1", 4},
          Case{"50 mM sodium citrate", "3:6.2:0.2", 25}, Case{"0.1 M sodium acetate", "3.8:5.8:0.2", 25},
          Case{"50 mM glycine-HCl", "2.2:3.2:0.2", 25}, Case{"50 mM glycine-NaOH", "9:10.4:0.2", 25},
          Case{"25 mM MES-KOH, ionic strength 0.1 mol/kg", "5.6:6.8:0.2", 25},
          Case{"30 mM acetate, 30 mM phosphate, 30 mM Tris", "4:9:0.5", 25},
          Case{"50 mM imidazole-HCl", "6.2:7.8:0.2", 25}}) {
        const Series series = series_of(c.label, c.range, 100, c.use_C);
        for (const SeriesRow& row : series.rows) {
            INFO(c.label << " at pH " << row.target.value());
            // Computed again from the printed volumes alone.
            Preparation mixed;
            mixed.filled_to = series.request.volume;
            mixed.filled_at = series.request.prepare_at;
            double litres = 0;
            for (std::size_t s = 0; s < row.volumes.size(); ++s) {
                mixed.portions.push_back({series.stocks[s].reagent,
                                          Amount::mol(row.volumes[s].L() * series.stocks[s].strength.mol_per_L()),
                                          std::nullopt});
                litres += row.volumes[s].L();
            }
            CHECK(litres < series.request.volume.L());
            const Composed composed = compose(bundled_table(), mixed);
            const Prediction again = predict(bundled_table(), composed.mixture, series.request.use_at, davies_model());
            const double ionic =
                again.ionic_strength.mol_per_kg() *
                (series.ionic_strength.per_litre ? composed.water.kg() / series.request.volume.L() : 1);
            CHECK(std::abs(again.ph.value() - row.target.value()) <= 0.005);
            CHECK(std::abs(ionic / series.ionic_strength.value_mol - 1) <= 0.01);
            CHECK(row.ph.value() == Approx(again.ph.value()).margin(1e-12));
            worst_ph = std::max(worst_ph, std::abs(again.ph.value() - row.target.value()));
            worst_ionic = std::max(worst_ionic, std::abs(ionic / series.ionic_strength.value_mol - 1));
        }
    }
    INFO(worst_ph << " " << worst_ionic);
    CHECK(worst_ph > 0);
}

TEST_CASE("series: the stocks hold what the rows take", "[series]") {
    const Series series = series_of("50 mM sodium phosphate", "6:8:0.2", 1000);
    for (std::size_t s = 0; s < series.stocks.size(); ++s) {
        double litres = 0;
        for (const SeriesRow& row : series.rows) {
            litres += row.volumes[s].L();
        }
        CHECK(litres < series.stocks[s].volume.L());
        CHECK(series.stocks[s].amount.mol() ==
              Approx(series.stocks[s].strength.mol_per_L() * series.stocks[s].volume.L()));
    }
    CHECK(series.ionic_strength_chosen);
}

TEST_CASE("series: why there is none", "[series][bad-input]") {
    CHECK(refusal("50 mM sodium phosphate, ionic strength 0.05 M", "6:8:0.5") == "unreachable_ionic_strength");
    CHECK(refusal("50 mM sodium acetate", "1:5:1") == "unreachable_target");
    CHECK(refusal("10 M sodium acetate", "4:5:0.5") != "made");
    for (const char* range : {"", "6:8:0", "6:8:0.2:1", "six", "6:8:1e-9", "6:6", "6:8:x", "1e999:2"}) {
        INFO(range);
        CHECK_THROWS_AS(read_range(range, "test"), Error);
    }
    CHECK(read_range("6:8:0.2", "test").size() == 11);
    CHECK(read_range("8:6:0.5", "test").front() == 8);
    CHECK(read_range("8:6:0.5", "test").back() == 6);
    CHECK(read_range("7", "test") == std::vector<double>{7});
    CHECK(test::run_carboy({"series", "50 mM acetate, pH 5", "--ph", "4:5"}).status == 2);
    CHECK(test::run_carboy({"series", "50 mM acetate", "--ph", "4:50:1"}).status == 2);
    CHECK(test::run_carboy({"series", "50 mM acetate"}).status == 2);
}

TEST_CASE("series: CSV and JSON say the same", "[series]") {
    const auto csv = test::run_carboy({"series", "50 mM sodium phosphate", "--ph", "6:8:1", "--format", "csv"});
    REQUIRE(csv.status == 0);
    CHECK(csv.out.find("target_pH,A_mL,B_mL,C_mL,fill_to_mL,predicted_pH") == 0);
    const auto awk = test::run_program("bash", {"-c", "tail -n +2 | cut -d, -f1,2"}, csv.out);
    const auto jq =
        test::run_program("bash", {"-c", std::string(CARBOY_PROGRAM) +
                                             " series '50 mM sodium phosphate' --ph 6:8:1 --format json | jq -r "
                                             "'.rows[] | \"\\(.target_pH),\\(.volumes_mL.A)\"'"});
    CHECK(awk.out == jq.out);
}
