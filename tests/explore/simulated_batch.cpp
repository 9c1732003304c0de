#include "explore/simulated_batch.h"

#include <cmath>
#include <stdexcept>
#include <vector>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/notation.h"

namespace carboy::test {

namespace {

struct Item {
    std::uint16_t article;
    double amount;  ///< g or mL
    bool by_volume;
    bool titrant;
    double strength_factor = 1;
};

std::string as_line(const std::vector<Item>& items, double litres) {
    std::string line;
    for (const Item& item : items) {
        const std::string_view name = bundled_table().reagents[item.article].name;
        if (item.amount > 0) {
            line +=
                fmt::format("{:.12f} {} {}, ", item.amount * item.strength_factor, item.by_volume ? "mL" : "g", name);
        }
    }
    return line + fmt::format("to {} L", litres);
}

Preparation made(const std::vector<Item>& items, double litres, Temperature bench) {
    return read_mixture(as_line(items, litres), bundled_table(), bench);
}

/// Titrant to a pH at a temperature, by halving; amounts in the unit of the item.
void titrate(std::vector<Item>& items, double litres, Temperature bench, double ph, Temperature at) {
    double low = 0;
    double high = 0;
    for (const Item& item : items) {
        high = item.titrant ? 15 * item.amount : high;
    }
    const auto off = [&](double amount) {
        for (Item& item : items) {
            item.amount = item.titrant ? amount : item.amount;
        }
        return ph_at(made(items, litres, bench), at) - ph;
    };
    const bool falls = off(low) > 0;
    for (int i = 0; i < 60; ++i) {
        const double middle = (low + high) / 2;
        ((off(middle) > 0) == falls ? low : high) = middle;
    }
}

}  // namespace

double ph_at(const Preparation& preparation, Temperature temperature) {
    const Table& table = bundled_table();
    EquilibriumSolver solver(table, compose(table, preparation).mixture, temperature, davies_model());
    solver.solve();
    return solver.ph().value();
}

double shown(double ph) {
    return std::round(ph * 100) / 100;
}

SimulatedBatch simulate(const Plan& plan, const Mistake& mistake) {
    const Table& table = bundled_table();
    const Request& request = plan.request;
    const double litres = request.volume.L();
    std::vector<Item> items;
    for (const Weighing& item : plan.weigh) {
        items.push_back({item.reagent, item.mass.g(), false, item.purpose == Purpose::titrant});
    }
    for (const Measurement& item : plan.measure) {
        items.push_back({item.reagent, item.volume.mL(), true, item.purpose == Purpose::titrant});
    }
    const auto each_titrant = [&](auto change) {
        for (Item& item : items) {
            if (item.titrant) {
                change(item);
            }
        }
    };
    const auto each_of = [&](std::uint16_t reagent, auto change) {
        for (Item& item : items) {
            if (item.article == reagent && !item.titrant) {
                change(item);
            }
        }
    };
    double filled = litres;
    Temperature read_at = request.prepare_at;
    switch (mistake.kind) {
        case MistakeKind::meter:
            break;
        case MistakeKind::titrant_off:
            each_titrant([&](Item& item) { item.amount *= *mistake.factor; });
            break;
        case MistakeKind::titrant_forgotten:
            each_titrant([&](Item& item) { item.amount = 0; });
            break;
        case MistakeKind::titrant_other_strength:
            each_titrant([&](Item& item) {
                item.article = mistake.taken.value_or(item.article);
                item.strength_factor = mistake.taken ? 1.0 : *mistake.factor;
            });
            break;
        case MistakeKind::titrant_wrong_kind:
            each_titrant([&](Item& item) {
                item.amount *= table.reagents[item.article].strength_mol_per_L.value /
                               table.reagents[*mistake.taken].strength_mol_per_L.value;
                item.article = *mistake.taken;
            });
            break;
        case MistakeKind::other_hydrate:
        case MistakeKind::other_form:
            each_of(*mistake.reagent, [&](Item& item) { item.article = *mistake.taken; });
            break;
        case MistakeKind::forms_swapped: {
            double first = 0;
            double second = 0;
            each_of(*mistake.reagent, [&](Item& item) { first = item.amount; });
            each_of(*mistake.taken, [&](Item& item) { second = item.amount; });
            each_of(*mistake.reagent, [&](Item& item) { item.amount = second; });
            each_of(*mistake.taken, [&](Item& item) { item.amount = first; });
            break;
        }
        case MistakeKind::mass_tenfold:
        case MistakeKind::left_out:
            each_of(*mistake.reagent, [&](Item& item) { item.amount *= *mistake.factor; });
            break;
        case MistakeKind::wrong_volume:
            filled *= *mistake.factor;
            break;
        case MistakeKind::set_at_bench:
        case MistakeKind::set_at_other_temperature:
            titrate(items, litres, request.prepare_at, request.ph->value(), *mistake.temperature);
            break;
        case MistakeKind::read_at_other_temperature:
            read_at = *mistake.temperature;
            break;
        case MistakeKind::set_before_dilution: {
            const double bench_ph = ph_at(plan.preparation, request.prepare_at);
            titrate(items, litres / *mistake.factor, request.prepare_at, bench_ph, request.prepare_at);
            break;
        }
    }
    return {made(items, filled, request.prepare_at), read_at};
}

}  // namespace carboy::test
