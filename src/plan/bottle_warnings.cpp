#include "plan/bottle_warnings.h"

#include <algorithm>
#include <vector>

#include <fmt/format.h>

namespace carboy {

namespace {

std::vector<const Bottle*> bottles_used(const Plan& plan) {
    std::vector<const Bottle*> used;
    const auto add = [&](const Bottle* bottle) {
        if (bottle != nullptr && std::find(used.begin(), used.end(), bottle) == used.end()) {
            used.push_back(bottle);
        }
    };
    for (const Weighing& item : plan.weigh) {
        add(item.bottle);
    }
    for (const Measurement& item : plan.measure) {
        add(item.bottle);
    }
    for (const Stock& stock : plan.stocks) {
        add(stock.bottle);
    }
    return used;
}

}  // namespace

Amount taken_from(const Plan& plan, const Bottle& bottle) {
    Amount taken;
    const auto add = [&](const auto& items) {
        for (const auto& item : items) {
            if (item.bottle == &bottle) {
                taken += item.amount;
            }
        }
    };
    add(plan.weigh);
    add(plan.measure);
    add(plan.stocks);
    return taken;
}

void warn_of_bottles(Plan& plan, const Stockroom& stockroom) {
    const Shelf* shelf = stockroom.shelf();
    if (shelf == nullptr) {
        return;
    }
    std::string unjudged;
    for (const Bottle* bottle : bottles_used(plan)) {
        const std::string_view name = stockroom.table().reagents[bottle->reagent].name;
        if (shelf->expired(*bottle)) {
            plan.warnings.push_back(
                {"bottle_expired", fmt::format("{} ({}) expired on {}, and nothing else on the shelf would do. Check "
                                               "it, or replace it.",
                                               bottle->id, name, bottle->expires->text())});
        } else if (bottle->expires && !shelf->today) {
            unjudged += unjudged.empty() ? bottle->id : ", " + bottle->id;
        }
        constexpr double doubtful = 0.1;
        const bool sets_ph = std::any_of(plan.measure.begin(), plan.measure.end(), [&](const Measurement& item) {
            return item.bottle == bottle && item.purpose == Purpose::buffer;
        });
        if (bottle->doubt > doubtful && sets_ph) {
            plan.warnings.push_back(
                {"stock_uncertain",
                 fmt::format(
                     "What is in {} ({}) follows from its label, whose pH is uncertain by {:.1f} there. Let the "
                     "meter decide after dilution.",
                     bottle->id, name, bottle->doubt)});
        }
        const auto left = shelf->left(*bottle);
        constexpr double nearly_all = 0.9;
        if (left && left->mol() > 0 && taken_from(plan, *bottle) > nearly_all * *left) {
            plan.warnings.push_back({"bottle_nearly_empty",
                                     fmt::format("{} ({}) will be all but empty after this: {:.0f} % of what is left "
                                                 "goes in.",
                                                 bottle->id, name, 100 * (taken_from(plan, *bottle) / *left))});
        }
    }
    if (!unjudged.empty()) {
        plan.warnings.push_back(
            {"expiry_not_judged",
             fmt::format("Whether {} is past its date was not judged: no date was given (--on).", unjudged)});
    }
}

}  // namespace carboy
