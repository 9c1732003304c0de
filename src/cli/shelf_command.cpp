#include <fcntl.h>
#include <memory>
#include <sys/file.h>
#include <unistd.h>

#include <CLI/CLI.hpp>
#include <fmt/format.h>

#include "carboy/booking.h"
#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/shelf_file.h"

#include "cli/commands.h"
#include "cli/file.h"
#include "cli/subcommands.h"
#include "report/shelf_text.h"

namespace carboy::cli {

namespace {

constexpr auto examples = R"(
Examples:
  carboy shelf check shelf.json
  carboy shelf check shelf.json --on 2026-12-01
  carboy recipe "50 mM Tris-HCl, pH 8" --volume 1L --shelf shelf.json \
      --format json -o recipe.json
  carboy shelf use shelf.json recipe.json
  carboy shelf undo shelf.json

Amounts and the journal of bookings live in the one shelf file, which is
replaced whole or not at all.
)";

struct Options {
    std::string file;
    std::string recipe;
    std::string today;
    bool again = false;
    SharedOptions shared;
};

std::optional<Date> day(const Options& options) {
    return options.today.empty() ? std::nullopt : std::optional(read_date(options.today, "--on"));
}

void write(const Options& options, const nlohmann::ordered_json& record, const std::string& text) {
    write_result(options.shared.json() ? record.dump() + "\n" : text, options.shared.output_file);
}

int check(const Options& options) {
    const Table table = table_for(options.shared);
    ShelfReading reading = read_shelf(table, read_file(options.file), davies_model(), options.file);
    reading.shelf.today = day(options);
    write(options, shelf_check_json(reading, options.file),
          shelf_check_text(reading, options.file, options.shared.colour()));
    return reading.faults.empty() ? 0 : 4;
}

/// Keeps a second booking out while one is under way. The system lets go of it when the program ends, however it ends.
class Lock {
public:
    explicit Lock(const std::string& path)
        : descriptor_(open((path + ".lock").c_str(), O_RDWR | O_CREAT | O_CLOEXEC, 0666)) {
        if (descriptor_ < 0 || flock(descriptor_, LOCK_EX) != 0) {
            throw Error(ErrorKind::file, "cannot_write", "the shelf cannot be locked for booking", path + ".lock",
                        "check the folder and its permissions");
        }
    }
    Lock(const Lock&) = delete;
    Lock& operator=(const Lock&) = delete;
    ~Lock() { close(descriptor_); }

private:
    int descriptor_;
};

int use(const Options& options) {
    if (options.file == "-") {
        throw Error(ErrorKind::input, "usage", "a shelf on standard input cannot be booked off", "FILE",
                    "name the shelf file");
    }
    const std::string recipes = read_file(options.recipe);
    const Lock lock(options.file);
    const Booked booked = book(read_file(options.file), recipes, day(options), options.again);
    if (!booked.shelf_json.empty()) {
        write_result(booked.shelf_json, options.file);
    }
    write(options, booking_json(booked, options.file, false), booking_text(booked, options.file, false));
    return 0;
}

int undo(const Options& options) {
    const Lock lock(options.file);
    const Booked booked = undo_booking(read_file(options.file));
    write_result(booked.shelf_json, options.file);
    write(options, booking_json(booked, options.file, true), booking_text(booked, options.file, true));
    return 0;
}

}  // namespace

Action declare_shelf(CLI::App& app, SharedOptions*& shared) {
    auto options = std::make_shared<Options>();
    shared = &options->shared;
    app.footer(examples);
    Subcommands<Options> commands(app, options);
    const auto declare = [&](const char* name, const char* summary, int (*run)(const Options&)) {
        CLI::App* sub = commands.add(name, summary, run);
        sub->add_option("file", options->file, "Shelf file")->required()->type_name("FILE");
        return sub;
    };
    declare("check", "Check a shelf file and list what it holds", check)
        ->add_option("--on", options->today, "Date to judge expiry by, as 2026-12-31")
        ->type_name("DATE");
    CLI::App* using_up = declare("use", "Book off what recipes take", use);
    using_up->add_option("recipe", options->recipe, "Recipes as JSON, one a line ('-': standard input)")
        ->required()
        ->type_name("RECIPE");
    using_up->add_option("--on", options->today, "Date for the journal, as 2026-12-31")->type_name("DATE");
    using_up->add_flag("--again", options->again, "Book recipes that are booked already once more");
    declare("undo", "Put back what the last booking took", undo);
    return commands.action();
}

}  // namespace carboy::cli
