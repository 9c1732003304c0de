#pragma once

#include <cstddef>
#include <functional>
#include <optional>
#include <vector>

namespace carboy {

/// A weighted least-squares problem: residuals already divided by their standard uncertainties.
struct LeastSquares {
    /// Residuals at these parameters, one per reading; infinite or NaN where the model has no value.
    std::function<void(const std::vector<double>&, std::vector<double>&)> residuals;
    std::vector<double> steps;  ///< for central differences, one per parameter
    std::size_t readings = 0;
};

struct LeastSquaresAnswer {
    std::vector<double> parameters;
    std::vector<std::vector<double>> covariance;  ///< for residuals of unit variance
    std::vector<double> residuals;
    double sum_of_squares = 0;
    int iterations = 0;
    bool converged = false;
    std::optional<std::size_t> undetermined;  ///< first parameter that the readings leave open
};

/// Levenberg-Marquardt: (J'J + lambda diag J'J) step = -J'r, lambda raised until the sum of squares falls and lowered
/// when it does. Marquardt DW, J. Soc. Ind. Appl. Math. 11, 431 (1963).
LeastSquaresAnswer minimise(const LeastSquares& problem, std::vector<double> start);

/// Two-sided quantile: P(|t| < q) = `coverage` for Student's t; at least 1 degree of freedom.
/// Abramowitz and Stegun, Handbook of Mathematical Functions (1964), 26.7.3 and 26.7.4.
double student_quantile(double coverage, std::size_t degrees_of_freedom);

}  // namespace carboy
