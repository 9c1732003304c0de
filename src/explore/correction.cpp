#include "explore/correction.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy {

namespace {

/// A first step of the search, small beside what any batch needs and large beside rounding: mol per litre.
constexpr double first_step_mol_per_L = 1e-5;
/// More than this of strong acid or base in a litre is no solution that any of this describes.
constexpr double most_mol_per_L = 6;

std::size_t portion_of(const Preparation& preparation, const PlannedTitrant& titrant) {
    for (std::size_t i = preparation.portions.size(); i-- > 0;) {
        if (preparation.portions[i].reagent == titrant.titrant.reagent &&
            preparation.portions[i].amount == titrant.amount) {
            return i;
        }
    }
    return preparation.portions.size();
}

/// The buffer that ends up furthest from its label, relative.
double concentration_off(const Table& table, const Plan& plan, const Preparation& finished) {
    const auto total = [&](const Preparation& preparation, ComponentId system) {
        double mol = 0;
        for (const Portion& portion : preparation.portions) {
            for (const Supply& supply : table.reagents[portion.reagent].supplies) {
                mol += supply.component == system ? supply.count * portion.amount.value_or(Amount{}).mol() : 0.0;
            }
        }
        return mol / preparation.filled_to->L();
    };
    double worst = 0;
    for (const BufferItem& buffer : plan.request.buffers) {
        const double off = total(finished, buffer.system) / total(plan.preparation, buffer.system) - 1;
        worst = std::abs(off) > std::abs(worst) ? off : worst;
    }
    return worst;
}

bool moves_away(const Bench& bench, const Plan& plan, const VesselContent& vessel, const Titrant& titrant,
                Amount step) {
    const Temperature at = plan.request.use_at;
    const double before = ph_of(bench, vessel.finished(bench.table, titrant, Amount{}), at).value();
    const double after = ph_of(bench, vessel.finished(bench.table, titrant, step), at).value();
    return (after - before) * (plan.request.ph->value() - before) < 0;
}

Correction worked_out(const Bench& bench, const Plan& plan, const VesselContent& vessel, const Titrant& titrant,
                      Amount amount) {
    constexpr double nine_tenths = 0.9;  // common practice, no source: the last tenth in small portions
    const Request& request = plan.request;
    Correction correction;
    correction.titrant = titrant;
    correction.amount = amount;
    const PH now = ph_of(bench, vessel.present, request.prepare_at);
    const double all =
        std::abs(charge_at(bench, vessel.finished(bench.table, titrant, Amount{}), *request.ph, request.use_at));
    const double by_meter =
        std::abs(charge_at(bench, vessel.present, PH(now.value() + meter_ph), request.prepare_at) / 2 -
                 charge_at(bench, vessel.present, PH(now.value() - meter_ph), request.prepare_at) / 2);
    correction.least = amount * std::max(0.0, 1 - by_meter / all);
    correction.most = amount * (1 + by_meter / all);
    correction.at_once = nine_tenths * correction.least;

    const Preparation then = vessel.with(bench.table, titrant, amount);
    const Preparation finished = vessel.finished(bench.table, titrant, amount);
    correction.volume_then = *then.filled_to;
    correction.volume = *then.filled_to - *vessel.present.filled_to;
    correction.stop_reading = ph_of(bench, then, request.prepare_at);
    correction.finished_volume = *finished.filled_to;
    correction.finished_reading = ph_of(bench, finished, request.prepare_at);
    correction.concentration_off = concentration_off(bench.table, plan, finished);
    correction.predicted = predict(bench.table, compose(bench.table, finished).mixture, request.use_at, bench.model);
    return correction;
}

}  // namespace

Preparation with_excess(const Table& table, const Plan& plan, const Preparation& present, Amount acid) {
    Preparation changed = present;
    double acid_mol = acid.mol();
    const auto planned = titrant_of(table, plan);
    const std::size_t portion = planned ? portion_of(present, *planned) : present.portions.size();
    if (portion < present.portions.size() && planned->charge != 0) {
        // An acid titrant (charge -1) takes up excess acid as it is; missing acid is acid that did not go in.
        const double titrant_mol = planned->amount.mol() - planned->charge * acid_mol;
        changed.portions[portion].amount = Amount::mol(std::max(0.0, titrant_mol));
        acid_mol = titrant_mol >= 0 ? 0.0 : -planned->charge * titrant_mol;
    }
    if (acid_mol != 0) {
        const Titrant strong = strong_titrant(table, plan, acid_mol > 0 ? -1 : 1);
        changed.portions.push_back({strong.reagent, Amount::mol(std::abs(acid_mol)), std::nullopt});
    }
    return changed;
}

Amount acid_in_excess(const Bench& bench, const Plan& plan, const VesselContent& vessel, PH reading) {
    const double litres = vessel.present.filled_to->L();
    const auto make = [&](Amount acid) { return with_excess(bench.table, plan, vessel.present, acid); };
    const auto found =
        amount_for(bench, make, reading, plan.request.prepare_at, Amount::mol(first_step_mol_per_L * litres),
                   Amount::mol(most_mol_per_L * litres), true);
    if (!found) {
        throw Error(ErrorKind::no_recipe, "impossible_reading",
                    fmt::format("no amount of strong acid or base beside this label gives a reading of {:.2f}",
                                reading.value()),
                    "--reading", "check the meter, its calibration and the label");
    }
    return *found;
}

Attempt attempt(const Bench& bench, const Plan& plan, const VesselContent& vessel, const Titrant& titrant) {
    const double litres = vessel.present.filled_to->L();
    const Amount step = Amount::mol(first_step_mol_per_L * litres);
    // As much titrant again as there is batch is no correction any more.
    const Amount most =
        Amount::mol(titrant.strength ? titrant.strength->mol_per_L() * litres : most_mol_per_L * litres);
    const auto make = [&](Amount amount) { return vessel.finished(bench.table, titrant, amount); };
    const auto amount = amount_for(bench, make, *plan.request.ph, plan.request.use_at, std::min(step, most), most);
    if (!amount || amount->mol() < 0) {
        return {std::nullopt, moves_away(bench, plan, vessel, titrant, std::min(step, most))};
    }
    return {worked_out(bench, plan, vessel, titrant, *amount), false};
}

}  // namespace carboy
