#include "explore/least_squares.h"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace carboy {

namespace {

using Matrix = std::vector<std::vector<double>>;

double sum_of_squares(const std::vector<double>& residuals) {
    double sum = 0;
    for (const double r : residuals) {
        sum += r * r;
    }
    return sum;
}

/// Derivatives of the residuals by central differences, one-sided at the edge of what the model can answer; one row per
/// parameter. `here` are the residuals at the point itself.
Matrix derivatives(const LeastSquares& problem, const std::vector<double>& at, const std::vector<double>& here) {
    Matrix rows(at.size(), std::vector<double>(problem.readings));
    std::vector<double> moved = at;
    std::vector<double> above(problem.readings);
    std::vector<double> below(problem.readings);
    for (std::size_t p = 0; p < at.size(); ++p) {
        const double step = problem.steps[p];
        moved[p] = at[p] + step;
        problem.residuals(moved, above);
        moved[p] = at[p] - step;
        problem.residuals(moved, below);
        moved[p] = at[p];
        for (std::size_t i = 0; i < problem.readings; ++i) {
            const bool no_below = !std::isfinite(below[i]);
            const bool no_above = !std::isfinite(above[i]);
            const double rise = (no_above ? here[i] : above[i]) - (no_below ? here[i] : below[i]);
            rows[p][i] = rise / (no_below || no_above ? step : 2 * step);
        }
    }
    return rows;
}

double dot(const std::vector<double>& a, const std::vector<double>& b) {
    double sum = 0;
    for (std::size_t i = 0; i < a.size(); ++i) {
        sum += a[i] * b[i];
    }
    return sum;
}

/// The normal matrix J'J scaled to a unit diagonal, so that parameters of any unit are treated alike.
struct Normal {
    Matrix scaled;
    std::vector<double> scale;  ///< lengths of the columns of J
    std::vector<double> slope;  ///< J'r / scale
};

Normal normal_equations(const Matrix& rows, const std::vector<double>& residuals) {
    const std::size_t count = rows.size();
    Normal normal{Matrix(count, std::vector<double>(count)), std::vector<double>(count), std::vector<double>(count)};
    for (std::size_t p = 0; p < count; ++p) {
        normal.scale[p] = std::sqrt(dot(rows[p], rows[p]));
    }
    for (std::size_t p = 0; p < count; ++p) {
        normal.slope[p] = normal.scale[p] > 0 ? dot(rows[p], residuals) / normal.scale[p] : 0.0;
        for (std::size_t q = 0; q < count; ++q) {
            const double product = normal.scale[p] * normal.scale[q];
            normal.scaled[p][q] = product > 0 ? dot(rows[p], rows[q]) / product : 0.0;
        }
    }
    return normal;
}

/// Cholesky factor in the lower triangle; the index of a pivot that vanishes when the matrix is not positive definite.
std::optional<std::size_t> factor(Matrix& matrix) {
    constexpr double vanishing = 1e-12;  // of a unit diagonal
    for (std::size_t j = 0; j < matrix.size(); ++j) {
        double pivot = matrix[j][j];
        for (std::size_t k = 0; k < j; ++k) {
            pivot -= matrix[j][k] * matrix[j][k];
        }
        if (!(pivot > vanishing)) {
            return j;
        }
        matrix[j][j] = std::sqrt(pivot);
        for (std::size_t i = j + 1; i < matrix.size(); ++i) {
            double sum = matrix[i][j];
            for (std::size_t k = 0; k < j; ++k) {
                sum -= matrix[i][k] * matrix[j][k];
            }
            matrix[i][j] = sum / matrix[j][j];
        }
    }
    return std::nullopt;
}

std::vector<double> solved(const Matrix& lower, std::vector<double> right) {
    const std::size_t count = lower.size();
    for (std::size_t i = 0; i < count; ++i) {
        for (std::size_t k = 0; k < i; ++k) {
            right[i] -= lower[i][k] * right[k];
        }
        right[i] /= lower[i][i];
    }
    for (std::size_t i = count; i-- > 0;) {
        for (std::size_t k = i + 1; k < count; ++k) {
            right[i] -= lower[k][i] * right[k];
        }
        right[i] /= lower[i][i];
    }
    return right;
}

void add_covariance(LeastSquaresAnswer& answer, const Normal& normal) {
    const std::size_t count = normal.scale.size();
    Matrix lower = normal.scaled;
    answer.undetermined = factor(lower);
    if (answer.undetermined) {
        return;
    }
    answer.covariance.assign(count, std::vector<double>(count));
    for (std::size_t p = 0; p < count; ++p) {
        std::vector<double> unit(count);
        unit[p] = 1;
        const auto column = solved(lower, unit);
        for (std::size_t q = 0; q < count; ++q) {
            answer.covariance[q][p] = column[q] / (normal.scale[p] * normal.scale[q]);
        }
    }
}

/// P(|t| < q). Abramowitz and Stegun 26.7.3 (odd) and 26.7.4 (even).
double student_coverage(double q, std::size_t freedom) {
    const auto nu = static_cast<double>(freedom);
    const double theta = std::atan(q / std::sqrt(nu));
    const double cosine = std::cos(theta);
    if (freedom == 1) {
        return 2 * theta / std::numbers::pi;
    }
    double term = freedom % 2 == 1 ? cosine : 1.0;
    double sum = term;
    for (std::size_t k = freedom % 2 == 1 ? 3 : 2; k + 1 < freedom; k += 2) {
        const auto n = static_cast<double>(k);
        term *= cosine * cosine * (n - 1) / n;
        sum += term;
    }
    return freedom % 2 == 1 ? 2 / std::numbers::pi * (theta + std::sin(theta) * sum) : std::sin(theta) * sum;
}

}  // namespace

LeastSquaresAnswer minimise(const LeastSquares& problem, std::vector<double> start) {
    constexpr int most_iterations = 200;
    constexpr double settled = 1e-10;  // of each parameter's own standard error
    constexpr double highest_lambda = 1e12;
    LeastSquaresAnswer answer;
    answer.parameters = std::move(start);
    answer.residuals.resize(problem.readings);
    problem.residuals(answer.parameters, answer.residuals);
    answer.sum_of_squares = sum_of_squares(answer.residuals);
    double lambda = 1e-3;
    std::vector<double> tried(problem.readings);
    Normal normal;
    while (answer.iterations < most_iterations && !answer.converged) {
        ++answer.iterations;
        normal = normal_equations(derivatives(problem, answer.parameters, answer.residuals), answer.residuals);
        for (std::size_t p = 0; p < normal.scale.size(); ++p) {
            if (!(normal.scale[p] > 0)) {
                answer.undetermined = p;
                return answer;
            }
        }
        bool fell = false;
        while (!fell && lambda < highest_lambda) {
            Matrix damped = normal.scaled;
            for (std::size_t p = 0; p < damped.size(); ++p) {
                damped[p][p] += lambda;
            }
            std::vector<double> moved = answer.parameters;
            double longest = 0;  // in standard errors, about
            if (!factor(damped)) {
                const auto step = solved(damped, normal.slope);
                for (std::size_t p = 0; p < moved.size(); ++p) {
                    moved[p] -= step[p] / normal.scale[p];
                    longest = std::max(longest, std::abs(step[p]));
                }
                problem.residuals(moved, tried);
                const double sum = sum_of_squares(tried);
                if (sum <= answer.sum_of_squares) {
                    fell = true;
                    answer.parameters = moved;
                    answer.residuals = tried;
                    answer.sum_of_squares = sum;
                }
                answer.converged = longest < settled * std::max(1.0, std::sqrt(answer.sum_of_squares));
            }
            if (answer.converged) {
                break;
            }
            lambda = fell ? std::max(lambda / 10, 1e-15) : lambda * 10;
        }
        // No step makes it smaller: rounding is all that is left.
        answer.converged = answer.converged || !fell;
    }
    add_covariance(answer,
                   normal_equations(derivatives(problem, answer.parameters, answer.residuals), answer.residuals));
    return answer;
}

double student_quantile(double coverage, std::size_t degrees_of_freedom) {
    double low = 0;
    double high = 1e6;
    for (int i = 0; i < 200 && high - low > 1e-12 * high; ++i) {
        const double middle = (low + high) / 2;
        (student_coverage(middle, degrees_of_freedom) < coverage ? low : high) = middle;
    }
    return (low + high) / 2;
}

}  // namespace carboy
