#include "carboy/titrant.h"

#include <algorithm>
#include <cmath>
#include <string>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"

namespace carboy {

namespace {

bool same_chemistry(const Reagent& a, const Reagent& b) {
    return std::is_permutation(
        a.supplies.begin(), a.supplies.end(), b.supplies.begin(), b.supplies.end(),
        [](const Supply& x, const Supply& y) { return x.component == y.component && x.count == y.count; });
}

/// The article of that chemistry whose strength is the one given, within what a label rounds.
std::uint16_t article_of_strength(const Table& table, std::uint16_t reagent, Molarity strength) {
    constexpr double rounding = 0.01;
    for (std::size_t i = 0; i < table.reagents.size(); ++i) {
        const Reagent& article = table.reagents[i];
        if (article.strength_mol_per_L.known() && same_chemistry(article, table.reagents[reagent]) &&
            std::abs(article.strength_mol_per_L.value / strength.mol_per_L() - 1) < rounding) {
            return static_cast<std::uint16_t>(i);
        }
    }
    return reagent;
}

}  // namespace

Titrant read_titrant(std::string_view text, const Table& table, std::string_view where) {
    const Reagent* article = find_reagent(table, text);
    article = article != nullptr ? article : find_reagent_by_cas(table, text);
    if (article != nullptr) {
        Titrant titrant{static_cast<std::uint16_t>(article - table.reagents.data()), std::nullopt};
        if (article->strength_mol_per_L.known()) {
            titrant.strength = Molarity::mol_per_L(article->strength_mol_per_L.value);
        }
        return titrant;
    }
    // A strength is written as in a mixture: what one litre of it brings is its strength.
    const std::string_view before = "1 L of ";
    try {
        const Preparation litre = read_mixture(fmt::format("{}{}, to 1 L", before, text), table, Temperature{}, where);
        const double strength = litre.portions.front().amount.value_or(Amount{}).mol();
        if (litre.portions.size() == 1 && strength > 0) {
            const Molarity molarity = Molarity::mol_per_L(strength);
            return {article_of_strength(table, litre.portions.front().reagent, molarity), molarity};
        }
    } catch (Error& error) {
        Error told(error.kind(), error.code(), error.message(), std::string(where), error.help());
        Error::Excerpt excerpt = error.excerpt();
        if (excerpt.begin >= before.size() && excerpt.begin < before.size() + text.size()) {
            excerpt.begin -= before.size();
            excerpt.length = std::min(excerpt.length, text.size() - excerpt.begin);
            excerpt.text = std::string(text);
            told.with_excerpt(excerpt);
        }
        throw told;
    }
    throw Error(ErrorKind::input, "bad_titrant", fmt::format("'{}' is not one acid or base with a strength", text),
                std::string(where), "write it like '1 M HCl', 'NaOH 10 mol/L' or, to weigh it, 'NaOH'");
}

}  // namespace carboy
