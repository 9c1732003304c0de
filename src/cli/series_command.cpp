#include <memory>

#include <CLI/CLI.hpp>
#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/request_json.h"
#include "carboy/series.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "notation/range.h"
#include "report/series_text.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy series "50 mM sodium phosphate" --ph 6:8:0.2
  carboy series "20 mM HEPES-NaOH, ionic strength 0.15 M" --ph 7:8:0.25 \
      --volume 250mL --at 37C
  carboy series "50 mM acetate" --ph 4:5.6:0.4 --format csv -o acetate.csv

Every buffer of the set has the same concentration and ionic strength. Without
one on the label it is the least that all of them can have.
)";

struct Options {
    std::string label;
    std::string ph;
    std::string volume = "100 mL";
    SharedOptions shared;
};

/// A label line wants a pH beside its buffers; here --ph has it.
Request request_without_ph(const std::string& label, const Table& table) {
    Request request = request_from_label(label + ", pH 7", table);
    request.label = label;
    request.ph.reset();
    return request;
}

int run(const Options& options) {
    const Table table = table_for(options.shared);
    Request request = request_without_ph(options.label, table);
    if (const auto at = options.shared.use_at()) {
        request.use_at = *at;
    }
    request.prepare_at = options.shared.bench_at().value_or(Temperature{});
    request.volume = read_volume(options.volume, "--volume");
    std::vector<PH> phs;
    for (const double value : read_range(options.ph, "--ph")) {
        if (!(value >= -2 && value <= 16)) {
            throw Error(ErrorKind::input, "ph_out_of_range", fmt::format("pH {:g} is outside -2 to 16", value), "--ph");
        }
        phs.emplace_back(value);
    }
    const Series series = plan_series(table, request, phs, options.shared.activity_model());
    const TextStyle style{options.shared.colour(), options.shared.explain, options.shared.prepare_at.empty()};
    write_result(options.shared.json()            ? series_json(series, table).dump() + "\n"
                 : options.shared.format == "csv" ? series_csv(series)
                                                  : series_text(series, table, style),
                 options.shared.output_file);
    return 0;
}

}  // namespace

Action declare_series(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    app.add_option("label", options->label, "The buffers, without a pH")->required()->type_name("LABEL");
    app.add_option("--ph", options->ph, "The set, as FROM:TO:STEP")->required()->type_name("RANGE");
    app.add_option("--volume", options->volume, "Volume of each")->type_name("V")->capture_default_str();
    add_computing_options(app, options->shared);
    add_output_options(app, options->shared, {"text", "json", "csv"});
    return [options] { return run(*options); };
}

}  // namespace carboy::cli
