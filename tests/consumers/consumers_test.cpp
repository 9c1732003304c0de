#include <algorithm>
#include <filesystem>
#include <iostream>

#include <nlohmann/json.hpp>

#include "catch_shim.h"
#include "support/document.h"
#include "support/run_program.h"

// What the program writes, in the hands of programs that nobody here wrote. Where one is missing the test is skipped,
// and says so loudly; tests/run installs them all.

using carboy::test::missing;
using carboy::test::run_carboy;
using carboy::test::run_program;
using nlohmann::json;

namespace {

const std::string python = "/usr/bin/python3";
const std::string here = std::string(CARBOY_SOURCE_DIR) + "/tests/consumers/";

json output_of(std::vector<std::string> arguments) {
    arguments.insert(arguments.end(), {"--format", "json"});
    const auto run = run_carboy(arguments);
    INFO(run.err);
    REQUIRE(run.status == 0);
    return json::parse(run.out);
}

}  // namespace

TEST_CASE("molar masses against periodictable", "[consumers]") {
    const auto list = run_carboy({"constants", "list", "reagents", "--format", "json"});
    const auto run = run_program(
        python, {here + "molar_masses.py", std::string(CARBOY_DATA_DIR) + "/constants/10-elements.json"}, list.out);
    if (missing(run.status, "python3-periodictable")) {
        return;
    }
    INFO(run.out << run.err);
    CHECK(run.status == 0);
    std::cout << run.out;
}

TEST_CASE("every output is valid by its schema, by python3-jsonschema", "[consumers]") {
    std::string lines;
    const auto add = [&](const char* schema, const json& record) {
        lines += json{{"schema", schema}, {"record", record}}.dump() + "\n";
    };
    for (const char* label : {"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C",
                              "0.1 M sodium phosphate, pH 7.2, ionic strength 0.3 M", "150 mM NaCl, 5 mM KCl",
                              "2 M potassium phosphate, pH 7.4", "0.02 % w/v sodium azide, 20 mM HEPES, pH 7.4",
                              "50 mM glycine, pH 2.6", "0.1 M ammonium acetate, pH 5"}) {
        const json record = output_of({"recipe", label, "--volume", "1L"});
        add("recipe.schema.json", record);
        add("prediction.schema.json", record.at("predicted"));
    }
    for (const char* mixture : {"25 mmol/kg KH2PO4, 25 mmol/kg Na2HPO4", "1 nM HCl", "5 mM NaCl",
                                "6.057 g Tris, 34.5 mL of 1 M HCl, to 1 L"}) {
        for (const char* model : {"davies", "debye-huckel", "ideal"}) {
            add("prediction.schema.json", output_of({"predict", mixture, "--activity", model}));
        }
    }
    for (const std::vector<std::string>& batch :
         {std::vector<std::string>{"0.1 M sodium phosphate, pH 7.2", "--reading", "6.9", "--with", "NaOH 10 mol/L"},
          {"50 mM Tris-HCl, pH 7.5 at 4 C", "--reading", "7.5", "--with", "1 M HCl", "--prepare-at", "22 C"},
          {"50 mM Tris-HCl, pH 8", "--reading", "8.01", "--with", "1 M HCl"},
          {"50 mM Tris-HCl, pH 8", "--reading", "8.3", "--with", "1 M NaOH", "--not-filled", "900 mL"},
          {"0.2 M sodium acetate, pH 5", "--reading", "4.4", "--with", "NaOH"},
          {"50 mM sodium citrate, pH 5.5", "--reading", "9.9", "--with", "acetic acid"}}) {
        std::vector<std::string> arguments{"adjust", "--volume", "1L"};
        arguments.insert(arguments.end(), batch.begin(), batch.end());
        add("adjustment.schema.json", output_of(arguments));
    }
    for (const char* label : {"50 mM Trsi-HCl, pH 7.5", "50 mM sodium acetate, pH 2", ""}) {
        const auto run = run_carboy({"recipe", label, "--volume", "1L", "--format", "json"});
        add("error.schema.json", json::parse(run.err));
    }
    const std::string shelf = std::string(CARBOY_SOURCE_DIR) + "/examples/saltmarsh/shelf.json";
    add("shelf.schema.json", json::parse(carboy::test::project_file("examples/saltmarsh/shelf.json")));
    for (const std::vector<std::string>& more : {std::vector<std::string>{"--shelf", shelf},
                                                 {"--balance", "1 mg"},
                                                 {"--balance", "0.1 g", "--shelf", shelf},
                                                 {"--route", "stocks"},
                                                 {"--stock", "1 M Tris-HCl, pH 8"},
                                                 {"--hold", "Na+ = 0.2 M"}}) {
        std::vector<std::string> arguments{"recipe", "50 mM Tris-HCl, 0.2 mM EDTA, pH 8", "--volume", "200 mL"};
        arguments.insert(arguments.end(), more.begin(), more.end());
        add("recipe.schema.json", output_of(arguments));
    }
    add("series.schema.json", output_of({"series", "50 mM sodium phosphate, 5 mM EDTA", "--ph", "6:8:0.5"}));
    add("series.schema.json",
        output_of({"series", "20 mM HEPES-KOH, ionic strength 0.1 mol/kg", "--ph", "7:8", "--at", "4 C"}));
    add("request.schema.json", json::parse(carboy::test::project_file("examples/saltmarsh/request.json")));
    add("constants.schema.json", json::parse(carboy::test::project_file("examples/saltmarsh/own-constants.json")));
    for (const auto& file : std::filesystem::directory_iterator(std::string(CARBOY_DATA_DIR) + "/constants")) {
        add("constants.schema.json",
            json::parse(carboy::test::project_file("data/constants/" + file.path().filename().string())));
    }
    for (const std::vector<std::string>& demands :
         {std::vector<std::string>{"--ph", "7.4", "--at", "37C"},
          {"--ph", "8", "--range", "4C:37C", "--acid", "5mM", "--stay-within", "0.3", "--avoid", "amine", "--clear-at",
           "230"},
          {"--ph", "8", "--want", "volatile", "--ionic-strength", "100mM", "--concentration", "20 mmol/kg"},
          {"--ph", "5:9"}}) {
        std::vector<std::string> words{"select"};
        words.insert(words.end(), demands.begin(), demands.end());
        add("selection.schema.json", output_of(words));
    }
    const std::string titration = std::string(CARBOY_SOURCE_DIR) + "/examples/saltmarsh/titration.csv";
    const carboy::test::TemporaryFolder folder;
    add("fit.schema.json", output_of({"fit", titration, "--mixture", "25 mL of 0.1 M acetic acid, to 50 mL", "--with",
                                      "0.1 M NaOH", "--free", "pK acetate", "--free", "amount acetic acid", "--free",
                                      "offset", "--free", "slope", "--write", folder.path("own.json")}));
    const auto written = run_program("cat", {folder.path("own.json")});
    add("constants.schema.json", json::parse(written.out));
    add("fit.schema.json",
        output_of({"fit", "--mixture", "0.1 M acetic acid", "--degree", "0.014", "--free", "pK acetate"}));
    const auto run = run_program(python, {here + "validate.py", std::string(CARBOY_DATA_DIR) + "/schema"}, lines);
    if (missing(run.status, "python3-jsonschema")) {
        return;
    }
    INFO(run.out << run.err);
    CHECK(run.status == 0);
    std::cout << run.out;
}

TEST_CASE("jq reads a recipe", "[consumers]") {
    const auto recipe = run_carboy({"recipe", "50 mM Tris-HCl, pH 8", "--volume", "1L", "--format", "json"});
    const auto run = run_program("jq", {"-r", ".weigh[] | \"\\(.cas) \\(.mass_g * 1000 | round)\""}, recipe.out);
    if (missing(run.status, "jq")) {
        return;
    }
    CHECK(run.out == "77-86-1 6057\n");
}
