#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>
#include <string>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/error.h"

// Two unknowns, x = ln a(H+) and the ionic strength I, two equations: charges sum to zero, and I is that of the
// composition. Both derivatives are sums over the species, so a joint Newton iteration costs little more than the
// residuals. It starts from a closed-form estimate and is safeguarded by a nested bracketed search.

namespace carboy {

namespace {

constexpr std::size_t hydrogen = 0;
constexpr std::size_t hydroxide = 1;
constexpr std::size_t first_part = 2;

constexpr double ph_tolerance = 1e-12;
constexpr double charge_tolerance = 1e-14;
constexpr double ionic_strength_tolerance = 1e-13;

/// exp(x) to within x^5/720 of it, and positive for every x: a Newton step corrects itself, so it need not be exact.
double near_exp(double x) {
    const double even = 12.0 + x * x;
    return (even + 6.0 * x) / (even - 6.0 * x);
}

double ten_to(double exponent) {
    return std::exp(exponent * std::numbers::ln10);
}

}  // namespace

EquilibriumSolver::EquilibriumSolver(const Table& table, const Mixture& mixture, Temperature temperature,
                                     const ActivityModel& model)
    : water_(water_at(temperature)), model_(&model) {
    const auto add_species = [this](std::string_view formula, std::int8_t charge, double dissociation) {
        formula_.push_back(formula);
        charge_.push_back(charge);
        highest_charge_ = std::max(highest_charge_, std::abs(static_cast<int>(charge)));
        dissociation_.push_back(dissociation);
    };
    add_species("H+", 1, 0);
    add_species("OH-", -1, 0);
    for (const auto& [component, total] : mixture.parts()) {
        const std::size_t first = charge_.size();
        if (component.kind == ComponentKind::spectator) {
            const Spectator& spectator = table.spectators[component.index];
            add_species(spectator.formula, spectator.charge, 0);
        } else {
            const System& system = table.systems[component.index];
            ++system_count_;  // parts are sorted: systems stand before spectators
            system_species_end_ = charge_.size() + system.species.size();
            add_species(system.species[0].formula, system.species[0].charge, 0);
            for (std::size_t step = 0; step < system.steps.size(); ++step) {
                const Species& base = system.species[step + 1];
                const double pK = thermodynamic_pK(system, step, temperature);
                steps_.push_back({parts_.size(), charge_.size(), pK});
                add_species(base.formula, base.charge, ten_to(-pK));
            }
        }
        parts_.push_back({component, first, charge_.size() - first, total.mol_per_kg()});
    }
    gamma_.assign(charge_.size(), 1.0);
    log_slope_.assign(charge_.size(), 0.0);
    ratio_.assign(charge_.size(), 0.0);
    molality_.assign(charge_.size(), 0.0);
    ion_product_ = ten_to(-water_.pKw);
    line_up_steps();
}

void EquilibriumSolver::line_up_steps() {
    std::stable_sort(steps_.begin(), steps_.end(), [](const auto& a, const auto& b) { return a.pK < b.pK; });
}

void EquilibriumSolver::evaluate_activities() {
    Activities activities{gamma_, log_slope_, 1.0};
    model_->evaluate(water_, {charge_, molality_, formula_, ionic_strength_, highest_charge_}, activities);
    water_activity_ = activities.water_activity;
    const double* gamma = gamma_.data();
    const double* dissociation = dissociation_.data();
    double* ratio = ratio_.data();
    for (std::size_t i = first_part; i < system_species_end_; ++i) {
        ratio[i] = dissociation[i] * gamma[i - 1] / gamma[i];
    }
}

/// Adds one system's species to the balance. Charges are counted from that of the dominant species: far from its pK a
/// system's deviation from a whole charge is many orders smaller than the charge, and it decides the pH.
void EquilibriumSolver::add_system(const Part& part, double inverse_activity) {
    double* weight = &molality_[part.first];
    const double* ratio = &ratio_[part.first];
    const double* log_slope = &log_slope_[part.first];
    weight[0] = 1.0;
    double sum = 1.0;
    double largest = 1.0;
    std::size_t dominant = 0;
    for (std::size_t j = 1; j < part.count; ++j) {
        weight[j] = weight[j - 1] * (ratio[j] * inverse_activity);
        sum += weight[j];
        if (weight[j] > largest) {
            largest = weight[j];
            dominant = j;
        }
    }
    const double scale = part.total / sum;
    const double z_dominant = charge_[part.first + dominant];
    double m1 = 0, m2 = 0, m3 = 0;  // moments of u = z - z_dominant, mol/kg
    double s0 = 0, s1 = 0, s2 = 0;  // moments of the slopes of ln gamma with u
    auto u = static_cast<double>(dominant);
    for (std::size_t j = 0; j < part.count; ++j) {
        const double m = weight[j] * scale;
        weight[j] = m;
        const double mu = m * u;
        const double muu = mu * u;
        const double slope = log_slope[j];
        m1 += mu;
        m2 += muu;
        m3 += muu * u;
        s0 += m * slope;
        s1 += mu * slope;
        s2 += muu * slope;
        u -= 1.0;
    }
    // dm/dx = m (u - mean u) and dm/dI = m (mean slope - slope), both at constant total.
    const double inverse_total = part.total > 0 ? 1.0 / part.total : 0.0;
    const double variance = m2 - m1 * m1 * inverse_total;
    const double skew = m3 - m1 * m2 * inverse_total;
    const double slope_u = s1 - s0 * m1 * inverse_total;
    const double slope_uu = s2 - s0 * m2 * inverse_total;
    balance_.charge += part.total * z_dominant;
    balance_.ionic_strength += 0.5 * (part.total * z_dominant * z_dominant + 2.0 * z_dominant * m1 + m2);
    balance_.charge_by_x += variance;
    balance_.charge_by_I -= slope_u;
    balance_.ionic_strength_by_x += 0.5 * (2.0 * z_dominant * variance + skew);
    balance_.ionic_strength_by_I -= 0.5 * (2.0 * z_dominant * slope_u + slope_uu);
    deviation_ += m1;
}

void EquilibriumSolver::evaluate_balance() {
    const double inverse_activity = 1.0 / activity_H_;
    const double h = activity_H_ / gamma_[hydrogen];
    const double oh = ion_product_ * water_activity_ * inverse_activity / gamma_[hydroxide];
    molality_[hydrogen] = h;
    molality_[hydroxide] = oh;

    balance_ = spectators_;
    deviation_ = 0;
    for (std::size_t part = 0; part < system_count_; ++part) {
        add_system(parts_[part], inverse_activity);
    }
    // Whole charges first: they cancel to the last bits, and what is left meets the small terms undamaged.
    balance_.charge += deviation_;
    balance_.charge += h - oh;
    balance_.ionic_strength += 0.5 * (h + oh);
    balance_.charge_by_x += h + oh;
    balance_.charge_by_I += oh * log_slope_[hydroxide] - h * log_slope_[hydrogen];
    balance_.ionic_strength_by_x += 0.5 * (h - oh);
    balance_.ionic_strength_by_I -= 0.5 * (h * log_slope_[hydrogen] + oh * log_slope_[hydroxide]);
}

/// What does not change during a solve: spectators carry their charge through every trial state.
void EquilibriumSolver::take_totals() {
    spectators_ = {};
    for (std::size_t i = system_count_; i < parts_.size(); ++i) {
        const Part& part = parts_[i];
        const double z = charge_[part.first];
        molality_[part.first] = part.total;
        spectators_.charge += z * part.total;
        spectators_.ionic_strength += 0.5 * z * z * part.total;
    }
}

double EquilibriumSolver::ions() const {
    double sum = 0;
    for (std::size_t i = 0; i < charge_.size(); ++i) {
        sum += std::abs(static_cast<int>(charge_[i])) * molality_[i];
    }
    return sum;
}

/// Lines all steps up by pK and lets them give up their protons one after the other until the charges cross zero. Only
/// totals and the order of the steps matter, so this also estimates the ionic strength before any constant is needed.
EquilibriumSolver::Crossing EquilibriumSolver::find_crossing() const {
    Crossing crossing;
    crossing.charge = spectators_.charge;
    double sum_zz = 2.0 * spectators_.ionic_strength;
    for (std::size_t part = 0; part < system_count_; ++part) {
        const double z = charge_[parts_[part].first];
        crossing.charge += parts_[part].total * z;
        sum_zz += parts_[part].total * z * z;
    }
    for (; crossing.step < steps_.size(); ++crossing.step) {
        const StepPlace& step = steps_[crossing.step];
        const double total = parts_[step.part].total;
        const double z = charge_[step.species];  // of the base: the acid's square is (z + 1)^2
        if (crossing.charge < total) {
            sum_zz -= std::max(crossing.charge, 0.0) * (2.0 * z + 1.0);
            break;
        }
        sum_zz -= total * (2.0 * z + 1.0);
        crossing.charge -= total;
    }
    crossing.ionic_strength =
        0.5 * (sum_zz + (crossing.step == steps_.size() || crossing.charge < 0 ? std::abs(crossing.charge) : 0));
    return crossing;
}

/// Well inside a step, that step alone tells the pH. Near the boundary after step k the balance reads
/// a (1 + sum_{j<=k} n_j/K_j) + r - (Kw + sum_{j>k} n_j K_j) / a = 0 with r the charge left there: a quadratic in
/// a(H+).
double EquilibriumSolver::first_guess(const Crossing& crossing) const {
    constexpr double clearly_partial = 0.02;
    double rest = crossing.charge;
    std::size_t boundary = crossing.step;
    if (crossing.step < steps_.size() && rest > 0) {
        const StepPlace& step = steps_[crossing.step];
        const double total = parts_[step.part].total;
        const double fraction = rest / total;
        if (fraction > clearly_partial && fraction < 1.0 - clearly_partial) {
            return ratio_[step.species] * (1.0 - fraction) / fraction;
        }
        if (fraction >= 0.5) {
            rest -= total;
            ++boundary;
        }
    }
    double over_a = ion_product_;
    double times_a = 1;
    for (std::size_t i = 0; i < steps_.size(); ++i) {
        const double total = parts_[steps_[i].part].total;
        const double constant = ratio_[steps_[i].species];
        if (i < boundary) {
            times_a += total / constant;
        } else {
            over_a += total * constant;
        }
    }
    const double root = std::sqrt(rest * rest + 4.0 * times_a * over_a);
    return rest > 0 ? 2.0 * over_a / (rest + root) : (root - rest) / (2.0 * times_a);
}

bool EquilibriumSolver::converge_jointly(int most_iterations) {
    constexpr double longest_step = 3.0;  // in ln a: a little over one pH unit
    for (int iteration = 0; iteration < most_iterations; ++iteration) {
        evaluate_balance();
        const Balance& b = balance_;
        const double mismatch = b.ionic_strength - ionic_strength_;
        const double feedback = 1.0 - b.ionic_strength_by_I;
        const double determinant = feedback * b.charge_by_x + b.ionic_strength_by_x * b.charge_by_I;
        double dx = 0;
        double dI = 0;
        if (determinant > 0.05 * b.charge_by_x) {
            const double inverse = 1.0 / determinant;
            dx = -(b.charge * feedback + mismatch * b.charge_by_I) * inverse;
            dI = (mismatch * b.charge_by_x - b.ionic_strength_by_x * b.charge) * inverse;
        } else {
            // Far outside the range of the activity model its feedback can run away; plain substitution does not.
            dx = -b.charge / b.charge_by_x;
            dI = mismatch;
        }
        if (std::abs(dx) < ph_tolerance && std::abs(dI) <= ionic_strength_tolerance * ionic_strength_ &&
            std::abs(b.charge) <= charge_tolerance * ions()) {
            return true;
        }
        activity_H_ *= near_exp(std::clamp(dx, -longest_step, longest_step));
        ionic_strength_ = std::clamp(ionic_strength_ + dI, 0.2 * ionic_strength_, 5.0 * ionic_strength_ + 1e-7);
        evaluate_activities();
    }
    return false;
}

/// Root of the charge balance in x alone. The balance rises strictly with x, so the bracket only shrinks.
void EquilibriumSolver::bracket_at_fixed_activities() {
    constexpr double rounding = 1e-15;
    double low = -40.0 * std::numbers::ln10;
    double high = 20.0 * std::numbers::ln10;
    double x = std::clamp(std::log(activity_H_), low, high);
    for (int iteration = 0; iteration < 400 && high - low > rounding * std::abs(low); ++iteration) {
        activity_H_ = std::exp(x);
        evaluate_balance();
        (balance_.charge > 0 ? high : low) = x;
        const double newton = x - balance_.charge / balance_.charge_by_x;
        const double next = newton > low && newton < high && iteration % 3 != 2 ? newton : 0.5 * (low + high);
        if (std::abs(next - x) < rounding * std::abs(low)) {
            break;
        }
        x = next;
    }
}

/// Bisection on I around the bracketed search for x: slow, and it always ends at a self-consistent state.
void EquilibriumSolver::converge_nested() {
    const auto mismatch_at = [this](double ionic_strength) {
        ionic_strength_ = ionic_strength;
        evaluate_activities();
        bracket_at_fixed_activities();
        return balance_.ionic_strength - ionic_strength;
    };
    double low = 0;
    double high = 1e-6;
    while (mismatch_at(high) > 0 && high < 1e6) {
        low = high;
        high *= 4;
    }
    for (int iteration = 0; iteration < 200 && high - low > 1e-15 * high; ++iteration) {
        const double middle = 0.5 * (low + high);
        (mismatch_at(middle) > 0 ? low : high) = middle;
    }
}

void EquilibriumSolver::solve() {
    take_totals();
    const Crossing crossing = find_crossing();
    ionic_strength_ = crossing.ionic_strength + 1e-7;  // what water itself brings
    evaluate_activities();
    activity_H_ = first_guess(crossing);
    if (converge_jointly(50)) {
        return;
    }
    converge_nested();
    if (converge_jointly(20)) {
        return;
    }
    std::string amounts;
    for (const Part& part : parts_) {
        amounts += fmt::format(" {}:{:.17g}", formula_[part.first], part.total);
    }
    throw Error(
        ErrorKind::defect, "not_converged",
        fmt::format("the equilibrium of{} mol/kg at {} °C did not converge", amounts, water_.temperature.celsius()), {},
        "please report this line");
}

void EquilibriumSolver::hold_at(PH ph) {
    take_totals();
    activity_H_ = ten_to(-ph.value());
    if (!(ionic_strength_ > 0)) {
        ionic_strength_ = 1e-7;
    }
    for (int iteration = 0; iteration < 200; ++iteration) {
        evaluate_activities();
        evaluate_balance();
        const double mismatch = balance_.ionic_strength - ionic_strength_;
        if (std::abs(mismatch) <= ionic_strength_tolerance * ionic_strength_) {
            return;
        }
        const double feedback = 1.0 - balance_.ionic_strength_by_I;
        const double step = iteration < 50 && feedback > 0.3 ? mismatch / feedback : 0.5 * mismatch;
        ionic_strength_ = std::max(ionic_strength_ + step, 0.2 * ionic_strength_);
    }
    throw Error(ErrorKind::defect, "not_converged",
                fmt::format("the ionic strength at pH {} did not converge", ph.value()), {}, "please report this line");
}

}  // namespace carboy
