#include <memory>

#include <CLI/CLI.hpp>

#include "carboy/notation.h"
#include "carboy/prediction.h"
#include "carboy/preparation.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "report/json.h"
#include "report/prediction_text.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy predict "25 mmol/kg KH2PO4, 25 mmol/kg Na2HPO4" --at 37C
  carboy predict "50 mL of 0.1 M KH2PO4, 29.1 mL of 0.1 M NaOH, to 100 mL"
  carboy predict "6.057 g Tris, 34.5 mL of 1 M HCl, to 1 L" --explain
  carboy predict "0.1 M acetic acid" --format json | jq .pH

Masses and volumes need a final 'to V'. Concentrations in mol/kg are per
kilogram of water and need none. With --shelf, 'bottle ID' is a reagent.
)";

struct Options {
    std::string mixture;
    ShelfOptions shelf;
    SharedOptions shared;
};

int run(const Options& options) {
    const Table constants = table_for(options.shared);
    const auto shelf = shelf_for(options.shelf, constants, options.shared.activity_model());
    const Table& table = shelf ? shelf->table() : constants;
    const Temperature bench = options.shared.bench_at().value_or(Temperature{});
    const Preparation preparation = read_mixture(options.mixture, table, bench);
    const Prediction prediction =
        predict(table, compose(table, preparation).mixture, options.shared.use_at().value_or(Temperature{}),
                options.shared.activity_model());
    if (options.shared.json()) {
        write_result(prediction_json(prediction, table).dump() + "\n", options.shared.output_file);
    } else {
        const TextStyle style{options.shared.colour(), options.shared.explain, false};
        write_result(prediction_text(options.mixture, prediction, table, style), options.shared.output_file);
    }
    return 0;
}

}  // namespace

Action declare_predict(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    app.add_option("mixture", options->mixture, "What was put together")->required()->type_name("MIXTURE");
    add_shelf_options(app, options->shelf);
    add_computing_options(app, options->shared);
    add_output_options(app, options->shared);
    return [options] { return run(*options); };
}

}  // namespace carboy::cli
