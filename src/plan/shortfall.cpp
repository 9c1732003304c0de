#include "plan/shortfall.h"

#include <algorithm>

#include <fmt/format.h>

#include "carboy/equilibrium.h"

#include "plan/articles.h"

namespace carboy {

namespace {

/// Charge that a form leaves to protons per mole of its system: the lower, the more acid.
double basicity(const Reagent& reagent, ComponentId system) {
    return reagent.strong_charge / count_of(reagent, system);
}

}  // namespace

std::string Shortfall::buffer_names() const {
    std::string names;
    for (const BufferItem& buffer : request_.buffers) {
        names += names.empty() ? "" : " + ";
        names += name_of(table_, buffer.system);
    }
    return names;
}

std::optional<Shortfall::Limit> Shortfall::limit(const CounterIonSet& set, bool acid) const {
    Preparation preparation = fixed_;
    std::string forms;
    for (std::size_t b = 0; b < set.forms.size(); ++b) {
        if (set.forms[b].empty()) {
            return std::nullopt;
        }
        const BufferItem& buffer = request_.buffers[b];
        const auto more_extreme = [&](const Chemistry& x, const Chemistry& y) {
            const double bx = basicity(table_.reagents[x.articles.front()], buffer.system);
            const double by = basicity(table_.reagents[y.articles.front()], buffer.system);
            return acid ? bx < by : bx > by;
        };
        const Chemistry& form = *std::min_element(set.forms[b].begin(), set.forms[b].end(), more_extreme);
        const Reagent& reagent = table_.reagents[form.articles.front()];
        const double share = buffer.concentration.value / count_of(reagent, buffer.system);
        Portion portion;
        portion.reagent = form.articles.front();
        if (buffer.concentration.unit == ConcentrationUnit::mol_per_kg) {
            portion.molality = Molality::mol_per_kg(share);
        } else {
            portion.amount = Amount::mol(share * request_.volume.L());
        }
        preparation.portions.push_back(portion);
        forms += forms.empty() ? "" : " + ";
        forms += reagent.name;
    }
    EquilibriumSolver solver(table_, compose(table_, preparation).mixture, request_.use_at, model_);
    solver.solve();
    return Limit{solver.ph().value(), forms};
}

std::optional<Error> Shortfall::ionic_strength_too_low() const {
    if (!request_.ionic_strength) {
        return std::nullopt;
    }
    Request without = request_;
    without.ionic_strength.reset();
    try {
        const Plan plan = plan_recipe(table_, without, model_);
        double least = plan.predicted.ionic_strength.mol_per_kg();
        if (request_.ionic_strength->per_litre) {
            least *= compose(table_, plan.preparation).water.kg() / request_.volume.L();
        }
        const std::string_view unit = request_.ionic_strength->per_litre ? "mol/L" : "mol/kg";
        if (least > request_.ionic_strength->value_mol) {
            return Error(
                ErrorKind::no_recipe, "unreachable_ionic_strength",
                fmt::format("an ionic strength of {:.4g} {} cannot be reached: the buffer and the additives alone "
                            "bring {:.4g} {}, and salt only adds to it",
                            request_.ionic_strength->value_mol, unit, least, unit),
                "label", fmt::format("ask for at least {:.4g} {}, or for less buffer", least, unit));
        }
    } catch (const Error&) {
        // The pH itself is out of reach; that is told instead.
    }
    return std::nullopt;
}

/// The same label without the counter-ions it names, when the shelf can make that.
std::string Shortfall::counter_ions_that_would_do(const Shelf& shelf) const {
    Request freely = request_;
    bool named = false;
    for (BufferItem& buffer : freely.buffers) {
        named = named || buffer.counter_ion;
        buffer.counter_ion.reset();
        buffer.named_form.reset();
    }
    if (!named) {
        return {};
    }
    try {
        std::string words;
        for (const CounterIonChoice& choice : plan_recipe(shelf, freely, model_).counter_ions) {
            words += fmt::format("{}{} with {}", words.empty() ? "" : ", ", name_of(table_, choice.system),
                                 name_of(table_, choice.counter_ion));
        }
        return words;
    } catch (const Error&) {
        return {};
    }
}

/// With a shelf that is all there is: what the recipe from the whole table would take and the shelf does not hold.
std::optional<Error> Shortfall::short_on_shelf() const {
    const Shelf* shelf = stockroom_.shelf();
    if (shelf == nullptr || !shelf->complete()) {
        return std::nullopt;
    }
    Table whole = table_;
    whole.reagents = table_.reagents.first(table_.reagents.size() - shelf->bottles().size());
    Request open = request_;
    if (open.route == Route::dilution) {
        open.route = Route::automatic;
    }
    std::optional<Plan> plan;
    try {
        plan = plan_recipe(whole, open, model_);
    } catch (const Error&) {
        return std::nullopt;  // no shelf would do; the reason is told instead
    }
    std::string missing;
    std::string instead;
    for (const Portion& portion : plan->preparation.portions) {
        const Reagent& wanted = table_.reagents[portion.reagent];
        bool enough = false;
        Amount there;
        std::string held;
        for (const Bottle& bottle : shelf->bottles()) {
            if (!same_supplies(table_.reagents[bottle.reagent], wanted)) {
                continue;
            }
            const auto left = shelf->left(bottle);
            enough = enough || !left;
            there += left.value_or(Amount{});
            held += (held.empty() ? "" : ", ") + bottle.id;
        }
        if (enough || there >= *portion.amount) {
            continue;
        }
        const auto grams = [&](Amount amount) {
            return is_solution(wanted) ? fmt::format("{:.4g} mL", 1e3 * amount.mol() / wanted.strength_mol_per_L.value)
                                       : fmt::format("{:.4g} g", amount.mol() * wanted.molar_mass_g_per_mol);
        };
        missing += missing.empty() ? "" : "; ";
        missing += held.empty() ? fmt::format("{} is not there ({} needed)", wanted.name, grams(*portion.amount))
                                : fmt::format("{} is short: {} needed, {} left in {}", wanted.name,
                                              grams(*portion.amount), grams(there), held);
        for (const Bottle& bottle : shelf->bottles()) {
            const Reagent& other = table_.reagents[bottle.reagent];
            const bool brings_the_same =
                std::any_of(wanted.supplies.begin(), wanted.supplies.end(), [&](const Supply& s) {
                    return s.component.kind == ComponentKind::system && count_of(other, s.component) > 0;
                });
            if (brings_the_same && !same_supplies(other, wanted)) {
                instead += fmt::format("{}{} ({})", instead.empty() ? "" : ", ", other.name, bottle.id);
            }
        }
    }
    if (missing.empty()) {
        return std::nullopt;
    }
    if (const std::string other = counter_ions_that_would_do(*shelf); !other.empty()) {
        instead = other;
    }
    return Error(ErrorKind::no_recipe, "short_on_shelf", fmt::format("the shelf cannot make this: {}", missing),
                 "shelf",
                 instead.empty() ? "get what is missing, make less, or leave --shelf out to see the recipe"
                                 : fmt::format("what else would do: {}", instead));
}

Error Shortfall::no_dilution() const {
    return {ErrorKind::no_recipe, "no_stock_to_dilute",
            stockroom_.shelf() == nullptr
                ? fmt::format("the route 'dilution' needs a stock of {} to dilute", buffer_names())
                : fmt::format("no bottle on the shelf holds {} in these proportions, strong enough to dilute",
                              buffer_names()),
            "label", "name one with --stock, as in --stock '1 M Tris-HCl, pH 8', or put it on the shelf"};
}

std::optional<Error> Shortfall::ion_total_too_low() const {
    if (request_.constraints.totals.empty()) {
        return std::nullopt;
    }
    Request without = request_;
    without.constraints.totals.clear();
    try {
        const Plan plan = plan_recipe(table_, without, model_);
        for (const auto& total : request_.constraints.totals) {
            const bool molal = total.concentration.unit == ConcentrationUnit::mol_per_kg;
            double mol = 0;
            for (const Portion& portion : plan.preparation.portions) {
                mol += portion.amount->mol() * count_of(table_.reagents[portion.reagent], total.ion);
            }
            const double least = mol / (molal ? compose(table_, plan.preparation).water.kg() : request_.volume.L());
            if (least > total.concentration.value) {
                const std::string_view unit = molal ? "mol/kg" : "mol/L";
                return Error(
                    ErrorKind::no_recipe, "unreachable_total",
                    fmt::format("{:.4g} {} {} in all cannot be kept: the buffer and the additives bring {:.4g} {}",
                                total.concentration.value, unit, name_of(table_, total.ion), least, unit),
                    "constraints", fmt::format("ask for at least {:.4g} {}, or for less buffer", least, unit));
            }
        }
    } catch (const Error&) {
        // The pH itself is out of reach; that is told instead.
    }
    return std::nullopt;
}

Error Shortfall::no_reagents() const {
    for (const CounterIonSet& set : sets_) {
        for (std::size_t b = 0; b < set.forms.size(); ++b) {
            if (set.forms[b].empty()) {
                return {
                    ErrorKind::no_recipe, "no_reagent",
                    fmt::format("there is no reagent that brings {} with {} or nothing beside it",
                                name_of(table_, set.choices[b].system), name_of(table_, set.choices[b].counter_ion)),
                    "label", "name another counter-ion, or add the reagent with --constants"};
            }
        }
    }
    if (request_.route == Route::salts) {
        return {ErrorKind::no_recipe, "no_reagent",
                fmt::format(
                    "the route with two salts needs two forms of {} with the same counter-ion, and the table has one",
                    buffer_names()),
                "label", "use the route 'titrated', or add the other form with --constants"};
    }
    return {ErrorKind::no_recipe, "no_reagent",
            fmt::format("the table has no acid or base to bring {} to its pH with this counter-ion", buffer_names()),
            "label", "name another counter-ion, or use the route 'salts'"};
}

Error Shortfall::explain(bool nothing_to_try) const {
    if (auto error = short_on_shelf()) {
        return *error;
    }
    if (request_.route == Route::dilution) {
        return no_dilution();
    }
    if (nothing_to_try) {
        return no_reagents();
    }
    if (auto error = ion_total_too_low()) {
        return *error;
    }
    if (auto error = ionic_strength_too_low()) {
        return *error;
    }
    const double wanted = request_.ph->value();
    const CounterIonSet& set = sets_.front();
    const auto ion = [&] { return name_of(table_, set.choices.front().counter_ion); };
    const auto acid = limit(set, true);
    const auto base = limit(set, false);
    const double t = request_.use_at.celsius();
    if (acid && wanted < acid->ph) {
        return {
            ErrorKind::no_recipe, "unreachable_target",
            fmt::format(
                "pH {:.2f} is too acid for {} with {}: the most acid form that may be used, {}, reads {:.2f} at "
                "{:g} °C by itself",
                wanted, buffer_names(), ion(), acid->forms, acid->ph, t),
            "label",
            fmt::format("a strong acid would reach it: name it as the counter-ion, as in '{}-HCl'; a buffer with a pKa "
                        "near {:.1f} would hold it better",
                        name_of(table_, request_.buffers.front().system), wanted)};
    }
    if (base && wanted > base->ph) {
        const bool two_salts = request_.route == Route::salts;
        return {
            ErrorKind::no_recipe, "unreachable_target",
            fmt::format("pH {:.2f} is too basic for {} with {}: the most basic form that may be used, {}, reads {:.2f} "
                        "at {:g} °C by itself",
                        wanted, buffer_names(), ion(), base->forms, base->ph, t),
            "label",
            fmt::format("{}; a buffer with a pKa near {:.1f} would hold it better",
                        two_salts
                            ? "the route 'titrated' with a strong base would reach it"
                            : fmt::format("a strong base would reach it: name it as the counter-ion, as in '{}-NaOH'",
                                          name_of(table_, request_.buffers.front().system)),
                        wanted)};
    }
    return {ErrorKind::no_recipe, "unreachable_target",
            fmt::format("pH {:.2f} cannot be made from {} with {} and the reagents of the table", wanted,
                        buffer_names(), ion()),
            "label", "try another route ('titrated', 'salts'), or leave the counter-ion out of the label"};
}

}  // namespace carboy
