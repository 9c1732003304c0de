#include "explore/mistakes.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "plan/articles.h"

namespace carboy {

namespace {

constexpr std::size_t nowhere = static_cast<std::size_t>(-1);

Mistake of_kind(MistakeKind kind) {
    Mistake mistake;
    mistake.kind = kind;
    return mistake;
}

/// Moles in the mass that was meant for another article.
Amount amount_of(const Reagent& reagent, Mass mass) {
    return Amount::mol(mass.g() * reagent.counted_assay() / reagent.molar_mass_g_per_mol);
}

bool supplies(const Reagent& reagent, ComponentId component) {
    return std::any_of(reagent.supplies.begin(), reagent.supplies.end(),
                       [&](const Supply& supply) { return supply.component == component; });
}

class Imagination {
public:
    Imagination(const Bench& bench, const Plan& plan, const Contents& contents)
        : bench_(bench), plan_(plan), contents_(contents), titrant_(titrant_of(bench.table, plan)) {}

    std::vector<Suspect> all() {
        add(of_kind(MistakeKind::meter), contents_);
        titrant_mistakes();
        for (const Weighing& item : plan_.weigh) {
            if (item.purpose != Purpose::titrant) {
                weighing_mistakes(item);
            }
        }
        for (const Measurement& item : plan_.measure) {
            if (item.purpose != Purpose::titrant) {
                scaled(MistakeKind::left_out, item.reagent, item.amount, 0.0);
            }
        }
        swapped_forms();
        wrong_volumes();
        temperatures();
        stock();
        return std::move(suspects_);
    }

private:
    const Reagent& reagent(std::uint16_t index) const { return bench_.table.reagents[index]; }

    void add(Mistake mistake, const Contents& contents) {
        suspects_.push_back({std::move(mistake), contents, plan_.request.prepare_at});
    }

    std::size_t portion_of(std::uint16_t article, Amount amount) const {
        const auto& portions = contents_.present.portions;
        for (std::size_t i = 0; i < portions.size(); ++i) {
            if (portions[i].reagent == article && portions[i].amount == amount) {
                return i;
            }
        }
        return nowhere;
    }
    std::size_t titrant_portion() const {
        return titrant_ ? portion_of(titrant_->titrant.reagent, titrant_->amount) : nowhere;
    }

    /// One portion replaced: another article, another amount.
    void replaced(Mistake mistake, std::size_t portion, std::uint16_t article, Amount amount) {
        Contents made = contents_;
        made.present.portions[portion].reagent = article;
        made.present.portions[portion].amount = amount;
        add(std::move(mistake), made);
    }

    void scaled(MistakeKind kind, std::uint16_t article, Amount amount, double factor) {
        const std::size_t portion = portion_of(article, amount);
        if (portion == nowhere) {
            return;
        }
        Mistake mistake = of_kind(kind);
        mistake.reagent = article;
        mistake.factor = factor;
        if (factor < 1) {
            const Amount missing = amount * (1 - factor);
            mistake.to_weigh_in = Weighing{article, Purpose::buffer, missing, mass_of(reagent(article), missing)};
        }
        replaced(std::move(mistake), portion, article, amount * factor);
    }

    void titrant_mistakes() {
        const std::size_t portion = titrant_portion();
        if (portion == nowhere) {
            return;
        }
        const auto with_factor = [&](MistakeKind kind, double factor, std::optional<std::uint16_t> taken) {
            Suspect suspect = titrant_off_by(plan_, contents_, *titrant_, factor);
            suspect.mistake.kind = kind;
            suspect.mistake.taken = taken;
            suspects_.push_back(std::move(suspect));
        };
        with_factor(MistakeKind::titrant_forgotten, 0, std::nullopt);
        if (titrant_->charge != 0) {
            const Titrant other = strong_titrant(bench_.table, plan_, -titrant_->charge);
            Mistake mistake = of_kind(MistakeKind::titrant_wrong_kind);
            mistake.reagent = titrant_->titrant.reagent;
            mistake.taken = other.reagent;
            replaced(std::move(mistake), portion, other.reagent, titrant_->amount);
        }
        if (!titrant_->titrant.strength) {
            return;
        }
        std::vector<double> factors;
        for (std::size_t i = 0; i < bench_.table.reagents.size(); ++i) {
            const Reagent& article = bench_.table.reagents[i];
            if (!article.strength_mol_per_L.known() || !same_supplies(article, reagent(titrant_->titrant.reagent))) {
                continue;
            }
            const double factor = article.strength_mol_per_L.value / titrant_->titrant.strength->mol_per_L();
            if (std::abs(factor - 1) > 0.02) {
                factors.push_back(factor);
                with_factor(MistakeKind::titrant_other_strength, factor, static_cast<std::uint16_t>(i));
            }
        }
        for (const double tenfold : {10.0, 0.1}) {
            if (std::none_of(factors.begin(), factors.end(),
                             [&](double factor) { return std::abs(factor / tenfold - 1) < 0.2; })) {
                with_factor(MistakeKind::titrant_other_strength, tenfold, std::nullopt);
            }
        }
    }

    /// A salt form that a bench could have taken: of the same system, with ions of this recipe or the commonest ones.
    bool could_be_taken_for(const Reagent& article, const Reagent& planned) const {
        const auto expected = [&](ComponentId component) {
            if (component.kind == ComponentKind::system) {
                return supplies(planned, component);
            }
            const std::string_view name = bench_.table.spectators[component.index].name;
            return name == "Na+" || name == "Cl-" ||
                   std::any_of(plan_.preparation.portions.begin(), plan_.preparation.portions.end(),
                               [&](const Portion& portion) { return supplies(reagent(portion.reagent), component); });
        };
        const bool same_system =
            std::any_of(article.supplies.begin(), article.supplies.end(),
                        [](const Supply& supply) { return supply.component.kind == ComponentKind::system; });
        return article.state == State::solid && article.usual && !article.rarely_stocked && same_system &&
               !same_supplies(article, planned) &&
               std::all_of(article.supplies.begin(), article.supplies.end(),
                           [&](const Supply& supply) { return expected(supply.component); });
    }

    void weighing_mistakes(const Weighing& item) {
        const std::size_t portion = portion_of(item.reagent, item.amount);
        if (portion == nowhere) {
            return;
        }
        const Reagent& planned = reagent(item.reagent);
        for (std::size_t i = 0; i < bench_.table.reagents.size(); ++i) {
            const Reagent& article = bench_.table.reagents[i];
            const bool hydrate = article.state == State::solid && i != item.reagent &&
                                 article.formula != planned.formula && same_supplies(article, planned);
            if (!hydrate && !could_be_taken_for(article, planned)) {
                continue;
            }
            Mistake mistake = of_kind(hydrate ? MistakeKind::other_hydrate : MistakeKind::other_form);
            mistake.reagent = item.reagent;
            mistake.taken = static_cast<std::uint16_t>(i);
            const Amount amount = amount_of(article, item.mass);
            mistake.factor = amount / item.amount;
            if (hydrate && amount < item.amount) {
                const Amount missing = item.amount - amount;
                mistake.to_weigh_in = Weighing{*mistake.taken, item.purpose, missing, mass_of(article, missing)};
            }
            replaced(std::move(mistake), portion, static_cast<std::uint16_t>(i), amount);
        }
        scaled(MistakeKind::mass_tenfold, item.reagent, item.amount, 10.0);
        scaled(MistakeKind::mass_tenfold, item.reagent, item.amount, 0.1);
        scaled(MistakeKind::left_out, item.reagent, item.amount, 0.0);
    }

    /// Two weighed forms of one system, each put in by the mass of the other.
    void swapped_forms() {
        for (std::size_t a = 0; a < plan_.weigh.size(); ++a) {
            for (std::size_t b = a + 1; b < plan_.weigh.size(); ++b) {
                const Weighing& first = plan_.weigh[a];
                const Weighing& second = plan_.weigh[b];
                const std::size_t at_first = portion_of(first.reagent, first.amount);
                const std::size_t at_second = portion_of(second.reagent, second.amount);
                if (first.purpose != Purpose::buffer || second.purpose != Purpose::buffer || at_first == nowhere ||
                    at_second == nowhere) {
                    continue;
                }
                Contents made = contents_;
                made.present.portions[at_first].amount = amount_of(reagent(first.reagent), second.mass);
                made.present.portions[at_second].amount = amount_of(reagent(second.reagent), first.mass);
                Mistake mistake = of_kind(MistakeKind::forms_swapped);
                mistake.reagent = first.reagent;
                mistake.taken = second.reagent;
                add(std::move(mistake), made);
            }
        }
    }

    void wrong_volumes() {
        for (const double factor : {2.0, 0.5}) {
            Contents made = contents_;
            made.present.filled_to = factor * *made.present.filled_to;
            made.mark = std::max(made.mark, *made.present.filled_to);
            Mistake mistake = of_kind(MistakeKind::wrong_volume);
            mistake.factor = factor;
            add(std::move(mistake), made);
        }
    }

    /// The recipe with the titrant that gives it this pH at this temperature; empty when none does.
    std::optional<Contents> set_to(const Contents& start, PH ph, Temperature temperature) const {
        const std::size_t portion = titrant_portion();
        if (portion == nowhere) {
            return std::nullopt;
        }
        const auto make = [&](Amount amount) {
            Preparation made = start.present;
            made.portions[portion].amount = amount;
            return made;
        };
        const Amount planned = *start.present.portions[portion].amount;
        const auto amount = amount_for(bench_, make, ph, temperature, 1e-3 * planned, 20 * planned);
        if (!amount || amount->mol() < 0) {
            return std::nullopt;
        }
        Contents set = start;
        set.present.portions[portion].amount = *amount;
        return set;
    }

    void temperatures() {
        // Common practice, no source: cold room or ice, room, incubator.
        constexpr std::array places{4.0, 25.0, 37.0};
        const Request& request = plan_.request;
        std::vector<Temperature> others;
        for (const double celsius : places) {
            others.push_back(Temperature::celsius(celsius));
        }
        if (std::find(others.begin(), others.end(), request.use_at) == others.end()) {
            others.push_back(request.use_at);
        }
        for (const Temperature temperature : others) {
            if (temperature != request.prepare_at) {
                Mistake read = of_kind(MistakeKind::read_at_other_temperature);
                read.temperature = temperature;
                suspects_.push_back({read, contents_, temperature});
            }
            if (temperature == request.prepare_at || temperature == request.use_at) {
                continue;
            }
            if (const auto set = set_to(contents_, *request.ph, temperature)) {
                Mistake mistake = of_kind(MistakeKind::set_at_other_temperature);
                mistake.temperature = temperature;
                add(mistake, *set);
            }
        }
        if (request.use_at != request.prepare_at || request.strength != 1) {
            if (const auto set = set_to(contents_, *request.ph, request.prepare_at)) {
                Mistake mistake = of_kind(MistakeKind::set_at_bench);
                mistake.temperature = request.prepare_at;
                add(mistake, *set);
            }
        }
    }

    /// Brought to the bench pH of the recipe at tenfold concentration, where a stock reads differently.
    void stock() {
        constexpr double fold = 10;
        constexpr double most_ionic_strength = 1.0;  // mol/kg; past it no model here can say what the stock reads
        if (plan_.request.strength != 1 || plan_.predicted.ionic_strength.mol_per_kg() * fold > most_ionic_strength) {
            return;
        }
        Contents concentrate = contents_;
        for (Portion& portion : concentrate.present.portions) {
            portion.amount = portion.amount.value_or(Amount{}) * fold;
        }
        const PH bench_ph = ph_of(bench_, contents_.present, plan_.request.prepare_at);
        if (auto set = set_to(concentrate, bench_ph, plan_.request.prepare_at)) {
            for (Portion& portion : set->present.portions) {
                portion.amount = portion.amount.value_or(Amount{}) / fold;
            }
            Mistake mistake = of_kind(MistakeKind::set_before_dilution);
            mistake.factor = fold;
            add(mistake, *set);
        }
    }

    const Bench& bench_;
    const Plan& plan_;
    const Contents& contents_;
    std::optional<PlannedTitrant> titrant_;
    std::vector<Suspect> suspects_;
};

}  // namespace

std::vector<Suspect> single_mistakes(const Bench& bench, const Plan& plan, const Contents& contents) {
    return Imagination(bench, plan, contents).all();
}

Suspect titrant_off_by(const Plan& plan, const Contents& contents, const PlannedTitrant& titrant, double factor) {
    Suspect suspect{of_kind(MistakeKind::titrant_off), contents, plan.request.prepare_at};
    suspect.mistake.reagent = titrant.titrant.reagent;
    suspect.mistake.factor = factor;
    for (Portion& portion : suspect.contents.present.portions) {
        if (portion.reagent == titrant.titrant.reagent && portion.amount == titrant.amount) {
            portion.amount = factor * titrant.amount;
        }
    }
    return suspect;
}

}  // namespace carboy
