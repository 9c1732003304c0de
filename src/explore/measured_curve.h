#pragma once

#include <cstddef>
#include <vector>

#include "carboy/activity.h"
#include "carboy/equilibrium.h"
#include "carboy/fit.h"

namespace carboy {

/// What the model says a meter would have shown at every point, for any values of the free parameters.
class MeasuredCurve {
public:
    /// Throws as `fit_measurements` does for what cannot be asked of these points.
    MeasuredCurve(const Table& table, const FitProblem& problem, const ActivityModel& model);

    /// Where the search starts: table and statement.
    const std::vector<double>& start() const { return start_; }
    /// Steps for derivatives.
    const std::vector<double>& steps() const { return steps_; }
    /// One fitted reading per point. NaN where the parameters make an amount negative.
    void evaluate(const std::vector<double>& parameters, std::vector<double>& readings);
    double highest_ionic_strength() const { return highest_ionic_strength_; }

private:
    /// So much of one part, per kilogram of water, as stated; `free` is the parameter that multiplies it.
    struct Share {
        std::size_t part;
        double mol_per_kg;
        std::size_t free;
        bool titrant;
    };
    static constexpr std::size_t fixed = static_cast<std::size_t>(-1);

    void take_point(const Table& table, const FitProblem& problem, const Point& point,
                    std::vector<std::pair<ComponentId, Share>>& shares) const;
    double reading_at(const std::vector<double>& parameters) const;

    const FitProblem* problem_;
    std::vector<std::vector<Share>> points_;
    std::optional<EquilibriumSolver> solver_;
    std::vector<double> start_;
    std::vector<double> steps_;
    std::vector<double> totals_;
    std::size_t strength_ = fixed;
    std::size_t carbonate_ = fixed;
    std::size_t carbonate_part_ = 0;
    std::size_t offset_ = fixed;
    std::size_t slope_ = fixed;
    struct FreePK {
        std::size_t parameter;
        std::size_t part;
        std::size_t step;
        double table_pK;
        std::size_t acid_species;  ///< of the step, among the solver's species
    };
    std::vector<FreePK> pKs_;
    double highest_ionic_strength_ = 0;
};

}  // namespace carboy
