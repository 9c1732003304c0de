#include "explore/fit_warnings.h"

#include <cmath>

#include <fmt/format.h>

namespace carboy {

namespace {

constexpr double far = 2.5;  // standard deviations

/// Wald-Wolfowitz: runs of one sign against what chance would give, in standard deviations. Wald A, Wolfowitz J, Ann.
/// Math. Stat. 11, 147 (1940).
double runs_score(const std::vector<FitResidual>& residuals) {
    double above = 0;
    double below = 0;
    double runs = 0;
    bool last = false;
    for (std::size_t i = 0; i < residuals.size(); ++i) {
        const bool up = residuals[i].weighted > 0;
        (up ? above : below) += 1;
        runs += i == 0 || up != last ? 1 : 0;
        last = up;
    }
    const double all = above + below;
    if (above < 3 || below < 3) {
        return 0;
    }
    const double expected = 1 + 2 * above * below / all;
    const double variance = (expected - 1) * (expected - 2) / (all - 1);
    return (runs - expected) / std::sqrt(variance);
}

void warn_of_correlation(Fit& fit, const Table& table) {
    constexpr double nearly_one = 0.98;
    for (std::size_t i = 0; i < fit.parameters.size(); ++i) {
        for (std::size_t j = i + 1; j < fit.parameters.size(); ++j) {
            if (std::abs(fit.correlation[i][j]) > nearly_one) {
                fit.warnings.push_back(
                    {"hardly_apart",
                     fmt::format("The readings hardly tell {} from {} (correlation {:+.3f}): what one gains the other "
                                 "loses. Fix one of them if it is known, or measure over a wider range.",
                                 parameter_name(fit.parameters[i].parameter, table),
                                 parameter_name(fit.parameters[j].parameter, table), fit.correlation[i][j])});
            }
        }
    }
}

void warn_of_values(Fit& fit) {
    for (const FittedParameter& p : fit.parameters) {
        const Unknown unknown = p.parameter.unknown;
        if (unknown == Unknown::slope && (p.upper_95 < 0.95 || p.lower_95 > 1.02)) {
            fit.warnings.push_back(
                {"poor_electrode", fmt::format("An electrode slope of {:.1f} % is outside 95 to 102 %, which common "
                                               "practice asks of a good one: calibrate or replace it.",
                                               100 * p.value)});
        }
        if (unknown == Unknown::carbonate && p.lower_95 <= 0) {
            fit.warnings.push_back({"no_carbonate_seen",
                                    "The carbonate is no more than its uncertainty: the readings show none for sure."});
        }
    }
}

}  // namespace

double chi_square_score(const Fit& fit) {
    const auto nu = static_cast<double>(fit.degrees_of_freedom);
    const double spread = 2 / (9 * nu);
    return (std::cbrt(fit.chi_square / nu) - (1 - spread)) / std::sqrt(spread);
}

void add_warnings(Fit& fit, const Table& table, const ActivityModel& model) {
    if (fit.degrees_of_freedom > 0 && chi_square_score(fit) > far) {
        fit.warnings.push_back(
            {"scatters_more_than_stated",
             "The readings scatter more than their stated uncertainty allows. Either the meter is less sure than was "
             "said, or the model misses something: an old titrant, carbonate, a wrong mixture line, another acid."});
    }
    if (runs_score(fit.residuals) < -far) {
        fit.warnings.push_back(
            {"residuals_run",
             "Neighbouring residuals keep the same sign for long: the curve is missed in shape, not only by scatter, "
             "and "
             "the standard errors are too small. Free what else may be off (titrant strength, offset, carbonate)."});
    }
    warn_of_correlation(fit, table);
    warn_of_values(fit);
    if (fit.highest_ionic_strength_mol_per_kg > model.trusted_to_mol_per_kg()) {
        fit.warnings.push_back(
            {"beyond_the_activity_model",
             fmt::format("Ionic strength goes up to {:.2f} mol/kg, past the {:.2g} mol/kg to which the {} model is "
                         "trusted: constants found there carry its error.",
                         fit.highest_ionic_strength_mol_per_kg, model.trusted_to_mol_per_kg(), model.name())});
    }
}

}  // namespace carboy
