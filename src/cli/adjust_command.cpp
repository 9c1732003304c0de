#include <memory>

#include <CLI/CLI.hpp>
#include <fmt/format.h>

#include "carboy/adjustment.h"
#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/request_json.h"
#include "carboy/shelf.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "report/adjustment_json.h"
#include "report/adjustment_text.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy adjust "50 mM Tris-HCl, pH 7.5 at 4 C" --volume 1L --reading 7.31 \
      --with "1 M HCl" --prepare-at 22C
  carboy adjust "0.1 M sodium phosphate, pH 7.2" --volume 2L --reading 6.9 \
      --with "NaOH 10 mol/L"
  carboy adjust "20 mM HEPES-KOH, pH 7.4" --volume 500mL --reading 7.2 \
      --not-filled 430mL --with "1 M KOH" --format json | jq .correction.add_mL

The reading is taken at the bench temperature, --prepare-at. The titrant is
written as in a mixture; without a strength a solid is weighed in. The causes
take the recipe's amounts as put in.
)";

struct Options {
    std::string label;
    std::string volume;
    std::string reading;
    std::string titrant;
    std::string reading_before;
    std::string not_filled;
    double within_percent = 5;
    std::string route = "any";
    ShelfOptions shelf;
    SharedOptions shared;
};

Request request_of(const Options& options, const Table& table) {
    Request request = request_from_label(options.label, table);
    if (const auto use_at = options.shared.use_at()) {
        const auto on_label = read_label(options.label, table).ph_at;
        if (on_label && *on_label != *use_at) {
            throw Error(
                ErrorKind::input, "two_temperatures",
                fmt::format("the label says {:g} °C and --at says {:g} °C", on_label->celsius(), use_at->celsius()),
                "--at", "leave one of them out");
        }
        request.use_at = *use_at;
    }
    request.volume = read_volume(options.volume, "--volume");
    request.prepare_at = options.shared.bench_at().value_or(Temperature{});
    request.route = route_of(options.route).value_or(Route::automatic);
    return request;
}

OffBatch batch_of(const Options& options) {
    OffBatch batch;
    batch.reading = read_ph(options.reading, "--reading");
    if (!options.reading_before.empty()) {
        batch.reading_before = read_ph(options.reading_before, "--reading-before");
    }
    if (!options.not_filled.empty()) {
        batch.not_filled = read_volume(options.not_filled, "--not-filled");
    }
    batch.within = options.within_percent / 100;
    return batch;
}

int run(const Options& options) {
    const Table bundled = table_for(options.shared);
    const ActivityModel& model = options.shared.activity_model();
    const auto shelf = shelf_for(options.shelf, bundled, model);
    const Table& table = shelf ? shelf->table() : bundled;
    const OffBatch batch = batch_of(options);
    const Titrant titrant = read_titrant(options.titrant, table);
    const Request request = request_of(options, table);
    const Plan plan = shelf ? plan_recipe(*shelf, request, model) : plan_recipe(table, request, model);
    const Adjustment adjustment = adjust(table, plan, batch, titrant, model);
    if (options.shared.json()) {
        write_result(adjustment_json(adjustment, table).dump() + "\n", options.shared.output_file);
    } else {
        const TextStyle style{options.shared.colour(), options.shared.explain, options.shared.prepare_at.empty()};
        write_result(adjustment_text(adjustment, table, style), options.shared.output_file);
    }
    return 0;
}

}  // namespace

Action declare_adjust(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    app.add_option("label", options->label, "What is to stand on the bottle")->required()->type_name("LABEL");
    app.add_option("--volume", options->volume, "Volume of the batch, at the mark")->required()->type_name("V");
    app.add_option("--reading", options->reading, "What the meter shows, at the bench")->required()->type_name("PH");
    app.add_option("--with", options->titrant, "Acid or base at hand, such as '1 M HCl'")
        ->required()
        ->type_name("TITRANT");
    app.add_option("--reading-before", options->reading_before, "What it showed before the titrant went in")
        ->type_name("PH");
    app.add_option("--not-filled", options->not_filled, "Present volume, if not yet filled to the mark")
        ->type_name("V");
    app.add_option("--within", options->within_percent, "How far off concentrations may end up, in percent")
        ->check(CLI::Range(0.0, 100.0))
        ->type_name("PERCENT")
        ->capture_default_str();
    add_route_option(app, options->route, "How it was made, as for a recipe");
    add_shelf_options(app, options->shelf);
    add_computing_options(app, options->shared);
    add_output_options(app, options->shared);
    return [options] { return run(*options); };
}

}  // namespace carboy::cli
