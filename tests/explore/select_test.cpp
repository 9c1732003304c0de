#include <algorithm>
#include <cmath>
#include <iostream>

#include <nlohmann/json.hpp>

#include "carboy/constants_file.h"
#include "carboy/error.h"
#include "carboy/plan.h"
#include "carboy/prediction.h"
#include "carboy/selection.h"

#include "catch_shim.h"
#include "support/run_program.h"

using namespace carboy;

namespace {

Job job_at(double ph, double celsius) {
    Job job;
    job.ph = PH(ph);
    job.at = Temperature::celsius(celsius);
    return job;
}

std::string_view name(const Standing& standing) {
    return bundled_table().systems[standing.system].name;
}

const Standing* standing_of(const Selection& selection, std::string_view system) {
    const auto found = std::find_if(selection.ranked.begin(), selection.ranked.end(),
                                    [&](const Standing& standing) { return name(standing) == system; });
    return found == selection.ranked.end() ? nullptr : &*found;
}

const Excluded* exclusion_of(const Selection& selection, std::string_view system) {
    const auto found = std::find_if(selection.excluded.begin(), selection.excluded.end(), [&](const Excluded& one) {
        return bundled_table().systems[one.system].name == system;
    });
    return found == selection.excluded.end() ? nullptr : &*found;
}

}  // namespace

TEST_CASE("select: every buffering system is ranked or excluded, once", "[select]") {
    for (const double ph : {3.0, 5.0, 7.4, 9.0, 11.0}) {
        const Selection selection = select_buffers(bundled_table(), job_at(ph, 25), davies_model());
        const auto buffers = std::count_if(bundled_table().systems.begin(), bundled_table().systems.end(),
                                           [](const System& system) { return system.role == Role::buffer; });
        CHECK(static_cast<long>(selection.ranked.size() + selection.excluded.size()) == buffers);
        CHECK(!selection.ranked.empty());
    }
}

TEST_CASE("select: the order is by how far the pH moves, doubts and drawbacks after", "[select]") {
    const Selection selection = select_buffers(bundled_table(), job_at(7.4, 37), davies_model());
    const auto rank = [](const Standing& s) { return std::tuple(!s.drawbacks.empty(), !s.doubts.empty(), s.moves); };
    for (std::size_t i = 1; i < selection.ranked.size(); ++i) {
        CHECK(rank(selection.ranked[i - 1]) <= rank(selection.ranked[i]));
    }
    for (const Standing& standing : selection.ranked) {
        INFO(name(standing));
        CHECK(!standing.reason.empty());
        CHECK(standing.after_acid.value() < 7.4);
        CHECK(standing.after_base.value() > 7.4);
        // Within one pH of a pK: a third of the best, 0.576 of the concentration. Salt moves it a little.
        CHECK(standing.buffer_value.mol_per_kg() > 0.30 * 0.576 * 0.05);
    }
}

TEST_CASE("select: the figures are those of the planner and the forward solver", "[select]") {
    const Table& table = bundled_table();
    Job job = job_at(8.0, 4);
    job.acid = Molarity::mol_per_L(1e-4);
    const Selection selection = select_buffers(table, job, davies_model());
    const Standing* tris = standing_of(selection, "Tris");
    REQUIRE(tris != nullptr);
    Request request;
    request.buffers.push_back({id_of(table, *find_system(table, "Tris")), job.concentration, std::nullopt});
    request.ph = job.ph;
    request.use_at = job.at;
    const Plan plan = plan_recipe(table, request, davies_model());
    CHECK(std::abs(plan.predicted.buffer_value / tris->buffer_value - 1) < 1e-9);
    CHECK(std::abs(plan.predicted.ionic_strength / tris->ionic_strength - 1) < 1e-9);
    // A little acid: the shift is what the buffer value says, but for the change of ionic strength.
    const double first_order = 1e-4 / tris->buffer_value.mol_per_kg();
    CHECK(std::abs((8.0 - tris->after_acid.value()) / first_order - 1) < 0.03);
    // Tris moves about -0.028 per kelvin at 25 °C and more when cold. Common practice, no source.
    CHECK(tris->ph_per_kelvin < -0.028);
    CHECK(tris->ph_per_kelvin > -0.034);
}

TEST_CASE("select: dilution of the equimolal phosphate standard", "[select][reference]") {
    // Bates RG, Determination of pH (1973): dilution value of 0.025 + 0.025 mol/kg phosphate at 25 °C, +0.080.
    Job job = job_at(6.865, 25);
    job.concentration = {0.05, ConcentrationUnit::mol_per_kg};
    const Selection selection = select_buffers(bundled_table(), job, davies_model());
    const Standing* phosphate = standing_of(selection, "phosphate");
    REQUIRE(phosphate != nullptr);
    // The bound is that of the certified pH values themselves, 0.02.
    std::cout << "dilution value of the phosphate standard: predicted - certified " << phosphate->ph_on_dilution - 0.080
              << "\n";
    CHECK(std::abs(phosphate->ph_on_dilution - 0.080) < 0.02);
}

TEST_CASE("select: a fact excludes and is named with its source", "[select]") {
    Job job = job_at(7.2, 25);
    job.avoid = {Trait::phosphate, Trait::amine};
    const Selection selection = select_buffers(bundled_table(), job, davies_model());
    CHECK(standing_of(selection, "phosphate") == nullptr);
    const Excluded* phosphate = exclusion_of(selection, "phosphate");
    REQUIRE(phosphate != nullptr);
    CHECK(phosphate->code == "trait");
    CHECK(!phosphate->source.empty());
    CHECK(standing_of(selection, "TES") == nullptr);
    CHECK(standing_of(selection, "HEPES") != nullptr);
}

TEST_CASE("select: wavelength, load and salt limits", "[select]") {
    Job job = job_at(7.2, 25);
    job.clear_from_nm = 230;
    job.most_ionic_strength = IonicStrengthTarget{0.05, true};
    job.acid = Molarity::mol_per_L(0.005);
    job.hold_ph = 0.22;
    const Selection selection = select_buffers(bundled_table(), job, davies_model());
    REQUIRE(exclusion_of(selection, "imidazole") != nullptr);
    CHECK(exclusion_of(selection, "imidazole")->code == "absorbs");
    REQUIRE(exclusion_of(selection, "phosphate") != nullptr);
    CHECK(exclusion_of(selection, "phosphate")->code == "too_much_salt");
    for (const Standing& standing : selection.ranked) {
        CHECK(standing.moves_by_load <= 0.22);
        CHECK(standing.ionic_strength.mol_per_kg() <= 0.0505);
        // What the table cannot confirm is a doubt, never a pass.
        const Fact* cutoff = find_fact(bundled_table(), standing.system, Trait::uv_cutoff);
        CHECK((cutoff != nullptr || !standing.doubts.empty()));
    }
}

TEST_CASE("select: a mixture for a range holds better at its weakest than any of its parts", "[select]") {
    Job job = job_at(5, 25);
    job.ph_to = PH(9);
    const Selection selection = select_buffers(bundled_table(), job, davies_model());
    REQUIRE(!selection.mixed.empty());
    const auto& best = selection.mixed.front();
    CHECK(best.systems.size() > 1);
    for (const MixedBuffer& mixed : selection.mixed) {
        CHECK(mixed.least_buffer_value <= best.least_buffer_value);
    }
}

TEST_CASE("traits: read, checked and laid over", "[select][constants]") {
    const auto fact_document = [](const std::string& traits) {
        return R"({"schema": "carboy-constants/1", "traits": [)" + traits + "]}";
    };
    const auto good = lay_over(bundled_table(), fact_document(R"({"trait": "phosphate", "systems": ["phosphate"],
        "holds": false, "text": "Not this one.", "source": "common-practice"})"));
    REQUIRE(good.faults.empty());
    REQUIRE(good.changes.size() == 1);
    CHECK(good.changes.front().replaced);
    const auto index = id_of(good.table, *find_system(good.table, "phosphate")).index;
    CHECK(!find_fact(good.table, index, Trait::phosphate)->holds);
    CHECK(find_fact(bundled_table(), index, Trait::phosphate)->holds);
    for (const char* bad :
         {R"({"trait": "smelly", "systems": ["phosphate"], "text": "x", "source": "common-practice"})",
          R"({"trait": "toxic", "systems": ["fosfate"], "text": "x", "source": "common-practice"})",
          R"({"trait": "toxic", "systems": ["phosphate"], "text": "x"})",
          R"({"trait": "uv-cutoff", "systems": ["phosphate"], "text": "x", "source": "common-practice"})",
          R"({"trait": "toxic", "wavelength_nm": 200, "systems": ["phosphate"], "text": "x",
              "source": "common-practice"})"}) {
        INFO(bad);
        CHECK(!lay_over(bundled_table(), fact_document(bad)).faults.empty());
    }
}

TEST_CASE("select: from a shelf, only what is there", "[select][cli]") {
    const auto run = test::run_carboy({"select", "--ph", "7.5", "--format", "json", "--shelf",
                                       std::string(CARBOY_SOURCE_DIR) + "/examples/saltmarsh/shelf.json"});
    INFO(run.err);
    REQUIRE(run.status == 0);
    const auto record = nlohmann::json::parse(run.out);
    CHECK(record.at("ranked").at(0).at("system") == "HEPES");
    for (const auto& one : record.at("excluded")) {
        if (one.at("system") == "MOPS") {
            CHECK(one.at("code") == "not_on_shelf");
        }
        CHECK(one.at("system") != "HEPES");
    }
}

TEST_CASE("select: bad input is told with its place", "[select][cli]") {
    for (const std::vector<std::string>& words : {std::vector<std::string>{"--ph", "7", "--avoid", "phosphat"},
                                                  {"--ph", "7", "--range", "37C:4C"},
                                                  {"--ph", "9:5"},
                                                  {"--ph", "7", "--range", "4C"},
                                                  {"--ph", "7", "--acid", "5 g/L"},
                                                  {"--ph", "7", "--at", "120C"},
                                                  {"--ph", "7", "--stay-within", "-1"},
                                                  {"--ph", "7", "--avoid", "uv-cutoff"}}) {
        std::vector<std::string> arguments{"select"};
        arguments.insert(arguments.end(), words.begin(), words.end());
        const auto run = test::run_carboy(arguments);
        INFO(words.back() << ": " << run.err);
        CHECK(run.status == 2);
        CHECK(run.out.empty());
    }
    CHECK(test::run_carboy({"select", "--ph", "13.5"}).status == 1);
}
