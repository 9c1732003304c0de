#include <memory>

#include <CLI/CLI.hpp>
#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/sweep.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "cli/subject.h"
#include "cli/terminal.h"
#include "notation/range.h"
#include "plot/svg_plot.h"
#include "report/sweep_report.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy sweep "50 mM Tris-HCl, pH 7.5 at 25 C" --temperature 0:40:5
  carboy sweep "50 mM Tris-HCl, pH 7.5" "50 mM HEPES-NaOH, pH 7.5" \
      "50 mM sodium phosphate, pH 7.5" --temperature 4:37:3 --format svg \
      -o three.svg
  carboy sweep "0.5 M sodium phosphate, pH 7.2" --dilution 1:10:1
  carboy sweep "20 mM HEPES-KOH, pH 7.4" --salt "0:500:50 mM KCl"
  carboy sweep "50 mM sodium acetate, pH 5" --concentration "10:200:10 mM"

Each is a label, which is planned first and then left as it is, or a mixture.
)";

struct Options {
    std::vector<std::string> solutions;
    std::string temperature;
    std::string dilution;
    std::string salt;
    std::string concentration;
    bool ascii = false;
    bool no_plot = false;
    SharedOptions shared;
};

/// `A:B:STEP` and what stands after it.
struct RangeText {
    std::string range;
    std::string rest;
};
RangeText split(const std::string& text) {
    const auto end = std::min(text.find_first_not_of("0123456789.:+-eE"), text.size());
    // An `e` can only begin the rest when no digit follows; no unit of ours begins with it.
    const auto begin = std::min(text.find_first_not_of(' ', end), text.size());
    return {text.substr(0, end), text.substr(begin)};
}

/// Range, unit and, for a salt, its name: `0:500:50 mM KCl`.
void read_amounts(SweepCondition& condition, const std::string& text, std::string_view where, bool with_salt,
                  const Table& table) {
    const RangeText parts = split(text);
    condition.values = read_range(parts.range, where);
    if (parts.rest.empty()) {
        throw Error(ErrorKind::input, "missing_unit", fmt::format("'{}' has no unit", text), std::string(where),
                    fmt::format("write it like '{} mM'", text));
    }
    // One of the unit, read as the notation reads it everywhere; a salt's name stands behind.
    Preparation one;
    double unit = 1;
    try {
        const Concentration concentration = read_concentration("1 " + parts.rest, where);
        condition.per_kg_water = concentration.unit == ConcentrationUnit::mol_per_kg;
        if (concentration.unit != ConcentrationUnit::mol_per_L && !condition.per_kg_water) {
            throw Error(ErrorKind::input, "unusable_unit", fmt::format("'{}' does not count moles", parts.rest),
                        std::string(where), "write mM, mol/L or mol/kg");
        }
        unit = concentration.value;
        if (with_salt) {
            one = read_mixture("1 mol/kg NaCl", table, Temperature{});
        }
    } catch (const Error& error) {
        if (!with_salt || error.code() == "unusable_unit") {
            throw;
        }
        one = read_mixture("1 " + parts.rest, table, Temperature{}, where);
        condition.per_kg_water = one.portions.front().molality.has_value();
        unit =
            condition.per_kg_water ? one.portions.front().molality->mol_per_kg() : one.portions.front().amount->mol();
    }
    if (with_salt) {
        condition.salt = one.portions.front().reagent;
    }
    for (double& value : condition.values) {
        value = std::stod(fmt::format("{:.12g}", value * unit));  // 3 x 0.001 is 0.003
    }
}

SweepCondition condition_of(const Options& options, const Table& table) {
    const int asked = static_cast<int>(!options.temperature.empty()) + static_cast<int>(!options.dilution.empty()) +
                      static_cast<int>(!options.salt.empty()) + static_cast<int>(!options.concentration.empty());
    if (asked != 1) {
        throw Error(ErrorKind::input, "usage",
                    asked == 0 ? "what is to be varied?" : "one condition is varied at a time", "command line",
                    "give one of --temperature, --dilution, --salt and --concentration");
    }
    SweepCondition condition;
    if (!options.temperature.empty()) {
        RangeText parts = split(options.temperature);
        const double shift = parts.rest.empty() ? 0 : read_temperature("0 " + parts.rest, "--temperature").celsius();
        condition.values = read_range(parts.range, "--temperature");
        for (double& value : condition.values) {
            value += shift;  // kelvin
        }
    } else if (!options.dilution.empty()) {
        condition.what = Condition::dilution;
        const RangeText parts = split(options.dilution);
        if (!parts.rest.empty() && parts.rest != "x") {
            throw Error(ErrorKind::input, "bad_range", fmt::format("'{}' is no dilution", options.dilution),
                        "--dilution", "write it as FROM:TO:STEP, such as 1:10:1");
        }
        condition.values = read_range(parts.range, "--dilution");
    } else if (!options.salt.empty()) {
        condition.what = Condition::salt;
        read_amounts(condition, options.salt, "--salt", true, table);
    } else {
        condition.what = Condition::concentration;
        read_amounts(condition, options.concentration, "--concentration", false, table);
    }
    return condition;
}

int run(const Options& options) {
    const Table table = table_for(options.shared);
    const SweepCondition condition = condition_of(options, table);
    std::vector<SweepSubject> subjects;
    for (const std::string& line : options.solutions) {
        Subject subject = read_subject(line, table, options.shared, std::nullopt);
        subjects.push_back({line, std::move(subject.preparation), subject.temperature, std::move(subject.of_buffer)});
    }
    const Sweep result = sweep(table, subjects, condition, options.shared.activity_model());
    const std::string& format = options.shared.format;
    std::string text;
    if (format == "json") {
        text = sweep_json(result, table).dump() + "\n";
    } else if (format == "csv") {
        text = sweep_csv(result, table);
    } else if (format == "svg") {
        text = svg_plot(sweep_plot(result, table));
    } else {
        const TextStyle style{options.shared.colour(), options.shared.explain, false};
        const auto canvas =
            options.no_plot ? std::nullopt : std::optional(terminal_canvas(options.shared, options.ascii));
        text = sweep_text(result, table, style, canvas);
    }
    write_result(text, options.shared.output_file);
    return 0;
}

}  // namespace

Action declare_sweep(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    app.add_option("solutions", options->solutions, "Labels or mixtures, swept together")
        ->required()
        ->type_name("SOLUTION");
    const auto range = [&](const char* name, std::string& value, const char* text) {
        app.add_option(name, value, text)->type_name("RANGE");
    };
    range("--temperature", options->temperature, "FROM:TO:STEP in C, such as 0:40:5");
    range("--dilution", options->dilution, "Times the volume, such as 1:10:1");
    range("--salt", options->salt, "NaCl, or another, added: '0:0.5:0.05 M KCl'");
    range("--concentration", options->concentration, "Total of the buffer: '10:200:10 mM'");
    app.add_flag("--ascii", options->ascii, "Draw with plain characters");
    app.add_flag("--no-plot", options->no_plot, "Text without the curves");
    add_computing_options(app, options->shared);
    add_output_options(app, options->shared, {"text", "json", "csv", "svg"});
    return [options] { return run(*options); };
}

}  // namespace carboy::cli
