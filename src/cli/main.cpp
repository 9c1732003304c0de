#include <algorithm>
#include <array>
#include <cstdio>
#include <exception>
#include <iterator>
#include <string>
#include <string_view>
#include <unistd.h>
#include <vector>

#include <CLI/CLI.hpp>
#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/error.h"
#include "carboy/notation.h"

#include "cli/commands.h"
#include "report/error_text.h"
#include "report/json.h"

namespace {

using carboy::Error;
using carboy::ErrorKind;
using carboy::cli::Action;
using carboy::cli::SharedOptions;

struct Command {
    const char* name;
    const char* summary;
    Action (*declare)(CLI::App&, SharedOptions*&);
};

constexpr std::array commands{
    Command{"recipe", "From a label to what to weigh, measure and read", carboy::cli::declare_recipe},
    Command{"predict", "The pH and the species of a mixture as made", carboy::cli::declare_predict},
    Command{"titrate", "pH and buffer value against titrant added", carboy::cli::declare_titrate},
    Command{"sweep", "pH against temperature, dilution, salt or strength", carboy::cli::declare_sweep},
    Command{"series", "A set of buffers across pH, from the same stocks", carboy::cli::declare_series},
    Command{"shelf", "Check what is on the shelf, and book it off", carboy::cli::declare_shelf},
    Command{"adjust", "What to do with a batch whose pH is off", carboy::cli::declare_adjust},
    Command{"select", "Rank the buffers for a job, with the reasons", carboy::cli::declare_select},
    Command{"fit", "Constants and strengths from your own readings", carboy::cli::declare_fit},
    Command{"constants", "Look into the constants, or check a file of them", carboy::cli::declare_constants}};

constexpr auto overview = R"(
Examples:
  carboy recipe "50 mM Tris-HCl, 150 mM NaCl, pH 7.5 at 4 C" --volume 1L
  carboy predict "25 mmol/kg KH2PO4, 25 mmol/kg Na2HPO4"
  carboy constants show phosphate

'carboy COMMAND --help' tells more of each.
Exit status: 0 done; 1 understood, but there is no such recipe; 2 the input is
wrong; 3 a file cannot be read or written; 4 the constants file is invalid;
70 a defect of the program.
Not for clinical or parenteral use.
)";

void report(const Error& error, const SharedOptions* shared) {
    if (shared != nullptr && shared->json()) {
        fmt::print(stderr, "{}\n", carboy::error_json(error, error.id()).dump());
        return;
    }
    const bool colour = shared == nullptr || shared->color == "auto"
                            ? isatty(STDERR_FILENO) != 0 && shared != nullptr && shared->colour()
                            : shared->color == "always";
    std::fputs(carboy::error_text(error, colour).c_str(), stderr);
}

std::string usage_of(const CLI::App& app) {
    const std::string& name = app.get_name();
    return fmt::format("'{} --help' shows how it is used", name == "carboy" ? name : "carboy " + name);
}

/// A word where a command is expected, and none is called that.
Error unknown_command(const std::string& word, const CLI::App& app) {
    std::vector<std::string> names;
    for (const CLI::App* command : app.get_subcommands([](const CLI::App*) { return true; })) {
        names.push_back(command->get_name());
    }
    const auto near = carboy::nearest_words(word, names);
    return {ErrorKind::input, "usage", fmt::format("there is no command '{}'", word), "command line",
            near.empty() ? fmt::format("the commands are {}", fmt::join(names, ", "))
                         : fmt::format("did you mean {}?", near.front())};
}

/// Words that are left over, in the order typed: most often a label that stands without quotes.
Error left_over_error(const CLI::App& app, const std::vector<std::string>& words) {
    const std::vector<std::string> left = app.remaining(true);
    std::vector<std::string> unexpected;
    std::copy_if(words.begin(), words.end(), std::back_inserter(unexpected),
                 [&](const std::string& word) { return std::find(left.begin(), left.end(), word) != left.end(); });
    const std::string told =
        fmt::format("'{}' {} not expected here", fmt::join(unexpected, " "), unexpected.size() == 1 ? "is" : "are");
    std::vector<std::string> options;
    for (const CLI::Option* option : app.get_options()) {
        for (const std::string& name : option->get_lnames()) {
            options.push_back("--" + name);
        }
    }
    std::string help = usage_of(app);
    const auto option = std::find_if(unexpected.begin(), unexpected.end(),
                                     [](const std::string& word) { return word.starts_with('-'); });
    if (unexpected.size() == 1 && option == unexpected.end()) {
        help = fmt::format("name the option that it belongs to, as in --volume 1L; {}", help);
    } else if (option == unexpected.end()) {
        help = fmt::format("put quotes around what has spaces in it, as in \"50 mM Tris-HCl, pH 8.0\"; {}", help);
    } else if (const auto near = carboy::nearest_words(*option, options, 1); !near.empty()) {
        help = fmt::format("did you mean {}? {}", near.front(), help);
    }
    return {ErrorKind::input, "usage", told, "command line", help};
}

/// CLI11's complaint in our form, with the nearest option or command where a word is unknown.
Error usage_error(const CLI::ParseError& error, const CLI::App& app, const std::vector<std::string>& words) {
    const auto code = static_cast<CLI::ExitCodes>(error.get_exit_code());
    // After the name of the app in question, the first word that is no option was meant as a command.
    if (code == CLI::ExitCodes::RequiredError && !app.get_subcommands([](const CLI::App*) { return true; }).empty()) {
        bool inside = app.get_name() == "carboy";
        for (const std::string& word : words) {
            if (inside && !word.starts_with('-')) {
                const auto named = [&](const CLI::App* command) { return command->get_name() == word; };
                if (app.get_subcommands(named).empty()) {
                    return unknown_command(word, app);
                }
                break;
            }
            inside = inside || word == app.get_name();
        }
    }
    if (code == CLI::ExitCodes::ExtrasError) {
        return left_over_error(app, words);
    }
    std::string told = error.what();
    while (told.ends_with('.') || told.ends_with('\n')) {
        told.pop_back();
    }
    return {ErrorKind::input, "usage", told, "command line", usage_of(app)};
}

int run(int argc, char** argv) {
    SharedOptions* shared = nullptr;
    Action action;  // owns what `shared` points to, which errors are told by
    try {
        CLI::App app{"Recipes for buffers, from the label on the bottle to the balance and the meter.", "carboy"};
        app.set_version_flag("--version",
                             fmt::format("carboy {} (constants {})", CARBOY_VERSION, carboy::bundled_table().version));
        app.footer(overview);
        app.require_subcommand(1);
        // Only the command that is called declares its options: start-up time counts in scripts.
        const std::string_view called = argc > 1 ? argv[1] : "";
        for (const Command& command : commands) {
            CLI::App* sub = app.add_subcommand(command.name, command.summary);
            if (called == command.name) {
                action = command.declare(*sub, shared);
            }
        }
        try {
            app.parse(argc, argv);
        } catch (const CLI::ParseError& error) {
            if (error.get_exit_code() == static_cast<int>(CLI::ExitCodes::Success)) {
                return app.exit(error);
            }
            const auto used = app.get_subcommands();
            throw usage_error(error, used.empty() ? app : *used.front(),
                              std::vector<std::string>(argv + 1, argv + argc));
        }
        return action ? action() : 0;
    } catch (const Error& error) {
        report(error, shared);
        return carboy::exit_status(error.kind());
    } catch (const std::exception& error) {
        report(Error(ErrorKind::defect, "unexpected", error.what(), {}, "please report this line and what was typed"),
               shared);
        return carboy::exit_status(ErrorKind::defect);
    }
}

}  // namespace

int main(int argc, char** argv) try { return run(argc, argv); } catch (...) {
    // Only telling of an error can fail here: out of memory, or standard error is gone.
    return carboy::exit_status(ErrorKind::defect);
}
