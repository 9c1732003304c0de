#include "plan/staging.h"

#include <algorithm>
#include <cmath>
#include <utility>

#include <fmt/format.h>

#include "carboy/enthalpy.h"
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

/// The vessel at one moment of the work.
struct Contents {
    PH ph;
    double uncertainty_k2 = 0;
    double enthalpy_kJ = 0;
};

Contents contents_of(const Table& table, const Preparation& preparation, const ActivityModel& model) {
    const Composed composed = compose(table, preparation);
    EquilibriumSolver solver(table, composed.mixture, preparation.filled_at, model);
    solver.solve();
    return {solver.ph(), 2 * model.ph_uncertainty(solver.ionic_strength()),
            composed.water.kg() * reaction_enthalpy_kJ_per_kg(table, solver)};
}

Reading reading_of(Stage stage, const Preparation& preparation, const Contents& contents) {
    return {stage, *preparation.filled_to, contents.ph, contents.uncertainty_k2};
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
    const Contents dissolved = contents_of(table, stage, model);
    plan.readings.push_back(reading_of(Stage::dissolved, stage, dissolved));
    if (titrated) {
        const Portion all = plan.preparation.portions.back();
        for (const auto& [reached, share] : {std::pair(Stage::nearly, at_once), std::pair(Stage::titrated, 1.0)}) {
            Preparation now = stage;
            now.portions.push_back({all.reagent, share * *all.amount, std::nullopt});
            now.filled_to = plan.dissolve_in + share * titrant;
            const Contents reached_now = contents_of(table, now, model);
            plan.readings.push_back(reading_of(reached, now, reached_now));
            if (reached == Stage::titrated) {
                const double brought =
                    all.amount->mol() *
                    reaction_enthalpy_kJ_per_mol(table, table.reagents[all.reagent], plan.request.prepare_at);
                // A litre of solution weighs about a kilogram.
                plan.temperature_rise_K = temperature_rise_K(dissolved.enthalpy_kJ + brought - reached_now.enthalpy_kJ,
                                                             Mass::kilograms(now.filled_to->L()));
            }
        }
    }
    plan.readings.push_back(reading_of(Stage::filled, plan.preparation, contents_of(table, plan.preparation, model)));
    if (plan.request.strength != 1) {
        Preparation working = plan.preparation;
        working.filled_to = plan.request.strength * total;
        plan.readings.push_back(reading_of(Stage::diluted, working, contents_of(table, working, model)));
    }
}

}  // namespace carboy
