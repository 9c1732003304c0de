#pragma once

#include <string>

#include "carboy/adjustment.h"

// Batches with a mistake in them, put together as a person would write them down: the recipe's own masses and volumes
// in a mixture line, with the mistake made in that line. Nothing here comes from src/explore.

namespace carboy::test {

struct SimulatedBatch {
    Preparation preparation;
    Temperature read_at;
};

/// The recipe with this mistake (kind, articles, factor and temperature count).
SimulatedBatch simulate(const Plan& plan, const Mistake& mistake);

/// pH by the forward calculation alone.
double ph_at(const Preparation& preparation, Temperature temperature);

/// What a meter with two decimals shows.
double shown(double ph);

}  // namespace carboy::test
