#pragma once

#include <functional>
#include <optional>
#include <string>
#include <vector>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/quantity.h"
#include "carboy/shelf.h"

namespace CLI {
class App;
}

namespace carboy::cli {

/// Options that the commands share, as typed.
struct SharedOptions {
    std::string at;
    std::string prepare_at;
    std::string activity = "davies";
    std::string constants_file;
    std::string format = "text";
    std::string output_file;
    std::string color = "auto";
    bool quiet = false;
    bool explain = false;

    bool json() const { return format == "json"; }
    /// Colour only for text on a terminal that wants it (NO_COLOR, TERM=dumb and -o turn `auto` off).
    bool colour() const;
    std::optional<Temperature> use_at() const;
    std::optional<Temperature> bench_at() const;
    const ActivityModel& activity_model() const;
};

/// -o, --format, --color, --quiet, --constants: every command. `formats` are those the command can write.
void add_output_options(CLI::App& app, SharedOptions& options,
                        const std::vector<std::string>& formats = {"text", "json"});
/// --at, --prepare-at, --activity, --explain: commands that compute.
void add_computing_options(CLI::App& app, SharedOptions& options);

/// The bundled table, with the user's file laid over it when one is given; what it changed is told on standard error
/// unless quiet. Throws Error (file or data).
Table table_for(const SharedOptions& options);

/// --route, described by `text`.
void add_route_option(CLI::App& app, std::string& route, const char* text);

/// What is on the shelf, as typed.
struct ShelfOptions {
    std::string shelf_file;
    std::vector<std::string> stocks;
    std::string today;
};
/// --shelf, --stock, --on.
void add_shelf_options(CLI::App& app, ShelfOptions& options);
/// The shelf asked for; none when no option names one. Throws Error (file, data or input).
std::optional<Shelf> shelf_for(const ShelfOptions& options, const Table& table, const ActivityModel& model);

/// One command: its options are declared on a CLI::App, and it runs later.
using Action = std::function<int()>;

}  // namespace carboy::cli
