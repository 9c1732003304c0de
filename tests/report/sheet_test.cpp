#include <iostream>
#include <regex>
#include <sstream>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "catch_shim.h"
#include "report/markup.h"
#include "report/sheet_html.h"
#include "report/sheet_markdown.h"
#include "report/sheet_text.h"
#include "report/xml.h"
#include "support/csv.h"
#include "support/document.h"
#include "support/run_program.h"

// Recipe sheets as a lab gets them: in the hands of a browser, a printer, a Markdown reader and a spreadsheet that
// nobody here wrote. Where a program is missing its check is skipped, loudly; tests/run installs them.

using namespace carboy;
using carboy::test::check_is_xml;
using carboy::test::missing;
using carboy::test::run_carboy;
using carboy::test::run_program;
using carboy::test::TemporaryFolder;
using nlohmann::json;

namespace {

const std::string here = std::string(CARBOY_SOURCE_DIR) + "/tests/report/";
const std::string python = "/usr/bin/python3";

const std::vector<std::vector<std::string>> recipes{
    {"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C", "--volume", "2L", "--prepare-at", "22 C"},
    {"150 mM NaCl, 5 mM KCl", "--volume", "500 mL"},
    {"50 mM sodium phosphate, pH 7.2", "--volume", "1L", "--route", "stocks"},
    {"50 mM acetic acid, 50 mM sodium phosphate, 50 mM borate, pH 8.6", "--volume", "1L", "--balance", "0.1 mg"},
    // As long as they come: eight weighings, two warnings, five classified reagents, nine steps.
    {"0.1 M Tris-HCl, 0.5 M NaCl, 10 mM MgCl2, 1 mM DTT, 1 mM EDTA, 0.02 % w/v sodium azide, 20 mM imidazole, "
     "pH 8 at 4 C",
     "--volume", "2L", "--prepare-at", "22 C"}};

std::string written(std::vector<std::string> arguments, const std::string& format) {
    arguments.insert(arguments.begin(), "recipe");
    arguments.insert(arguments.end(), {"--format", format});
    const auto run = run_carboy(arguments);
    INFO(run.err);
    REQUIRE(run.status == 0);
    return run.out;
}

/// A sheet whose every text tries to break out of its format.
Sheet hostile_sheet() {
    const std::string text = R"(<b>"R&D" | *it's* `x` _y_ [z](w) # \ </style><script>)";
    Sheet sheet;
    sheet.title = sheet.request_id = sheet.recipe_id = sheet.stop_at = sheet.made = sheet.expires = text;
    sheet.volume = sheet.bench_temperature = sheet.in_use = sheet.tolerance = sheet.program = "1 L";
    sheet.portions = {{text, text, "1 g", "0.9 to 1.1 g", text, text, true}};
    sheet.readings = {{text, "1 L", "7.00", true}};
    sheet.steps = sheet.notes = sheet.advice = {text, text, text};
    sheet.result = {{text, text}};
    sheet.hazards = {{text, "Danger", {{"H300", text}}}};
    return sheet;
}

std::size_t count_of(const std::string& text, const std::string& part) {
    std::size_t count = 0;
    for (std::size_t at = text.find(part); at != std::string::npos; at = text.find(part, at + part.size())) {
        ++count;
    }
    return count;
}

}  // namespace

TEST_CASE("sheet: the HTML has the structure that a screen reader needs", "[sheets]") {
    for (const auto& recipe : recipes) {
        const std::string page = written(recipe, "html");
        const auto structure = run_program(python, {here + "sheet_structure.py"}, page);
        INFO(recipe.front() << "\n" << structure.out << structure.err);
        if (!missing(structure.status, "python3")) {
            CHECK(structure.status == 0);
        }
        // The page is XML too, which is the strictest reader there is.
        check_is_xml(page);
    }
}

TEST_CASE("sheet: prints on one A4 and one Letter page", "[sheets]") {
    const TemporaryFolder folder;
    for (const auto& recipe : recipes) {
        const std::string page = written(recipe, "html");
        for (const char* paper : {"A4", "letter"}) {
            // Headless printing knows only one paper by itself; the page leaves the choice to the printer.
            const std::string sized =
                std::regex_replace(page, std::regex("@page \\{"), fmt::format("@page {{ size: {};", paper));
            REQUIRE(sized != page);
            const std::string file = folder.write("sheet.html", sized);
            const auto print =
                run_program("chromium", {"--headless", "--no-sandbox", "--disable-gpu", "--no-pdf-header-footer",
                                         "--user-data-dir=" + folder.path("profile"),
                                         "--print-to-pdf=" + folder.path("sheet.pdf"), "file://" + file});
            if (missing(print.status, "chromium")) {
                return;
            }
            const auto info = run_program("pdfinfo", {folder.path("sheet.pdf")});
            if (missing(info.status, "poppler-utils")) {
                return;
            }
            INFO(recipe.front() << " on " << paper << "\n" << info.out << print.err);
            CHECK(std::regex_search(info.out, std::regex("Pages: +1\n")));
            CHECK(info.out.find(paper == std::string("A4") ? "(A4)" : "(letter)") != std::string::npos);
        }
    }
}

TEST_CASE("sheet: every text is escaped", "[sheets]") {
    const Sheet sheet = hostile_sheet();
    const std::string page = sheet_html(sheet);
    CHECK(page.find("<b>\"R") == std::string::npos);
    CHECK(page.find("<script") == std::string::npos);
    CHECK(count_of(page, "</style>") == 1);
    CHECK(page.find("&lt;b&gt;&quot;R&amp;D&quot; | *it&#39;s*") != std::string::npos);
    check_is_xml(page);
    Markup markup;
    markup.element("p", "a\x01\x1f<", {{"title", "\"'&"}});
    CHECK(markup.finish() == "<p title=\"&quot;&#39;&amp;\">a  &lt;</p>\n");
}

TEST_CASE("sheet: Markdown renders as headings, lists and tables with the texts as they were", "[sheets]") {
    const std::string script =
        "import sys\ntry:\n    import markdown\nexcept ImportError:\n    sys.exit(77)\n"
        "print(markdown.markdown(sys.stdin.read(), extensions=['tables']))";
    for (const auto& recipe : recipes) {
        const auto run = run_program(python, {"-c", script}, written(recipe, "markdown"));
        if (missing(run.status, "python3-markdown")) {
            return;
        }
        INFO(run.out << run.err);
        CHECK(count_of(run.out, "<h1>") == 1);
        CHECK(count_of(run.out, "<table>") == (recipe.back() == "stocks" ? 4 : 3));
        CHECK(count_of(run.out, "<h2>") >= 6);
        CHECK(run.out.find("<li>[ ] ") != std::string::npos);
        CHECK(run.out.find(">| ") == std::string::npos);
        CHECK(run.out.find("**") == std::string::npos);
    }
    const auto run = run_program(python, {"-c", script}, sheet_markdown(hostile_sheet()));
    INFO(run.out << run.err);
    CHECK(run.out.find("<script") == std::string::npos);
    CHECK(run.out.find("<h1>&lt;b&gt;\"R&amp;D\" | *it's* `x` _y_ [z](w) # \\ &lt;/style&gt;&lt;script&gt;</h1>") !=
          std::string::npos);
    CHECK(count_of(run.out, "<table>") == 3);
    CHECK(run.out.find("<em>") == std::string::npos);
    CHECK(run.out.find("<a ") == std::string::npos);
}

TEST_CASE("sheet: plain text has blanks and fits 80 columns", "[sheets]") {
    for (const auto& recipe : recipes) {
        const std::string page = written(recipe, "sheet");
        std::istringstream lines(page);
        for (std::string line; std::getline(lines, line);) {
            std::size_t width = 0;
            for (const char c : line) {
                width += (static_cast<unsigned char>(c) & 0xC0U) != 0x80U ? 1 : 0;
            }
            INFO(line);
            CHECK(width <= 80);
        }
        CHECK(page.find("allowed") != std::string::npos);
        CHECK(page.find("  [ ]  1. ") != std::string::npos);
        CHECK(page.find("checked by     ____________________") != std::string::npos);
    }
}

TEST_CASE("sheet: targets and allowed ranges agree with the record", "[sheets]") {
    const std::vector<std::string>& recipe = recipes.front();
    const json record = json::parse(written(recipe, "json"));
    const std::string page = written(recipe, "sheet");
    for (const auto& item : record.at("weigh")) {
        const std::string name = item.at("reagent");
        const std::regex row(name + R"( +([0-9.]+) (g|mg) [^]*?allowed ([0-9.]+) to ([0-9.]+) (g|mg))");
        std::smatch match;
        INFO(page);
        REQUIRE(std::regex_search(page, match, row));
        const double unit = match[2] == "mg" ? 1e-3 : 1;
        CHECK(match[2] == match[5]);
        const double mass = item.at("mass_g");
        CHECK(std::stod(match[1]) * unit == Approx(mass).epsilon(6e-4));
        // Common practice, no source: a weighing is within 1 % of its target.
        CHECK(std::stod(match[3]) * unit == Approx(0.99 * mass).epsilon(6e-4));
        CHECK(std::stod(match[4]) * unit == Approx(1.01 * mass).epsilon(6e-4));
    }
    CHECK(page.find(record.at("recipe_id").get<std::string>()) != std::string::npos);
    CHECK(written(recipe, "html").find(record.at("recipe_id").get<std::string>()) != std::string::npos);
}

TEST_CASE("recipe --format csv: one row an ingredient, with the figures of the record", "[sheets]") {
    for (const auto& recipe : recipes) {
        const json record = json::parse(written(recipe, "json"));
        std::istringstream lines(written(recipe, "csv"));
        std::vector<std::vector<std::string>> rows;
        for (std::string line; std::getline(lines, line);) {
            rows.push_back(test::split_csv_line(line));
            CHECK(rows.back().size() == rows.front().size());
        }
        REQUIRE(rows.size() == 2 + record.at("weigh").size() + record.at("measure").size() +
                                   (record.contains("make_first") ? record.at("make_first").size() : 0));
        const auto column = [&](const char* name) {
            return static_cast<std::size_t>(std::find(rows[0].begin(), rows[0].end(), name) - rows[0].begin());
        };
        std::vector<double> masses;
        for (const auto& row : rows) {
            if (row[column("action")] == "weigh") {
                masses.push_back(std::stod(row[column("mass_g")]));
            }
            CHECK((&row == &rows.front() || row[column("recipe_id")] == record.at("recipe_id")));
        }
        REQUIRE(masses.size() == record.at("weigh").size());
        for (std::size_t i = 0; i < masses.size(); ++i) {
            CHECK(masses[i] == record.at("weigh").at(i).at("mass_g").get<double>());
        }
        CHECK(rows.back()[column("action")] == "fill");
        CHECK(std::stod(rows.back()[column("fill_to_mL")]) == record.at("fill_to_mL").get<double>());
    }
}
