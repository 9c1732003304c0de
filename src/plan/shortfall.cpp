#include "plan/shortfall.h"

#include <algorithm>

#include <fmt/format.h>

#include "carboy/equilibrium.h"

namespace carboy {

namespace {

double count_of(const Reagent& reagent, ComponentId component) {
    for (const Supply& supply : reagent.supplies) {
        if (supply.component == component) {
            return supply.count;
        }
    }
    return 0;
}

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

Error Shortfall::no_reagents() const {
    for (const CounterIonSet& set : sets_) {
        for (std::size_t b = 0; b < set.forms.size(); ++b) {
            if (set.forms[b].empty()) {
                return {
                    ErrorKind::no_recipe, "no_reagent",
                    fmt::format("the table has no reagent that brings {} with {} or nothing beside it",
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

Error Shortfall::explain() const {
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
