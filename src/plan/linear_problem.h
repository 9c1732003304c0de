#pragma once

#include <cstdint>
#include <optional>
#include <vector>

#include "carboy/activity.h"
#include "carboy/constants.h"
#include "carboy/equilibrium.h"
#include "carboy/preparation.h"
#include "carboy/request.h"

namespace carboy {

/// The planner's linear problem at one pH, temperature and composition.
///
/// At a fixed pH and ionic strength each system has a known mean charge, so electroneutrality is linear in the amounts
/// of the reagents, as are the totals of the buffers and, given the mean squared charges, the ionic strength. Activity
/// coefficients and the mass of water depend on the answer: it is solved again until the amounts repeat.
class LinearProblem {
public:
    /// Total of a buffer or of a strong ion: moles in the finished volume, or per kilogram of its water.
    struct Total {
        ComponentId component;
        double value = 0;
        bool per_kg_water = false;
        bool counts_fixed = false;  ///< what `fixed` brings of it is part of the total
    };

    /// `fixed` are the additives; `volume` and `filled_at` give the water; components that may occur are those of
    /// `fixed` and of `reagents`.
    LinearProblem(const Table& table, const Preparation& fixed, std::vector<Total> totals,
                  const std::vector<std::uint16_t>& reagents, PH ph, Temperature use_at, const ActivityModel& model);

    /// Asks for an ionic strength too; one more column is needed then.
    void ask_ionic_strength(const IonicStrengthTarget& target) { ionic_strength_ = target; }

    struct Answer {
        std::vector<double> amounts_mol;  ///< one per column; may be negative: then these columns cannot do it
        Mass water;
        bool settled = false;  ///< amounts repeat to the precision asked for
    };
    /// Amounts of the reagents in `columns`: as many as there are totals, plus one for the charge, plus one if an ionic
    /// strength is asked for. Empty when the columns are not independent. `precision` is the relative change to stop
    /// at.
    std::optional<Answer> solve(const std::vector<std::uint16_t>& columns, double precision);

private:
    struct Term {
        std::size_t part;
        double count;
    };
    std::vector<Term> terms_of(std::uint16_t reagent) const;
    void set_composition(const std::vector<std::uint16_t>& columns, const std::vector<double>& amounts_mol);
    bool solve_once(const std::vector<std::uint16_t>& columns, std::vector<double>& amounts_mol);

    const Table* table_;
    Preparation fixed_;
    std::vector<Total> totals_;
    PH ph_;
    double density_kg_per_L_;
    Mixture shape_;
    EquilibriumSolver solver_;
    std::optional<IonicStrengthTarget> ionic_strength_;
    double water_kg_ = 0;
    std::vector<double> part_mol_;  ///< totals of the parts in the finished volume
    std::vector<double> matrix_;
};

}  // namespace carboy
