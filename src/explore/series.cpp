#include "carboy/series.h"

#include <algorithm>
#include <cmath>
#include <optional>

#include <fmt/format.h>

#include "carboy/error.h"

#include "plan/articles.h"
#include "plan/candidates.h"
#include "plan/linear_problem.h"
#include "plan/stock.h"
#include "plan/stockroom.h"

namespace carboy {

namespace {

/// Amounts of every column, one row a pH.
struct Solution {
    const Candidate* candidate = nullptr;
    std::vector<std::vector<double>> amounts_mol;
};

/// Next of 1, 2, 2.5, 5 times a power of ten.
double round_up(double value) {
    const double decade = std::pow(10.0, std::floor(std::log10(value)));
    for (const double step : {1.0, 2.0, 2.5, 5.0}) {
        if (value <= step * decade * (1 + 1e-9)) {
            return step * decade;
        }
    }
    return 10 * decade;
}

/// Last of them below.
double round_down(double value) {
    const double decade = std::pow(10.0, std::floor(std::log10(value)));
    for (const double step : {8.0, 6.0, 5.0, 4.0, 3.0, 2.5, 2.0, 1.5}) {
        if (value >= step * decade * (1 - 1e-9)) {
            return step * decade;
        }
    }
    return decade;
}

Preparation additives_of(const Table& table, const Request& request) {
    Preparation fixed;
    fixed.filled_to = request.volume;
    fixed.filled_at = request.prepare_at;
    for (const AdditiveItem& item : request.additives) {
        if (item.concentration.unit == ConcentrationUnit::mol_per_kg) {
            throw Error(ErrorKind::input, "unusable_unit", "a series is mixed by volume: no mol/kg on its label",
                        "label", "give the additive in mol/L");
        }
        fixed.portions.push_back({item.reagent,
                                  amount_in(item.concentration, request.volume, table.reagents[item.reagent], table),
                                  std::nullopt});
    }
    return fixed;
}

std::vector<LinearProblem::Total> totals_of(const Request& request) {
    std::vector<LinearProblem::Total> totals;
    for (const BufferItem& buffer : request.buffers) {
        if (buffer.concentration.unit != ConcentrationUnit::mol_per_L) {
            throw Error(ErrorKind::input, "unusable_unit", "a series is mixed by volume: its buffer is given in mol/L",
                        "label", "write it as 50 mM");
        }
        totals.push_back({buffer.system, buffer.concentration.value * request.volume.L()});
    }
    return totals;
}

/// The linear problems of a series: one a pH, over the reagents of all candidates.
class Rows {
public:
    Rows(const Table& table, const Request& request, const std::vector<Candidate>& all, const std::vector<PH>& phs,
         const ActivityModel& model)
        : fixed_(additives_of(table, request)) {
        std::vector<std::uint16_t> reagents;
        for (const Candidate& candidate : all) {
            const auto columns = candidate.columns();
            reagents.insert(reagents.end(), columns.begin(), columns.end());
        }
        for (const PH ph : phs) {
            problems_.emplace_back(table, fixed_, totals_of(request), reagents, ph, request.use_at, model);
            if (request.ionic_strength) {
                problems_.back().ask_ionic_strength(*request.ionic_strength);
            }
        }
    }

    /// Amounts for every row; `failed` is the first pH that has none.
    std::optional<Solution> solve(const Candidate& candidate, std::size_t& failed) {
        constexpr double exact = 1e-12;
        Solution solution{&candidate, {}};
        for (std::size_t row = 0; row < problems_.size(); ++row) {
            failed = row;
            auto answer = problems_[row].solve(candidate.columns(), exact);
            if (!answer || !answer->settled) {
                return std::nullopt;
            }
            const double largest = *std::max_element(answer->amounts_mol.begin(), answer->amounts_mol.end());
            for (double& mol : answer->amounts_mol) {
                if (mol < -1e-9 * largest) {
                    return std::nullopt;
                }
                mol = std::max(mol, 0.0);
            }
            solution.amounts_mol.push_back(std::move(answer->amounts_mol));
        }
        return solution;
    }
    const Preparation& fixed() const { return fixed_; }

private:
    Preparation fixed_;
    std::vector<LinearProblem> problems_;
};

/// Two forms before a form with a strong acid or base, usual counter-ions and mild articles first.
std::vector<const Candidate*> in_order(const std::vector<Candidate>& all, const Table& table) {
    std::vector<const Candidate*> order;
    for (const Candidate& candidate : all) {
        order.push_back(&candidate);
    }
    const auto harsh = [&](const Candidate& candidate) {
        int count = 0;
        for (const std::uint16_t column : candidate.columns()) {
            count +=
                table.reagents[column].ghs.signal_word == "Danger" || table.reagents[column].rarely_stocked ? 1 : 0;
        }
        return count;
    };
    std::stable_sort(order.begin(), order.end(), [&](const Candidate* a, const Candidate* b) {
        return std::tuple(a->set, a->titrated, harsh(*a)) < std::tuple(b->set, b->titrated, harsh(*b));
    });
    return order;
}

/// The one that reaches the whole range; the Error names the pH at which the best of them fails.
Solution choose(Rows& rows, const std::vector<Candidate>& all, const std::vector<PH>& phs, const Request& request,
                const Table& table) {
    std::size_t furthest = 0;
    for (const Candidate* candidate : in_order(all, table)) {
        std::size_t failed = 0;
        if (auto solution = rows.solve(*candidate, failed)) {
            return std::move(*solution);
        }
        furthest = std::max(furthest, failed);
    }
    const std::string_view name = name_of(table, request.buffers.front().system);
    if (all.empty()) {
        throw Error(ErrorKind::no_recipe, "no_reagent", fmt::format("there are no two stocks to mix {} from", name),
                    "label", "name another counter-ion");
    }
    throw Error(ErrorKind::no_recipe, "unreachable_target",
                fmt::format("no pair of stocks of {} reaches the whole range; it fails at pH {:.2f}", name,
                            phs[furthest].value()),
                "--ph",
                "ask for a narrower range, a higher ionic strength, or name a strong acid or base as the "
                "counter-ion, as in 'glycine-NaOH'");
}

/// A stock of an article, strong enough for the row that takes most of it.
Stock stock_for(const Table& table, std::uint16_t reagent, Amount most, Amount all, const Request& request,
                double times_buffer) {
    constexpr double largest_share = 0.4;  // of the final volume, so that stocks and water have room
    const Reagent& article = table.reagents[reagent];
    const double needed = most.mol() / request.volume.L();  // mol/L in the buffer
    double strength = std::max(round_up(needed / 0.1), times_buffer);
    if (article.solubility_g_per_L.known()) {
        const double half_saturated = 0.5 * article.solubility_g_per_L.value / article.molar_mass_g_per_mol;
        strength = strength > half_saturated ? round_down(half_saturated) : strength;
    }
    if (is_solution(article)) {
        strength = std::min(strength, article.strength_mol_per_L.value);
    }
    if (needed > largest_share * strength) {
        throw Error(ErrorKind::no_recipe, "stocks_too_dilute",
                    fmt::format("{} does not dissolve well enough for a stock to mix from", article.name), "label",
                    "ask for a lower concentration");
    }
    // A tenth more than the rows take, in a flask that holds it.
    const Volume spare = Volume::litres(1.1 * all.mol() / strength);
    return stock_of(article, reagent, Molarity::mol_per_L(strength),
                    flask_for(table, spare).value_or(Volume::litres(std::ceil(spare.L()))));
}

/// The least ionic strength that every row can have: the largest that a row has by itself, rounded up.
IonicStrengthTarget least_ionic_strength(const Table& table, const Request& request, const Stockroom& stockroom,
                                         const std::vector<PH>& phs, const ActivityModel& model) {
    Request plain = request;
    plain.ionic_strength.reset();
    const auto sets = counter_ion_sets(stockroom, plain);
    const auto all = candidates(sets, plain, table);
    Rows rows(table, plain, all, phs, model);
    const Solution solution = choose(rows, all, phs, plain, table);
    double largest = 0;
    for (const auto& amounts : solution.amounts_mol) {
        Preparation preparation = rows.fixed();
        const auto columns = solution.candidate->columns();
        for (std::size_t c = 0; c < columns.size(); ++c) {
            preparation.portions.push_back({columns[c], Amount::mol(amounts[c]), std::nullopt});
        }
        const Composed composed = compose(table, preparation);
        EquilibriumSolver solver(table, composed.mixture, request.use_at, model);
        solver.solve();
        largest = std::max(largest, solver.ionic_strength().mol_per_kg() * composed.water.kg() / request.volume.L());
    }
    const double decade = std::pow(10.0, std::floor(std::log10(largest)) - 1);
    return {std::ceil(largest / decade * (1 + 1e-9)) * decade, true};
}

/// Says so when it is the ionic strength asked for that cannot be kept; the range itself is told otherwise.
void check_ionic_strength(const Table& table, const Request& request, const Stockroom& stockroom,
                          const std::vector<PH>& phs, const ActivityModel& model) {
    if (!request.ionic_strength || !request.ionic_strength->per_litre) {
        return;
    }
    const double least = least_ionic_strength(table, request, stockroom, phs, model).value_mol;
    if (least > request.ionic_strength->value_mol) {
        throw Error(
            ErrorKind::no_recipe, "unreachable_ionic_strength",
            fmt::format("the buffer alone brings up to {:.2g} mol/L of ionic strength in this range, more than the "
                        "{:.4g} mol/L asked for",
                        least, request.ionic_strength->value_mol),
            "label", fmt::format("ask for at least {:.2g} M, or for less buffer", least));
    }
}

SeriesRow verified(const Table& table, const Series& series, PH target, std::vector<Volume> volumes,
                   const ActivityModel& model) {
    Preparation preparation;
    preparation.filled_to = series.request.volume;
    preparation.filled_at = series.request.prepare_at;
    for (std::size_t s = 0; s < volumes.size(); ++s) {
        const Stock& stock = series.stocks[s];
        preparation.portions.push_back(
            {stock.reagent, Amount::mol(volumes[s].L() * stock.strength.mol_per_L()), std::nullopt});
    }
    const Mixture mixture = compose(table, preparation).mixture;
    const Prediction at_use = predict(table, mixture, series.request.use_at, model);
    SeriesRow row;
    row.target = target;
    row.volumes = std::move(volumes);
    row.ph = at_use.ph;
    row.at_bench = series.request.prepare_at == series.request.use_at
                       ? at_use.ph
                       : predict(table, mixture, series.request.prepare_at, model).ph;
    row.ionic_strength = at_use.ionic_strength;
    row.buffer_value = at_use.buffer_value;
    row.osmolality = at_use.particles;
    row.uncertainty_k2 = at_use.uncertainty.expanded_k2;
    return row;
}

}  // namespace

Series plan_series(const Table& table, const Request& request, const std::vector<PH>& phs, const ActivityModel& model) {
    if (phs.empty() || request.buffers.empty()) {
        throw Error(ErrorKind::input, "bad_amount",
                    phs.empty() ? "a series needs its pH values" : "a series needs a buffer",
                    phs.empty() ? "--ph" : "label", "as in 'carboy series \"50 mM sodium phosphate\" --ph 6:8:0.2'");
    }
    Series series;
    series.request = request;
    const Stockroom stockroom(table, request.constraints, nullptr);
    if (!request.ionic_strength) {
        series.ionic_strength_chosen = true;
        series.request.ionic_strength = least_ionic_strength(table, request, stockroom, phs, model);
    }
    series.ionic_strength = *series.request.ionic_strength;
    const auto sets = counter_ion_sets(stockroom, series.request);
    const auto all = candidates(sets, series.request, table);
    Rows rows(table, series.request, all, phs, model);
    const Solution solution = [&] {
        try {
            return choose(rows, all, phs, series.request, table);
        } catch (const Error&) {
            check_ionic_strength(table, request, stockroom, phs, model);
            throw;
        }
    }();
    series.counter_ions = sets[solution.candidate->set].choices;

    double buffer_mol_per_L = 0;
    for (const BufferItem& buffer : request.buffers) {
        buffer_mol_per_L = std::max(buffer_mol_per_L, buffer.concentration.value);
    }
    const auto columns = solution.candidate->columns();
    const auto add_stock = [&](std::uint16_t reagent, const std::vector<double>& amounts) {
        const Amount most = Amount::mol(*std::max_element(amounts.begin(), amounts.end()));
        double all_mol = 0;
        for (const double mol : amounts) {
            all_mol += mol;
        }
        series.stocks.push_back(
            stock_for(table, reagent, most, Amount::mol(all_mol), request, 5 * round_up(buffer_mol_per_L)));
    };
    std::vector<std::size_t> used;  // columns that some row takes
    for (std::size_t c = 0; c < columns.size(); ++c) {
        std::vector<double> amounts;
        for (const auto& row : solution.amounts_mol) {
            amounts.push_back(row[c]);
        }
        if (*std::max_element(amounts.begin(), amounts.end()) > 0) {
            used.push_back(c);
            add_stock(columns[c], amounts);
        }
    }
    for (const Portion& portion : rows.fixed().portions) {
        add_stock(portion.reagent, std::vector<double>(phs.size(), portion.amount->mol()));
    }
    // 0.01 mL in 100 mL, finer where a row buffers so weakly that it would show.
    constexpr double close_enough_ph = 0.004;
    for (const double fineness : {1e-4, 5e-5, 2e-5, 1e-5}) {
        series.graduation = Volume::litres(round_up(fineness * request.volume.L() * 0.999));
        series.rows.clear();
        double worst = 0;
        for (std::size_t row = 0; row < phs.size(); ++row) {
            std::vector<Volume> volumes;
            const auto add = [&](double mol) {
                const Stock& stock = series.stocks[volumes.size()];
                const double steps = std::round(mol / stock.strength.mol_per_L() / series.graduation.L());
                volumes.push_back(steps * series.graduation);
            };
            for (const std::size_t c : used) {
                add(solution.amounts_mol[row][c]);
            }
            for (const Portion& portion : rows.fixed().portions) {
                add(portion.amount->mol());
            }
            series.rows.push_back(verified(table, series, phs[row], std::move(volumes), model));
            worst = std::max(worst, std::abs(series.rows.back().ph.value() - phs[row].value()));
        }
        if (worst <= close_enough_ph) {
            break;
        }
    }
    return series;
}

}  // namespace carboy
