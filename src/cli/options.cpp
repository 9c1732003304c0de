#include "cli/options.h"

#include <cstdio>
#include <cstdlib>
#include <string_view>
#include <unistd.h>

#include <CLI/CLI.hpp>
#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/constants_file.h"
#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/shelf_file.h"

#include "cli/file.h"

namespace carboy::cli {

bool SharedOptions::colour() const {
    if (color != "auto") {
        return color == "always";
    }
    const char* no_colour = std::getenv("NO_COLOR");
    const char* terminal = std::getenv("TERM");
    return output_file.empty() && isatty(STDOUT_FILENO) != 0 && (no_colour == nullptr || *no_colour == '\0') &&
           terminal != nullptr && std::string_view(terminal) != "dumb";
}

std::optional<Temperature> SharedOptions::use_at() const {
    return at.empty() ? std::nullopt : std::optional(read_temperature(at, "--at"));
}

std::optional<Temperature> SharedOptions::bench_at() const {
    return prepare_at.empty() ? std::nullopt : std::optional(read_temperature(prepare_at, "--prepare-at"));
}

const ActivityModel& SharedOptions::activity_model() const {
    return *find_activity_model(activity);
}

void add_output_options(CLI::App& app, SharedOptions& options, const std::vector<std::string>& formats) {
    const bool two = formats.size() == 2;
    app.add_option("--format", options.format,
                   two ? "text for people, json for programs" : fmt::format("{}", fmt::join(formats, ", ")))
        ->check(CLI::IsMember(formats))
        ->type_name("FORMAT")
        ->capture_default_str();
    app.add_option("-o,--output", options.output_file, "Write to FILE, whole or not at all")->type_name("FILE");
    app.add_option("--constants", options.constants_file, "Lay FILE over the bundled constants")->type_name("FILE");
    app.add_option("--color", options.color, "Emphasis in text: auto, always or never")
        ->check(CLI::IsMember({"auto", "always", "never"}))
        ->type_name("WHEN")
        ->capture_default_str();
    app.add_flag("-q,--quiet", options.quiet, "Only errors on standard error");
}

void add_computing_options(CLI::App& app, SharedOptions& options) {
    app.add_option("--at", options.at, "Temperature of use [25 C, or the label's]")->type_name("T");
    app.add_option("--prepare-at", options.prepare_at, "Temperature at the bench and the meter [25 C]")->type_name("T");
    app.add_option("--activity", options.activity, "davies, debye-huckel or ideal")
        ->check(CLI::IsMember({"davies", "debye-huckel", "ideal"}))
        ->type_name("MODEL")
        ->capture_default_str();
    app.add_flag("--explain", options.explain, "Add constants, equations and sources");
}

Table table_for(const SharedOptions& options) {
    if (options.constants_file.empty()) {
        return bundled_table();
    }
    ConstantsOverlay overlay = lay_over(bundled_table(), read_file(options.constants_file));
    if (!overlay.faults.empty()) {
        const ConstantsFault& first = overlay.faults.front();
        const std::string more =
            overlay.faults.size() > 1 ? fmt::format(" (and {} more)", overlay.faults.size() - 1) : std::string();
        throw Error(ErrorKind::data, "invalid_constants",
                    fmt::format("{}: {}{}", first.path.empty() ? "document" : first.path, first.message, more),
                    options.constants_file,
                    fmt::format("'carboy constants check {}' lists every fault", options.constants_file));
    }
    if (!options.quiet) {
        for (const ConstantsChange& change : overlay.changes) {
            fmt::print(stderr, "{}: {} {} {}\n", options.constants_file, change.replaced ? "replaces" : "adds",
                       change.kind, change.name);
        }
    }
    return std::move(overlay.table);
}

void add_route_option(CLI::App& app, std::string& route, const char* text) {
    const auto words = route_words();
    app.add_option("--route", route, text)
        ->check(CLI::IsMember(std::vector<std::string>(words.begin(), words.end())))
        ->type_name("ROUTE")
        ->capture_default_str();
}

void add_shelf_options(CLI::App& app, ShelfOptions& options) {
    app.add_option("--shelf", options.shelf_file, "Use only what FILE lists as there")->type_name("FILE");
    app.add_option("--stock", options.stocks, "A solution at hand, such as '0.2 M NaH2PO4'")
        ->type_name("SOLUTION")
        ->allow_extra_args(false);
    app.add_option("--on", options.today, "Date to judge expiry by, as 2026-12-31")->type_name("DATE");
}

std::optional<Shelf> shelf_for(const ShelfOptions& options, const Table& table, const ActivityModel& model) {
    std::optional<Shelf> shelf;
    if (!options.shelf_file.empty()) {
        ShelfReading reading = read_shelf(table, read_file(options.shelf_file), model, options.shelf_file);
        if (!reading.faults.empty()) {
            const ConstantsFault& first = reading.faults.front();
            throw Error(ErrorKind::data, "invalid_shelf",
                        fmt::format("{}: {}{}", first.path.empty() ? "document" : first.path, first.message,
                                    reading.faults.size() > 1 ? fmt::format(" (and {} more)", reading.faults.size() - 1)
                                                              : std::string()),
                        options.shelf_file,
                        fmt::format("'carboy shelf check {}' lists every fault", options.shelf_file));
        }
        shelf = std::move(reading.shelf);
    }
    if (!options.today.empty()) {
        const Date today = read_date(options.today, "--on");
        if (!shelf) {
            throw Error(ErrorKind::input, "usage", "--on judges the dates of a shelf, and there is none", "--on",
                        "give --shelf too");
        }
        shelf->today = today;
    }
    if (!options.stocks.empty()) {
        shelf = with_stocks(table, shelf ? &*shelf : nullptr, options.stocks, model);
    }
    return shelf;
}

}  // namespace carboy::cli
