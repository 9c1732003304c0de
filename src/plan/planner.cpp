#include <algorithm>
#include <array>
#include <cmath>
#include <optional>
#include <vector>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/error.h"
#include "carboy/plan.h"

#include "plan/articles.h"
#include "plan/bottle_warnings.h"
#include "plan/candidates.h"
#include "plan/dilution.h"
#include "plan/draft.h"
#include "plan/linear_problem.h"
#include "plan/portioning.h"
#include "plan/shortfall.h"
#include "plan/staging.h"
#include "warning/observe.h"

namespace carboy {

namespace {

/// Rounding noise of an amount that should be none.
bool negative(double mol, double largest) {
    return mol < -1e-9 * largest;
}

bool feasible(const LinearProblem::Answer& answer) {
    const double largest = *std::max_element(answer.amounts_mol.begin(), answer.amounts_mol.end());
    return std::none_of(answer.amounts_mol.begin(), answer.amounts_mol.end(),
                        [&](double mol) { return negative(mol, largest); });
}

void check(const Request& request) {
    constexpr double most_mol_per_L = 50;
    if (!(request.volume.L() > 0) || !std::isfinite(request.volume.L())) {
        throw Error(ErrorKind::input, "bad_amount", "a recipe needs a volume greater than zero", "volume",
                    "give one, such as 1 L");
    }
    for (const BufferItem& buffer : request.buffers) {
        const double value = buffer.concentration.value;
        if (!(value > 0) || value > most_mol_per_L) {
            throw Error(ErrorKind::input, "bad_amount",
                        "a buffer's concentration must be above zero and below 50 mol/L", "label",
                        "give one, such as 50 mM");
        }
    }
}

/// A label that itself asks for what the constraints rule out.
void check_conflicts(const Request& request, const Table& table) {
    const Constraints& constraints = request.constraints;
    const auto conflict = [&](std::string_view asked, std::string_view ruled_out) {
        return Error(ErrorKind::no_recipe, "constraint_conflict",
                     fmt::format("the label asks for {}, and {} is ruled out", asked, ruled_out), "constraints",
                     "change the label, or leave the constraint out");
    };
    for (const ComponentId ion : constraints.without) {
        for (const AdditiveItem& item : request.additives) {
            if (count_of(table.reagents[item.reagent], ion) > 0) {
                throw conflict(table.reagents[item.reagent].name, name_of(table, ion));
            }
        }
        for (const BufferItem& buffer : request.buffers) {
            if (buffer.counter_ion == ion) {
                throw conflict(fmt::format("{} with {}", name_of(table, buffer.system), name_of(table, ion)),
                               name_of(table, ion));
            }
        }
    }
    for (const std::uint16_t avoided : constraints.avoid) {
        for (const AdditiveItem& item : request.additives) {
            if (item.reagent == avoided) {
                throw conflict(table.reagents[avoided].name, "that article");
            }
        }
    }
}

/// What the label adds besides its buffers, at the working strength.
Preparation additives_of(const Stockroom& stockroom, const Request& request) {
    const Table& table = stockroom.table();
    Preparation fixed;
    fixed.filled_to = request.strength * request.volume;
    fixed.filled_at = request.prepare_at;
    for (const AdditiveItem& item : request.additives) {
        Portion portion;
        portion.reagent = item.reagent;
        if (item.concentration.unit == ConcentrationUnit::mol_per_kg) {
            portion.molality = Molality::mol_per_kg(item.concentration.value / request.strength);
        } else {
            const Amount amount = amount_in(item.concentration, request.volume, table.reagents[item.reagent], table);
            const Share taken = stockroom.stand_in({item.reagent, amount}, request.volume);
            portion.reagent = taken.reagent;
            portion.amount = taken.amount;
        }
        fixed.portions.push_back(portion);
    }
    return fixed;
}

LinearProblem::Total total_of(const Request& request, ComponentId component, const Concentration& concentration,
                              bool counts_additives) {
    const bool molal = concentration.unit == ConcentrationUnit::mol_per_kg;
    return {component, concentration.value * (molal ? 1 / request.strength : request.volume.L()), molal,
            counts_additives};
}

std::vector<LinearProblem::Total> totals_of(const Request& request) {
    std::vector<LinearProblem::Total> totals;
    for (const BufferItem& buffer : request.buffers) {
        totals.push_back(total_of(request, buffer.system, buffer.concentration, false));
    }
    for (const auto& total : request.constraints.totals) {
        totals.push_back(total_of(request, total.ion, total.concentration, true));
    }
    return totals;
}

std::vector<Share> moles_of(const Preparation& fixed, Mass water) {
    std::vector<Share> moles;
    for (const Portion& portion : fixed.portions) {
        moles.push_back({portion.reagent,
                         portion.amount ? *portion.amount : Amount::mol(portion.molality->mol_per_kg() * water.kg())});
    }
    return moles;
}

/// The best draft of every route.
class Choice {
public:
    Choice(const Stockroom& stockroom, const Request& request) : stockroom_(stockroom), request_(request) {}

    void offer(std::optional<Draft> draft, const Candidate* candidate) {
        if (!draft || !keeps_constraints(*draft)) {
            return;
        }
        auto& best = best_[static_cast<std::size_t>(draft->route)];
        if (!best || better(*draft, best->draft)) {
            best = Kept{std::move(*draft), candidate};
        }
    }

    struct Kept {
        Draft draft;
        const Candidate* candidate = nullptr;  ///< none: the draft is exact already
    };
    const Kept* of(Route route) const {
        const auto& best = best_[static_cast<std::size_t>(route)];
        return best ? &*best : nullptr;
    }
    const Kept* best() const {
        if (request_.route != Route::automatic) {
            return of(request_.route);
        }
        const Kept* found = nullptr;
        for (const auto& kept : best_) {
            if (kept && (found == nullptr || better(kept->draft, found->draft))) {
                found = &*kept;
            }
        }
        return found;
    }
    bool any_before(std::size_t set) const {
        const Kept* found = best();
        return found != nullptr && found->draft.set < set;
    }
    /// Fewest weighings of a draft that only had too many; none when there was no such.
    std::optional<int> fewest_weighings() const { return fewest_weighings_; }
    bool lacked_what_was_asked_for() const { return lacked_use_; }

private:
    bool keeps_constraints(const Draft& draft) {
        const Constraints& constraints = request_.constraints;
        const int weighings = draft.weighings + draft.stocks_to_make;
        if (constraints.most_weighings && weighings > static_cast<int>(*constraints.most_weighings)) {
            fewest_weighings_ = std::min(fewest_weighings_.value_or(weighings), weighings);
            return false;
        }
        for (const std::uint16_t wanted : constraints.use) {
            const bool used = std::any_of(draft.ingredients.begin(), draft.ingredients.end(), [&](const auto& item) {
                return stockroom_.is_one_of(item.reagent, {&wanted, 1});
            });
            if (!used) {
                lacked_use_ = true;
                return false;
            }
        }
        return true;
    }

    const Stockroom& stockroom_;
    const Request& request_;
    std::array<std::optional<Kept>, 5> best_;
    std::optional<int> fewest_weighings_;
    bool lacked_use_ = false;
};

Error constraint_error(const Choice& choice, const Request& request, const Table& table) {
    if (choice.fewest_weighings()) {
        return {ErrorKind::no_recipe, "too_many_weighings",
                fmt::format("it cannot be done with {} weighings: the least is {}", *request.constraints.most_weighings,
                            *choice.fewest_weighings()),
                "constraints", "allow more, or put stock solutions on the shelf"};
    }
    return {ErrorKind::no_recipe, "unused_reagent",
            fmt::format("no recipe for this label has a place for {}",
                        table.reagents[request.constraints.use.front()].name),
            "constraints", "check that it brings the buffer with the label's counter-ion, or leave it out"};
}

/// The routes besides the chosen one, best first, with the reason for each place.
void rank_ways(Plan& plan, const Choice& choice, const Stockroom& stockroom) {
    std::vector<const Choice::Kept*> kept;
    for (const Route route : {Route::titrated, Route::salts, Route::stocks, Route::dilution}) {
        if (const auto* found = choice.of(route)) {
            kept.push_back(found);
        }
    }
    std::sort(kept.begin(), kept.end(), [](const auto* a, const auto* b) { return better(a->draft, b->draft); });
    for (const auto* one : kept) {
        plan.ways.push_back({one->draft.route, in_words(one->draft, stockroom.table()), true});
    }
    const auto impossible = [&](Route route, const char* reason) {
        if (choice.of(route) == nullptr) {
            plan.ways.push_back({route, reason, false});
        }
    };
    impossible(Route::titrated, "no form of the buffer and strong acid or base lead there");
    impossible(Route::salts, "no two forms of the buffer lead there");
    impossible(Route::stocks, "no two forms of the buffer lead there");
    impossible(Route::dilution, stockroom.shelf() != nullptr ? "no bottle of the same buffer is on the shelf"
                                                             : "needs a shelf with a stock of the same buffer");
}

void offer_all(Choice& choice, LinearProblem& problem, const Stockroom& stockroom, const Request& request,
               const Preparation& fixed, const std::vector<Candidate>& all) {
    constexpr double good_enough_to_rank = 1e-4;
    for (const Candidate& candidate : all) {
        if (choice.any_before(candidate.set)) {
            break;
        }
        const auto answer = problem.solve(candidate.columns(), good_enough_to_rank);
        if (!answer || !feasible(*answer)) {
            continue;
        }
        const auto additives = additive_ingredients(stockroom, request, moles_of(fixed, answer->water));
        if (!additives) {
            continue;
        }
        const auto offer = [&](Route route) {
            choice.offer(draft_of(stockroom, request, candidate, answer->amounts_mol, *additives, route), &candidate);
        };
        if (request.route == Route::automatic || request.route == Route::stocks) {
            offer(Route::stocks);
        }
        if (request.route != Route::stocks) {
            offer(candidate.titrated ? Route::titrated : Route::salts);
        }
    }
}

/// The exact ingredients of the best recipe at the pH of the label.
Draft plan_to_ph(Plan& plan, const Stockroom& stockroom, const Preparation& fixed, const ActivityModel& model) {
    const Request& request = plan.request;
    const Table& table = stockroom.table();
    const auto sets = counter_ion_sets(stockroom, request);
    const auto all = candidates(sets, request, table);
    const Shortfall shortfall(stockroom, request, fixed, sets, model);
    Choice choice(stockroom, request);
    if (request.route == Route::automatic || request.route == Route::dilution) {
        for (Draft& draft : dilutions(stockroom, request, fixed, sets, model)) {
            choice.offer(std::move(draft), nullptr);
        }
    }
    std::vector<std::uint16_t> reagents;
    for (const Candidate& candidate : all) {
        const auto columns = candidate.columns();
        reagents.insert(reagents.end(), columns.begin(), columns.end());
    }
    LinearProblem problem(table, fixed, totals_of(request), reagents, *request.ph, request.use_at, model);
    if (request.ionic_strength) {
        problem.ask_ionic_strength(*request.ionic_strength);
    }
    offer_all(choice, problem, stockroom, request, fixed, all);
    const Choice::Kept* best = choice.best();
    if (best == nullptr) {
        if (choice.fewest_weighings() || choice.lacked_what_was_asked_for()) {
            throw constraint_error(choice, request, table);
        }
        throw shortfall.explain(all.empty());
    }
    Draft draft = best->draft;
    if (best->candidate != nullptr) {
        constexpr double exact = 1e-13;
        const auto answer = problem.solve(best->candidate->columns(), exact);
        if (!answer || !answer->settled) {
            throw Error(ErrorKind::defect, "not_converged", "the amounts of the recipe did not settle", "plan",
                        "please report the label");
        }
        const auto additives = additive_ingredients(stockroom, request, moles_of(fixed, answer->water));
        const Route route = draft.route == Route::stocks ? Route::stocks
                            : best->candidate->titrated  ? Route::titrated
                                                         : Route::salts;
        auto exactly = additives
                           ? draft_of(stockroom, request, *best->candidate, answer->amounts_mol, *additives, route)
                           : std::nullopt;
        if (!exactly) {  // the shelf holds a hair less than the exact amount
            throw shortfall.explain(false);
        }
        draft = std::move(*exactly);
        plan.counter_ions = sets[best->candidate->set].choices;
    } else {
        plan.counter_ions = draft.counter_ions;
    }
    plan.route = draft.route;
    if (request.route == Route::automatic) {
        rank_ways(plan, choice, stockroom);
    }
    return draft;
}

/// A recipe without a pH target: everything is weighed as the label says.
Draft plan_as_written(Plan& plan, const Stockroom& stockroom, const Preparation& fixed, const ActivityModel& model) {
    const auto moles = moles_of(fixed, compose(stockroom.table(), fixed).water);
    if (!plan.request.constraints.totals.empty()) {
        throw Error(ErrorKind::input, "missing_ph",
                    "an ion's total is held beside a buffer at its pH, and the label has none", "constraints",
                    "write the salt's amount on the label");
    }
    auto additives = additive_ingredients(stockroom, plan.request, moles);
    if (!additives) {
        throw Shortfall(stockroom, plan.request, fixed, {}, model).explain(true);
    }
    Draft draft;
    draft.ingredients = std::move(*additives);
    plan.route = Route::salts;
    return draft;
}

void check_room(const Plan& plan, const Table& table) {
    Volume measured;
    for (const Measurement& item : plan.measure) {
        measured += item.volume;
    }
    constexpr double most_titrant = 0.75;
    if (!plan.measure.empty() && plan.measure.back().purpose == Purpose::titrant &&
        plan.measure.back().volume > most_titrant * plan.request.volume) {
        const Measurement& titrant = plan.measure.back();
        throw Error(ErrorKind::no_recipe, "no_room_for_titrant",
                    fmt::format("even {} would take {:.0f} % of the volume to bring this to pH {:.2f}",
                                table.reagents[titrant.reagent].name, 100 * (titrant.volume / plan.request.volume),
                                plan.request.ph->value()),
                    "label", "ask for a lower concentration, or use the route 'salts'");
    }
    if (measured > 1.0001 * plan.request.volume) {
        throw Error(ErrorKind::no_recipe, "stocks_too_dilute",
                    fmt::format("the solutions alone would make {:.0f} % of the volume",
                                100 * (measured / plan.request.volume)),
                    "label", "ask for a lower concentration, or use stronger stocks");
    }
}

Preparation diluted(const Preparation& preparation, double times) {
    Preparation working = preparation;
    working.filled_to = times * *preparation.filled_to;
    return working;
}

/// What rounding changes: the ingredients of the draft are exact, and portioned in order.
void compare_with_exact(Plan& plan, const Table& table, const Draft& draft, const ActivityModel& model) {
    Preparation exact = plan.preparation;
    exact.portions.clear();
    for (const Ingredient& item : draft.ingredients) {
        if (item.amount.mol() > 0) {
            exact.portions.push_back({item.reagent, item.amount, std::nullopt});
        }
    }
    const Mixture mixture = compose(table, diluted(exact, plan.request.strength)).mixture;
    EquilibriumSolver solver(table, mixture, plan.request.use_at, model);
    solver.solve();
    Rounding rounding;
    rounding.ph = plan.predicted.ph.value() - solver.ph().value();
    for (std::size_t i = 0; i < exact.portions.size(); ++i) {
        const double change = *plan.preparation.portions[i].amount / *exact.portions[i].amount - 1;
        if (std::abs(change) > std::abs(rounding.largest_relative)) {
            rounding.largest_relative = change;
            rounding.largest_reagent = exact.portions[i].reagent;
        }
    }
    plan.rounding = rounding;
}

Plan plan_with(const Stockroom& stockroom, const Request& request, const ActivityModel& model) {
    const Table& table = stockroom.table();
    check(request);
    check_conflicts(request, table);
    Plan plan;
    plan.request = request;
    plan.shelf_sha256 = stockroom.shelf() != nullptr ? stockroom.shelf()->sha256 : std::string();
    plan.preparation.filled_to = request.volume;
    plan.preparation.filled_at = request.prepare_at;
    const Preparation fixed = additives_of(stockroom, request);
    const Draft draft =
        request.ph ? plan_to_ph(plan, stockroom, fixed, model) : plan_as_written(plan, stockroom, fixed, model);
    portion(plan, draft, stockroom);
    const Composed composed = compose(table, plan.preparation);
    check_room(plan, table);
    plan.volume_neglected = composed.volume_neglected;
    if (request.strength == 1) {
        plan.predicted = predict(table, composed.mixture, request.use_at, model);
    } else {
        plan.as_bottled = predict(table, composed.mixture, request.use_at, model);
        plan.predicted =
            predict(table, compose(table, diluted(plan.preparation, request.strength)).mixture, request.use_at, model);
    }
    if (request.balance || request.measure_with) {
        compare_with_exact(plan, table, draft, model);
    }
    stage(plan, table, model);
    warn_of_bottles(plan, stockroom);
    observe_recipe(plan, table);
    return plan;
}

}  // namespace

std::span<const std::string_view> route_words() {
    static constexpr std::array<std::string_view, 5> words{"any", "titrated", "salts", "stocks", "dilution"};
    return words;
}

std::string_view route_word(Route route) {
    return route_words()[static_cast<std::size_t>(route)];
}

std::optional<Route> route_of(std::string_view word) {
    const auto words = route_words();
    const auto known = std::find(words.begin(), words.end(), word);
    return known == words.end() ? std::nullopt : std::optional(static_cast<Route>(known - words.begin()));
}

Plan plan_recipe(const Table& table, const Request& request, const ActivityModel& model) {
    return plan_with(Stockroom(table, request.constraints, nullptr), request, model);
}

Plan plan_recipe(const Shelf& shelf, const Request& request, const ActivityModel& model) {
    return plan_with(Stockroom(shelf.table(), request.constraints, &shelf), request, model);
}

std::vector<std::uint16_t> reagents_used(const Plan& plan) {
    std::vector<std::uint16_t> used;
    for (const Portion& portion : plan.preparation.portions) {
        if (std::find(used.begin(), used.end(), portion.reagent) == used.end()) {
            used.push_back(portion.reagent);
        }
    }
    return used;
}

}  // namespace carboy
