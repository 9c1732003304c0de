#include "plan/articles.h"

#include <algorithm>
#include <cmath>

namespace carboy {

namespace {

bool same_supplies(const Reagent& a, const Reagent& b) {
    return std::is_permutation(
        a.supplies.begin(), a.supplies.end(), b.supplies.begin(), b.supplies.end(),
        [](const Supply& x, const Supply& y) { return x.component == y.component && x.count == y.count; });
}

void add_article(std::vector<Chemistry>& chemistries, const Table& table, std::uint16_t index) {
    const Reagent& reagent = table.reagents[index];
    const auto known = std::find_if(chemistries.begin(), chemistries.end(), [&](const Chemistry& chemistry) {
        return same_supplies(table.reagents[chemistry.articles.front()], reagent);
    });
    if (known == chemistries.end()) {
        chemistries.push_back({{index}});
    } else if (reagent.usual) {
        known->articles.insert(known->articles.begin(), index);
    } else {
        known->articles.push_back(index);
    }
}

template <class Accepts>
std::vector<Chemistry> chemistries_where(const Table& table, Accepts accepts) {
    std::vector<Chemistry> found;
    for (std::size_t i = 0; i < table.reagents.size(); ++i) {
        if (accepts(table.reagents[i])) {
            add_article(found, table, static_cast<std::uint16_t>(i));
        }
    }
    return found;
}

bool supplies(const Reagent& reagent, ComponentId component) {
    return std::any_of(reagent.supplies.begin(), reagent.supplies.end(),
                       [&](const Supply& supply) { return supply.component == component; });
}

}  // namespace

std::vector<Chemistry> forms_of(const Table& table, ComponentId system, std::optional<ComponentId> counter_ion) {
    return chemistries_where(table, [&](const Reagent& reagent) {
        return supplies(reagent, system) &&
               std::all_of(reagent.supplies.begin(), reagent.supplies.end(), [&](const Supply& supply) {
                   return supply.component == system || (counter_ion && supply.component == *counter_ion);
               });
    });
}

std::optional<Chemistry> alone(const Table& table, ComponentId component) {
    auto found = chemistries_where(table, [&](const Reagent& reagent) {
        return reagent.supplies.size() == 1 && reagent.supplies[0].component == component;
    });
    return found.empty() ? std::nullopt : std::optional(std::move(found.front()));
}

std::optional<Chemistry> salt_of(const Table& table, ComponentId cation, ComponentId anion) {
    auto found = chemistries_where(table, [&](const Reagent& reagent) {
        return reagent.supplies.size() == 2 && supplies(reagent, cation) && supplies(reagent, anion) &&
               reagent.supplies[0].count == 1 && reagent.supplies[1].count == 1;
    });
    return found.empty() ? std::nullopt : std::optional(std::move(found.front()));
}

std::uint16_t usual_article(const Table& table, std::uint16_t reagent) {
    for (std::size_t i = 0; i < table.reagents.size(); ++i) {
        if (table.reagents[i].usual && same_supplies(table.reagents[i], table.reagents[reagent])) {
            return static_cast<std::uint16_t>(i);
        }
    }
    return reagent;
}

std::uint16_t article_to_titrate_with(const Table& table, const Chemistry& chemistry, Amount amount, Volume total) {
    constexpr double least = 0.005;  // common practice, no source: a titrant should be 0.5 to 10 % of the volume
    constexpr double most = 0.10;
    const auto awkwardness = [&](std::uint16_t index) {
        const Figure& strength = table.reagents[index].strength_mol_per_L;
        if (!strength.known()) {
            return 1e6;
        }
        const double share = amount.mol() / strength.value / total.L();
        return share < least  ? std::log(least / std::max(share, 1e-12))
               : share > most ? 10 * std::log(share / most)
                              : 0.0;
    };
    return *std::min_element(chemistry.articles.begin(), chemistry.articles.end(),
                             [&](std::uint16_t a, std::uint16_t b) { return awkwardness(a) < awkwardness(b); });
}

}  // namespace carboy
