#include <memory>
#include <vector>

#include <CLI/CLI.hpp>
#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/selection.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "report/error_text.h"
#include "report/selection_json.h"
#include "report/selection_text.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy select --ph 7.4 --at 37C
  carboy select --ph 8 --at 4C --concentration 50mM --acid 5mM --stay-within 0.2
  carboy select --ph 7.2 --range 4C:37C --avoid phosphate --avoid amine
  carboy select --ph 7.5 --clear-at 230 --avoid metal-binding --format csv
  carboy select --ph 8 --want volatile --format json | jq .ranked[0].system
  carboy select --ph 7.5 --shelf shelf.json
  carboy select --ph 5:9 --avoid metal-binding

Traits for --avoid and --want: phosphate, carboxylate, amine (primary or
secondary), tertiary-amine, zwitterion, metal-binding, volatile, toxic,
controlled, cell-use, radicals-in-light, diol-binding, gas-exchange,
short-lived. What the table says of a trait, and its source: --explain.
A range of pH proposes systems to mix.
)";

struct Options {
    std::string ph;
    std::string concentration = "50 mM";
    std::string range;
    std::string acid;
    std::string base;
    std::string hold;
    std::string ionic_strength;
    std::vector<std::string> avoid;
    std::vector<std::string> want;
    std::string clear_at;
    bool all = false;
    ShelfOptions shelf;
    SharedOptions shared;
};

std::vector<Trait> traits(const std::vector<std::string>& words, const char* where) {
    std::vector<Trait> list;
    for (const std::string& word : words) {
        const auto trait = trait_of(word);
        if (!trait || *trait == Trait::uv_cutoff) {
            std::vector<std::string> known(trait_words().begin(), trait_words().end());
            const auto near = nearest_words(word, known);
            throw Error(ErrorKind::input, "unknown_trait", fmt::format("'{}' is no trait", word), where,
                        trait          ? std::string("ask for it with --clear-at, as in --clear-at 280")
                        : near.empty() ? fmt::format("one of {}", fmt::join(known, ", "))
                                       : fmt::format("did you mean {}?", near.front()));
        }
        list.push_back(*trait);
    }
    return list;
}

/// `4C:37C`: two of a kind with a colon between.
std::pair<std::string, std::string> ends(const std::string& text, const char* where, const char* example) {
    const auto colon = text.find(':');
    if (colon == std::string::npos || text.find(':', colon + 1) != std::string::npos) {
        throw Error(ErrorKind::input, "bad_range", fmt::format("'{}' is not two ends with a colon between", text),
                    where, fmt::format("write it as {}", example));
    }
    return {text.substr(0, colon), text.substr(colon + 1)};
}

double positive_number(const std::string& text, const char* where, const char* example) {
    char* end = nullptr;
    const double value = std::strtod(text.c_str(), &end);
    if (end == text.c_str() || *end != '\0' || !(value > 0) || value > 1e4) {
        throw Error(ErrorKind::input, "not_a_number", fmt::format("'{}' is no number above zero", text), where,
                    fmt::format("write it as {}", example));
    }
    return value;
}

Molarity released(const std::string& text, const char* where) {
    const Concentration load = read_concentration(text, where);
    if (load.unit != ConcentrationUnit::mol_per_L) {
        throw Error(ErrorKind::input, "unusable_unit", "the load is counted in moles per litre", where,
                    "write it as '5 mM'");
    }
    return Molarity::mol_per_L(load.value);
}

Job job_of(const Options& options) {
    Job job;
    if (options.ph.find(':') != std::string::npos) {
        const auto [from, to] = ends(options.ph, "--ph", "5:9");
        job.ph = read_ph(from, "--ph");
        job.ph_to = read_ph(to, "--ph");
    } else {
        job.ph = read_ph(options.ph, "--ph");
    }
    job.at = options.shared.use_at().value_or(Temperature{});
    job.prepare_at = options.shared.bench_at().value_or(Temperature{});
    job.concentration = read_concentration(options.concentration, "--concentration");
    if (job.concentration.unit != ConcentrationUnit::mol_per_L &&
        job.concentration.unit != ConcentrationUnit::mol_per_kg) {
        throw Error(ErrorKind::input, "unusable_unit", "systems are compared at one molar concentration",
                    "--concentration", "write it as '50 mM' or '50 mmol/kg'");
    }
    if (!options.range.empty()) {
        const auto [from, to] = ends(options.range, "--range", "4C:37C");
        job.range = std::pair(read_temperature(from, "--range"), read_temperature(to, "--range"));
    }
    if (!options.acid.empty()) {
        job.acid = released(options.acid, "--acid");
    }
    if (!options.base.empty()) {
        job.base = released(options.base, "--base");
    }
    if (!options.hold.empty()) {
        job.hold_ph = positive_number(options.hold, "--stay-within", "0.1");
    }
    if (!options.ionic_strength.empty()) {
        const Concentration limit = read_concentration(options.ionic_strength, "--ionic-strength");
        job.most_ionic_strength = IonicStrengthTarget{limit.value, limit.unit != ConcentrationUnit::mol_per_kg};
    }
    job.avoid = traits(options.avoid, "--avoid");
    job.want = traits(options.want, "--want");
    if (!options.clear_at.empty()) {
        job.clear_from_nm = positive_number(options.clear_at, "--clear-at", "280, in nm");
    }
    return job;
}

int run(const Options& options) {
    const Table table = table_for(options.shared);
    const ActivityModel& model = options.shared.activity_model();
    const std::optional<Shelf> shelf = shelf_for(options.shelf, table, model);
    const Selection selection = select_buffers(table, job_of(options), model, shelf ? &*shelf : nullptr);
    if (options.shared.json()) {
        write_result(selection_json(selection, table).dump() + "\n", options.shared.output_file);
    } else if (options.shared.format == "csv") {
        write_result(selection_csv(selection, table), options.shared.output_file);
    } else {
        const TextStyle style{options.shared.colour(), options.shared.explain, false};
        constexpr std::size_t ten = 10;
        write_result(selection_text(selection, table, style, options.all ? table.systems.size() : ten),
                     options.shared.output_file);
    }
    return selection.ranked.empty() && selection.mixed.empty() ? exit_status(ErrorKind::no_recipe) : 0;
}

}  // namespace

Action declare_select(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    app.add_option("--ph", options->ph, "pH to hold, or a range such as 5:9")->required()->type_name("PH");
    app.add_option("--concentration", options->concentration, "Total of the buffer")
        ->type_name("C")
        ->capture_default_str();
    app.add_option("--range", options->range, "Used between these, as 4C:37C")->type_name("T:T");
    app.add_option("--acid", options->acid, "Strong acid set free in it, as 5mM")->type_name("C");
    app.add_option("--base", options->base, "Strong base set free in it")->type_name("C");
    app.add_option("--stay-within", options->hold, "The load may move pH by no more")->type_name("PH");
    app.add_option("--ionic-strength", options->ionic_strength, "Limit, as 100mM")->type_name("I");
    app.add_option("--avoid", options->avoid, "Leave out what has this trait")
        ->type_name("TRAIT")
        ->allow_extra_args(false);
    app.add_option("--want", options->want, "Only what is known to have it")
        ->type_name("TRAIT")
        ->allow_extra_args(false);
    app.add_option("--clear-at", options->clear_at, "Wavelength it must not absorb at, nm")->type_name("NM");
    app.add_flag("--all", options->all, "Show all that rank, not ten");
    add_shelf_options(app, options->shelf);
    add_computing_options(app, options->shared);
    add_output_options(app, options->shared, {"text", "json", "csv"});
    return [options] { return run(*options); };
}

}  // namespace carboy::cli
