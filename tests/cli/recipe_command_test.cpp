#include <cmath>
#include <regex>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "catch_shim.h"
#include "support/run_program.h"

using carboy::test::run_carboy;
using nlohmann::json;

namespace {

json recipe(std::vector<std::string> arguments) {
    arguments.insert(arguments.begin(), "recipe");
    arguments.insert(arguments.end(), {"--format", "json"});
    const auto run = run_carboy(arguments);
    INFO(run.err);
    REQUIRE(run.status == 0);
    return json::parse(run.out);
}

/// The recipe as a mixture line: `weigh`, `measure` and `fill_to_mL` alone.
std::string as_mixture(const json& record) {
    std::string line;
    for (const auto& item : record.at("weigh")) {
        line += fmt::format("{} g {}, ", item.at("mass_g").get<double>(), item.at("cas").get<std::string>());
    }
    for (const auto& item : record.at("measure")) {
        line += fmt::format("{} mL of {} M {}, ", item.at("volume_mL").get<double>(),
                            item.at("concentration_mol_per_L").get<double>(), item.at("cas").get<std::string>());
    }
    return line + fmt::format("to {} mL", record.at("fill_to_mL").get<double>());
}

}  // namespace

TEST_CASE("recipe: the label of the contract", "[cli][recipe]") {
    const json record =
        recipe({"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 °C", "--volume", "2L", "--prepare-at", "22 C"});
    CHECK(record.at("kind") == "recipe");
    CHECK(record.at("route") == "titrated");
    CHECK(record.at("weigh").at(0).at("cas") == "77-86-1");
    // 0.1 mol of Tris is 12.1135 g (IUPAC standard atomic weights).
    CHECK(record.at("weigh").at(0).at("mass_g").get<double>() * record.at("weigh").at(0).at("assay").get<double>() ==
          Approx(12.1135).margin(0.001));
    CHECK(record.at("measure").size() == 1);
    CHECK(record.at("measure").at(0).at("role") == "titrant");
    CHECK(record.at("fill_to_mL") == 2000);
    REQUIRE(record.at("readings").size() == 4);
    CHECK(record.at("readings").at(0).at("volume_mL") == 1600);
    CHECK(record.at("predicted").at("pH").get<double>() == Approx(7.5).margin(1e-9));
    CHECK(record.at("predicted").at("temperature_C") == 4);
    // Tris moves by about -0.028 per kelvin (common practice): set 18 K above the use temperature it reads 0.5 lower.
    CHECK(record.at("readings").at(2).at("pH").get<double>() == Approx(7.5 - 18 * 0.028).margin(0.06));
}

TEST_CASE("recipe: fed back as a mixture line, weigh and measure alone give the target", "[cli][recipe]") {
    for (const char* label :
         {"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C",
          "0.1 M sodium phosphate, pH 7.20 at 25 C, ionic strength 0.30 M", "20 mM HEPES-KOH, pH 7.4",
          "50 mM acetic acid, 50 mM sodium phosphate, 50 mM borate, pH 8.6", "0.2 M sodium acetate, pH 5.0",
          "100 mM glycine-HCl, pH 2.8", "50 mM potassium phosphate, pH 7.0 at 37 C", "0.5 M EDTA, pH 8.0"}) {
        for (const char* route : {"titrated", "any"}) {
            const json record = recipe({label, "--volume", "750 mL", "--prepare-at", "21 C", "--route", route});
            const auto run = run_carboy({"predict", as_mixture(record), "--at",
                                         fmt::format("{} C", record.at("target").at("temperature_C").get<double>()),
                                         "--prepare-at", "21 C", "--format", "json"});
            INFO(label << "\n" << as_mixture(record) << "\n" << run.err);
            REQUIRE(run.status == 0);
            const json prediction = json::parse(run.out);
            CHECK(prediction.at("pH").get<double>() == Approx(record.at("target").at("pH").get<double>()).margin(1e-6));
            CHECK(prediction.at("ionic_strength_mol_per_kg").get<double>() ==
                  Approx(record.at("predicted").at("ionic_strength_mol_per_kg").get<double>()).epsilon(1e-6));
        }
    }
}

TEST_CASE("recipe: text and JSON agree", "[cli][recipe]") {
    const std::vector<std::string> arguments{"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C", "--volume", "1L"};
    const json record = recipe(arguments);
    const auto run = run_carboy({"recipe", arguments[0], arguments[1], arguments[2]});
    REQUIRE(run.status == 0);
    for (const auto& item : record.at("weigh")) {
        const std::regex line(item.at("reagent").get<std::string>() + R"( +([0-9.]+) (g|mg))");
        std::smatch match;
        INFO(run.out);
        REQUIRE(std::regex_search(run.out, match, line));
        const double grams = std::stod(match[1]) * (match[2] == "mg" ? 1e-3 : 1.0);
        CHECK(grams == Approx(item.at("mass_g").get<double>()).epsilon(6e-4));
    }
    for (const auto& reading : record.at("readings")) {
        CHECK(run.out.find(fmt::format("pH {:.2f}", reading.at("pH").get<double>())) != std::string::npos);
    }
    CHECK(run.out.find(fmt::format("pH {:.2f} ± {:.2f}", record.at("predicted").at("pH").get<double>(),
                                   record.at("predicted").at("uncertainty").at("pH_expanded_k2").get<double>())) !=
          std::string::npos);
}

TEST_CASE("recipe: the sheet fits 80 columns and needs no colour", "[cli][recipe]") {
    for (const char* label : {"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C",
                              "0.1 M citrate, 0.05 % w/v sodium azide, pH 5.5", "2 M potassium phosphate, pH 7.4"}) {
        const auto run = run_carboy({"recipe", label, "--volume", "1L", "--explain"});
        INFO(run.err);
        REQUIRE(run.status == 0);
        CHECK(run.out.find('\x1b') == std::string::npos);
        std::size_t begin = 0;
        while (begin < run.out.size()) {
            const std::size_t end = run.out.find('\n', begin);
            const std::string line = run.out.substr(begin, end - begin);
            std::size_t width = 0;
            for (const char c : line) {
                width += (static_cast<unsigned char>(c) & 0xC0U) != 0x80U ? 1 : 0;
            }
            INFO(line);
            CHECK(width <= 80);
            CHECK((line.empty() || line.back() != ' '));
            begin = end + 1;
        }
    }
    CHECK(run_carboy({"recipe", "50 mM Tris-HCl, pH 8", "--volume", "1L", "--color", "always"}).out.find("\x1b[1m") !=
          std::string::npos);
}

TEST_CASE("recipe: the same input gives the same bytes", "[cli][recipe]") {
    const std::vector<std::string> arguments{"recipe", "20 mM HEPES-KOH, pH 7.4", "--volume", "1L", "--format", "json"};
    const auto first = run_carboy(arguments);
    CHECK(first.out == run_carboy(arguments).out);
    setenv("LC_ALL", "de_DE.UTF-8", 1);
    CHECK(first.out == run_carboy(arguments).out);
    unsetenv("LC_ALL");
}

TEST_CASE("recipe: two temperatures that contradict each other are refused, --at alone serves", "[cli][recipe]") {
    CHECK(run_carboy({"recipe", "50 mM Tris-HCl, pH 8 at 4 C", "--volume", "1L", "--at", "37 C"}).status == 2);
    CHECK(recipe({"50 mM Tris-HCl, pH 8", "--volume", "1L", "--at", "37 C"}).at("target").at("temperature_C") == 37);
    CHECK(recipe({"50 mM Tris-HCl, pH 8 at 37 C", "--volume", "1L", "--at", "37 C"}).at("target").at("temperature_C") ==
          37);
}

TEST_CASE("recipe: says when the bench temperature was left out", "[cli][recipe]") {
    const auto assumed = run_carboy({"recipe", "50 mM Tris-HCl, pH 8", "--volume", "1L"});
    CHECK(assumed.out.find("25 °C is assumed") != std::string::npos);
    const auto given = run_carboy({"recipe", "50 mM Tris-HCl, pH 8", "--volume", "1L", "--prepare-at", "25 C"});
    CHECK(given.out.find("is assumed") == std::string::npos);
}

TEST_CASE("recipe: a request file gives what the same label gives", "[cli][recipe]") {
    const carboy::test::TemporaryFolder folder;
    const std::string file = folder.write("request.json", R"({"id":"B-0043",
        "buffers":[{"system":"phosphate","concentration":"50 mmol/L","cation":"Na+"}],
        "additives":[{"reagent":"NaCl","concentration":"150 mmol/L"}],
        "target":{"pH":7.4,"temperature":"37 Cel","ionic_strength":"0.30 mol/L"}, "volume":"1 L", "prepare_at":"22 Cel"})");
    const auto run = run_carboy({"recipe", "--request", file, "--format", "json"});
    INFO(run.err);
    REQUIRE(run.status == 0);
    const json from_file = json::parse(run.out);
    CHECK(from_file.at("id") == "B-0043");
    const json from_label = recipe({"50 mM sodium phosphate, 150 mM NaCl, pH 7.4 at 37 C, ionic strength 0.30 M",
                                    "--volume", "1L", "--prepare-at", "22 C"});
    CHECK(from_file.at("recipe_id") == from_label.at("recipe_id"));
    CHECK(from_file.at("weigh") == from_label.at("weigh"));
    CHECK(from_file.at("predicted") == from_label.at("predicted"));
}

TEST_CASE("recipe: -o writes whole files only", "[cli][recipe]") {
    const carboy::test::TemporaryFolder folder;
    const std::string file = folder.write("sheet.txt", "what was there");
    const auto fails = run_carboy({"recipe", "50 mM Tris-HCl, pH 20", "--volume", "1L", "-o", file});
    CHECK(fails.status == 2);
    CHECK(carboy::test::run_program("cat", {file}).out == "what was there");
    const auto works = run_carboy({"recipe", "50 mM Tris-HCl, pH 8", "--volume", "1L", "-o", file});
    CHECK(works.status == 0);
    CHECK(works.out.empty());
    CHECK(carboy::test::run_program("cat", {file}).out.find("Tris") != std::string::npos);
    CHECK(run_carboy({"recipe", "50 mM Tris-HCl, pH 8", "--volume", "1L", "-o", folder.path("no/such/folder.txt")})
              .status == 3);
}
