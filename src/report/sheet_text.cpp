#include "report/sheet_text.h"

#include <fmt/format.h>

#include "report/page.h"

namespace carboy {

namespace {

const std::vector<Page::Column> portion_columns{{2},  {31}, {1}, {10, Page::Align::right}, {2}, {10}, {2},
                                                {10}, {2},  {10}};
const std::vector<Page::Column> allowed_columns{{4}, {29}, {1}, {46}};
const std::vector<Page::Column> reading_columns{{2}, {40}, {9, Page::Align::right}, {13, Page::Align::right},
                                                {3}, {13}};
const std::vector<Page::Column> result_columns{{2}, {37}, {41}};
const std::vector<Page::Column> field_columns{{2}, {15}, {21}, {4}, {17}, {21}};
constexpr auto blank = "__________";

void portions(Page& page, std::string_view heading, const std::vector<Sheet::Portion>& list) {
    if (list.empty()) {
        return;
    }
    page.heading(heading);
    page.row(portion_columns, {"", "", "", "target", "", "actual", "", "lot", "", "initials"});
    for (const Sheet::Portion& portion : list) {
        page.row(portion_columns, {"", portion.reagent, "", portion.target, "", blank, "",
                                   portion.lot.empty() ? blank : portion.lot, "", blank});
        page.row(allowed_columns,
                 {"", portion.formula, "",
                  fmt::format("{}{}{}", portion.range.empty() ? "" : "allowed " + portion.range,
                              portion.range.empty() || portion.detail.empty() ? "" : "; ", portion.detail)});
    }
}

void readings(Page& page, const Sheet& sheet) {
    page.heading(fmt::format("THE METER, AT {}", sheet.bench_temperature));
    page.row(reading_columns, {"", "", "volume", "pH", "", "read"});
    for (const Sheet::Reading& reading : sheet.readings) {
        page.row(reading_columns, {"", reading.after, reading.volume, reading.ph, "", blank});
    }
}

void cautions(Page& page, const Sheet& sheet) {
    page.heading("CAUTIONS");
    for (const Sheet::Hazard& hazard : sheet.hazards) {
        std::string text =
            fmt::format("{}: {}.", hazard.reagent, hazard.signal_word.empty() ? "Caution" : hazard.signal_word);
        for (const Sheet::Line& statement : hazard.statements) {
            text += fmt::format(" {} {}.", statement.term, statement.text);
        }
        page.paragraph(text);
    }
    for (const std::string& advice : sheet.advice) {
        page.paragraph(advice);
    }
}

void record(Page& page, const Sheet& sheet) {
    constexpr auto line = "____________________";
    const auto filled = [&](const std::string& value) { return value.empty() ? std::string(line) : value; };
    page.heading("RECORD");
    const auto pair = [&](const char* left, const std::string& left_value, const char* right,
                          const std::string& right_value) {
        page.row(field_columns, {"", left, left_value, "", right, right_value});
    };
    pair("made by", line, "made on", filled(sheet.made));
    pair("checked by", line, "checked on", line);
    pair("balance", line, "meter", line);
    pair("standards", line, "slope, %", line);
    pair("final pH", line, "temperature read", line);
    pair("treatment", line, "container", line);
    pair("store at", line, "use by", filled(sheet.expires));
}

}  // namespace

std::string sheet_text(const Sheet& sheet) {
    Page page(false);
    page.title(sheet.title, sheet.volume);
    page.paragraph(fmt::format("Recipe {}{}", short_recipe_id(sheet.recipe_id),
                               sheet.request_id.empty() ? "" : ", " + sheet.request_id),
                   "");
    portions(page, "MAKE FIRST", sheet.stocks);
    portions(page, "WEIGH AND MEASURE", sheet.portions);
    page.paragraph(fmt::format("Purified water to {} at {}. Allowed: within {} of the target.", sheet.volume,
                               sheet.bench_temperature, sheet.tolerance));
    page.heading("STEPS");
    int number = 0;
    for (const std::string& step : sheet.steps) {
        page.paragraph(step, fmt::format("  [ ] {:2}. ", ++number));
    }
    readings(page, sheet);
    page.heading("IN USE");
    for (const Sheet::Line& line : sheet.result) {
        page.row(result_columns, {"", line.term, line.text});
    }
    page.paragraph("± is the expanded uncertainty, k = 2; amounts and meter are not in it.");
    if (!sheet.notes.empty()) {
        page.heading("TAKE NOTE");
        for (const std::string& note : sheet.notes) {
            page.paragraph(note, "  - ");
        }
    }
    cautions(page, sheet);
    record(page, sheet);
    page.blank();
    page.paragraph(fmt::format("Recipe id {}. {}.", sheet.recipe_id, sheet.program), "");
    return page.text();
}

}  // namespace carboy
