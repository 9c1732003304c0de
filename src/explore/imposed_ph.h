#pragma once

#include <functional>
#include <optional>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/preparation.h"
#include "carboy/quantity.h"

namespace carboy {

/// What the calculations of an adjustment have in common.
struct Bench {
    const Table& table;
    const ActivityModel& model;
};

/// pH of a preparation at a temperature.
PH ph_of(const Bench& bench, const Preparation& preparation, Temperature temperature);

/// Charge of the whole preparation, mol, if its pH were `ph`: linear in every amount but for activities and dilution.
double charge_at(const Bench& bench, const Preparation& preparation, PH ph, Temperature temperature);

/// Amount for which `make(amount)` has that pH. It begins with none and with `step`, which `make` must serve, and goes
/// no further than `most`. Empty: out of reach. Negative: it would have to be taken away; `signed_amounts` says whether
/// `make` serves those (else the figure is an estimate).
std::optional<Amount> amount_for(const Bench& bench, const std::function<Preparation(Amount)>& make, PH ph,
                                 Temperature temperature, Amount step, Amount most, bool signed_amounts = false);

}  // namespace carboy
