#pragma once

#include "cli/options.h"

namespace carboy::cli {

// Each declares its options on a CLI::App of its own and returns what to run. `shared` is set to where its shared
// options will be, so that errors can be told in the format asked for.
Action declare_recipe(CLI::App& app, SharedOptions*& shared);
Action declare_predict(CLI::App& app, SharedOptions*& shared);
Action declare_titrate(CLI::App& app, SharedOptions*& shared);
Action declare_sweep(CLI::App& app, SharedOptions*& shared);
Action declare_series(CLI::App& app, SharedOptions*& shared);
Action declare_shelf(CLI::App& app, SharedOptions*& shared);
Action declare_adjust(CLI::App& app, SharedOptions*& shared);
Action declare_select(CLI::App& app, SharedOptions*& shared);
Action declare_fit(CLI::App& app, SharedOptions*& shared);
Action declare_constants(CLI::App& app, SharedOptions*& shared);

}  // namespace carboy::cli
