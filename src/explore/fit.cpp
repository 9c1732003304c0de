#include "carboy/fit.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/error.h"

#include "explore/fit_warnings.h"
#include "explore/least_squares.h"
#include "explore/measured_curve.h"

namespace carboy {

namespace {

constexpr double coverage = 0.95;
constexpr double normal_quantile_95 = 1.959963984540054;

void check(const FitProblem& problem) {
    if (problem.free.empty()) {
        throw Error(ErrorKind::input, "nothing_free", "nothing is left free to be found", "--free",
                    "name what is wanted, as in --free 'pK1 acetate'");
    }
    if (problem.points.size() < problem.free.size()) {
        throw Error(ErrorKind::input, "too_few_readings",
                    fmt::format("{} readings cannot settle {} unknowns", problem.points.size(), problem.free.size()),
                    "--free", "measure more, or free less");
    }
    if (problem.reading == ReadingKind::degree &&
        (problem.free.size() != 1 || problem.free.front().unknown != Unknown::pK)) {
        throw Error(ErrorKind::input, "nothing_free", "a degree of dissociation tells one pK and nothing else",
                    "--free", "free the pK of the step whose degree was measured");
    }
    for (const Point& point : problem.points) {
        const bool is_degree = problem.reading == ReadingKind::degree;
        if (!(point.uncertainty > 0) || !std::isfinite(point.reading) ||
            (is_degree && !(point.reading > 0 && point.reading < 1))) {
            throw Error(ErrorKind::input, "bad_amount",
                        is_degree ? "a degree of dissociation lies between 0 and 1"
                                  : "every reading needs a standard uncertainty above zero",
                        {}, "check the measurements");
        }
    }
}

Error undetermined(std::size_t which, const FitProblem& problem, const Table& table) {
    return {ErrorKind::no_recipe, "undetermined",
            fmt::format("the readings do not tell {}{}", parameter_name(problem.free[which], table),
                        problem.free.size() > 1 ? " apart from the others" : ""),
            "--free", "free less, or measure where it shows: on both sides of the pK, and past the equivalence point"};
}

/// Residuals in units of their uncertainty. A degree is compared as log-odds, in which a pK is nearly linear.
LeastSquares least_squares(const FitProblem& problem, MeasuredCurve& curve, std::vector<double>& fitted) {
    LeastSquares squares;
    squares.readings = problem.points.size();
    squares.steps = curve.steps();
    squares.residuals = [&](const std::vector<double>& parameters, std::vector<double>& residuals) {
        curve.evaluate(parameters, fitted);
        for (std::size_t i = 0; i < fitted.size(); ++i) {
            const Point& point = problem.points[i];
            if (problem.reading == ReadingKind::degree) {
                const double odds =
                    std::log(fitted[i] / (1 - fitted[i])) - std::log(point.reading / (1 - point.reading));
                residuals[i] = odds * point.reading * (1 - point.reading) / point.uncertainty;
            } else {
                residuals[i] = (fitted[i] - point.reading) / point.uncertainty;
            }
        }
    };
    return squares;
}

/// Moles of a reagent in a preparation; none when it is not told in moles.
std::optional<double> moles_of(const Preparation& preparation, std::uint16_t reagent) {
    double mol = 0;
    for (const Portion& portion : preparation.portions) {
        if (portion.reagent == reagent) {
            if (!portion.amount) {
                return std::nullopt;
            }
            mol += portion.amount->mol();
        }
    }
    return mol;
}

std::optional<double> stated(const FreeParameter& parameter, const FitProblem& problem) {
    if (parameter.unknown == Unknown::titrant_strength) {
        const auto mol = moles_of(*problem.titrant, problem.titrant->portions.front().reagent);
        return mol ? std::optional(*mol / problem.titrant->filled_to->L()) : std::nullopt;
    }
    if (parameter.unknown != Unknown::amount) {
        return std::nullopt;
    }
    const auto first = moles_of(problem.points.front().mixture, parameter.reagent);
    const bool same = std::all_of(problem.points.begin(), problem.points.end(), [&](const Point& point) {
        return moles_of(point.mixture, parameter.reagent) == first;
    });
    return same ? first : std::nullopt;
}

}  // namespace

Fit fit_measurements(const Table& table, const FitProblem& problem, const ActivityModel& model) {
    check(problem);
    MeasuredCurve curve(table, problem, model);
    std::vector<double> fitted(problem.points.size());
    const LeastSquares squares = least_squares(problem, curve, fitted);
    const LeastSquaresAnswer answer = minimise(squares, curve.start());
    if (answer.undetermined) {
        throw undetermined(*answer.undetermined, problem, table);
    }
    if (!answer.converged || !std::isfinite(answer.sum_of_squares)) {
        throw Error(ErrorKind::no_recipe, "no_fit", "the fit did not settle on anything", {},
                    "check the mixture line and the titrant against what was done, or free less");
    }

    Fit fit;
    fit.problem = problem;
    fit.activity_model = model.name();
    fit.iterations = answer.iterations;
    fit.chi_square = answer.sum_of_squares;
    fit.degrees_of_freedom = problem.points.size() - problem.free.size();
    fit.scaled_by_scatter = fit.degrees_of_freedom > 0;
    fit.t_quantile = fit.scaled_by_scatter ? student_quantile(coverage, fit.degrees_of_freedom) : normal_quantile_95;
    const double scatter =
        fit.scaled_by_scatter ? std::sqrt(fit.chi_square / static_cast<double>(fit.degrees_of_freedom)) : 1.0;
    curve.evaluate(answer.parameters, fitted);
    for (std::size_t i = 0; i < fitted.size(); ++i) {
        const Point& point = problem.points[i];
        fit.residuals.push_back({point.titrant, point.reading, fitted[i], -answer.residuals[i]});
    }
    const auto& covariance = answer.covariance;
    for (std::size_t i = 0; i < problem.free.size(); ++i) {
        FittedParameter parameter;
        parameter.parameter = problem.free[i];
        parameter.start = curve.start()[i];
        parameter.value = answer.parameters[i];
        parameter.standard_error = scatter * std::sqrt(covariance[i][i]);
        parameter.lower_95 = parameter.value - fit.t_quantile * parameter.standard_error;
        parameter.upper_95 = parameter.value + fit.t_quantile * parameter.standard_error;
        parameter.stated = stated(parameter.parameter, problem);
        if (parameter.parameter.unknown == Unknown::pK) {
            const Step& step = table.systems[parameter.parameter.system].steps[parameter.parameter.step];
            parameter.pK_25C = step.pK_25C.value + parameter.value - parameter.start;
        }
        fit.parameters.push_back(parameter);
        auto& row = fit.correlation.emplace_back();
        for (std::size_t j = 0; j < problem.free.size(); ++j) {
            row.push_back(covariance[i][j] / std::sqrt(covariance[i][i] * covariance[j][j]));
        }
    }
    fit.highest_ionic_strength_mol_per_kg = curve.highest_ionic_strength();
    fit.model_uncertainty = model.ph_uncertainty(Molality::mol_per_kg(fit.highest_ionic_strength_mol_per_kg));
    add_warnings(fit, table, model);
    return fit;
}

std::string parameter_name(const FreeParameter& parameter, const Table& table) {
    switch (parameter.unknown) {
        case Unknown::pK: {
            const System& system = table.systems[parameter.system];
            return system.steps.size() == 1 ? fmt::format("pK of {}", system.name)
                                            : fmt::format("pK{} of {}", parameter.step + 1, system.name);
        }
        case Unknown::titrant_strength:
            return "titrant strength";
        case Unknown::amount:
            return fmt::format("amount of {}", table.reagents[parameter.reagent].name);
        case Unknown::carbonate:
            return "carbonate in the titrant";
        case Unknown::offset:
            return "electrode offset";
        case Unknown::slope:
            return "electrode slope";
    }
    return {};
}

}  // namespace carboy
