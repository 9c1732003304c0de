#include <cmath>
#include <memory>
#include <vector>

#include <CLI/CLI.hpp>
#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/fit.h"
#include "carboy/measurements.h"
#include "carboy/notation.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "report/fit_json.h"
#include "report/fit_text.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy fit titration.csv --mixture "25 mL of 0.1 M acetic acid, to 50 mL" \
      --with "0.1 M NaOH" --free "pK acetate" --free "amount acetic acid"
  carboy fit titration.csv --mixture "25 mL of 0.1 M acetic acid, to 50 mL" \
      --with "0.1 M NaOH" --free "pK acetate" --free offset --write own.json
  carboy fit --mixture "0.1 M acetic acid" --reading 2.88 --free "pK acetate"
  carboy fit --mixture "0.1 M acetic acid" --degree 0.0140 --u 0.0002 \
      --free "pK acetate"

DATA has a header and a line for each reading: volume_mL (titrant added in all)
or mixture (a mixture line, quoted), then pH or mV, then u, its standard
uncertainty, which may be left out: --u then holds for all.
Free are 'pK2 phosphate', 'amount REAGENT', titrant-strength, carbonate (in the
titrant), offset and slope (of the electrode, about pH 7).
)";

struct Options {
    std::string data;
    std::string mixture;
    std::string titrant;
    std::string fill;
    std::vector<std::string> free;
    std::string uncertainty;
    std::string reading;
    std::string degree;
    std::string constants_out;
    SharedOptions shared;
};

double number(const std::string& text, const char* where) {
    char* end = nullptr;
    const double value = std::strtod(text.c_str(), &end);
    if (text.empty() || end == text.c_str() || *end != '\0' || !std::isfinite(value)) {
        throw Error(ErrorKind::input, "not_a_number", fmt::format("'{}' is no number", text), where,
                    "write a plain number, as 0.02");
    }
    return value;
}

Error usage(const std::string& message, const std::string& help) {
    return {ErrorKind::input, "usage", message, "command line", help};
}

/// Two good meters agree to 0.02 (common practice, no source); of a degree, one part in a hundred.
double assumed_uncertainty(ReadingKind kind, double reading) {
    return kind == ReadingKind::pH ? 0.02 : kind == ReadingKind::millivolt ? 1.0 : 0.01 * reading;
}

Measurements single_reading(const Options& options) {
    Measurements one;
    Point point;
    one.reading = options.degree.empty() ? ReadingKind::pH : ReadingKind::degree;
    point.reading =
        options.degree.empty() ? read_ph(options.reading, "--reading").value() : number(options.degree, "--degree");
    point.uncertainty = options.uncertainty.empty() ? assumed_uncertainty(one.reading, point.reading)
                                                    : number(options.uncertainty, "--u");
    one.points.push_back(std::move(point));
    return one;
}

Measurements measurements_of(const Options& options, const Table& table, Temperature bench) {
    const int sources =
        (options.data.empty() ? 0 : 1) + (options.reading.empty() ? 0 : 1) + (options.degree.empty() ? 0 : 1);
    if (sources != 1) {
        throw usage(sources == 0 ? "there is nothing measured" : "more than one kind of measurement is given",
                    "give a file, or --reading PH, or --degree SHARE");
    }
    if (options.data.empty()) {
        return single_reading(options);
    }
    const double uncertainty = options.uncertainty.empty() ? 0.0 : number(options.uncertainty, "--u");
    if (!options.uncertainty.empty() && !(uncertainty > 0)) {
        throw Error(ErrorKind::input, "bad_amount", "an uncertainty must be above zero", "--u", "write it as 0.02");
    }
    // A file in mV has another usual uncertainty; what it is in is known only once it is read.
    const std::string text = read_file(options.data);
    Measurements read = read_measurements(text, table, bench, uncertainty > 0 ? uncertainty : 1.0, options.data);
    if (options.uncertainty.empty()) {
        read = read_measurements(text, table, bench, assumed_uncertainty(read.reading, 0.5), options.data);
    }
    return read;
}

FitProblem problem_of(const Options& options, const Table& table) {
    const Temperature bench = options.shared.bench_at().value_or(Temperature{});
    Measurements measured = measurements_of(options, table, bench);
    FitProblem problem;
    problem.at = options.shared.use_at().value_or(bench);
    problem.reading = measured.reading;
    problem.points = std::move(measured.points);
    if (measured.has_mixtures != options.mixture.empty()) {
        throw measured.has_mixtures
            ? usage("the file says what each mixture was, and --mixture says it again", "leave --mixture out")
            : usage("what was in the vessel is not said", "add --mixture '25 mL of 0.1 M acetic acid, to 50 mL'");
    }
    if (!options.mixture.empty()) {
        const std::string line = options.fill.empty() ? options.mixture : options.mixture + ", to " + options.fill;
        const Preparation mixture = read_mixture(line, table, bench, "--mixture");
        for (Point& point : problem.points) {
            point.mixture = mixture;
        }
    }
    if (!options.titrant.empty()) {
        problem.titrant = read_mixture("1 L of " + options.titrant + ", to 1 L", table, bench, "--with");
    } else if (!options.data.empty() && !measured.has_mixtures) {
        throw usage("what was added is not said", "add --with '0.1 M NaOH'");
    }
    if (!options.fill.empty()) {
        problem.filled_to = read_volume(options.fill, "--fill");
    }
    for (const std::string& text : options.free) {
        problem.free.push_back(read_free_parameter(text, table));
    }
    return problem;
}

int run(const Options& options) {
    const Table table = table_for(options.shared);
    const Fit fit = fit_measurements(table, problem_of(options, table), options.shared.activity_model());
    const std::string what = !options.data.empty() ? options.data
                             : options.degree.empty()
                                 ? fmt::format("pH {} of {}", options.reading, options.mixture)
                                 : fmt::format("{} dissociated in {}", options.degree, options.mixture);
    if (!options.constants_out.empty()) {
        const auto constants = fitted_constants(fit, table, what);
        if (constants.at("systems").empty()) {
            throw usage("no pK was found that a constants file could hold", "leave --write out, or free a pK");
        }
        write_result(constants.dump(2) + "\n", options.constants_out);
        if (!options.shared.quiet) {
            fmt::print(stderr, "{}: written; use it with --constants {}\n", options.constants_out,
                       options.constants_out);
        }
    }
    if (options.shared.json()) {
        write_result(fit_json(fit, table, what).dump() + "\n", options.shared.output_file);
    } else if (options.shared.format == "csv") {
        write_result(fit_csv(fit), options.shared.output_file);
    } else {
        const TextStyle style{options.shared.colour(), options.shared.explain, false};
        write_result(fit_text(fit, table, what, style), options.shared.output_file);
    }
    return 0;
}

}  // namespace

Action declare_fit(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    app.add_option("data", options->data, "File of readings, - for standard input")->type_name("DATA");
    app.add_option("--mixture", options->mixture, "What was in the vessel")->type_name("MIXTURE");
    app.add_option("--with", options->titrant, "What was added, as '0.1 M NaOH'")->type_name("TITRANT");
    app.add_option("--fill", options->fill, "Each point was filled to V")->type_name("V");
    app.add_option("--free", options->free, "What is to be found; give it again")
        ->required()
        ->type_name("NAME")
        ->allow_extra_args(false);
    app.add_option("--u", options->uncertainty, "Standard uncertainty [0.02 pH, 1 mV]")->type_name("U");
    app.add_option("--reading", options->reading, "One pH instead of a file")->type_name("PH");
    app.add_option("--degree", options->degree, "Share dissociated instead of a file")->type_name("A");
    app.add_option("--write", options->constants_out, "Write the pK found for --constants")->type_name("FILE");
    add_computing_options(app, options->shared);
    add_output_options(app, options->shared, {"text", "json", "csv"});
    return [options] { return run(*options); };
}

}  // namespace carboy::cli
