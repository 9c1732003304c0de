#include <filesystem>
#include <random>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "catch_shim.h"
#include "support/document.h"
#include "support/run_program.h"

using carboy::test::file_content;
using carboy::test::run_carboy;
using carboy::test::run_program;
using carboy::test::TemporaryFolder;
using nlohmann::json;

namespace {

double left(const std::string& shelf, const std::string& id) {
    const json document = json::parse(file_content(shelf));
    for (const json& bottle : document.at("bottles")) {
        if (bottle.at("id") == id) {
            return std::stod(bottle.at("left").get<std::string>());
        }
    }
    return -1;
}

constexpr auto shelf_text = R"({"schema":"carboy-shelf/1","bottles":[
  {"id":"T","reagent":"Tris","left":"100 g"},
  {"id":"H","reagent":"HCl","strength":"1 M","left":"500 mL"}]})";

std::string recipe(const std::string& shelf, const std::string& volume, const std::string& into) {
    const auto run = run_carboy(
        {"recipe", "50 mM Tris-HCl, pH 8", "--volume", volume, "--shelf", shelf, "--format", "json", "-o", into});
    INFO(run.err);
    REQUIRE(run.status == 0);
    return into;
}

}  // namespace

TEST_CASE("shelf check: a file, its faults, and what is past its date", "[cli][shelf]") {
    const TemporaryFolder folder;
    const auto good = run_carboy(
        {"shelf", "check", std::string(CARBOY_SOURCE_DIR) + "/examples/saltmarsh/shelf.json", "--on", "2026-12-01"});
    CHECK(good.status == 0);
    CHECK(good.out.find("expired 2026-10-31") != std::string::npos);
    CHECK(good.out.find("valid") != std::string::npos);
    const auto bad = run_carboy({"shelf", "check", folder.write("bad.json", R"({"schema":"carboy-shelf/1","bottles":[
        {"id":"1","reagent":"Trsi"},{"id":"1","reagent":"Tris"}]})")});
    CHECK(bad.status == 4);
    CHECK(bad.out.find("did you mean Tris") != std::string::npos);
    CHECK(bad.out.find("2 faults") != std::string::npos);
    CHECK(run_carboy({"shelf", "check", folder.path("none.json")}).status == 3);
    CHECK(run_carboy({"shelf", "check", folder.write("x.json", "x"), "--format", "json"}).status == 4);
    const auto used =
        run_carboy({"recipe", "50 mM Tris-HCl, pH 8", "--volume", "1L", "--shelf", folder.path("bad.json")});
    CHECK(used.status == 4);
    CHECK(used.err.find("shelf check") != std::string::npos);
}

TEST_CASE("shelf use: booked once, undone once, and all or nothing", "[cli][shelf]") {
    const TemporaryFolder folder;
    const std::string shelf = folder.write("shelf.json", shelf_text);
    const std::string made = recipe(shelf, "2L", folder.path("recipe.json"));
    const double tris = json::parse(file_content(made)).at("weigh").at(0).at("mass_g").get<double>();

    CHECK(run_carboy({"shelf", "use", shelf, made, "--on", "2026-12-01"}).status == 0);
    CHECK(left(shelf, "T") == Approx(100 - tris).margin(1e-5));
    const auto again = run_carboy({"shelf", "use", shelf, made});
    CHECK(again.status == 0);
    CHECK(again.out.find("booked already") != std::string::npos);
    CHECK(left(shelf, "T") == Approx(100 - tris).margin(1e-5));
    CHECK(run_carboy({"shelf", "use", shelf, made, "--again"}).status == 0);
    CHECK(left(shelf, "T") == Approx(100 - 2 * tris).margin(1e-5));
    CHECK(run_carboy({"shelf", "undo", shelf}).status == 0);
    CHECK(run_carboy({"shelf", "undo", shelf}).status == 0);
    CHECK(left(shelf, "T") == Approx(100).margin(1e-5));
    CHECK(left(shelf, "H") == Approx(500).margin(1e-5));
    CHECK(run_carboy({"shelf", "undo", shelf}).status == 1);
    CHECK(run_carboy({"shelf", "check", shelf}).status == 0);

    // Sixty litres would take more than there is: nothing is booked.
    json greedy = json::parse(file_content(made));
    greedy["weigh"][0]["mass_g"] = 101;
    const std::string before = file_content(shelf);
    const auto refused = run_carboy({"shelf", "use", shelf, folder.write("greedy.json", greedy.dump())});
    CHECK(refused.status == 1);
    CHECK(file_content(shelf) == before);
    CHECK(run_carboy({"shelf", "use", shelf, folder.write("none.json", R"({"kind":"error"})")}).status == 2);
    CHECK(run_carboy({"shelf", "use", shelf, folder.write("broken.json", "{")}).status == 2);
    CHECK(file_content(shelf) == before);
}

TEST_CASE("shelf use: killed at any moment, nothing is lost or booked twice", "[cli][shelf][faults]") {
    const TemporaryFolder folder;
    const std::string shelf = folder.write("shelf.json", shelf_text);
    const std::string made = recipe(shelf, "100 mL", folder.path("recipe.json"));
    const double tris = json::parse(file_content(made)).at("weigh").at(0).at("mass_g").get<double>();
    std::mt19937_64 random(20261205);
    int killed_before = 0;
    int booked = 0;
    for (int trial = 0; trial < 60; ++trial) {
        folder.write("shelf.json", shelf_text);
        const double seconds = std::uniform_real_distribution<double>(0.0002, 0.006)(random);
        run_program("timeout",
                    {"-s", "KILL", fmt::format("{:.5f}", seconds), CARBOY_PROGRAM, "shelf", "use", shelf, made});
        const json document = json::parse(file_content(shelf));  // never half a file
        const bool done = document.contains("journal");
        CHECK(left(shelf, "T") == Approx(done ? 100 - tris : 100).margin(1e-5));
        (done ? booked : killed_before) += 1;
        // The script simply runs it again.
        REQUIRE(run_carboy({"shelf", "use", shelf, made}).status == 0);
        CHECK(left(shelf, "T") == Approx(100 - tris).margin(1e-5));
        CHECK(json::parse(file_content(shelf)).at("journal").size() == 1);
    }
    INFO(killed_before << " killed before, " << booked << " booked");
    CHECK(killed_before > 0);
    CHECK(booked > 0);
}

TEST_CASE("shelf use: two at a time, both are booked", "[cli][shelf][faults]") {
    const TemporaryFolder folder;
    const std::string shelf = folder.write("shelf.json", shelf_text);
    std::string commands;
    for (int i = 1; i <= 8; ++i) {
        const std::string made = recipe(shelf, fmt::format("{} mL", 100 * i), folder.path(fmt::format("{}.json", i)));
        commands += fmt::format("'{}' shelf use '{}' '{}' > /dev/null & ", CARBOY_PROGRAM, shelf, made);
    }
    REQUIRE(run_program("bash", {"-c", commands + "wait"}).status == 0);
    CHECK(json::parse(file_content(shelf)).at("journal").size() == 8);
    // 3.6 L in all at 50 mmol/L, 121.14 g/mol.
    const double assay =
        1 / (json::parse(file_content(folder.path("1.json"))).at("weigh").at(0).at("assay").get<double>());
    CHECK(left(shelf, "T") == Approx(100 - 3.6 * 0.05 * 121.14 * assay).margin(2e-3));
}

TEST_CASE("recipe: fed back with its rounded amounts and its bottles, by the program itself", "[cli][shelf]") {
    const std::string shelf = std::string(CARBOY_SOURCE_DIR) + "/examples/saltmarsh/shelf.json";
    for (const char* label : {"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 8.0", "20 mM sodium phosphate, pH 7.4",
                              "25 mM HEPES-NaOH, 100 mM NaCl, pH 7.2", "20 mM imidazole-HCl, pH 7.0"}) {
        for (const char* balance : {"1 mg", "0.01 g"}) {
            const auto run = run_carboy({"recipe", label, "--volume", "500 mL", "--shelf", shelf, "--on", "2026-12-01",
                                         "--balance", balance, "--format", "json"});
            INFO(label << "\n" << run.err);
            REQUIRE(run.status == 0);
            const json record = json::parse(run.out);
            std::string line;
            const auto add = [&](const json& item, const std::string& amount) {
                line += fmt::format("{}{} of bottle {}", line.empty() ? "" : ", ", amount,
                                    item.at("shelf_id").get<std::string>());
            };
            if (record.contains("make_first")) {
                continue;  // a stock that is made has no bottle; the planner's own test covers it
            }
            for (const json& item : record.at("weigh")) {
                add(item, fmt::format("{} g", item.at("mass_g").get<double>()));
            }
            for (const json& item : record.at("measure")) {
                add(item, fmt::format("{} mL", item.at("volume_mL").get<double>()));
            }
            const auto back = run_carboy({"predict", line + ", to 500 mL", "--shelf", shelf, "--format", "json"});
            INFO(line << "\n" << back.err);
            REQUIRE(back.status == 0);
            CHECK(json::parse(back.out).at("pH").get<double>() ==
                  Approx(record.at("predicted").at("pH").get<double>()).margin(1e-6));
        }
    }
}
