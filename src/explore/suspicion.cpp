#include "explore/suspicion.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "carboy/equilibrium.h"
#include "carboy/error.h"
#include "carboy/uncertainty.h"

#include "explore/correction.h"

namespace carboy {

namespace {

constexpr double largest_factor = 20;  // 50 % NaOH in place of 1 mol/L

/// What the meter should show of a suspect, and how sure that is. False when it is no solution at all.
bool take_reading(const Bench& bench, Suspect& suspect) {
    try {
        EquilibriumSolver solver(bench.table, compose(bench.table, suspect.vessel.present).mixture, suspect.read_at,
                                 bench.model);
        solver.solve();
        suspect.mistake.reading = solver.ph();
        suspect.mistake.reading_expanded_k2 =
            std::hypot(ph_uncertainty(solver, bench.table, bench.model).expanded_k2, meter_ph);
        return true;
    } catch (const Error& error) {
        if (error.kind() == ErrorKind::defect) {
            throw;
        }
        return false;  // the mistake would leave no room for water: nobody makes it unnoticed
    }
}

/// How many times the planned titrant gives this reading; empty when none does.
std::optional<double> factor_for(const Bench& bench, const Plan& plan, const VesselContent& vessel,
                                 const PlannedTitrant& titrant, PH reading) {
    const auto make = [&](Amount amount) {
        return titrant_off_by(plan, vessel, titrant, amount / titrant.amount).vessel.present;
    };
    const auto amount = amount_for(bench, make, reading, plan.request.prepare_at, 1e-3 * titrant.amount,
                                   largest_factor * titrant.amount);
    if (!amount || amount->mol() < 0) {
        return std::nullopt;
    }
    return *amount / titrant.amount;
}

/// The wrong kind of titrant was not yet in: before it only the other reagents count.
void take_reading_before(const Bench& bench, const Plan& plan, const VesselContent& planned, Suspect& suspect) {
    const bool of_titrant = suspect.mistake.kind == MistakeKind::titrant_wrong_kind ||
                            suspect.mistake.kind == MistakeKind::set_before_dilution;
    const Preparation before = before_titrant(bench.table, plan, of_titrant ? planned.present : suspect.vessel.present);
    suspect.mistake.before = ph_of(bench, before, plan.request.prepare_at);
}

double density(double off, double standard_uncertainty) {
    const double z = off / standard_uncertainty;
    return std::exp(-z * z / 2) / standard_uncertainty;
}

/// A titrant error of just the size that gives the reading, with the weight of errors of about that size.
std::optional<Suspect> titrant_error(const Bench& bench, const Plan& plan, const VesselContent& vessel, PH reading,
                                     double& weight) {
    const auto titrant = titrant_of(bench.table, plan);
    if (!titrant) {
        return std::nullopt;
    }
    const auto factor = factor_for(bench, plan, vessel, *titrant, reading);
    if (!factor) {
        return std::nullopt;
    }
    Suspect suspect = titrant_off_by(plan, vessel, *titrant, *factor);
    if (!take_reading(bench, suspect)) {
        return std::nullopt;
    }
    suspect.mistake.consistent = true;
    const double standard = suspect.mistake.reading_expanded_k2 / 2;
    const double acid = static_cast<double>(titrant->charge <= 0 ? 1 : -1);
    const double low = factor_for(bench, plan, vessel, *titrant, PH(reading.value() + acid * standard)).value_or(0.0);
    const double high =
        factor_for(bench, plan, vessel, *titrant, PH(reading.value() - acid * standard)).value_or(largest_factor);
    // The same measure as `density`: probability per standard uncertainty of pH, times sqrt(2 pi).
    constexpr double root_two_pi = 2.5066;
    weight = prior(MistakeKind::titrant_off) * titrant_factor_share(std::min(low, high), std::max(low, high)) *
             root_two_pi / (2 * standard);
    return suspect;
}

}  // namespace

std::vector<Suspect> suspects(const Bench& bench, const Plan& plan, const VesselContent& vessel,
                              const OffBatch& batch) {
    constexpr std::size_t most = 6;
    constexpr std::size_t nearest_when_none = 2;
    const double reading = batch.reading.value();
    const PH expected = ph_of(bench, vessel.present, plan.request.prepare_at);
    std::vector<Suspect> tried;
    std::array<int, 32> of_kind{};
    for (Suspect& suspect : single_mistakes(bench, plan, vessel)) {
        const bool shows =
            take_reading(bench, suspect) && (suspect.mistake.kind == MistakeKind::meter ||
                                             std::abs(suspect.mistake.reading.value() - expected.value()) > meter_ph);
        if (shows) {
            ++of_kind[static_cast<std::size_t>(suspect.mistake.kind)];
            tried.push_back(std::move(suspect));
        }
    }
    for (Suspect& suspect : tried) {
        Mistake& mistake = suspect.mistake;
        const double off = reading - mistake.reading.value();
        mistake.consistent = std::abs(off) <= mistake.reading_expanded_k2;
        mistake.plausibility = prior(mistake.kind) / of_kind[static_cast<std::size_t>(mistake.kind)] *
                               density(off, mistake.reading_expanded_k2 / 2);
    }
    double weight = 0;
    if (auto suspect = titrant_error(bench, plan, vessel, batch.reading, weight)) {
        suspect->mistake.plausibility = weight;
        tried.push_back(std::move(*suspect));
    }
    double sum = 0;
    for (Suspect& suspect : tried) {
        Mistake& mistake = suspect.mistake;
        if (batch.reading_before) {
            take_reading_before(bench, plan, vessel, suspect);
            const double off = batch.reading_before->value() - mistake.before->value();
            mistake.consistent = mistake.consistent && std::abs(off) <= mistake.reading_expanded_k2;
            mistake.plausibility *= density(off, mistake.reading_expanded_k2 / 2);
        }
        sum += mistake.plausibility;
    }
    for (Suspect& suspect : tried) {
        suspect.mistake.plausibility = sum > 0 ? suspect.mistake.plausibility / sum : 0;
    }
    const auto distance = [&](const Mistake& mistake) {
        const double before = batch.reading_before ? batch.reading_before->value() - mistake.before->value() : 0.0;
        return std::hypot(reading - mistake.reading.value(), before);
    };
    const bool any = std::any_of(tried.begin(), tried.end(), [](const Suspect& s) { return s.mistake.consistent; });
    if (any) {
        std::erase_if(tried, [](const Suspect& s) { return !s.mistake.consistent; });
    }
    std::stable_sort(tried.begin(), tried.end(), [&](const Suspect& a, const Suspect& b) {
        return any ? a.mistake.plausibility > b.mistake.plausibility : distance(a.mistake) < distance(b.mistake);
    });
    tried.resize(std::min(tried.size(), any ? most : nearest_when_none));
    return tried;
}

bool impossible_for_titrant(const Bench& bench, const Plan& plan, const VesselContent& vessel, PH reading) {
    const auto titrant = titrant_of(bench.table, plan);
    if (!titrant) {
        return false;
    }
    Suspect none = titrant_off_by(plan, vessel, *titrant, 0.0);
    Suspect most = titrant_off_by(plan, vessel, *titrant, largest_factor);
    if (!take_reading(bench, none)) {
        return false;
    }
    const bool most_counts = take_reading(bench, most);
    const double from_none = reading.value() - none.mistake.reading.value();
    const double from_most = reading.value() - most.mistake.reading.value();
    const bool titrant_lowers = none.mistake.reading > ph_of(bench, vessel.present, plan.request.prepare_at);
    return (titrant_lowers ? from_none : -from_none) > none.mistake.reading_expanded_k2 ||
           (most_counts && (titrant_lowers ? -from_most : from_most) > most.mistake.reading_expanded_k2);
}

}  // namespace carboy
