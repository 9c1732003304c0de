#pragma once

#include <optional>
#include <vector>

#include "carboy/plan.h"

#include "plan/candidates.h"

namespace carboy {

/// An ingredient before it is decided how it is weighed or measured.
struct Ingredient {
    std::uint16_t reagent = 0;
    Purpose purpose = Purpose::buffer;
    Amount amount;
    bool make_stock = false;  ///< a stock solution of it is made first
};

/// A way to a recipe: the articles taken for the columns of a candidate, and what they cost in work.
struct Draft {
    Route route = Route::titrated;
    std::vector<Ingredient> ingredients;  ///< the titrant last
    std::vector<CounterIonChoice> counter_ions;

    // What it is ranked by, lower is better, the first that differs decides.
    std::size_t set = 0;  ///< how unusual the counter-ions are
    int rare = 0;         ///< articles few benches keep
    int strangers = 0;    ///< buffers not made from the article that the label names
    int expired = 0;      ///< bottles past their date
    int work = 0;         ///< handling, see draft.cpp
    int harsh = 0;        ///< articles whose label says Danger
    double titrant_mol = 0;
    double total_mol = 0;

    int weighings = 0;
    int stocks_to_make = 0;
    bool titrated = false;
};

bool better(const Draft& a, const Draft& b);

/// Puts articles to the amounts of a candidate, one per column, for one route. Nothing when the shelf has too little or
/// no solution where the route wants one.
std::optional<Draft> draft_of(const Stockroom& stockroom, const Request& request, const Candidate& candidate,
                              const std::vector<double>& amounts_mol, const std::vector<Ingredient>& additives,
                              Route route);

/// Articles for the additives; nothing when the shelf is short of one.
std::optional<std::vector<Ingredient>> additive_ingredients(const Stockroom& stockroom, const Request& request,
                                                            const std::vector<Share>& additives);

/// Counts what the ingredients cost in work; fills in the figures of a draft that its ingredients decide.
void weigh_up(Draft& draft, const Stockroom& stockroom);

/// `1 weighing, then hydrochloric acid to the meter`: how a draft goes, for the table of ways.
std::string in_words(const Draft& draft, const Table& table);

}  // namespace carboy
