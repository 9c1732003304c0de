#include "plan/stockroom.h"

#include <algorithm>
#include <cmath>
#include <tuple>

#include "plan/articles.h"

namespace carboy {

namespace {

bool supplies(const Reagent& reagent, ComponentId component) {
    return count_of(reagent, component) != 0;
}

/// How badly the volume of a titrant suits the vessel; 0 is well.
double awkwardness(const Reagent& reagent, Amount amount, Volume total) {
    constexpr double least = 0.005;  // common practice, no source: a titrant should be 0.5 to 10 % of the volume
    constexpr double most = 0.10;
    if (!is_solution(reagent)) {
        return 1e6;
    }
    const double share = amount.mol() / reagent.strength_mol_per_L.value / total.L();
    return share < least ? std::log(least / std::max(share, 1e-12)) : share > most ? 10 * std::log(share / most) : 0.0;
}

}  // namespace

Stockroom::Stockroom(const Table& table, const Constraints& constraints, const Shelf* shelf)
    : table_(shelf != nullptr ? shelf->table() : table), shelf_(shelf), used_first_(constraints.use) {
    const bool bottles_only = shelf != nullptr && shelf->complete();
    if (!bottles_only && constraints.without.empty() && constraints.avoid.empty()) {
        return;
    }
    forbidden_.assign(table_.reagents.size(), false);
    for (std::size_t i = 0; i < table_.reagents.size(); ++i) {
        const auto index = static_cast<std::uint16_t>(i);
        const bool avoided = is_one_of(index, constraints.avoid);
        const bool brings_ion = std::any_of(constraints.without.begin(), constraints.without.end(),
                                            [&](const ComponentId& ion) { return supplies(table_.reagents[i], ion); });
        forbidden_[i] = avoided || brings_ion || (bottles_only && bottle(index) == nullptr);
    }
}

bool Stockroom::is_one_of(std::uint16_t reagent, std::span<const std::uint16_t> articles) const {
    const Bottle* of = bottle(reagent);
    return std::any_of(articles.begin(), articles.end(), [&](std::uint16_t article) {
        return reagent == article || (of != nullptr && of->article == article);
    });
}

/// Which of two articles of one chemistry to reach for: what was asked for, what is on the shelf and not expired, open
/// before closed, the one that expires first; of the table the usual one.
bool Stockroom::preferred(std::uint16_t a, std::uint16_t b) const {
    const auto key = [&](std::uint16_t index) {
        const Bottle* from = bottle(index);
        const bool never = from == nullptr || !from->expires;
        return std::tuple(!is_one_of(index, used_first_), from == nullptr, is_expired(index),
                          from == nullptr || !from->opened, never, never ? std::string() : from->expires->text(),
                          from == nullptr && !table_.reagents[index].usual, index);
    };
    return key(a) < key(b);
}

void Stockroom::add_article(std::vector<Chemistry>& chemistries, std::uint16_t index) const {
    const auto known = std::find_if(chemistries.begin(), chemistries.end(), [&](const Chemistry& chemistry) {
        return same_supplies(table_.reagents[chemistry.articles.front()], table_.reagents[index]);
    });
    if (known == chemistries.end()) {
        chemistries.push_back({{index}});
        return;
    }
    auto& articles = known->articles;
    if (shelf_ == nullptr && used_first_.empty()) {  // the common case, in order of the table
        articles.insert(table_.reagents[index].usual ? articles.begin() : articles.end(), index);
        return;
    }
    articles.insert(
        std::find_if(articles.begin(), articles.end(), [&](std::uint16_t other) { return preferred(index, other); }),
        index);
}

template <class Accepts>
std::vector<Chemistry> Stockroom::chemistries_where(Accepts accepts) const {
    std::vector<Chemistry> found;
    for (std::size_t i = 0; i < table_.reagents.size(); ++i) {
        if (accepts(table_.reagents[i]) && allows(static_cast<std::uint16_t>(i))) {
            add_article(found, static_cast<std::uint16_t>(i));
        }
    }
    return found;
}

std::vector<Chemistry> Stockroom::forms_of(ComponentId system, std::optional<ComponentId> counter_ion) const {
    return chemistries_where([&](const Reagent& reagent) {
        return supplies(reagent, system) &&
               std::all_of(reagent.supplies.begin(), reagent.supplies.end(), [&](const Supply& supply) {
                   return supply.component == system || (counter_ion && supply.component == *counter_ion);
               });
    });
}

std::optional<Chemistry> Stockroom::alone(ComponentId component) const {
    auto found = chemistries_where([&](const Reagent& reagent) {
        return reagent.supplies.size() == 1 && reagent.supplies[0].component == component;
    });
    return found.empty() ? std::nullopt : std::optional(std::move(found.front()));
}

std::optional<Chemistry> Stockroom::salt_of(ComponentId cation, ComponentId anion) const {
    auto found = chemistries_where([&](const Reagent& reagent) {
        return reagent.supplies.size() == 2 && supplies(reagent, cation) && supplies(reagent, anion) &&
               reagent.supplies[0].count == 1 && reagent.supplies[1].count == 1;
    });
    return found.empty() ? std::nullopt : std::optional(std::move(found.front()));
}

std::optional<Chemistry> Stockroom::same_as(std::uint16_t wanted) const {
    if (shelf_ == nullptr) {  // an article that the caller chose is taken as it is
        return allows(wanted) ? std::optional(Chemistry{{wanted}}) : std::nullopt;
    }
    auto found =
        chemistries_where([&](const Reagent& reagent) { return same_supplies(reagent, table_.reagents[wanted]); });
    return found.empty() ? std::nullopt : std::optional(std::move(found.front()));
}

Share Stockroom::stand_in(const Share& additive, Volume total) const {
    const Reagent& wanted = table_.reagents[additive.reagent];
    const auto usual = std::find_if(table_.systems.begin(), table_.systems.end(),
                                    [&](const System& system) { return system.usual_form == wanted.name; });
    const auto same = same_as(additive.reagent);
    const bool there = same && !shares(*same, additive.amount, Wanted::any, total, {}).empty();
    if (shelf_ == nullptr || there || usual == table_.systems.end()) {
        return additive;
    }
    const ComponentId system = id_of(table_, *usual);
    const auto others = chemistries_where([&](const Reagent& reagent) {
        return supplies(reagent, system) &&
               std::all_of(reagent.supplies.begin(), reagent.supplies.end(), [&](const Supply& supply) {
                   return supply.component == system || supply.component.kind == ComponentKind::spectator;
               });
    });
    for (const Chemistry& other : others) {
        const std::uint16_t article = other.articles.front();
        const Amount amount = additive.amount * (count_of(wanted, system) / count_of(table_.reagents[article], system));
        if (!shares(other, amount, Wanted::any, total, {}).empty()) {
            return {article, amount};
        }
    }
    return additive;
}

std::optional<Amount> Stockroom::left(std::uint16_t reagent, const std::vector<Share>& taken) const {
    const Bottle* from = bottle(reagent);
    auto amount = from != nullptr ? shelf_->left(*from) : std::nullopt;
    if (amount) {
        for (const Share& share : taken) {
            if (share.reagent == reagent) {
                *amount = *amount - share.amount;
            }
        }
    }
    return amount;
}

std::vector<Share> Stockroom::shares(const Chemistry& chemistry, Amount amount, Wanted wanted, Volume total,
                                     const std::vector<Share>& taken) const {
    std::vector<std::uint16_t> suitable;
    for (const std::uint16_t article : chemistry.articles) {
        if (wanted != Wanted::solution || is_solution(table_.reagents[article])) {
            suitable.push_back(article);
        }
    }
    if (suitable.empty()) {
        return {};
    }
    if (shelf_ == nullptr && wanted != Wanted::titrant) {
        return {{suitable.front(), amount}};
    }
    std::stable_sort(suitable.begin(), suitable.end(), [&](std::uint16_t a, std::uint16_t b) {
        const auto key = [&](std::uint16_t article) {
            const bool solution = is_solution(table_.reagents[article]);
            // To weigh is more exact than to measure a stock; a titrant is measured, at a strength that suits.
            return std::tuple(is_expired(article), bottle(article) == nullptr,
                              wanted == Wanted::any && solution && table_.reagents[article].state == State::solution,
                              wanted == Wanted::titrant ? awkwardness(table_.reagents[article], amount, total) : 0.0);
        };
        return key(a) < key(b);
    });
    for (const std::uint16_t article : suitable) {
        const auto there = left(article, taken);
        if (!there || *there >= amount) {
            return {{article, amount}};
        }
    }
    // No bottle holds enough by itself: several, of those of one kind.
    std::vector<Share> several;
    Amount missing = amount;
    for (const std::uint16_t article : suitable) {
        const Amount there = left(article, taken).value_or(Amount{});
        const Amount share = std::min(there, missing);
        if (share.mol() > 0) {
            several.push_back({article, share});
            missing = missing - share;
        }
    }
    return missing.mol() > 1e-12 * amount.mol() ? std::vector<Share>{} : several;
}

}  // namespace carboy
