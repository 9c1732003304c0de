#include "cli/bottle_options.h"

#include <algorithm>
#include <vector>

#include <CLI/CLI.hpp>
#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/error.h"
#include "carboy/notation.h"

#include "cli/file.h"

namespace carboy::cli {

namespace {

std::optional<Date> date_of(const std::string& text, const char* where) {
    return text.empty() ? std::nullopt : std::optional(read_date(text, where));
}

const LabelStock& stock_of(const BottleOptions& options, const Table& table) {
    if (options.label_size.empty() && !table.label_stock.empty()) {
        return table.label_stock.front();
    }
    const auto known = std::find_if(table.label_stock.begin(), table.label_stock.end(),
                                    [&](const LabelStock& stock) { return stock.name == options.label_size; });
    if (known == table.label_stock.end()) {
        std::vector<std::string_view> names;
        for (const LabelStock& stock : table.label_stock) {
            names.push_back(stock.name);
        }
        throw Error(
            ErrorKind::input, "unknown_label_size",
            fmt::format("the table knows no label called '{}'", options.label_size), "--label-size",
            fmt::format("it knows {}; --constants FILE can add others under 'label_stock'", fmt::join(names, ", ")));
    }
    return *known;
}

bool is_svg(const std::string& file) {
    return file.ends_with(".svg") || file.ends_with(".SVG");
}

bool is_html(const std::string& file) {
    return file.ends_with(".html") || file.ends_with(".htm");
}

}  // namespace

BottleDates BottleOptions::dates() const {
    const BottleDates given{date_of(made, "--made"), date_of(expires, "--expires")};
    if (given.made && given.expires && *given.expires < *given.made) {
        throw Error(ErrorKind::input, "dates_reversed",
                    fmt::format("made on {}, it would have expired on {} already", made, expires), "--expires",
                    "exchange the two, or correct one");
    }
    return given;
}

void add_bottle_options(CLI::App& app, BottleOptions& options) {
    app.add_option("--bottle-label", options.label_file, "Also write a label to FILE.svg or FILE.html")
        ->type_name("FILE");
    app.add_option("--label-size", options.label_size, "Label in mm, such as 70x36 [99.1x38.1]")->type_name("SIZE");
    app.add_option("--made", options.made, "Date for sheet and label, as 2026-12-31")->type_name("DATE");
    app.add_option("--expires", options.expires, "The same for when it is used up")->type_name("DATE");
}

void check_bottle_options(const BottleOptions& options, const Table& table, bool on_a_sheet) {
    const bool labelled = !options.label_file.empty();
    if (labelled && !is_svg(options.label_file) && !is_html(options.label_file)) {
        throw Error(ErrorKind::input, "usage",
                    fmt::format("a label is SVG or HTML, and '{}' is neither", options.label_file), "--bottle-label",
                    "end its name in .svg or .html");
    }
    if (!labelled && !options.label_size.empty()) {
        throw Error(ErrorKind::input, "usage", "--label-size is the size of a label, and there is none", "--label-size",
                    "give --bottle-label FILE too");
    }
    if (!labelled && !on_a_sheet && !(options.made.empty() && options.expires.empty())) {
        throw Error(ErrorKind::input, "usage", "this format has no place for dates", "--made, --expires",
                    "ask for a sheet with --format html, markdown or sheet, or for a --bottle-label");
    }
    options.dates();
    if (labelled) {
        stock_of(options, table);
    }
}

void write_bottle_label(const Plan& plan, const Table& table, const BottleOptions& options) {
    if (options.label_file.empty()) {
        return;
    }
    const BottleLabel label = bottle_label_of(plan, table, options.dates());
    const LabelStock& stock = stock_of(options, table);
    write_result(is_svg(options.label_file) ? bottle_label_svg(label, stock) : bottle_label_html(label, stock),
                 options.label_file);
}

}  // namespace carboy::cli
