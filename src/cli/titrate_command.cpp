#include <memory>

#include <CLI/CLI.hpp>
#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/titration.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "cli/subject.h"
#include "cli/terminal.h"
#include "plot/svg_plot.h"
#include "report/titration_report.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy titrate "0.1 M acetic acid, to 50 mL" --with "0.1 M NaOH"
  carboy titrate "50 mM Tris-HCl, pH 8.0" --volume 100mL --with "0.1 M HCl" \
      --shift 0.1
  carboy titrate "20 mM HEPES, pH 7.4" --with "1 M NaOH" --to-ph 8
  carboy titrate "10 mM H3PO4, to 100 mL" --with "0.1 M KOH" --format svg \
      -o phosphoric.svg

The line is a mixture as made, or a label, which is planned first. Volumes add
up, so the dilution by the titrant counts.
)";

struct Options {
    std::string subject;
    std::string titrant;
    std::string volume;
    std::string to_volume;
    std::string to_ph;
    std::string step;
    std::vector<double> shifts;
    bool ascii = false;
    bool no_plot = false;
    SharedOptions shared;
};

TitrationRequest request_of(const Options& options, const Table& table) {
    if (!options.to_volume.empty() && !options.to_ph.empty()) {
        throw Error(ErrorKind::input, "usage", "--to-volume and --to-ph are two ends", "command line",
                    "leave one of them out");
    }
    TitrationRequest request;
    if (!options.volume.empty()) {
        request.sample_volume = read_volume(options.volume, "--volume");
    }
    Subject subject = read_subject(options.subject, table, options.shared, request.sample_volume);
    request.sample = std::move(subject.preparation);
    request.temperature = subject.temperature;
    if (!request.sample.filled_to && !request.sample_volume) {
        request.sample_volume = Volume::litres(1);
    }
    request.titrant = read_mixture(options.titrant, table, options.shared.bench_at().value_or(Temperature{}), "--with");
    if (!options.to_volume.empty()) {
        request.to_volume = read_volume(options.to_volume, "--to-volume");
    }
    if (!options.to_ph.empty()) {
        request.to_ph = read_ph(options.to_ph, "--to-ph");
    }
    if (!options.step.empty()) {
        request.step = read_volume(options.step, "--step");
    }
    request.shifts = options.shifts;
    for (const double shift : {0.1, 0.5, 1.0}) {
        if (options.shifts.empty()) {
            request.shifts.push_back(shift);
        }
    }
    return request;
}

int run(const Options& options) {
    const Table table = table_for(options.shared);
    const TitrationCurve curve = titrate(table, request_of(options, table), options.shared.activity_model());
    const TitrationWords words{options.subject, options.titrant};
    const std::string& format = options.shared.format;
    std::string result;
    if (format == "json") {
        result = titration_json(curve, words, table).dump() + "\n";
    } else if (format == "csv") {
        result = titration_csv(curve);
    } else if (format == "svg") {
        result = svg_plot(titration_plot(curve, words));
    } else {
        const TextStyle style{options.shared.colour(), options.shared.explain, false};
        const auto canvas =
            options.no_plot ? std::nullopt : std::optional(terminal_canvas(options.shared, options.ascii));
        result = titration_text(curve, words, table, style, canvas);
    }
    write_result(result, options.shared.output_file);
    return 0;
}

}  // namespace

Action declare_titrate(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    app.add_option("solution", options->subject, "A mixture as made, or a label")->required()->type_name("SOLUTION");
    app.add_option("--with", options->titrant, "What is poured in, such as '0.1 M NaOH'")
        ->required()
        ->type_name("TITRANT");
    app.add_option("--volume", options->volume, "How much is titrated [all, or 1 L]")->type_name("V");
    app.add_option("--to-volume", options->to_volume, "Stop after so much titrant")->type_name("V");
    app.add_option("--to-ph", options->to_ph, "Stop at this pH")->type_name("PH");
    app.add_option("--shift", options->shifts, "What moves the pH so far [0.1 0.5 1]")
        ->check(CLI::Range(0.0001, 14.0))
        ->type_name("PH")
        ->allow_extra_args(false);
    app.add_option("--step", options->step, "Step of the table [a round one]")->type_name("V");
    app.add_flag("--ascii", options->ascii, "Draw with plain characters");
    app.add_flag("--no-plot", options->no_plot, "Text without the curve");
    add_computing_options(app, options->shared);
    add_output_options(app, options->shared, {"text", "json", "csv", "svg"});
    return [options] { return run(*options); };
}

}  // namespace carboy::cli
