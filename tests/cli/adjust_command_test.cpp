#include <nlohmann/json.hpp>

#include "catch_shim.h"
#include "support/run_program.h"

using carboy::test::run_carboy;
using nlohmann::json;

namespace {

const std::string tris = "50 mM Tris-HCl, pH 8.0";

carboy::test::Run adjust(const std::string& label, const std::vector<std::string>& rest) {
    std::vector<std::string> arguments{"adjust", label, "--volume", "1L"};
    arguments.insert(arguments.end(), rest.begin(), rest.end());
    return run_carboy(arguments);
}

json record(const std::string& label, std::vector<std::string> rest) {
    rest.insert(rest.end(), {"--format", "json"});
    const auto run = adjust(label, rest);
    INFO(run.err);
    REQUIRE(run.status == 0);
    return json::parse(run.out);
}

}  // namespace

TEST_CASE("adjust: the amount to act on stands first, and agrees with JSON", "[cli][adjust]") {
    const auto run = adjust(tris, {"--reading", "8.3", "--with", "1 M HCl", "--prepare-at", "22 C"});
    REQUIRE(run.status == 0);
    const json same = record(tris, {"--reading", "8.3", "--with", "1 M HCl", "--prepare-at", "22 C"});
    CHECK(same.at("verdict") == "add_titrant");
    const double volume = same.at("correction").at("add_mL").get<double>();
    const std::size_t add = run.out.find("Add ");
    REQUIRE(add != std::string::npos);
    CHECK(add < run.out.find("NOW"));
    CHECK(std::stod(run.out.substr(add + 4)) == Approx(volume).epsilon(6e-3));
    CHECK(run.out.find("until the meter reads 8.0") != std::string::npos);
    CHECK(run.out.find("is assumed") == std::string::npos);
    CHECK(same.at("off").at("what") == "acid missing");
    CHECK(same.at("off").at("amount_mmol_per_L").get<double>() == Approx(volume).epsilon(0.02));  // 1 mol/L into 1 L
}

TEST_CASE("adjust: within what two meters agree to it is left", "[cli][adjust]") {
    const json left = record(tris, {"--reading", "8.02", "--with", "1 M HCl"});
    CHECK(left.at("verdict") == "leave_it");
    CHECK(left.at("correction").is_null());
    CHECK(left.at("mistakes").empty());
    CHECK(record(tris, {"--reading", "8.03", "--with", "1 M HCl"}).at("verdict") == "add_titrant");
    CHECK(adjust(tris, {"--reading", "8.01", "--with", "1 M HCl"}).out.find("Leave it") != std::string::npos);
}

TEST_CASE("adjust: the wrong kind is told with the amount of the other", "[cli][adjust]") {
    const json other = record(tris, {"--reading", "8.3", "--with", "1 M NaOH"});
    CHECK(other.at("verdict") == "other_titrant");
    CHECK(other.at("reasons").at(0).at("code") == "wrong_side");
    CHECK(other.at("correction").at("titrant").at("cas") == "7647-01-0");
    const json direct = record(tris, {"--reading", "8.3", "--with", "1 M HCl"});
    CHECK(other.at("correction").at("add_mL") == direct.at("correction").at("add_mL"));
    // Acetic acid alone does not come below about pH 2.4 at any strength that fits in.
    const json weak = record("50 mM phosphate, pH 2.0", {"--reading", "2.6", "--with", "1 M acetic acid"});
    CHECK(weak.at("reasons").at(0).at("code") == "out_of_reach");
}

TEST_CASE("adjust: room below the mark is used, and over the mark is told", "[cli][adjust]") {
    const json room = record(tris, {"--reading", "8.3", "--with", "1 M HCl", "--not-filled", "850 mL"});
    CHECK(room.at("correction").at("finished_volume_mL").get<double>() == Approx(1000));
    CHECK(room.at("correction").at("concentration_off_percent").get<double>() == Approx(0).margin(1e-9));
    const json over = record(tris, {"--reading", "8.3", "--with", "0.1 M HCl"});
    CHECK(over.at("correction").at("finished_volume_mL").get<double>() > 1080);
    CHECK(over.at("verdict") == "discard");
    CHECK(over.at("reasons").at(0).at("code") == "concentration_off");
    CHECK(record(tris, {"--reading", "8.3", "--with", "0.1 M HCl", "--within", "20"}).at("verdict") == "add_titrant");
}

TEST_CASE("adjust: the likeliest cause comes first and decides whether to make it again", "[cli][adjust]") {
    // Tris hydrochloride weighed as Tris: everything is acid.
    const json form = record(tris, {"--reading", "4.6", "--with", "1 M NaOH"});
    INFO(form.at("mistakes").dump(1));
    CHECK(form.at("warnings").dump().find("impossible_reading") == std::string::npos);
    // A buffer for the cold room set to its label at the bench.
    const json cold =
        record("50 mM Tris-HCl, pH 7.5 at 4 C", {"--reading", "7.5", "--with", "1 M HCl", "--prepare-at", "22 C"});
    CHECK(cold.at("mistakes").at(0).at("kind") == "set_at_bench");
    // More basic than the recipe without any acid in it.
    const json impossible = record(tris, {"--reading", "12.5", "--with", "1 M HCl"});
    CHECK(impossible.at("warnings").at(0).at("code") == "impossible_reading");
}

TEST_CASE("adjust: a solid is weighed in", "[cli][adjust]") {
    const json solid = record("0.2 M sodium acetate, pH 5.0", {"--reading", "4.7", "--with", "NaOH"});
    const json liquid = record("0.2 M sodium acetate, pH 5.0", {"--reading", "4.7", "--with", "10 M NaOH"});
    CHECK(solid.at("correction").at("add_mol").get<double>() ==
          Approx(liquid.at("correction").at("add_mol").get<double>()).epsilon(0.01));
    CHECK(solid.at("correction").contains("add_g"));
    CHECK_FALSE(solid.at("correction").contains("add_mL"));
}

TEST_CASE("adjust: says when the bench temperature was left out", "[cli][adjust]") {
    CHECK(adjust(tris, {"--reading", "8.3", "--with", "1 M HCl"}).out.find("25 °C is assumed") != std::string::npos);
}

TEST_CASE("adjust: bad input", "[cli][adjust][bad-input]") {
    struct Case {
        std::string label;
        std::vector<std::string> rest;
        int status;
        const char* words;
    };
    for (const Case& c : std::vector<Case>{
             {tris, {}, 2, "--reading"},
             {tris, {"--reading", "8.3"}, 2, "--with"},
             {tris, {"--reading", "high", "--with", "1 M HCl"}, 2, "--reading"},
             {tris, {"--reading", "17", "--with", "1 M HCl"}, 2, "outside -2 to 16"},
             {tris, {"--reading", "8.3", "--with", ""}, 2, "--with"},
             {tris, {"--reading", "8.3", "--with", "HCk"}, 2, "--with"},
             {tris, {"--reading", "8.3", "--with", "1 M HCk"}, 2, "did you mean"},
             {tris, {"--reading", "8.3", "--with", "1 M"}, 2, "of what"},
             {tris, {"--reading", "8.3", "--with", "0 M HCl"}, 2, "--with"},
             {tris, {"--reading", "8.3", "--with", "1 M HCl, 1 M NaOH"}, 2, "--with"},
             {tris, {"--reading", "8.3", "--with", "1 M NaCl"}, 2, "neither acid nor base"},
             {tris, {"--reading", "8.3", "--with", "5 % w/w NaOH"}, 2, "density"},
             {tris, {"--reading", "8.3", "--with", "1 M HCl", "--not-filled", "2 L"}, 2, "the mark is at"},
             {tris, {"--reading", "8.3", "--with", "1 M HCl", "--not-filled", "0 L"}, 2, "more than zero"},
             {tris, {"--reading", "8.3", "--with", "1 M HCl", "--within", "-1"}, 2, "--within"},
             {tris, {"--reading", "8.3", "--with", "1 M HCl", "--at", "4 C", "--prepare-at", "200 C"}, 2, "outside"},
             {"50 mM Tris-HCl, pH 12", {"--reading", "8.3", "--with", "1 M HCl"}, 1, "too basic"},
             {"150 mM NaCl", {"--reading", "8.3", "--with", "1 M HCl"}, 2, "no pH"},
             {tris, {"--reading", "16", "--with", "1 M HCl"}, 1, "no amount"}}) {
        const auto run = adjust(c.label, c.rest);
        INFO(c.label << " " << (c.rest.empty() ? "" : c.rest.back()) << "\n" << run.err);
        CHECK(run.status == c.status);
        CHECK(run.out.empty());
        CHECK(run.err.find(c.words) != std::string::npos);
        CHECK(run.err.find("to 1 L") == std::string::npos);  // nothing that the user did not type
    }
}
