#include <memory>

#include <CLI/CLI.hpp>
#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/constants_file.h"
#include "carboy/error.h"
#include "carboy/notation.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "cli/subcommands.h"
#include "report/constants_json.h"
#include "report/constants_text.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy constants list
  carboy constants list reagents
  carboy constants show HEPES
  carboy constants list formulas
  carboy constants show PBS
  carboy constants show 7782-85-6 --format json
  carboy constants check own-constants.json
  carboy constants sources

A file for --constants has the same form as the bundled ones; its JSON Schema
is data/schema/constants.schema.json.
)";

struct Options {
    std::string listing = "systems";
    std::string name;
    std::string file;
    SharedOptions shared;
};

void write(const Options& options, const nlohmann::ordered_json& record, const std::string& text) {
    write_result(options.shared.json() ? record.dump() + "\n" : text, options.shared.output_file);
}

int list(const Options& options) {
    const Table table = table_for(options.shared);
    const Listing listing = options.listing == "reagents"   ? Listing::reagents
                            : options.listing == "ions"     ? Listing::ions
                            : options.listing == "formulas" ? Listing::formulas
                                                            : Listing::systems;
    if (options.shared.json()) {
        write(options, constants_list_json(table, listing), {});
    } else {
        write(options, {}, constants_list_text(table, listing, options.shared.colour()));
    }
    return 0;
}

int show(const Options& options) {
    const Table table = table_for(options.shared);
    const std::string text = constants_entry_text(table, options.name, options.shared.colour());
    if (text.empty()) {
        auto near = nearest_names(options.name, table, 3);
        for (const std::string& formula : nearest_formulas(options.name, table, 1)) {
            near.push_back(formula);
        }
        std::string help = "'carboy constants list' and 'carboy constants list reagents' show every name";
        if (!near.empty()) {
            help = fmt::format("did you mean {}? {}", fmt::join(near, ", "), help);
        }
        throw Error(ErrorKind::input, "unknown_name", fmt::format("the table knows nothing called '{}'", options.name),
                    "NAME", help);
    }
    write(options, constants_entry_json(table, options.name), text);
    return 0;
}

nlohmann::ordered_json check_json(const Options& options, const ConstantsOverlay& overlay) {
    auto faults = nlohmann::ordered_json::array();
    for (const ConstantsFault& fault : overlay.faults) {
        faults.push_back({{"path", fault.path}, {"message", fault.message}, {"help", fault.help}});
    }
    auto changes = nlohmann::ordered_json::array();
    for (const ConstantsChange& change : overlay.changes) {
        changes.push_back(
            {{"entry", change.kind}, {"name", change.name}, {"change", change.replaced ? "replaces" : "adds"}});
    }
    return {{"kind", "constants_check"},
            {"file", options.file},
            {"valid", overlay.faults.empty()},
            {"faults", std::move(faults)},
            {"changes", std::move(changes)}};
}

std::string check_text(const Options& options, const ConstantsOverlay& overlay) {
    std::string text;
    for (const ConstantsFault& fault : overlay.faults) {
        text += fmt::format("{}: {}\n", fault.path.empty() ? "document" : fault.path, fault.message);
        if (!fault.help.empty()) {
            text += fmt::format("  try: {}\n", fault.help);
        }
    }
    if (!overlay.faults.empty()) {
        return text + fmt::format("{}: {} fault{}\n", options.file, overlay.faults.size(),
                                  overlay.faults.size() == 1 ? "" : "s");
    }
    for (const ConstantsChange& change : overlay.changes) {
        text += fmt::format("{} {} {}\n", change.replaced ? "replaces" : "adds", change.kind, change.name);
    }
    return text + fmt::format("{}: valid\n", options.file);
}

int check(const Options& options) {
    const ConstantsOverlay overlay = lay_over(bundled_table(), read_file(options.file));
    write(options, check_json(options, overlay), check_text(options, overlay));
    return overlay.faults.empty() ? 0 : 4;
}

int sources(const Options& options) {
    const Table table = table_for(options.shared);
    write(options, sources_json(table), sources_text(table, options.shared.colour()));
    return 0;
}

}  // namespace

Action declare_constants(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    Subcommands<Options> commands(app, options);
    commands.add("list", "List systems, reagents, ions or formulas", list)
        ->add_option("what", options->listing, "systems, reagents, ions or formulas")
        ->check(CLI::IsMember({"systems", "reagents", "ions", "formulas"}))
        ->capture_default_str();
    commands.add("show", "Show all that is held under a name", show)
        ->add_option("name", options->name, "System, ion, reagent or formula")
        ->required()
        ->type_name("NAME");
    commands.add("check", "Check a file to lay over: every fault", check)
        ->add_option("file", options->file, "Constants file ('-' for standard input)")
        ->required()
        ->type_name("FILE");
    commands.add("sources", "List the publications behind it", sources);
    return commands.action();
}

}  // namespace carboy::cli
