#include "plan/portioning.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include <fmt/format.h>

#include "carboy/error.h"

#include "plan/articles.h"
#include "plan/stock.h"

namespace carboy {

namespace {

/// Nearest multiple of a graduation, at least one.
double to_graduation(double value, double graduation) {
    return std::max(std::round(value / graduation), 1.0) * graduation;
}

/// The vessel on the bench that a volume is measured with: the finest that holds it.
std::optional<std::uint16_t> vessel_for(const Table& table, const Request& request, Volume volume) {
    if (request.measure_with) {
        return request.measure_with;
    }
    std::optional<std::uint16_t> best;
    for (std::size_t i = 0; i < table.vessels.size(); ++i) {
        const Vessel& vessel = table.vessels[i];
        if (vessel.kind != VesselKind::scale || !vessel.at_hand || vessel.capacity_mL.value < volume.mL()) {
            continue;
        }
        if (!best || vessel.reads_to_mL.value < table.vessels[*best].reads_to_mL.value) {
            best = static_cast<std::uint16_t>(i);
        }
    }
    return best;
}

void add_measurement(Plan& plan, const Stockroom& stockroom, Measurement item) {
    const Table& table = stockroom.table();
    item.bottle = item.stock ? nullptr : stockroom.bottle(item.reagent);
    const bool rounds = plan.request.balance || plan.request.measure_with;
    if (rounds && !item.vessel) {
        item.vessel = vessel_for(table, plan.request, item.volume);
    }
    if (rounds && item.vessel && table.vessels[*item.vessel].kind == VesselKind::scale) {
        const double fine = table.vessels[*item.vessel].reads_to_mL.value;
        const Volume rounded = Volume::millilitres(to_graduation(item.volume.mL(), fine));
        item.amount = item.amount * (rounded / item.volume);
        item.volume = rounded;
    }
    plan.preparation.portions.push_back({item.reagent, item.amount, std::nullopt});
    plan.measure.push_back(item);
}

/// A flask and a pipette for a stock: the smallest flask in which what is weighed is enough for the balance while the
/// pipette takes no more than a tenth of the final volume.
struct Aliquot {
    double flask_mL = 0;
    double pipette_mL = 0;
    std::uint16_t pipette = 0;
};
std::optional<Aliquot> aliquot_for(const Table& table, const Plan& plan, const Reagent& article, Mass needed) {
    constexpr double largest_share = 0.1;
    std::optional<Aliquot> best;
    for (const Vessel& flask : table.vessels) {
        for (std::size_t p = 0; p < table.vessels.size(); ++p) {
            const Vessel& pipette = table.vessels[p];
            if (flask.kind != VesselKind::flask || pipette.kind != VesselKind::pipette || !flask.at_hand ||
                !pipette.at_hand || pipette.capacity_mL.value > largest_share * plan.request.volume.mL() ||
                pipette.capacity_mL.value > 0.5 * flask.capacity_mL.value) {
                continue;
            }
            const double ratio = flask.capacity_mL.value / pipette.capacity_mL.value;
            const Mass weighed = ratio * needed;
            const bool dissolves = !article.solubility_g_per_L.known() ||
                                   weighed.g() < 0.5 * article.solubility_g_per_L.value * flask.capacity_mL.value / 1e3;
            if (weighed < plan.request.balance->minimum || !dissolves) {
                continue;
            }
            const bool smaller =
                !best || flask.capacity_mL.value < best->flask_mL ||
                (flask.capacity_mL.value == best->flask_mL && pipette.capacity_mL.value > best->pipette_mL);
            if (smaller) {
                best = {flask.capacity_mL.value, pipette.capacity_mL.value, static_cast<std::uint16_t>(p)};
            }
        }
    }
    return best;
}

double round_mass(const Plan& plan, double grams) {
    return plan.request.balance ? to_graduation(grams, plan.request.balance->readability.g()) : grams;
}

void weigh(Plan& plan, const Stockroom& stockroom, const Ingredient& item) {
    const Reagent& article = stockroom.table().reagents[item.reagent];
    Weighing weighing{item.reagent, item.purpose, item.amount, mass_of(article, item.amount),
                      stockroom.bottle(item.reagent)};
    if (plan.request.balance) {
        const double rounded = round_mass(plan, weighing.mass.g());
        weighing.amount = weighing.amount * (rounded / weighing.mass.g());
        weighing.mass = Mass::grams(rounded);
    }
    plan.preparation.portions.push_back({item.reagent, weighing.amount, std::nullopt});
    // The salt that fills up the ionic strength may be one of the label's additives: it is weighed once.
    const auto same = std::find_if(plan.weigh.begin(), plan.weigh.end(), [&](const Weighing& other) {
        return other.reagent == item.reagent && other.purpose != Purpose::titrant && item.purpose != Purpose::titrant;
    });
    if (same != plan.weigh.end()) {
        same->amount += weighing.amount;
        same->mass += weighing.mass;
    } else {
        plan.weigh.push_back(weighing);
    }
}

/// A stock that is made for this recipe, and the measurement of it.
void from_stock(Plan& plan, const Stockroom& stockroom, const Ingredient& item, Volume taken, Volume volume,
                std::optional<std::uint16_t> pipette) {
    const Reagent& article = stockroom.table().reagents[item.reagent];
    const Molarity strength = Molarity::mol_per_L(item.amount.mol() / taken.L());
    Stock stock = stock_of(article, item.reagent, strength, volume);
    stock.bottle = stockroom.bottle(item.reagent);
    if (!is_solution(article)) {
        const Mass exact = stock.mass;
        stock.mass = Mass::grams(round_mass(plan, exact.g()));
        stock.amount = stock.amount * (stock.mass / exact);
    }
    stock.strength = Molarity::mol_per_L(stock.amount.mol() / volume.L());
    plan.stocks.push_back(stock);
    add_measurement(plan, stockroom,
                    {item.reagent, item.purpose, Amount::mol(stock.strength.mol_per_L() * taken.L()), stock.strength,
                     taken, nullptr, plan.stocks.size() - 1, pipette});
}

/// Common practice, no source: stocks ten times as strong as the buffer, in a flask that holds a little more than is
/// taken; weaker where the solid would not dissolve.
void make_route_stock(Plan& plan, const Stockroom& stockroom, const Ingredient& item) {
    constexpr double times = 10;
    constexpr double spare = 1.05;
    const Table& table = stockroom.table();
    const Reagent& article = table.reagents[item.reagent];
    double buffer_mol_per_L = 0;
    for (const BufferItem& buffer : plan.request.buffers) {
        const double count = count_of(article, buffer.system);
        buffer_mol_per_L =
            count > 0 ? std::max(buffer_mol_per_L, buffer.concentration.value / count) : buffer_mol_per_L;
    }
    double strength = times * buffer_mol_per_L;
    if (article.solubility_g_per_L.known()) {
        strength = std::min(strength, 0.5 * article.solubility_g_per_L.value / article.molar_mass_g_per_mol);
    }
    if (is_solution(article)) {
        strength = std::min(strength, article.strength_mol_per_L.value);
    }
    const Volume taken = Volume::litres(item.amount.mol() / strength);
    const Volume least = spare * taken;
    from_stock(plan, stockroom, item, taken,
               flask_for(table, least).value_or(Volume::millilitres(std::ceil(least.mL()))), std::nullopt);
}

/// Too little for the balance: taken from a stock of which more is weighed.
bool make_intermediate(Plan& plan, const Stockroom& stockroom, const Ingredient& item) {
    const Table& table = stockroom.table();
    const Reagent& article = table.reagents[item.reagent];
    const Mass needed = mass_of(article, item.amount);
    if (!plan.request.balance || needed >= plan.request.balance->minimum || item.purpose == Purpose::titrant) {
        return false;
    }
    const auto aliquot = aliquot_for(table, plan, article, needed);
    if (!aliquot) {
        plan.warnings.push_back(
            {"below_minimum_mass",
             fmt::format("{:.3g} mg of {} is less than the balance weighs well ({:g} mg), and no flask and pipette of "
                         "the table lead to a stock for it. Make a larger batch, or use a finer balance.",
                         needed.g() * 1e3, article.name, plan.request.balance->minimum.g() * 1e3)});
        return false;
    }
    from_stock(plan, stockroom, item, Volume::millilitres(aliquot->pipette_mL), Volume::millilitres(aliquot->flask_mL),
               aliquot->pipette);
    return true;
}

}  // namespace

void portion(Plan& plan, const Draft& draft, const Stockroom& stockroom) {
    const Table& table = stockroom.table();
    for (const Ingredient& item : draft.ingredients) {
        if (!(item.amount.mol() > 0)) {
            continue;
        }
        const Reagent& article = table.reagents[item.reagent];
        if (item.make_stock) {
            make_route_stock(plan, stockroom, item);
        } else if (is_solution(article)) {
            const Molarity strength = Molarity::mol_per_L(article.strength_mol_per_L.value);
            add_measurement(
                plan, stockroom,
                {item.reagent, item.purpose, item.amount, strength,
                 Volume::litres(item.amount.mol() / strength.mol_per_L()), nullptr, std::nullopt, std::nullopt});
        } else if (!make_intermediate(plan, stockroom, item)) {
            weigh(plan, stockroom, item);
        }
    }
}

}  // namespace carboy
