#include "plan/staging.h"

#include <algorithm>
#include <cmath>
#include <utility>

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

// Common practice, no source: nine tenths of the titrant at once, the last tenth in small portions.
constexpr double at_once = 0.9;

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

/// Volume that the weighed and measured things take up, the titrant apart. Where the table does not know a solute's
/// volume: 0.6 mL a gram, common for organic solids, from memory; it only decides how much water to begin with.
Volume bulk_of(const Plan& plan, const Table& table) {
    constexpr double mL_per_g = 0.6;
    Volume bulk;
    for (const Weighing& item : plan.weigh) {
        const Volume known = item.amount.mol() * volume_per_mole(table, table.reagents[item.reagent]);
        const Volume guessed = Volume::millilitres(mL_per_g * item.mass.g());
        const bool neglected = known.mL() < 0.2 * guessed.mL();
        bulk += neglected ? guessed : known;
    }
    for (const Measurement& item : plan.measure) {
        if (item.purpose != Purpose::titrant) {
            bulk += item.volume;
        }
    }
    return bulk;
}

void choose_volumes(Plan& plan, const Table& table, Volume titrant) {
    const Volume total = plan.request.volume;
    const Volume bulk = bulk_of(plan, table);
    // Common practice, no source: dissolve in about 80 % of the volume; less where the titrant needs the room, more
    // where what is dissolved takes it.
    plan.dissolve_in = std::min(0.8 * total, std::max(0.95 * total - titrant, 0.2 * total));
    const bool crowded = bulk > 0.6 * plan.dissolve_in;
    if (crowded) {
        plan.dissolve_in = std::max(plan.dissolve_in, std::min(0.97 * total - titrant, bulk + 0.5 * (total - bulk)));
        plan.dissolve_in = std::max(plan.dissolve_in, std::min(bulk, total));
    }
    constexpr double first_water = 0.875;
    plan.start_with = std::max(first_water * (plan.dissolve_in - bulk), Volume{});
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
    choose_volumes(plan, table, titrant);

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
        const Portion all = plan.preparation.portions.back();
        for (const auto& [reached, share] : {std::pair(Stage::nearly, at_once), std::pair(Stage::titrated, 1.0)}) {
            Preparation now = stage;
            now.portions.push_back({all.reagent, share * *all.amount, std::nullopt});
            now.filled_to = plan.dissolve_in + share * titrant;
            plan.readings.push_back({reached, *now.filled_to, reading_of(table, now, model)});
        }
    }
    plan.readings.push_back({Stage::filled, total, reading_of(table, plan.preparation, model)});
    if (plan.request.strength != 1) {
        Preparation working = plan.preparation;
        working.filled_to = plan.request.strength * total;
        plan.readings.push_back({Stage::diluted, *working.filled_to, reading_of(table, working, model)});
    }
    warn_of_gas(plan, table);
    if (plan.request.ph) {
        warn_of_weak_buffering(plan);
        warn_of_large_titrant(plan);
    }
}

}  // namespace carboy
