#include "plan/articles.h"

#include <algorithm>

namespace carboy {

bool same_supplies(const Reagent& a, const Reagent& b) {
    return std::is_permutation(
        a.supplies.begin(), a.supplies.end(), b.supplies.begin(), b.supplies.end(),
        [](const Supply& x, const Supply& y) { return x.component == y.component && x.count == y.count; });
}

bool is_solution(const Reagent& reagent) {
    return reagent.strength_mol_per_L.known();
}

std::uint16_t usual_article(const Table& table, std::uint16_t reagent) {
    for (std::size_t i = 0; i < table.reagents.size(); ++i) {
        if (table.reagents[i].usual && same_supplies(table.reagents[i], table.reagents[reagent])) {
            return static_cast<std::uint16_t>(i);
        }
    }
    return reagent;
}

Mass mass_of(const Reagent& article, Amount amount) {
    return Mass::grams(amount.mol() * article.molar_mass_g_per_mol / article.counted_assay());
}

double count_of(const Reagent& reagent, ComponentId component) {
    for (const Supply& supply : reagent.supplies) {
        if (supply.component == component) {
            return supply.count;
        }
    }
    return 0;
}

}  // namespace carboy
