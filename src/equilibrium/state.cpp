#include <cmath>
#include <numbers>

#include "carboy/equilibrium.h"

// What can be asked of a solved state, and the knobs for sensitivities.

namespace carboy {

namespace {

constexpr std::size_t parts_before_systems = 2;  // H+ and OH- stand first in the species arrays

}  // namespace

PH EquilibriumSolver::ph() const {
    return PH(-std::log10(activity_H_));
}

Molality EquilibriumSolver::buffer_value() const {
    return Molality::mol_per_kg(balance_.charge_by_x * std::numbers::ln10);
}

double EquilibriumSolver::mean_charge(std::size_t part) const {
    const Part& p = parts_[part];
    if (p.count == 1 || p.total <= 0) {
        return charge_[p.first];
    }
    double sum = 0;
    for (std::size_t i = p.first; i < p.first + p.count; ++i) {
        sum += charge_[i] * molality_[i];
    }
    return sum / p.total;
}

double EquilibriumSolver::mean_square_charge(std::size_t part) const {
    const Part& p = parts_[part];
    if (p.count == 1 || p.total <= 0) {
        return charge_[p.first] * charge_[p.first];
    }
    double sum = 0;
    for (std::size_t i = p.first; i < p.first + p.count; ++i) {
        sum += charge_[i] * charge_[i] * molality_[i];
    }
    return sum / p.total;
}

EquilibriumSolver::SpeciesState EquilibriumSolver::species(std::size_t index) const {
    std::size_t part = water_part;
    if (index >= parts_before_systems) {
        part = 0;
        while (index >= parts_[part].first + parts_[part].count) {
            ++part;
        }
    }
    return {part, formula_[index], charge_[index], Molality::mol_per_kg(molality_[index]), gamma_[index]};
}

double EquilibriumSolver::pK(std::size_t part, std::size_t step) const {
    return -std::log10(dissociation_[parts_[part].first + step + 1]);
}

void EquilibriumSolver::shift_pK(std::size_t part, std::size_t step, double by) {
    dissociation_[parts_[part].first + step + 1] *= std::exp(-by * std::numbers::ln10);
}

void EquilibriumSolver::shift_pKw(double by) {
    ion_product_ *= std::exp(-by * std::numbers::ln10);
}

}  // namespace carboy
