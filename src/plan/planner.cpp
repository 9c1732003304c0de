#include <algorithm>
#include <array>
#include <cmath>
#include <optional>
#include <tuple>
#include <vector>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/plan.h"

#include "plan/candidates.h"
#include "plan/linear_problem.h"
#include "plan/shortfall.h"
#include "plan/staging.h"

namespace carboy {

namespace {

/// The amounts that a candidate asks for.
struct Solved {
    const Candidate* candidate = nullptr;
    std::vector<std::uint16_t> columns;
    LinearProblem::Answer answer;
};

std::vector<std::uint16_t> columns_of(const Candidate& candidate) {
    std::vector<std::uint16_t> columns;
    for (const Chemistry* form : candidate.forms) {
        columns.push_back(form->articles.front());
    }
    columns.push_back(candidate.extra->articles.front());
    if (candidate.salt != nullptr) {
        columns.push_back(candidate.salt->articles.front());
    }
    return columns;
}

/// Rounding noise of an amount that should be none.
bool negative(double mol, double largest) {
    return mol < -1e-9 * largest;
}

bool feasible(const LinearProblem::Answer& answer) {
    const double largest = *std::max_element(answer.amounts_mol.begin(), answer.amounts_mol.end());
    return std::none_of(answer.amounts_mol.begin(), answer.amounts_mol.end(),
                        [&](double mol) { return negative(mol, largest); });
}

/// Lower is better: usual counter-ions, then articles that benches keep, then few weighings, then little titrant, then
/// little of everything.
std::tuple<std::size_t, int, int, double, double> rank(const Solved& solved, const Table& table) {
    const auto& amounts = solved.answer.amounts_mol;
    const std::size_t extra = solved.candidate->forms.size();
    double total = 0;
    for (const double mol : amounts) {
        total += std::max(mol, 0.0);
    }
    int rare = 0;
    for (const std::uint16_t column : solved.columns) {
        rare += table.reagents[column].rarely_stocked ? 1 : 0;
    }
    const bool titrated = solved.candidate->route == Route::titrated;
    return {solved.candidate->set, rare, titrated ? 0 : 1, titrated ? amounts[extra] : 0.0, total};
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

Preparation additives_of(const Table& table, const Request& request) {
    Preparation fixed;
    fixed.filled_to = request.volume;
    fixed.filled_at = request.prepare_at;
    for (const AdditiveItem& item : request.additives) {
        Portion portion;
        portion.reagent = item.reagent;
        if (item.concentration.unit == ConcentrationUnit::mol_per_kg) {
            portion.molality = Molality::mol_per_kg(item.concentration.value);
        } else {
            portion.amount = amount_in(item.concentration, request.volume, table.reagents[item.reagent], table);
        }
        fixed.portions.push_back(portion);
    }
    return fixed;
}

std::vector<LinearProblem::Total> totals_of(const Request& request) {
    std::vector<LinearProblem::Total> totals;
    for (const BufferItem& buffer : request.buffers) {
        const bool molal = buffer.concentration.unit == ConcentrationUnit::mol_per_kg;
        totals.push_back({buffer.system, buffer.concentration.value * (molal ? 1.0 : request.volume.L()), molal});
    }
    return totals;
}

/// Best candidate, or an Error that says in the bench's words why there is none.
Solved choose(LinearProblem& problem, const Table& table, const std::vector<Candidate>& all,
              const Shortfall& shortfall) {
    constexpr double good_enough_to_rank = 1e-4;
    std::optional<Solved> best;
    for (const Candidate& candidate : all) {
        if (best && candidate.set > best->candidate->set) {
            break;
        }
        Solved solved{&candidate, columns_of(candidate), {}};
        auto answer = problem.solve(solved.columns, good_enough_to_rank);
        if (!answer || !feasible(*answer)) {
            continue;
        }
        solved.answer = std::move(*answer);
        if (!best || rank(solved, table) < rank(*best, table)) {
            best = std::move(solved);
        }
    }
    if (!best) {
        throw shortfall.explain();
    }
    constexpr double exact = 1e-13;
    best->answer = problem.solve(best->columns, exact).value();
    if (!best->answer.settled) {
        throw Error(ErrorKind::defect, "not_converged", "the amounts of the recipe did not settle", "plan",
                    "please report the label");
    }
    return std::move(*best);
}

void add_to_plan(Plan& plan, const Table& table, std::uint16_t reagent, Purpose purpose, Amount amount) {
    if (!(amount.mol() > 0)) {
        return;
    }
    const Reagent& article = table.reagents[reagent];
    plan.preparation.portions.push_back({reagent, amount, std::nullopt});
    if (article.strength_mol_per_L.known()) {
        const Molarity strength = Molarity::mol_per_L(article.strength_mol_per_L.value);
        plan.measure.push_back(
            {reagent, purpose, amount, strength, Volume::litres(amount.mol() / strength.mol_per_L())});
    } else {
        const double assay = article.assay.known() ? article.assay.value : 1.0;
        plan.weigh.push_back(
            {reagent, purpose, amount, Mass::grams(amount.mol() * article.molar_mass_g_per_mol / assay)});
    }
}

/// A recipe without a pH target: everything is weighed as the label says.
void plan_as_written(Plan& plan, const Table& table, const Preparation& fixed) {
    const Composed composed = compose(table, fixed);
    for (const Portion& portion : fixed.portions) {
        const Amount amount =
            portion.amount ? *portion.amount : Amount::mol(portion.molality->mol_per_kg() * composed.water.kg());
        add_to_plan(plan, table, portion.reagent, Purpose::additive, amount);
    }
    plan.route = Route::salts;
}

void plan_to_ph(Plan& plan, const Table& table, const Preparation& fixed, const ActivityModel& model) {
    const Request& request = plan.request;
    const auto sets = counter_ion_sets(table, request);
    const auto all = candidates(sets, request);
    const Shortfall shortfall(table, request, fixed, sets, model);
    if (all.empty()) {
        throw shortfall.no_reagents();
    }
    std::vector<std::uint16_t> reagents;
    for (const Candidate& candidate : all) {
        for (const std::uint16_t column : columns_of(candidate)) {
            reagents.push_back(column);
        }
    }
    LinearProblem problem(table, fixed, totals_of(request), reagents, *request.ph, request.use_at, model);
    if (request.ionic_strength) {
        problem.ask_ionic_strength(*request.ionic_strength);
    }
    const Solved solved = choose(problem, table, all, shortfall);
    const Candidate& chosen = *solved.candidate;
    plan.route = chosen.route;
    plan.counter_ions = sets[chosen.set].choices;

    const auto amount = [&](std::size_t column) {
        return Amount::mol(std::max(solved.answer.amounts_mol[column], 0.0));
    };
    const std::size_t extra = chosen.forms.size();
    for (std::size_t column = 0; column < extra; ++column) {
        add_to_plan(plan, table, solved.columns[column], Purpose::buffer, amount(column));
    }
    if (chosen.route == Route::salts) {
        add_to_plan(plan, table, solved.columns[extra], Purpose::buffer, amount(extra));
    }
    if (chosen.salt != nullptr) {
        add_to_plan(plan, table, solved.columns[extra + 1], Purpose::ionic_strength, amount(extra + 1));
    }
    for (const Portion& portion : fixed.portions) {
        add_to_plan(
            plan, table, portion.reagent, Purpose::additive,
            portion.amount ? *portion.amount : Amount::mol(portion.molality->mol_per_kg() * solved.answer.water.kg()));
    }
    if (chosen.route == Route::titrated) {
        const std::uint16_t article = article_to_titrate_with(table, *chosen.extra, amount(extra), request.volume);
        add_to_plan(plan, table, article, Purpose::titrant, amount(extra));
        if (!plan.measure.empty() && plan.measure.back().volume > 0.75 * request.volume) {
            throw Error(ErrorKind::no_recipe, "no_room_for_titrant",
                        fmt::format("even {} would take {:.0f} % of the volume to bring this to pH {:.2f}",
                                    table.reagents[article].name, 100 * (plan.measure.back().volume / request.volume),
                                    request.ph->value()),
                        "label", "ask for a lower concentration, or use the route 'salts'");
        }
    }
}

}  // namespace

std::string_view route_word(Route route) {
    constexpr std::array words{std::string_view("any"), std::string_view("titrated"), std::string_view("salts")};
    return words[static_cast<std::size_t>(route)];
}

Plan plan_recipe(const Table& table, const Request& request, const ActivityModel& model) {
    check(request);
    Plan plan;
    plan.request = request;
    plan.preparation.filled_to = request.volume;
    plan.preparation.filled_at = request.prepare_at;
    const Preparation fixed = additives_of(table, request);
    if (request.ph) {
        plan_to_ph(plan, table, fixed, model);
    } else {
        plan_as_written(plan, table, fixed);
    }
    const Composed composed = compose(table, plan.preparation);
    plan.volume_neglected = composed.volume_neglected;
    plan.predicted = predict(table, composed.mixture, request.use_at, model);
    stage(plan, table, model);
    return plan;
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
