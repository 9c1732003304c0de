#include "plan/draft.h"

#include <algorithm>
#include <tuple>

#include <fmt/format.h>

#include "plan/articles.h"

namespace carboy {

namespace {

/// A solution of the strength that one pipettes, not a concentrated acid.
bool is_stock_solution(const Stockroom& stockroom, std::uint16_t reagent) {
    const Reagent& article = stockroom.table().reagents[reagent];
    return is_solution(article) && article.state == State::solution && !article.mass_percent.known();
}

bool is_mixed_stock(const Stockroom& stockroom, std::uint16_t reagent) {
    const Bottle* bottle = stockroom.bottle(reagent);
    return bottle != nullptr && !bottle->article;
}

std::vector<Share> taken_by(const std::vector<Ingredient>& ingredients) {
    std::vector<Share> taken;
    for (const Ingredient& item : ingredients) {
        taken.push_back({item.reagent, item.amount});
    }
    return taken;
}

}  // namespace

bool better(const Draft& a, const Draft& b) {
    const auto key = [](const Draft& d) {
        return std::tie(d.set, d.rare, d.strangers, d.expired, d.work, d.harsh, d.titrant_mol, d.total_mol);
    };
    return key(a) < key(b);
}

void weigh_up(Draft& draft, const Stockroom& stockroom) {
    // Common practice, no source: a stock solution is the least to handle, a titrant is brought to the meter, a solid
    // is weighed and a concentrated liquid measured in the hood, and a stock that must be made first is the most.
    constexpr int to_pipette = 1;
    constexpr int to_titrate = 1;
    constexpr int to_weigh = 2;
    constexpr int to_make = 5;
    const Table& table = stockroom.table();
    for (const Ingredient& item : draft.ingredients) {
        const Reagent& article = table.reagents[item.reagent];
        draft.expired += stockroom.is_expired(item.reagent) ? 1 : 0;
        draft.rare += article.rarely_stocked ? 1 : 0;
        draft.harsh += article.ghs.signal_word == "Danger" ? 1 : 0;
        draft.total_mol += item.amount.mol();
        if (item.make_stock) {
            draft.work += to_make;
            draft.stocks_to_make += 1;
        } else if (item.purpose == Purpose::titrant) {
            draft.work += to_titrate;
            draft.titrant_mol += item.amount.mol();
            draft.titrated = true;
        } else {
            draft.work += is_stock_solution(stockroom, item.reagent) ? to_pipette : to_weigh;
            draft.weighings += is_solution(article) ? 0 : 1;
        }
    }
}

std::optional<std::vector<Ingredient>> additive_ingredients(const Stockroom& stockroom, const Request& request,
                                                            const std::vector<Share>& additives) {
    std::vector<Ingredient> ingredients;
    for (const Share& additive : additives) {
        if (additive.amount.mol() == 0) {
            continue;
        }
        const auto chemistry = stockroom.same_as(additive.reagent);
        const auto shares = chemistry ? stockroom.shares(*chemistry, additive.amount, Stockroom::Wanted::any,
                                                         request.volume, taken_by(ingredients))
                                      : std::vector<Share>{};
        if (shares.empty()) {
            return std::nullopt;
        }
        for (const Share& share : shares) {
            ingredients.push_back({share.reagent, Purpose::additive, share.amount});
        }
    }
    return ingredients;
}

std::optional<Draft> draft_of(const Stockroom& stockroom, const Request& request, const Candidate& candidate,
                              const std::vector<double>& amounts_mol, const std::vector<Ingredient>& additives,
                              Route route) {
    Draft draft;
    draft.route = route;
    draft.set = candidate.set;
    draft.strangers = candidate.strangers;
    std::vector<Share> taken = taken_by(additives);
    // The shares of one column; false when there are none.
    const auto take = [&](const Chemistry& chemistry, std::size_t column, Purpose purpose, Stockroom::Wanted wanted,
                          bool may_make, std::vector<Ingredient>& into) {
        const Amount amount = Amount::mol(std::max(amounts_mol[column], 0.0));
        if (amount.mol() == 0) {
            return true;
        }
        auto shares = stockroom.shares(chemistry, amount, wanted, request.volume, taken);
        // Only bottles count as stock solutions: the table's own are concentrated articles.
        const bool there = wanted != Stockroom::Wanted::solution ||
                           (!shares.empty() && std::all_of(shares.begin(), shares.end(), [&](const Share& share) {
                               return stockroom.bottle(share.reagent) != nullptr;
                           }));
        bool make = false;
        if (!there) {
            if (!may_make) {
                return false;
            }
            shares = stockroom.shares(chemistry, amount, Stockroom::Wanted::any, request.volume, taken);
            make = true;
        }
        for (const Share& share : shares) {
            into.push_back({share.reagent, purpose, share.amount, make});
            taken.push_back(share);
        }
        return !shares.empty();
    };
    const bool as_stocks = route == Route::stocks;
    const auto wanted = as_stocks ? Stockroom::Wanted::solution : Stockroom::Wanted::any;
    const bool may_make = as_stocks;
    const std::size_t extra = candidate.forms.size();
    std::vector<Ingredient> titrant;
    for (std::size_t column = 0; column < extra; ++column) {
        if (!take(*candidate.forms[column], column, Purpose::buffer, wanted, may_make, draft.ingredients)) {
            return std::nullopt;
        }
    }
    if (candidate.titrated) {
        // A titrant of a stocks route is one more solution, measured.
        if (!take(*candidate.extra, extra, Purpose::titrant, Stockroom::Wanted::titrant, false, titrant) ||
            titrant.size() > 1) {
            return std::nullopt;
        }
    } else if (!take(*candidate.extra, extra, Purpose::buffer, wanted, may_make, draft.ingredients)) {
        return std::nullopt;
    }
    for (std::size_t s = 0; s < candidate.salts.size(); ++s) {
        const bool for_total = s < request.constraints.totals.size();
        if (!take(*candidate.salts[s], extra + 1 + s, for_total ? Purpose::ion_total : Purpose::ionic_strength,
                  Stockroom::Wanted::any, false, draft.ingredients)) {
            return std::nullopt;
        }
    }
    if (candidate.titrated && request.route != Route::stocks &&
        std::any_of(draft.ingredients.begin(), draft.ingredients.end(), [&](const Ingredient& item) {
            return item.purpose == Purpose::buffer && is_mixed_stock(stockroom, item.reagent);
        })) {
        draft.route = Route::dilution;
    }
    draft.ingredients.insert(draft.ingredients.end(), additives.begin(), additives.end());
    draft.ingredients.insert(draft.ingredients.end(), titrant.begin(), titrant.end());
    weigh_up(draft, stockroom);
    return draft;
}

std::string in_words(const Draft& draft, const Table& table) {
    std::string text;
    const auto add = [&](const std::string& part) { text += (text.empty() ? "" : ", ") + part; };
    const auto plural = [](int count, std::string_view one, std::string_view many) {
        return fmt::format("{} {}", count, count == 1 ? one : many);
    };
    if (draft.stocks_to_make > 0) {
        add(plural(draft.stocks_to_make, "stock to make first", "stocks to make first"));
    }
    if (draft.weighings > 0) {
        add(plural(draft.weighings, "weighing", "weighings"));
    }
    int measured = 0;
    for (const Ingredient& item : draft.ingredients) {
        const bool solution = is_solution(table.reagents[item.reagent]) || item.make_stock;
        measured += solution && item.purpose != Purpose::titrant ? 1 : 0;
    }
    if (measured > 0) {
        add(fmt::format("{} by volume", measured));
    }
    if (draft.titrated) {
        add(fmt::format("{} to the meter", table.reagents[draft.ingredients.back().reagent].name));
    } else {
        add("no titrant");
    }
    if (draft.expired > 0) {
        add(plural(draft.expired, "expired bottle", "expired bottles"));
    }
    return text;
}

}  // namespace carboy
