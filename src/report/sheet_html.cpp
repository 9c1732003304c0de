#include "report/sheet_html.h"

#include <cctype>

#include <fmt/format.h>

#include "report/markup.h"
#include "report/sheet_style.h"

namespace carboy {

namespace {

/// `Na2HPO4·7H2O` with its figures set low: those that follow an atom or a bracket.
void formula(Markup& page, std::string_view text) {
    std::string run;
    bool low = false;
    const auto flush = [&] {
        if (!run.empty() && low) {
            page.element("sub", run);
        } else {
            page.text(run);
        }
        run.clear();
    };
    char before = ' ';
    for (const char c : text) {
        const bool digit = std::isdigit(static_cast<unsigned char>(c)) != 0;
        const bool counts =
            digit && (low || std::isalpha(static_cast<unsigned char>(before)) != 0 || before == ')' || before == ']');
        if (counts != low) {
            flush();
            low = counts;
        }
        run += c;
        before = c;
    }
    flush();
}

/// A place to write, by pen or by keyboard; `name` is what a screen reader says.
void blank(Markup& page, std::string_view name, std::string_view value, bool number) {
    page.empty("input", {{"type", "text"},
                         {"aria-label", name},
                         {value.empty() ? "" : "value", value},
                         {number ? "inputmode" : "", "decimal"},
                         {"autocomplete", "off"}});
}

/// A named blank; `id` is unique on the page.
void field(Markup& page, std::string_view id, std::string_view name, std::string_view value = {}) {
    page.open("div", {{"class", "field"}});
    page.element("label", name, {{"for", id}});
    page.empty("input", {{"type", "text"}, {"id", id}, {value.empty() ? "" : "value", value}, {"autocomplete", "off"}});
    page.close();
}

void open_section(Markup& page, std::string_view id, std::string_view heading, std::string_view kind = {}) {
    page.open("section", {{"aria-labelledby", id}, {kind.empty() ? "" : "class", kind}});
    page.element("h2", heading, {{"id", id}});
}

void fact(Markup& page, std::string_view name, std::string_view value, std::string_view kind = {}) {
    page.open("div", {{kind.empty() ? "" : "class", kind}});
    page.element("dt", name);
    page.element("dd", value);
    page.close();
}

void header(Markup& page, const Sheet& sheet) {
    page.open("header");
    page.open("p", {{"class", "kicker"}});
    page.element("span", "Recipe sheet");
    page.element("span", fmt::format("Recipe {}{}{}", short_recipe_id(sheet.recipe_id),
                                     sheet.request_id.empty() ? "" : " · ", sheet.request_id));
    page.close();
    page.element("h1", sheet.title);
    page.open("dl", {{"class", "key"}});
    fact(page, "Make", fmt::format("{} at {}", sheet.volume, sheet.bench_temperature));
    if (!sheet.stop_at.empty()) {
        fact(page, "Stop the titrant at", fmt::format("pH {}", sheet.stop_at), "act");
    }
    fact(page, "In use", sheet.in_use);
    page.close();
    page.close();
}

void blank_cell(Markup& page, const Sheet::Portion& portion, std::string_view name, std::string_view value,
                bool number) {
    page.open("td", {{"class", number || name == "Lot" ? "blank" : "blank short"}, {"data-name", name}});
    blank(page, fmt::format("{}: {}", portion.reagent, name), value, number);
    page.close();
}

void portions(Markup& page, const std::vector<Sheet::Portion>& list, std::string_view caption) {
    page.open("table", {{"class", "portions"}});
    page.element("caption", caption);
    page.open("thead");
    page.open("tr");
    page.element("th", "Reagent", {{"scope", "col"}});
    page.element("th", "Target", {{"scope", "col"}, {"class", "figure"}});
    page.element("th", "Allowed", {{"scope", "col"}});
    for (const char* name : {"Actual", "Lot", "Initials"}) {
        page.element("th", name, {{"scope", "col"}});
    }
    page.close();
    page.close();
    page.open("tbody");
    for (const Sheet::Portion& portion : list) {
        page.open("tr");
        page.open("th", {{"scope", "row"}});
        page.element("b", portion.reagent);
        if (!portion.formula.empty()) {
            page.text(" ");
            formula(page, portion.formula);
        }
        if (!portion.detail.empty()) {
            page.element("span", portion.detail);
        }
        page.close();
        page.element("td", portion.target, {{"class", "figure target"}});
        page.element("td", portion.range.empty() ? "by the meter" : portion.range, {{"class", "range"}});
        blank_cell(page, portion, "Actual", {}, true);
        blank_cell(page, portion, "Lot", portion.lot, false);
        blank_cell(page, portion, "Initials", {}, false);
        page.close();
    }
    page.close();
    page.close();
}

void ingredients(Markup& page, const Sheet& sheet) {
    if (!sheet.stocks.empty()) {
        open_section(page, "make-first", "Make first");
        portions(page, sheet.stocks, "Stock solutions to make first");
        page.close();
    }
    open_section(page, "weigh", "Weigh and measure");
    portions(page, sheet.portions, "What to weigh and measure, with blanks for what was weighed, lot and initials");
    page.element("p",
                 fmt::format("Purified water to {} at {}. Allowed: within {} of the target.", sheet.volume,
                             sheet.bench_temperature, sheet.tolerance),
                 {{"class", "small"}});
    page.close();
}

void steps(Markup& page, const Sheet& sheet) {
    open_section(page, "steps", "Steps");
    page.open("ol", {{"class", "steps"}, {"role", "list"}});
    for (std::size_t i = 0; i < sheet.steps.size(); ++i) {
        const std::string id = fmt::format("step-{}", i + 1);
        page.open("li");
        page.empty("input", {{"type", "checkbox"}, {"id", id}});
        page.element("label", sheet.steps[i], {{"for", id}});
        page.close();
    }
    page.close();
    page.close();
}

void readings(Markup& page, const Sheet& sheet) {
    open_section(page, "meter", fmt::format("The meter, at {}", sheet.bench_temperature));
    page.open("table", {{"class", "readings"}});
    page.element("caption", "Readings to expect, with blanks for those taken");
    page.open("thead");
    page.open("tr");
    page.element("th", "When", {{"scope", "col"}});
    page.element("th", "Volume", {{"scope", "col"}, {"class", "figure"}});
    page.element("th", "pH", {{"scope", "col"}, {"class", "figure"}});
    page.element("th", "Read", {{"scope", "col"}});
    page.close();
    page.close();
    page.open("tbody");
    for (const Sheet::Reading& reading : sheet.readings) {
        page.open("tr", {{reading.act_on ? "class" : "", "act"}});
        page.element("th", reading.after, {{"scope", "row"}});
        page.element("td", reading.volume, {{"class", "figure"}});
        page.element("td", reading.ph, {{"class", "figure ph"}});
        page.open("td", {{"class", "blank"}});
        blank(page, fmt::format("pH read, {}", reading.after), {}, true);
        page.close();
        page.close();
    }
    page.close();
    page.close();
    page.open("div", {{"class", "fields"}});
    field(page, "meter-id", "Meter");
    field(page, "standards", "Calibrated with standards");
    field(page, "slope", "Slope, %");
    field(page, "meter-temperature", "Temperature read, °C");
    page.close();
    page.close();
}

void result(Markup& page, const Sheet& sheet) {
    open_section(page, "result", "In use");
    page.open("dl", {{"class", "result"}});
    for (const Sheet::Line& line : sheet.result) {
        page.element("dt", line.term);
        page.element("dd", line.text);
    }
    page.close();
    page.element("p", "± is the expanded uncertainty, k = 2; amounts and meter are not in it.", {{"class", "small"}});
    page.close();
}

void notes(Markup& page, const Sheet& sheet) {
    if (sheet.notes.empty()) {
        return;
    }
    open_section(page, "notes", "Take note");
    page.open("ul", {{"class", "notes"}, {"role", "list"}});
    for (const std::string& note : sheet.notes) {
        page.element("li", note);
    }
    page.close();
    page.close();
}

void cautions(Markup& page, const Sheet& sheet) {
    open_section(page, "cautions", "Cautions");
    page.open("ul", {{"class", "cautions"}, {"role", "list"}});
    for (const Sheet::Hazard& hazard : sheet.hazards) {
        page.open("li");
        page.element("b", hazard.reagent);
        page.text(" ");
        page.element("span", hazard.signal_word.empty() ? "Caution" : hazard.signal_word, {{"class", "signal"}});
        for (const Sheet::Line& statement : hazard.statements) {
            page.text(" ");
            page.element("span", statement.term, {{"class", "code"}});
            page.text(" " + statement.text + ".");
        }
        page.close();
    }
    for (const std::string& advice : sheet.advice) {
        page.element("li", advice);
    }
    page.close();
    page.close();
}

void record(Markup& page, const Sheet& sheet) {
    open_section(page, "record", "Record", "record");
    page.open("div", {{"class", "fields"}});
    field(page, "balance", "Balance");
    field(page, "made-by", "Made by");
    field(page, "made-on", "Made on", sheet.made);
    field(page, "checked-by", "Checked by");
    field(page, "checked-on", "Checked on");
    field(page, "final-ph", "Final pH");
    field(page, "treatment", "Filtered or autoclaved");
    field(page, "store-at", "Store at");
    field(page, "container", "Container");
    field(page, "use-by", "Use by", sheet.expires);
    page.close();
    page.close();
}

/// Long sheets are set smaller, so that they still print on one page: by what a page was measured to hold.
std::string_view length_class(const Sheet& sheet) {
    std::size_t letters = 0;
    for (const auto* list : {&sheet.steps, &sheet.notes, &sheet.advice}) {
        for (const std::string& text : *list) {
            letters += text.size() + 20;
        }
    }
    for (const Sheet::Hazard& hazard : sheet.hazards) {
        letters += 30;
        for (const Sheet::Line& statement : hazard.statements) {
            letters += statement.text.size() + 8;
        }
    }
    letters += 150 * (sheet.portions.size() + sheet.stocks.size() + sheet.readings.size());
    return letters < 2700 ? "" : letters < 3600 ? "long" : letters < 4800 ? "longer" : "longest";
}

}  // namespace

std::string sheet_html(const Sheet& sheet) {
    Markup page;
    const std::string_view length = length_class(sheet);
    page.raw("<!DOCTYPE html>\n");
    page.open("html", {{"lang", "en"}, {length.empty() ? "" : "class", length}});
    page.open("head");
    page.empty("meta", {{"charset", "utf-8"}});
    page.empty("meta", {{"name", "viewport"}, {"content", "width=device-width, initial-scale=1"}});
    page.element("title", fmt::format("{} · {}", sheet.title, sheet.volume));
    page.open("style");
    page.raw(sheet_style);
    page.close();
    page.close();
    page.open("body");
    header(page, sheet);
    page.open("main");
    ingredients(page, sheet);
    page.open("div", {{"class", "columns"}});
    page.open("div");
    steps(page, sheet);
    notes(page, sheet);
    page.close();
    page.open("div");
    readings(page, sheet);
    result(page, sheet);
    page.close();
    page.close();
    cautions(page, sheet);
    record(page, sheet);
    page.close();
    page.open("footer");
    page.element("p", fmt::format("Recipe id {}. {}.", sheet.recipe_id, sheet.program));
    return page.finish();
}

}  // namespace carboy
