#pragma once

#include <optional>
#include <vector>

#include "carboy/adjustment.h"

// Batches with a mistake in them, put together as a person would write them down: the recipe's own masses and volumes
// in a mixture line, with the mistake made in that line. Nothing here comes from src/explore.

namespace carboy::test {

struct SimulatedBatch {
    Preparation preparation;
    Temperature read_at;
};

struct Job {
    const char* label;
    double bench_C;
    Route route = Route::automatic;
};
/// Labels of all kinds, from the cold room to the incubator.
const std::vector<Job>& jobs();

Request request(const Job& job, double litres = 1.0);
Titrant titrant(const char* text);
/// What the program says of a batch of this recipe.
Adjustment adjusted(const Plan& plan, double reading, const Titrant& with,
                    std::optional<Volume> not_filled = std::nullopt);
/// The titrant that a bench would take for this reading.
Titrant needed(const Plan& plan, double reading);
/// `litres` of a batch after so much of a measured titrant.
Preparation after(const Preparation& before, const Correction& correction, Amount amount, double litres);

/// The recipe with this mistake (kind, articles, factor and temperature count).
SimulatedBatch simulate(const Plan& plan, const Mistake& mistake);

/// pH by the forward calculation alone.
double ph_at(const Preparation& preparation, Temperature temperature);

/// What a meter with two decimals shows.
double shown(double ph);

}  // namespace carboy::test
