#include "explore/measured_curve.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy {

namespace {

// CODATA 2018.
constexpr double gas_constant_J_per_K_mol = 8.314462618;
constexpr double faraday_C_per_mol = 96485.33212;

/// Ideal electrode: mV per pH.
double ideal_slope_mV(Temperature temperature) {
    return 1000 * std::numbers::ln10 * gas_constant_J_per_K_mol * temperature.kelvin() / faraday_C_per_mol;
}

constexpr double isopotential_pH = 7.0;  // where common glass electrodes read 0 mV

Error not_in_the_mixture(const std::string& what, const std::string& help) {
    return {ErrorKind::input, "not_in_the_mixture", what, "--free", help};
}

/// Moles of each portion in the vessel, and its water: volumes add up, or the vessel was filled.
struct Content {
    std::vector<std::pair<std::uint16_t, double>> mixture;  ///< reagent, mol
    std::vector<std::pair<std::uint16_t, double>> titrant;
    double water_kg = 0;
};

void pour(std::vector<std::pair<std::uint16_t, double>>& into, const Preparation& preparation, double times,
          double water_kg) {
    for (const Portion& portion : preparation.portions) {
        const double mol = portion.amount ? portion.amount->mol() : portion.molality->mol_per_kg() * water_kg;
        into.emplace_back(portion.reagent, mol * times);
    }
}

Content fill(const Table& table, const FitProblem& problem, const Point& point) {
    Content content;
    const double litres = point.titrant.L();
    if (problem.filled_to) {
        if (std::any_of(point.mixture.portions.begin(), point.mixture.portions.end(),
                        [](const Portion& portion) { return !portion.amount; })) {
            throw Error(ErrorKind::input, "unusable_unit", "a molality does not say how much was in the vessel",
                        "--mixture", "write what was put in, as '50 mL of 0.1 M KH2PO4'");
        }
        Preparation whole = point.mixture;
        whole.filled_to = problem.filled_to;
        pour(content.mixture, point.mixture, 1, 0);
        if (problem.titrant) {
            pour(content.titrant, *problem.titrant, litres / problem.titrant->filled_to->L(), 0);
            for (const auto& [reagent, mol] : content.titrant) {
                whole.portions.push_back({reagent, Amount::mol(mol), std::nullopt});
            }
        }
        content.water_kg = compose(table, whole).water.kg();
        return content;
    }
    content.water_kg = compose(table, point.mixture).water.kg();
    pour(content.mixture, point.mixture, 1, content.water_kg);
    if (problem.titrant && litres > 0) {
        const double times = litres / problem.titrant->filled_to->L();
        const double water = compose(table, *problem.titrant).water.kg();
        pour(content.titrant, *problem.titrant, times, water);
        content.water_kg += water * times;
    }
    return content;
}

}  // namespace

void MeasuredCurve::take_point(const Table& table, const FitProblem& problem, const Point& point,
                               std::vector<std::pair<ComponentId, Share>>& shares) const {
    const Content content = fill(table, problem, point);
    const auto add = [&](std::uint16_t reagent, double mol, std::size_t free, bool titrant) {
        for (const auto& [component, count] : table.reagents[reagent].supplies) {
            shares.push_back({component, {0, mol * count / content.water_kg, free, titrant}});
        }
    };
    for (const auto& [reagent, mol] : content.mixture) {
        const FreeParameter wanted{Unknown::amount, 0, 0, reagent};
        const auto place = std::find(problem.free.begin(), problem.free.end(), wanted);
        add(reagent, mol, place == problem.free.end() ? fixed : static_cast<std::size_t>(place - problem.free.begin()),
            false);
    }
    for (const auto& [reagent, mol] : content.titrant) {
        add(reagent, mol, strength_, true);
    }
}

MeasuredCurve::MeasuredCurve(const Table& table, const FitProblem& problem, const ActivityModel& model)
    : problem_(&problem) {
    for (std::size_t i = 0; i < problem.free.size(); ++i) {
        const FreeParameter& free = problem.free[i];
        if (std::count(problem.free.begin(), problem.free.end(), free) > 1) {
            throw Error(ErrorKind::input, "free_twice", fmt::format("{} is free twice", parameter_name(free, table)),
                        "--free", "name it once");
        }
        strength_ = free.unknown == Unknown::titrant_strength ? i : strength_;
        carbonate_ = free.unknown == Unknown::carbonate ? i : carbonate_;
        offset_ = free.unknown == Unknown::offset ? i : offset_;
        slope_ = free.unknown == Unknown::slope ? i : slope_;
    }
    if ((strength_ != fixed || carbonate_ != fixed) && !problem.titrant) {
        throw not_in_the_mixture("there is no titrant whose strength or carbonate could be found",
                                 "say what was added, as --with '0.1 M NaOH'");
    }
    if ((offset_ != fixed || slope_ != fixed) && problem.reading == ReadingKind::degree) {
        throw not_in_the_mixture("a degree of dissociation was not read with an electrode",
                                 "leave offset and slope out");
    }

    std::vector<std::vector<std::pair<ComponentId, Share>>> all(problem.points.size());
    Mixture everything;
    for (std::size_t i = 0; i < problem.points.size(); ++i) {
        take_point(table, problem, problem.points[i], all[i]);
        for (const auto& [component, share] : all[i]) {
            everything.add(component, Molality::mol_per_kg(share.mol_per_kg));
        }
    }
    const System* carbonate = find_system(table, "carbonate");
    if (carbonate_ != fixed) {
        if (carbonate == nullptr) {
            throw not_in_the_mixture("the table has no system called carbonate", "leave carbonate out");
        }
        everything.add(id_of(table, *carbonate), Molality{});
    }
    solver_.emplace(table, everything, problem.at, model);
    const auto part_of = [&](ComponentId component) {
        std::size_t part = 0;
        while (part < solver_->part_count() && solver_->component(part) != component) {
            ++part;
        }
        return part;
    };
    for (const auto& shares : all) {
        auto& point = points_.emplace_back();
        for (auto [component, share] : shares) {
            share.part = part_of(component);
            point.push_back(share);
        }
    }
    totals_.resize(solver_->part_count());
    carbonate_part_ = carbonate_ == fixed ? 0 : part_of(id_of(table, *carbonate));

    constexpr double relative_step = 1e-4;
    for (std::size_t i = 0; i < problem.free.size(); ++i) {
        const FreeParameter& free = problem.free[i];
        double from = 1;
        double step = relative_step;
        if (free.unknown == Unknown::pK) {
            const std::size_t part = part_of({ComponentKind::system, free.system});
            if (part == solver_->part_count()) {
                throw not_in_the_mixture(
                    fmt::format("there is no {} in the mixture or the titrant", table.systems[free.system].name),
                    "free a pK of something that is in it");
            }
            from = solver_->pK(part, free.step);
            std::size_t species = 0;
            while (solver_->species(species).part != part) {
                ++species;
            }
            pKs_.push_back({i, part, free.step, from, species + free.step});
        } else if (free.unknown == Unknown::amount) {
            const bool there = std::any_of(points_.begin(), points_.end(), [&](const auto& shares) {
                return std::any_of(shares.begin(), shares.end(), [&](const Share& share) { return share.free == i; });
            });
            if (!there) {
                throw not_in_the_mixture(
                    fmt::format("there is no {} in the mixture", table.reagents[free.reagent].name),
                    "free an amount of a reagent as the mixture line names it");
            }
        } else if (free.unknown == Unknown::carbonate) {
            from = 0.01;  // common practice, no source: an old bottle has a percent or two
        } else if (free.unknown == Unknown::offset) {
            from = 0;
            step = problem.reading == ReadingKind::millivolt ? 1e-2 : relative_step;
        }
        start_.push_back(from);
        steps_.push_back(step);
    }
}

double MeasuredCurve::reading_at(const std::vector<double>& parameters) const {
    if (problem_->reading == ReadingKind::degree) {
        const FreePK& pK = pKs_.front();
        const double acid = solver_->species(pK.acid_species).molality.mol_per_kg();
        const double base = solver_->species(pK.acid_species + 1).molality.mol_per_kg();
        return base / (acid + base);
    }
    const double offset = offset_ == fixed ? 0.0 : parameters[offset_];
    const double slope = slope_ == fixed ? 1.0 : parameters[slope_];
    const double beyond = solver_->ph().value() - isopotential_pH;
    return problem_->reading == ReadingKind::millivolt ? offset - slope * ideal_slope_mV(problem_->at) * beyond
                                                       : isopotential_pH + offset + slope * beyond;
}

void MeasuredCurve::evaluate(const std::vector<double>& parameters, std::vector<double>& readings) {
    for (const FreePK& pK : pKs_) {
        solver_->shift_pK(pK.part, pK.step, parameters[pK.parameter] - solver_->pK(pK.part, pK.step));
    }
    highest_ionic_strength_ = 0;
    for (std::size_t i = 0; i < points_.size(); ++i) {
        std::fill(totals_.begin(), totals_.end(), 0.0);
        double titrant = 0;
        for (const Share& share : points_[i]) {
            const double mol_per_kg = share.mol_per_kg * (share.free == fixed ? 1.0 : parameters[share.free]);
            totals_[share.part] += mol_per_kg;
            titrant += share.titrant ? mol_per_kg : 0.0;
        }
        if (carbonate_ != fixed) {
            totals_[carbonate_part_] += titrant * parameters[carbonate_];
        }
        if (std::any_of(totals_.begin(), totals_.end(), [](double total) { return !(total >= 0 && total < 20); })) {
            readings[i] = std::numeric_limits<double>::quiet_NaN();
            continue;
        }
        for (std::size_t part = 0; part < totals_.size(); ++part) {
            solver_->set_total(part, Molality::mol_per_kg(totals_[part]));
        }
        solver_->solve();
        highest_ionic_strength_ = std::max(highest_ionic_strength_, solver_->ionic_strength().mol_per_kg());
        readings[i] = reading_at(parameters);
    }
}

}  // namespace carboy
