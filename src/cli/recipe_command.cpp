#include <memory>

#include <CLI/CLI.hpp>
#include <fmt/format.h>

#include "carboy/constraint_words.h"
#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/plan.h"
#include "carboy/request_json.h"

#include "cli/bottle_options.h"
#include "cli/commands.h"
#include "cli/file.h"
#include "report/json.h"
#include "report/recipe_csv.h"
#include "report/recipe_text.h"
#include "report/sheet_html.h"
#include "report/sheet_markdown.h"
#include "report/sheet_text.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy recipe "50 mM Tris-HCl, 150 mM NaCl, pH 7.5 at 4 C" --volume 1L
  carboy recipe "0.1 M sodium phosphate, pH 7.2" --volume 2L --route salts
  carboy recipe "20 mM HEPES-KOH, pH 7.4 at 37 C, ionic strength 0.15 M" \
      --volume 500mL --prepare-at 22C
  carboy recipe "50 mM acetic acid, pH 5" --volume 1L --format json | jq .weigh
  carboy recipe --request request.json --format json -o recipe.json
  carboy recipe "50 mM Tris-HCl, pH 8" --volume 1L --format html -o tris.html
  carboy recipe "50 mM Tris-HCl, pH 8" --volume 1L --quiet \
      --bottle-label tris.svg --made 2026-12-01 --expires 2027-03-01

Masses carry the assay of the table; the meter readings are for the bench
temperature, the last figure is for the temperature of use.
)";

struct Options {
    std::string label;
    std::string volume;
    std::string route = "any";
    std::string request_file;
    std::vector<std::string> only;
    std::vector<std::string> without;
    std::vector<std::string> use;
    std::vector<std::string> avoid;
    std::vector<std::string> hold;
    std::optional<std::size_t> most_weighings;
    std::string balance;
    std::string minimum_mass;
    std::string measure_with;
    ShelfOptions shelf;
    BottleOptions bottle;
    SharedOptions shared;
};

/// What the options add to a request, wherever it came from.
void narrow(Request& request, const Options& options, const Table& table) {
    Constraints& constraints = request.constraints;
    for (const std::string& name : options.only) {
        allow_only(constraints, read_ion(name, table, "--only"), table);
    }
    for (const std::string& name : options.without) {
        constraints.without.push_back(read_ion(name, table, "--without"));
    }
    for (const std::string& name : options.use) {
        constraints.use.push_back(read_reagent(name, table, "--use"));
    }
    for (const std::string& name : options.avoid) {
        constraints.avoid.push_back(read_reagent(name, table, "--avoid"));
    }
    for (const std::string& text : options.hold) {
        constraints.totals.push_back(read_ion_total(text, table, "--hold"));
    }
    if (options.most_weighings) {
        constraints.most_weighings = options.most_weighings;
    }
    if (!options.balance.empty()) {
        request.balance = read_balance(
            options.balance,
            options.minimum_mass.empty() ? std::nullopt : std::optional<std::string_view>(options.minimum_mass),
            "--balance");
    } else if (!options.minimum_mass.empty()) {
        throw Error(ErrorKind::input, "usage", "--minimum-mass belongs to a --balance", "--minimum-mass",
                    "give the balance's readability, such as --balance 0.1mg");
    }
    if (!options.measure_with.empty()) {
        request.measure_with = read_vessel(options.measure_with, table, "--measure-with");
    }
}

/// --at may add a temperature of use to a label that has none, not contradict one.
void take_use_temperature(Request& request, const Options& options, const Table& table) {
    const auto use_at = options.shared.use_at();
    if (!use_at) {
        return;
    }
    const auto on_label = read_label(options.label, table).ph_at;
    if (on_label && *on_label != *use_at) {
        throw Error(ErrorKind::input, "two_temperatures",
                    fmt::format("the label says {:g} °C and --at says {:g} °C", on_label->celsius(), use_at->celsius()),
                    "--at", "leave one of them out");
    }
    request.use_at = *use_at;
}

Request request_of(const Options& options, const Table& table) {
    if (!options.request_file.empty()) {
        if (!options.label.empty() || !options.volume.empty() || !options.shared.at.empty() ||
            !options.shared.prepare_at.empty()) {
            throw Error(ErrorKind::input, "usage",
                        "--request holds the whole request: no label, --volume, --at or --prepare-at beside it",
                        "command line", "write them into the request");
        }
        return read_request(read_file(options.request_file), table,
                            options.request_file == "-" ? "request" : options.request_file);
    }
    if (options.label.empty() || options.volume.empty()) {
        throw Error(ErrorKind::input, "usage", options.label.empty() ? "a label is missing" : "--volume is missing",
                    "command line",
                    "'carboy recipe \"50 mM Tris-HCl, pH 8.0\" --volume 1L' is a whole command; 'carboy recipe --help' "
                    "tells more");
    }
    Request request = request_from_label(options.label, table);
    take_use_temperature(request, options, table);
    request.volume = read_volume(options.volume, "--volume");
    request.prepare_at = options.shared.bench_at().value_or(Temperature{});
    request.route = route_of(options.route).value_or(Route::automatic);
    return request;
}

/// The recipe in the format asked for.
std::string written(const Plan& plan, const Table& table, const Options& options) {
    const std::string& format = options.shared.format;
    const bool bench_temperature_assumed = options.shared.prepare_at.empty() && options.request_file.empty();
    if (format == "json") {
        return recipe_json(plan, table).dump() + "\n";
    }
    if (format == "csv") {
        return recipe_csv(plan, table);
    }
    if (format == "text") {
        return recipe_text(plan, table, {options.shared.colour(), options.shared.explain, bench_temperature_assumed});
    }
    SheetOptions sheet_options;
    sheet_options.bench_temperature_assumed = bench_temperature_assumed;
    const BottleDates dates = options.bottle.dates();
    sheet_options.made = dates.made;
    sheet_options.expires = dates.expires;
    const Sheet sheet = sheet_of(plan, table, sheet_options);
    return format == "html" ? sheet_html(sheet) : format == "markdown" ? sheet_markdown(sheet) : sheet_text(sheet);
}

/// An error of the planner carries the request's own id, as one of its reader does.
template <class Shelf>
Plan planned(const Shelf& shelf, const Table& table, const Request& request, const ActivityModel& model) {
    try {
        return shelf ? plan_recipe(*shelf, request, model) : plan_recipe(table, request, model);
    } catch (Error& error) {
        error.with_id(request.id);
        throw;
    }
}

int run(const Options& options) {
    const Table table = table_for(options.shared);
    const std::string& format = options.shared.format;
    check_bottle_options(options.bottle, table, format == "html" || format == "markdown" || format == "sheet");
    const ActivityModel& model = options.shared.activity_model();
    Request request = request_of(options, table);
    narrow(request, options, table);
    const auto shelf = shelf_for(options.shelf, table, model);
    const Plan plan = planned(shelf, table, request, model);
    const Table& used = shelf ? shelf->table() : table;
    write_bottle_label(plan, used, options.bottle);
    write_result(written(plan, used, options), options.shared.output_file);
    return 0;
}

}  // namespace

Action declare_recipe(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    app.add_option("label", options->label, "What is to stand on the bottle")->type_name("LABEL");
    app.add_option("--volume", options->volume, "Volume to make, such as 1L or '250 mL'")->type_name("V");
    add_route_option(app, options->route, "any, titrated, salts, stocks or dilution");
    add_shelf_options(app, options->shelf);
    const auto repeatable = [&](const char* name, std::vector<std::string>& values, const char* text,
                                const char* type) {
        app.add_option(name, values, text)->type_name(type)->allow_extra_args(false);
    };
    repeatable("--only", options->only, "No other ion of its charge, such as sodium", "ION");
    repeatable("--without", options->without, "Nothing that brings this ion, such as Cl-", "ION");
    repeatable("--hold", options->hold, "An ion's total, such as 'Na+ = 150 mM'", "TOTAL");
    repeatable("--use", options->use, "A reagent that must be in it", "REAGENT");
    repeatable("--avoid", options->avoid, "A reagent that must not", "REAGENT");
    app.add_option("--max-weighings", options->most_weighings, "At most so many weighings")->type_name("N");
    app.add_option("--balance", options->balance, "Round masses to what it reads: 0.1mg")->type_name("MASS");
    app.add_option("--minimum-mass", options->minimum_mass, "Least to weigh [100 times that]")->type_name("MASS");
    app.add_option("--measure-with", options->measure_with, "Vessel to round volumes to")->type_name("VESSEL");
    add_bottle_options(app, options->bottle);
    add_computing_options(app, options->shared);
    app.add_option("--request", options->request_file, "Read a JSON request from FILE, or from -")->type_name("FILE");
    add_output_options(app, options->shared, {"text", "sheet", "markdown", "html", "csv", "json"});
    return [options] { return run(*options); };
}

}  // namespace carboy::cli
