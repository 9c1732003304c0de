#include "plan/dilution.h"

#include <algorithm>
#include <cmath>

#include "carboy/equilibrium.h"

#include "plan/articles.h"
#include "plan/linear_problem.h"

namespace carboy {

namespace {

// Common practice, no source: pH is held to 0.02 for careful work. A dilution that comes so near is not trimmed.
constexpr double near_enough_ph = 0.02;
constexpr double same_ratio = 1e-4;

/// What is left to do when a bottle stands for the label's buffers.
struct Match {
    Amount amount;                 ///< moles of the bottle's article
    std::vector<Share> additives;  ///< of the label, less what the bottle brings
};

bool in_mol_per_L(const Concentration& concentration) {
    return concentration.unit == ConcentrationUnit::mol_per_L;
}

/// Same buffers in the same ratio, no additive that the label does not have.
std::optional<Match> match(const Table& table, const Bottle& bottle, const Request& request, const Preparation& fixed) {
    const Request& made = *bottle.made_as;
    if (made.buffers.size() != request.buffers.size() || made.buffers.empty()) {
        return std::nullopt;
    }
    double share = 0;  // litres of the stock in a litre
    for (const BufferItem& wanted : request.buffers) {
        const auto there = std::find_if(made.buffers.begin(), made.buffers.end(),
                                        [&](const BufferItem& item) { return item.system == wanted.system; });
        if (there == made.buffers.end() || !in_mol_per_L(wanted.concentration) || !in_mol_per_L(there->concentration)) {
            return std::nullopt;
        }
        const double ratio = wanted.concentration.value / there->concentration.value;
        if (share != 0 && std::abs(ratio / share - 1) > same_ratio) {
            return std::nullopt;
        }
        share = ratio;
    }
    Match found;
    const double litres = share * request.volume.L();
    if (litres > request.volume.L() * (1 + same_ratio)) {
        return std::nullopt;  // it is weaker than the label
    }
    found.amount = Amount::mol(litres * table.reagents[bottle.reagent].strength_mol_per_L.value);
    for (const Portion& portion : fixed.portions) {
        if (!portion.amount) {
            return std::nullopt;
        }
        found.additives.push_back({portion.reagent, *portion.amount});
    }
    for (const AdditiveItem& item : made.additives) {
        const Amount brought =
            amount_in(item.concentration, Volume::litres(litres), table.reagents[item.reagent], table);
        const auto same = std::find_if(found.additives.begin(), found.additives.end(), [&](const Share& additive) {
            return same_supplies(table.reagents[additive.reagent], table.reagents[item.reagent]);
        });
        if (same == found.additives.end() || brought > (1 + same_ratio) * same->amount) {
            return std::nullopt;
        }
        same->amount = std::max(same->amount - brought, Amount{});
        if (same->amount < same_ratio * brought) {
            same->amount = Amount{};
        }
    }
    return found;
}

Preparation with_additives(const Preparation& fixed, const std::vector<Share>& additives) {
    Preparation preparation = fixed;
    preparation.portions.clear();
    for (const Share& additive : additives) {
        if (additive.amount.mol() > 0) {
            preparation.portions.push_back({additive.reagent, additive.amount, std::nullopt});
        }
    }
    return preparation;
}

}  // namespace

std::vector<Draft> dilutions(const Stockroom& stockroom, const Request& request, const Preparation& fixed,
                             const std::vector<CounterIonSet>& sets, const ActivityModel& model) {
    std::vector<Draft> found;
    if (stockroom.shelf() == nullptr || request.strength != 1 || request.ionic_strength ||
        !request.constraints.totals.empty()) {
        return found;
    }
    const Table& table = stockroom.table();
    for (const Bottle& bottle : stockroom.shelf()->bottles()) {
        if (!bottle.made_as || !stockroom.allows(bottle.reagent)) {
            continue;
        }
        const auto matched = match(table, bottle, request, fixed);
        if (!matched) {
            continue;
        }
        const auto add = [&](Amount stock, const Chemistry* trim, Amount trimming, std::size_t set) {
            const Chemistry this_one{{bottle.reagent}};
            const auto additives = additive_ingredients(stockroom, request, matched->additives);
            if (!additives || stockroom.shares(this_one, stock, Stockroom::Wanted::any, request.volume, {}).empty()) {
                return;
            }
            Draft draft;
            draft.route = Route::dilution;
            draft.set = set;
            draft.counter_ions = sets[std::min(set, sets.size() - 1)].choices;
            draft.ingredients.push_back({bottle.reagent, Purpose::buffer, stock});
            draft.ingredients.insert(draft.ingredients.end(), additives->begin(), additives->end());
            if (trim != nullptr) {
                const auto titrant = stockroom.shares(*trim, trimming, Stockroom::Wanted::titrant, request.volume, {});
                if (titrant.size() != 1) {
                    return;
                }
                draft.ingredients.push_back({titrant.front().reagent, Purpose::titrant, trimming});
            }
            weigh_up(draft, stockroom);
            found.push_back(std::move(draft));
        };
        Preparation plain = with_additives(fixed, matched->additives);
        const Preparation rest = plain;
        plain.portions.push_back({bottle.reagent, matched->amount, std::nullopt});
        EquilibriumSolver solver(table, compose(table, plain).mixture, request.use_at, model);
        solver.solve();
        if (std::abs(solver.ph().value() - request.ph->value()) <= near_enough_ph) {
            add(matched->amount, nullptr, {}, 0);
            continue;
        }
        const BufferItem& first = request.buffers.front();
        const LinearProblem::Total total{first.system, first.concentration.value * request.volume.L()};
        const std::size_t before = found.size();
        const auto trim_with = [&](const Chemistry& titrant, std::size_t s) {
            LinearProblem problem(table, rest, {total}, {bottle.reagent, titrant.articles.front()}, *request.ph,
                                  request.use_at, model);
            const auto answer = problem.solve({bottle.reagent, titrant.articles.front()}, 1e-13);
            if (answer && answer->settled && answer->amounts_mol[0] >= 0 && answer->amounts_mol[1] >= 0) {
                add(Amount::mol(answer->amounts_mol[0]), &titrant, Amount::mol(answer->amounts_mol[1]), s);
            }
        };
        for (std::size_t s = 0; s < sets.size(); ++s) {
            for (const Chemistry& titrant : sets[s].titrants) {
                trim_with(titrant, s);
            }
        }
        // A trim needs little: where the label's own ions lie on the wrong side, the usual acid and base will do.
        for (std::size_t i = 0; i < table.spectators.size() && found.size() == before; ++i) {
            if (const auto titrant = stockroom.alone(id_of(table, table.spectators[i]))) {
                trim_with(*titrant, sets.size());
            }
        }
    }
    return found;
}

}  // namespace carboy
