#include "explore/vessel_content.h"

#include <algorithm>
#include <cmath>

#include "carboy/error.h"

#include "plan/articles.h"

namespace carboy {

namespace {

Volume volume_added(const Table& table, const Titrant& titrant, Amount amount) {
    return titrant.strength ? Volume::litres(amount.mol() / titrant.strength->mol_per_L())
                            : amount.mol() * volume_per_mole(table, table.reagents[titrant.reagent]);
}

/// The article that brings one mole of this ion and nothing else, of a strength near 1 mol/L.
std::optional<Titrant> bringing(const Table& table, ComponentId ion) {
    std::optional<Titrant> best;
    double best_distance = 0;
    for (std::size_t i = 0; i < table.reagents.size(); ++i) {
        const Reagent& reagent = table.reagents[i];
        if (reagent.supplies.size() != 1 || reagent.supplies[0].component != ion || reagent.supplies[0].count != 1 ||
            !reagent.strength_mol_per_L.known()) {
            continue;
        }
        const double distance = std::abs(std::log(reagent.strength_mol_per_L.value));
        if (!best || distance < best_distance) {
            best = Titrant{static_cast<std::uint16_t>(i), Molarity::mol_per_L(reagent.strength_mol_per_L.value)};
            best_distance = distance;
        }
    }
    return best;
}

}  // namespace

Preparation VesselContent::with(const Table& table, const Titrant& titrant, Amount amount) const {
    Preparation then = present;
    then.filled_to = *present.filled_to + volume_added(table, titrant, amount);
    then.portions.push_back({titrant.reagent, amount, std::nullopt});
    return then;
}

Preparation VesselContent::finished(const Table& table, const Titrant& titrant, Amount amount) const {
    Preparation then = with(table, titrant, amount);
    then.filled_to = std::max(*then.filled_to, mark);
    then.portions.insert(then.portions.end(), to_come.begin(), to_come.end());
    return then;
}

VesselContent planned_vessel(const Table& table, const Plan& plan, std::optional<Volume> not_filled) {
    VesselContent vessel;
    vessel.mark = plan.request.volume;
    vessel.present = plan.preparation;
    if (not_filled) {
        vessel.present.filled_to = not_filled;
        vessel.present.portions.clear();
        for (const Portion& portion : plan.preparation.portions) {
            const bool last = goes_in_last(table.reagents[portion.reagent], table);
            (last ? vessel.to_come : vessel.present.portions).push_back(portion);
        }
    }
    return vessel;
}

std::optional<PlannedTitrant> titrant_of(const Table& table, const Plan& plan) {
    PlannedTitrant found;
    bool any = false;
    for (const Measurement& item : plan.measure) {
        if (item.purpose == Purpose::titrant) {
            found.titrant = {item.reagent, item.strength};
            found.amount = item.amount;
            any = true;
        }
    }
    for (const Weighing& item : plan.weigh) {
        if (item.purpose == Purpose::titrant) {
            found.titrant = {item.reagent, std::nullopt};
            found.amount = item.amount;
            any = true;
        }
    }
    const auto& portions = plan.preparation.portions;
    for (std::size_t i = portions.size(); any && i-- > 0;) {
        if (portions[i].reagent == found.titrant.reagent && portions[i].amount == found.amount) {
            found.portion = i;
            const Reagent& reagent = table.reagents[found.titrant.reagent];
            const bool strong =
                reagent.supplies.size() == 1 && reagent.supplies[0].component.kind == ComponentKind::spectator;
            found.charge = !strong ? 0 : reagent.strong_charge < 0 ? -1 : 1;
            return found;
        }
    }
    return std::nullopt;
}

Preparation before_titrant(const Table& table, const Plan& plan, const Preparation& present) {
    const auto titrant = titrant_of(table, plan);
    Preparation before = present;
    before.filled_to = plan.dissolve_in;
    before.portions.clear();
    for (const Portion& portion : present.portions) {
        const bool of_titrant =
            titrant && same_supplies(table.reagents[portion.reagent], table.reagents[titrant->titrant.reagent]);
        if (!of_titrant && !goes_in_last(table.reagents[portion.reagent], table)) {
            before.portions.push_back(portion);
        }
    }
    return before;
}

Titrant strong_titrant(const Table& table, const Plan& plan, int sign) {
    const auto ion_of = [&](std::uint16_t index) { return ComponentId{ComponentKind::spectator, index}; };
    const auto planned = titrant_of(table, plan);
    if (planned && planned->charge == sign) {
        if (const auto titrant = bringing(table, table.reagents[planned->titrant.reagent].supplies[0].component)) {
            return *titrant;
        }
    }
    for (const CounterIonChoice& choice : plan.counter_ions) {
        if (choice.counter_ion.kind == ComponentKind::spectator &&
            table.spectators[choice.counter_ion.index].charge == sign) {
            if (const auto titrant = bringing(table, choice.counter_ion)) {
                return *titrant;
            }
        }
    }
    for (std::size_t i = 0; i < table.spectators.size(); ++i) {
        const std::string_view usual = sign < 0 ? "Cl-" : "Na+";
        if (table.spectators[i].name == usual) {
            if (const auto titrant = bringing(table, ion_of(static_cast<std::uint16_t>(i)))) {
                return *titrant;
            }
        }
    }
    throw Error(ErrorKind::data, "no_reagent", "the constants hold no strong acid or base to correct with", "constants",
                "they should hold hydrochloric acid and sodium hydroxide");
}

}  // namespace carboy
