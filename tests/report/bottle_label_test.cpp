#include "report/bottle_label.h"

#include <algorithm>
#include <iostream>
#include <regex>
#include <set>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "catch_shim.h"
#include "report/text_width.h"
#include "report/xml.h"
#include "support/document.h"
#include "support/run_program.h"

// Bottle labels: what stands on them, that it stays on them, and that a reader of QR codes which nobody here wrote
// reads them back from the rendered picture.

using namespace carboy;
using carboy::test::check_is_xml;
using carboy::test::file_content;
using carboy::test::missing;
using carboy::test::run_carboy;
using carboy::test::run_program;
using carboy::test::TemporaryFolder;
using nlohmann::json;

namespace {

const std::vector<std::string> labels{
    "150 mM NaCl, 5 mM KCl", "50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 °C",
    "0.1 M Tris-HCl, 0.5 M NaCl, 10 mM MgCl2, 1 mM DTT, 1 mM EDTA, 0.02 % w/v sodium azide, 20 mM imidazole, "
    "pH 8 at 4 C"};

/// Makes the label and returns the recipe's JSON record.
json made(const std::string& label, const std::string& file, std::vector<std::string> more = {}) {
    std::vector<std::string> arguments{"recipe",   label,  "--volume",       "1L", "--prepare-at", "22C",
                                       "--format", "json", "--bottle-label", file};
    arguments.insert(arguments.end(), more.begin(), more.end());
    const auto run = run_carboy(arguments);
    INFO(run.err);
    REQUIRE(run.status == 0);
    return json::parse(run.out);
}

std::vector<std::string> codes_of(const char* reagent) {
    const Reagent* found = find_reagent(bundled_table(), reagent);
    INFO(reagent);
    REQUIRE(found != nullptr);
    std::vector<std::string> codes;
    for (const PictogramRule* rule : pictograms_of(*found, bundled_table())) {
        codes.emplace_back(rule->code);
    }
    return codes;
}

std::string unescaped(std::string text) {
    for (const auto& [entity, letter] :
         {std::pair{"&lt;", "<"}, {"&gt;", ">"}, {"&quot;", "\""}, {"&#39;", "'"}, {"&amp;", "&"}}) {
        text = std::regex_replace(text, std::regex(entity), letter);
    }
    return text;
}

BottleLabel long_label() {
    BottleLabel label;
    label.name = R"(50 mM <Tris> & "HCl", it's 1 M)";
    label.ph = "pH 7.50 ± 0.04 at 4 °C";
    label.volume = "1 L";
    label.recipe_id = std::string(64, 'a');
    label.signal_word = "Danger";
    label.pictograms = {{"GHS02", "flame"},         {"GHS03", "flame over circle"},
                        {"GHS05", "corrosion"},     {"GHS06", "skull and crossbones"},
                        {"GHS08", "health hazard"}, {"GHS09", "environment"}};
    for (int i = 0; i < 12; ++i) {
        label.contains.push_back(
            {fmt::format("<reagent> & \"{}\"", i), {"H300", "H310", "H330"}, {"H300 Fatal if swallowed"}});
    }
    return label;
}

}  // namespace

TEST_CASE("pictograms: from hazard statements by the rules of the regulation", "[labels]") {
    // Regulation (EC) No 1272/2008, annex VI, table 3 lists these articles with these pictograms (from memory).
    CHECK(codes_of("hydrochloric acid 37 %") == std::vector<std::string>{"GHS05", "GHS07"});
    CHECK(codes_of("boric acid") == std::vector<std::string>{"GHS08"});
    CHECK(codes_of("acetic acid glacial") == std::vector<std::string>{"GHS02", "GHS05"});
    CHECK(codes_of("NaOH") == std::vector<std::string>{"GHS05"});
    CHECK(codes_of("NaCl").empty());
    // Article 26: the skull takes the place of the exclamation mark.
    const auto azide = codes_of("sodium azide");
    CHECK(std::find(azide.begin(), azide.end(), "GHS06") != azide.end());
    CHECK(std::find(azide.begin(), azide.end(), "GHS07") == azide.end());
    // Annex I gives no pictogram to these, nor annex III to its EUH statements.
    const std::set<std::string_view> without{"H362", "H412", "H413"};
    for (const HazardStatement& hazard : bundled_table().hazards) {
        INFO(hazard.code);
        const bool ruled = std::any_of(
            bundled_table().pictograms.begin(), bundled_table().pictograms.end(), [&](const PictogramRule& rule) {
                return std::find(rule.statements.begin(), rule.statements.end(), hazard.code) != rule.statements.end();
            });
        CHECK(ruled != (without.count(hazard.code) == 1 || hazard.code.starts_with("EUH")));
    }
}

TEST_CASE("bottle label: the QR code reads back as recipe id and label line", "[labels]") {
    const TemporaryFolder folder;
    for (const std::string& label : labels) {
        for (const char* size : {"70x36", "99.1x38.1", "101.6x50.8"}) {
            const std::string file = folder.path("label.svg");
            const json record = made(label, file, {"--label-size", size});
            const auto picture = run_program(
                "chromium", {"--headless", "--no-sandbox", "--disable-gpu", "--user-data-dir=" + folder.path("profile"),
                             "--force-device-scale-factor=3", "--window-size=800,600",
                             "--screenshot=" + folder.path("label.png"), "file://" + file});
            if (missing(picture.status, "chromium")) {
                return;
            }
            const auto read = run_program("zbarimg", {"--raw", "-q", folder.path("label.png")});
            if (missing(read.status, "zbar-tools")) {
                return;
            }
            INFO(size << "\n" << read.err);
            CHECK(read.out == record.at("recipe_id").get<std::string>() + "\n" + label + "\n");
        }
    }
}

TEST_CASE("bottle label: the HTML prints on one page of the label's size", "[labels]") {
    const TemporaryFolder folder;
    const std::string file = folder.path("label.html");
    made(labels[1], file, {"--label-size", "70x36"});
    const auto print = run_program("chromium", {"--headless", "--no-sandbox", "--disable-gpu", "--no-pdf-header-footer",
                                                "--user-data-dir=" + folder.path("profile"),
                                                "--print-to-pdf=" + folder.path("label.pdf"), "file://" + file});
    if (missing(print.status, "chromium")) {
        return;
    }
    const auto info = run_program("pdfinfo", {folder.path("label.pdf")});
    if (missing(info.status, "poppler-utils")) {
        return;
    }
    INFO(info.out);
    std::smatch match;
    REQUIRE(std::regex_search(info.out, match, std::regex("Page size: +([0-9.]+) x ([0-9.]+) pts")));
    CHECK(std::stod(match[1]) == Approx(70 * 72 / 25.4).margin(1));
    CHECK(std::stod(match[2]) == Approx(36 * 72 / 25.4).margin(1));
    CHECK(std::regex_search(info.out, std::regex("Pages: +1\n")));
}

TEST_CASE("bottle label: says what the GHS asks for, and that the solution is not classified", "[labels]") {
    const TemporaryFolder folder;
    const std::string file = folder.path("label.svg");
    made(labels[1], file, {"--made", "2026-12-01", "--expires", "2027-03-01", "--label-size", "105x74"});
    const std::string svg = file_content(file);
    for (const char* words :
         {"pH 7.50 ± 0.0", "at 4 °C", "2026-12-01", "2027-03-01", ">Warning", "GHS05", "GHS07", "GHS08",
          "Initials ____", "H290 May be", "Contains, hazards as supplied:", "not classified."}) {
        INFO(words);
        CHECK(std::regex_replace(svg, std::regex("</text>\\s*<text[^>]*>"), " ").find(words) != std::string::npos);
    }
    made(labels[0], file);
    CHECK(file_content(file).find("No ingredient is classified") != std::string::npos);
    CHECK(file_content(file).find("Made ______") != std::string::npos);
}

TEST_CASE("bottle label: everything stays on the label, whatever its size", "[labels]") {
    CHECK(bottle_label_svg(long_label(), bundled_table().label_stock.front()).find("Contains 12 classified") !=
          std::string::npos);
    const std::regex text(
        R"re(<text x="([0-9.-]+)" y="([0-9.-]+)" font-size="([0-9.]+)"( font-weight="bold")?( text-anchor="middle")?>([^<]*)<)re");
    for (const LabelStock& stock : bundled_table().label_stock) {
        const std::string svg = bottle_label_svg(long_label(), stock);
        INFO(stock.name << "\n" << svg);
        CHECK(svg.find("<reagent>") == std::string::npos);
        CHECK(svg.find("50 mM <Tris>") == std::string::npos);
        int lines = 0;
        for (std::sregex_iterator at(svg.begin(), svg.end(), text), end; at != end; ++at, ++lines) {
            const double size = std::stod((*at)[3]);
            const double width = text_width(unescaped((*at)[6]), (*at)[4].matched) * size;
            const double left = std::stod((*at)[1]) - ((*at)[5].matched ? width / 2 : 0);
            INFO(at->str());
            CHECK(left >= 0);
            CHECK(left + width <= stock.width_mm);
            CHECK(std::stod((*at)[2]) <= stock.height_mm);
            CHECK(size >= 0.85);
        }
        CHECK(lines >= 6);
        check_is_xml(svg);
    }
}

TEST_CASE("bottle label: what is wrong is told before anything is written", "[labels]") {
    const TemporaryFolder folder;
    const std::string file = folder.path("label.svg");
    const auto refused = [&](std::vector<std::string> more, const char* words) {
        std::vector<std::string> arguments{"recipe", labels[1], "--volume", "1L"};
        arguments.insert(arguments.end(), more.begin(), more.end());
        const auto run = run_carboy(arguments);
        INFO(run.err);
        CHECK(run.status == 2);
        CHECK(run.err.find(words) != std::string::npos);
        CHECK(run.out.empty());
        CHECK(file_content(file).empty());
    };
    refused({"--bottle-label", file, "--made", "1 December 2026"}, "write it as 2026-12-31");
    refused({"--bottle-label", file, "--made", "2026-02-30"}, "'2026-02-30' is no date");
    refused({"--bottle-label", file, "--made", "2026-12-01", "--expires", "2026-11-01"}, "expired");
    refused({"--bottle-label", file, "--label-size", "1x1"}, "99.1x38.1");
    refused({"--bottle-label", folder.path("label.pdf")}, ".svg or .html");
    refused({"--label-size", "70x36"}, "--bottle-label");
    refused({"--made", "2026-12-01"}, "--format html");
}
