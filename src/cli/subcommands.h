#pragma once

#include <memory>

#include <CLI/CLI.hpp>

#include "cli/options.h"

namespace carboy::cli {

/// A command of commands, such as `constants list`: they share one set of options, and which of them runs is known once
/// the command line is parsed.
template <class Options>
class Subcommands {
public:
    using Run = int (*)(const Options&);

    Subcommands(CLI::App& app, std::shared_ptr<Options> options) : app_(app), options_(std::move(options)) {
        app_.require_subcommand(1);
    }

    /// One of them, with the output options already declared.
    CLI::App* add(const char* name, const char* summary, Run run) {
        CLI::App* sub = app_.add_subcommand(name, summary);
        add_output_options(*sub, options_->shared);
        sub->callback([chosen = chosen_, run] { *chosen = run; });
        return sub;
    }
    Action action() const {
        return [options = options_, chosen = chosen_] { return (*chosen)(*options); };
    }

private:
    CLI::App& app_;
    std::shared_ptr<Options> options_;
    std::shared_ptr<Run> chosen_ = std::make_shared<Run>(nullptr);
};

}  // namespace carboy::cli
