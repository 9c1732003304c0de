#include "notation/shelf_builder.h"

#include <algorithm>
#include <limits>
#include <map>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/plan.h"
#include "carboy/request_json.h"

#include "constants/name.h"
#include "plan/articles.h"

namespace carboy {

struct ShelfBuilder::Text {
    std::deque<std::string> texts;
    std::deque<std::vector<Supply>> supplies;
    std::vector<Reagent> reagents;
    std::vector<NameEntry> names;
    std::shared_ptr<const void> base;
    std::shared_ptr<const void> before;
};

namespace {

Figure figure_of(double value) {
    return {value, std::numeric_limits<double>::quiet_NaN(), 0, Evidence::seen};
}

/// `hydrochloric acid 37 %` -> `hydrochloric acid`, `disodium hydrogen phosphate heptahydrate` -> without its water: in
/// solution it is no hydrate.
std::string_view name_in_solution(const Table& table, const Reagent& article) {
    std::string_view name = article.name;
    for (const Reagent& other : table.reagents) {  // of pellets and solutions of one substance, the solution's
        if (other.state == State::solution && other.usual && same_supplies(other, article)) {
            name = other.name;
        }
    }
    for (std::size_t i = 1; i < name.size(); ++i) {
        if (name[i - 1] == ' ' && name[i] >= '0' && name[i] <= '9') {
            return name.substr(0, i - 1);
        }
    }
    const auto last = name.find_last_of(' ');
    const bool of_water = name.ends_with("hydrate") || name.ends_with(" anhydrous");
    return of_water && last != std::string_view::npos ? name.substr(0, last) : name;
}

/// Components of a preparation in moles.
std::map<ComponentId, double> contents(const Table& table, const Preparation& preparation) {
    std::map<ComponentId, double> moles;
    for (const Portion& portion : preparation.portions) {
        for (const auto& [component, count] : table.reagents[portion.reagent].supplies) {
            moles[component] += count * portion.amount.value_or(Amount{}).mol();
        }
    }
    return moles;
}

double charge_of(const Table& table, const std::vector<Supply>& supplies) {
    double charge = 0;
    for (const Supply& supply : supplies) {
        if (supply.component.kind == ComponentKind::spectator) {
            charge += supply.count * table.spectators[supply.component.index].charge;
        }
    }
    return charge;
}

}  // namespace

ShelfBuilder::ShelfBuilder(const Table& base, const ActivityModel& model)
    : base_(base),
      model_(model),
      text_(std::make_shared<Text>()),
      reagents_(base.reagents.begin(), base.reagents.end()) {
    text_->base = base.owner;
}

ShelfBuilder::ShelfBuilder(const Shelf& shelf, const Table& base, const ActivityModel& model)
    : base_(base),
      model_(model),
      text_(std::make_shared<Text>()),
      reagents_(shelf.table().reagents.begin(), shelf.table().reagents.end()),
      bottles_(shelf.bottles()) {
    text_->base = base.owner;
    text_->before = shelf.table().owner;
}

std::string_view ShelfBuilder::keep(std::string text) {
    return text_->texts.emplace_back(std::move(text));
}

std::span<const Supply> ShelfBuilder::keep(std::vector<Supply> supplies) {
    return text_->supplies.emplace_back(std::move(supplies));
}

Reagent ShelfBuilder::solid(std::uint16_t article, std::optional<double> assay) {
    Reagent reagent = base_.reagents[article];
    if (assay) {
        reagent.assay = figure_of(*assay);
    }
    reagent.rarely_stocked = false;
    return reagent;
}

Reagent ShelfBuilder::solution(std::uint16_t article, Molarity strength, std::string_view strength_as_written) {
    Reagent reagent = base_.reagents[article];
    reagent.name = keep(fmt::format("{} {}", name_in_solution(base_, reagent), strength_as_written));
    reagent.state = State::solution;
    reagent.strength_mol_per_L = figure_of(strength.mol_per_L());
    reagent.mass_percent = figure_of(std::numeric_limits<double>::quiet_NaN());
    reagent.density_g_per_mL = figure_of(std::numeric_limits<double>::quiet_NaN());
    reagent.rarely_stocked = false;
    return reagent;
}

Reagent ShelfBuilder::made(std::string_view line, std::string_view where, Bottle& bottle) {
    Preparation preparation;
    double strength = 0;
    const bool label = line.find("pH") != std::string_view::npos;
    if (label) {
        Request request = request_from_label(line, base_, where);
        request.volume = Volume::litres(1);
        const Plan plan = plan_recipe(base_, request, model_);
        preparation = plan.preparation;
        bottle.doubt = plan.predicted.uncertainty.expanded_k2;
        if (!request.buffers.empty()) {
            strength = request.buffers.front().concentration.value;
        }
        bottle.made_as = std::move(request);
    } else {
        preparation = read_mixture(line, base_, Temperature{}, where);
        if (std::any_of(preparation.portions.begin(), preparation.portions.end(),
                        [](const Portion& portion) { return portion.molality.has_value(); })) {
            throw Error(ErrorKind::input, "unusable_unit", "a stock is told by its concentrations in mol/L or g/L",
                        std::string(where), "write it as '0.2 M NaH2PO4' or as a label with its pH");
        }
    }
    const double litres = preparation.filled_to.value_or(Volume::litres(1)).L();
    for (Portion& portion : preparation.portions) {
        portion.amount = *portion.amount / litres;
    }
    if (preparation.portions.size() == 1) {
        const Portion& only = preparation.portions.front();
        bottle.article = only.reagent;
        bottle.made_as.reset();
        const Molarity molarity = Molarity::mol_per_L(only.amount->mol());
        return solution(only.reagent, molarity, fmt::format("{:.4g} mol/L", molarity.mol_per_L()));
    }
    for (const Portion& portion : preparation.portions) {
        strength = strength > 0 ? strength : portion.amount->mol();
    }
    std::vector<Supply> supplies;
    for (const auto& [component, mol] : contents(base_, preparation)) {
        supplies.push_back({component, mol / strength});
    }
    Reagent reagent{};
    reagent.name = keep(std::string(line));
    reagent.strong_charge = charge_of(base_, supplies);
    reagent.supplies = keep(std::move(supplies));
    reagent.state = State::solution;
    reagent.assay = figure_of(std::numeric_limits<double>::quiet_NaN());
    reagent.assay_minimum = std::numeric_limits<double>::quiet_NaN();
    reagent.strength_mol_per_L = figure_of(strength);
    reagent.mass_percent = reagent.density_g_per_mL = reagent.solubility_g_per_L = reagent.assay;
    reagent.cas_evidence = Evidence::from_memory;
    return reagent;
}

void ShelfBuilder::add(const Reagent& reagent, Bottle bottle) {
    bottle.reagent = static_cast<std::uint16_t>(reagents_.size());
    reagents_.push_back(reagent);
    bottles_.push_back(std::move(bottle));
}

Shelf ShelfBuilder::finish(bool complete) {
    text_->names.assign(base_.names.begin(), base_.names.end());
    for (const Bottle& bottle : bottles_) {
        text_->names.push_back({keep(fold_name("bottle " + bottle.id)), EntryKind::reagent, bottle.reagent});
    }
    std::sort(text_->names.begin(), text_->names.end(),
              [](const NameEntry& a, const NameEntry& b) { return a.key < b.key; });
    text_->reagents = std::move(reagents_);
    Table table = base_;
    table.reagents = text_->reagents;
    table.names = text_->names;
    table.owner = text_;
    return {std::move(table), std::move(bottles_), complete};
}

}  // namespace carboy
