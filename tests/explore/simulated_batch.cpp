#include "explore/simulated_batch.h"

#include <cmath>
#include <stdexcept>
#include <vector>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/notation.h"
#include "carboy/request_json.h"

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

const std::vector<Job>& jobs() {
    static const std::vector<Job> all{{"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C", 22},
                                      {"50 mM Tris-HCl, pH 8.0 at 37 C", 25},
                                      {"100 mM sodium phosphate, pH 7.2", 25},
                                      {"100 mM sodium phosphate, pH 7.0", 25, Route::salts},
                                      {"20 mM HEPES-KOH, 100 mM KCl, pH 7.4 at 37 C", 22},
                                      {"0.2 M sodium acetate, pH 5.0", 25},
                                      {"50 mM sodium citrate, pH 5.5", 25},
                                      {"100 mM glycine-HCl, pH 2.8", 25},
                                      {"50 mM sodium borate, pH 9.0", 25},
                                      {"50 mM MES-NaOH, pH 6.1 at 25 C", 20},
                                      {"20 mM MOPS-NaOH, pH 7.2 at 4 C", 25},
                                      {"50 mM potassium phosphate, pH 7.0 at 37 C", 25},
                                      {"20 mM imidazole-HCl, 200 mM NaCl, pH 7.0", 25},
                                      {"100 mM sodium bicarbonate, pH 9.5", 25}};
    return all;
}

Request request(const Job& job, double litres) {
    Request made = request_from_label(job.label, bundled_table());
    made.volume = Volume::litres(litres);
    made.prepare_at = Temperature::celsius(job.bench_C);
    made.route = job.route;
    return made;
}

Titrant titrant(const char* text) {
    return read_titrant(text, bundled_table());
}

Adjustment adjusted(const Plan& plan, double reading, const Titrant& with, std::optional<Volume> not_filled) {
    OffBatch batch;
    batch.reading = PH(reading);
    batch.not_filled = not_filled;
    return adjust(bundled_table(), plan, batch, with, davies_model());
}

Titrant needed(const Plan& plan, double reading) {
    const double expected = ph_at(plan.preparation, plan.request.prepare_at);
    return titrant(reading > expected ? "1 M HCl" : "1 M NaOH");
}

Preparation after(const Preparation& before, const Correction& correction, Amount amount, double litres) {
    Preparation then = before;
    then.portions.push_back({correction.titrant.reagent, amount, std::nullopt});
    then.filled_to = Volume::litres(litres + amount.mol() / correction.titrant.strength->mol_per_L());
    return then;
}

}  // namespace carboy::test
