#include <algorithm>
#include <cmath>
#include <limits>
#include <vector>

#include "warning/circumstances.h"
#include "warning/observe.h"

namespace carboy {

namespace {

constexpr double none = std::numeric_limits<double>::quiet_NaN();

/// True when what the reagent supplies is, in the prediction, still as much protonated as in its bottle: only then does
/// its own solubility say what stays undissolved.
bool keeps_its_form(const Reagent& reagent, const Table& table, const Prediction& prediction) {
    const Supply* system = nullptr;
    for (const Supply& supply : reagent.supplies) {
        if (supply.component.kind == ComponentKind::system) {
            if (system != nullptr) {
                return false;
            }
            system = &supply;
        }
    }
    if (system == nullptr) {
        return true;
    }
    double charge = 0;
    double total = 0;
    for (const PredictedSpecies& species : prediction.species) {
        if (species.owner == table.systems[system->component.index].name) {
            charge += species.charge * species.molality.mol_per_kg();
            total += species.molality.mol_per_kg();
        }
    }
    constexpr double half_a_charge = 0.5;
    return total > 0 && std::abs(charge / total + reagent.strong_charge / system->count) < half_a_charge;
}

bool titrated(const Plan& plan) {
    return (!plan.measure.empty() && plan.measure.back().purpose == Purpose::titrant) ||
           (!plan.weigh.empty() && plan.weigh.back().purpose == Purpose::titrant);
}

std::vector<ReagentInUse> reagents_in_use(const Plan& plan, const Table& table) {
    const Prediction& bottled = plan.as_bottled ? *plan.as_bottled : plan.predicted;
    std::vector<ReagentInUse> list;
    list.reserve(plan.weigh.size() + plan.measure.size());
    for (const Weighing& item : plan.weigh) {
        const Reagent& reagent = table.reagents[item.reagent];
        ReagentInUse use{item.reagent, item.mass.g() / plan.request.volume.L(), 0, 0};
        if (reagent.solubility_g_per_L.known()) {
            const double share = use.g_per_L / reagent.solubility_g_per_L.value;
            const bool titrant = item.purpose == Purpose::titrant;
            if (titrated(plan) && !titrant) {
                use.share_dissolved = share * (plan.request.volume / plan.dissolve_in);
            }
            if (share > 0.1 && keeps_its_form(reagent, table, bottled)) {
                use.share_filled = share;
            }
        }
        list.push_back(use);
    }
    for (const Measurement& item : plan.measure) {
        list.push_back({item.reagent, 0, 0, 0});
    }
    return list;
}

double share_of_best_buffering(const Plan& plan, double buffer_value) {
    double total = 0;
    for (const BufferItem& buffer : plan.request.buffers) {
        total += buffer.concentration.value / plan.request.strength;
    }
    constexpr double best = 0.576;  // ln 10 / 4, at pH = pK
    return plan.request.ph && total > 0 ? buffer_value / (best * total) : none;
}

RecipeFacts facts_of(const Plan& plan, std::span<const ReagentInUse> reagents) {
    RecipeFacts facts;
    facts.reagents = reagents;
    facts.ph = {none, none, none, plan.predicted.ph.value()};
    for (const Reading& reading : plan.readings) {
        if (reading.stage == Stage::dissolved) {
            facts.ph[0] = reading.ph.value();
        } else if (reading.stage == Stage::titrated) {
            facts.ph[1] = reading.ph.value();
        } else if (reading.stage == Stage::filled) {
            facts.ph[2] = reading.ph.value();
        }
    }
    facts.temperature_rise_K = plan.temperature_rise_K;
    if (!plan.measure.empty() && plan.measure.back().purpose == Purpose::titrant) {
        facts.titrant_share = plan.measure.back().volume / plan.request.volume;
    }
    return facts;
}

const Observation* rule_of(const Table& table, const Warning& warning) {
    const auto rule = std::find_if(table.observations.begin(), table.observations.end(),
                                   [&](const Observation& o) { return o.code == warning.code; });
    return rule == table.observations.end() ? nullptr : &*rule;
}

/// Each code once, none that another speaks for, the heaviest first; light ones only while there are few.
void put_in_order(std::vector<Warning>& warnings, const Table& table) {
    std::vector<std::string_view> spoken_for;
    for (const Warning& warning : warnings) {
        if (const Observation* rule = rule_of(table, warning)) {
            spoken_for.insert(spoken_for.end(), rule->instead_of.begin(), rule->instead_of.end());
        }
    }
    std::stable_sort(warnings.begin(), warnings.end(),
                     [](const Warning& a, const Warning& b) { return a.weight > b.weight; });
    constexpr std::size_t few = 5;
    constexpr int light = 50;
    std::vector<Warning> kept;
    for (Warning& warning : warnings) {
        const bool silenced =
            std::find(spoken_for.begin(), spoken_for.end(), warning.code) != spoken_for.end() ||
            std::any_of(kept.begin(), kept.end(), [&](const Warning& k) { return k.message == warning.message; });
        if (!silenced && (warning.weight >= light || kept.size() < few)) {
            kept.push_back(std::move(warning));
        }
    }
    warnings = std::move(kept);
}

/// Of a stock, what is grave in the bottle and not at working strength: what comes down there stays down.
void add_of_bottle(Plan& plan, const Table& table) {
    constexpr int grave = 70;
    if (!plan.as_bottled) {
        return;
    }
    for (const Warning& warning : plan.as_bottled->warnings) {
        const bool said = std::any_of(plan.warnings.begin(), plan.warnings.end(),
                                      [&](const Warning& other) { return other.code == warning.code; });
        if (warning.weight >= grave && !said && rule_of(table, warning) != nullptr) {
            plan.warnings.push_back({warning.code, "In the bottle: " + warning.message, warning.weight});
        }
    }
}

}  // namespace

void observe_recipe(Plan& plan, const Table& table) {
    const std::vector<ReagentInUse> reagents = reagents_in_use(plan, table);
    RecipeFacts facts = facts_of(plan, reagents);
    const Circumstances seen = circumstances_of(table, plan.predicted, &facts);
    facts.share_of_best_buffering = share_of_best_buffering(plan, seen.buffer_value);
    for (const Observation& observation : table.observations) {
        Match match;
        if (observation.of_recipe && applies(observation, seen, match)) {
            plan.warnings.push_back(
                {std::string(observation.code), filled_in(observation, seen, match), observation.weight});
        }
    }
    for (const Warning& warning : plan.predicted.warnings) {
        plan.warnings.push_back(warning);
    }
    add_of_bottle(plan, table);
    if (plan.warnings.size() > 1) {
        put_in_order(plan.warnings, table);
    }
}

}  // namespace carboy
