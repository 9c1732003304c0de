#include "plan/staging.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "carboy/equilibrium.h"

namespace carboy {

bool goes_in_last(const Reagent& reagent, const Table& table) {
    return std::any_of(reagent.ghs.statements.begin(), reagent.ghs.statements.end(), [&](std::uint16_t statement) {
        const std::string_view code = table.hazards[statement].code;
        return code == "EUH031" || code == "EUH032";
    });
}

namespace {

PH reading_of(const Table& table, const Preparation& preparation, const ActivityModel& model) {
    EquilibriumSolver solver(table, compose(table, preparation).mixture, preparation.filled_at, model);
    solver.solve();
    return solver.ph();
}

bool is_titrant(const Plan& plan, std::size_t portion) {
    // The planner puts the titrant last.
    const bool titrated = (!plan.measure.empty() && plan.measure.back().purpose == Purpose::titrant) ||
                          (!plan.weigh.empty() && plan.weigh.back().purpose == Purpose::titrant);
    return titrated && portion + 1 == plan.preparation.portions.size();
}

/// A buffer far from every pK holds its pH badly; said only where a pH was asked for.
void warn_of_weak_buffering(Plan& plan) {
    double total = 0;
    for (const BufferItem& buffer : plan.request.buffers) {
        total += buffer.concentration.value;
    }
    // Best possible: ln 10 / 4 = 0.576 of the concentration, at pH = pK. Common practice: within 1 pH of a pK, 0.19 of
    // it.
    constexpr double one_ph_away = 0.19;
    const double value = plan.predicted.buffer_value.mol_per_kg();
    if (total > 0 && value < one_ph_away * total) {
        plan.warnings.push_back(
            {"weak_buffering",
             fmt::format(
                 "At pH {:.2f} this buffer is more than 1 pH from its pK: its buffer value is {:.2g} mol/kg per pH, "
                 "{:.0f} % of the best that its concentration allows. Small amounts of acid or base will move it.",
                 plan.predicted.ph.value(), value, 100 * value / (0.576 * total))});
    }
}

/// Below neutral, what gives off a toxic gas with acid does so in the finished solution.
void warn_of_gas(Plan& plan, const Table& table) {
    constexpr double neutral = 7.0;
    const double lowest = std::min(plan.readings.back().ph.value(), plan.predicted.ph.value());
    for (const std::uint16_t index : reagents_used(plan)) {
        const Reagent& reagent = table.reagents[index];
        if (lowest < neutral && goes_in_last(reagent, table)) {
            plan.warnings.insert(
                plan.warnings.begin(),
                {"acid_liberates_gas",
                 fmt::format(
                     "DANGER: {} gives off toxic gas with acid, and this solution is at pH {:.2f}. Leave it out or "
                     "choose another; otherwise only in the fume hood, under supervision.",
                     reagent.name, lowest)});
        }
    }
}

void warn_of_large_titrant(Plan& plan) {
    if (plan.measure.empty() || plan.measure.back().purpose != Purpose::titrant) {
        return;
    }
    const Measurement& titrant = plan.measure.back();
    const double share = titrant.volume / plan.request.volume;
    if (share > 0.5) {
        plan.warnings.push_back(
            {"much_titrant",
             fmt::format("The titrant makes up {:.0f} % of the final volume. A stronger one, or the route "
                         "with two salts, leaves more room.",
                         100 * share)});
    }
}

}  // namespace

void stage(Plan& plan, const Table& table, const ActivityModel& model) {
    const Volume total = plan.request.volume;
    const bool measured_titrant = !plan.measure.empty() && plan.measure.back().purpose == Purpose::titrant;
    const Volume titrant = measured_titrant ? plan.measure.back().volume : Volume{};
    // Common practice, no source: dissolve in about 80 % of the volume; less where the titrant needs the room.
    plan.dissolve_in = std::min(0.8 * total, std::max(0.95 * total - titrant, 0.2 * total));

    Preparation stage;
    stage.filled_at = plan.request.prepare_at;
    stage.filled_to = plan.dissolve_in;
    bool titrated = false;
    for (std::size_t i = 0; i < plan.preparation.portions.size(); ++i) {
        if (is_titrant(plan, i)) {
            titrated = true;
        } else if (!goes_in_last(table.reagents[plan.preparation.portions[i].reagent], table)) {
            stage.portions.push_back(plan.preparation.portions[i]);
        }
    }
    plan.readings.push_back({Stage::dissolved, *stage.filled_to, reading_of(table, stage, model)});
    if (titrated) {
        stage.portions.push_back(plan.preparation.portions.back());
        stage.filled_to = plan.dissolve_in + titrant;
        plan.readings.push_back({Stage::titrated, *stage.filled_to, reading_of(table, stage, model)});
    }
    plan.readings.push_back({Stage::filled, total, reading_of(table, plan.preparation, model)});
    warn_of_gas(plan, table);
    if (plan.request.ph) {
        warn_of_weak_buffering(plan);
        warn_of_large_titrant(plan);
    }
}

}  // namespace carboy
