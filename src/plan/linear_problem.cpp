#include "plan/linear_problem.h"

#include <algorithm>
#include <cmath>
#include <utility>

#include "carboy/water.h"

namespace carboy {

namespace {

Mixture shape_of(const Table& table, const Preparation& fixed, const std::vector<LinearProblem::Total>& totals,
                 const std::vector<std::uint16_t>& reagents) {
    Mixture shape;
    const auto add = [&](std::uint16_t reagent) {
        for (const Supply& supply : table.reagents[reagent].supplies) {
            shape.add(supply.component, Molality{});
        }
    };
    for (const Portion& portion : fixed.portions) {
        add(portion.reagent);
    }
    for (const std::uint16_t reagent : reagents) {
        add(reagent);
    }
    for (const auto& total : totals) {
        shape.add(total.component, Molality{});
    }
    return shape;
}

/// Gauss with partial pivoting on `size` rows of `size + 1` entries; false when singular.
bool eliminate(std::vector<double>& matrix, std::size_t size) {
    const std::size_t width = size + 1;
    for (std::size_t column = 0; column < size; ++column) {
        std::size_t pivot = column;
        for (std::size_t row = column + 1; row < size; ++row) {
            if (std::abs(matrix[row * width + column]) > std::abs(matrix[pivot * width + column])) {
                pivot = row;
            }
        }
        if (std::abs(matrix[pivot * width + column]) < 1e-9) {
            return false;
        }
        for (std::size_t k = 0; k < width && pivot != column; ++k) {
            std::swap(matrix[pivot * width + k], matrix[column * width + k]);
        }
        for (std::size_t row = 0; row < size; ++row) {
            if (row == column) {
                continue;
            }
            const double factor = matrix[row * width + column] / matrix[column * width + column];
            for (std::size_t k = column; k < width && factor != 0; ++k) {
                matrix[row * width + k] -= factor * matrix[column * width + k];
            }
        }
    }
    for (std::size_t row = 0; row < size; ++row) {
        matrix[row * width + size] /= matrix[row * width + row];
    }
    return true;
}

}  // namespace

LinearProblem::LinearProblem(const Table& table, const Preparation& fixed, std::vector<Total> totals,
                             const std::vector<std::uint16_t>& reagents, PH ph, Temperature use_at,
                             const ActivityModel& model)
    : table_(&table),
      fixed_(fixed),
      totals_(std::move(totals)),
      ph_(ph),
      density_kg_per_L_(water_at(fixed.filled_at).density_kg_per_L),
      shape_(shape_of(table, fixed_, totals_, reagents)),
      solver_(table, shape_, use_at, model),
      part_mol_(shape_.parts().size(), 0.0) {}

std::vector<LinearProblem::Term> LinearProblem::terms_of(std::uint16_t reagent) const {
    std::vector<Term> terms;
    const auto parts = shape_.parts();
    for (const auto& [component, count] : table_->reagents[reagent].supplies) {
        const ComponentId wanted = component;
        const auto place =
            std::find_if(parts.begin(), parts.end(), [&](const auto& p) { return p.component == wanted; });
        terms.push_back({static_cast<std::size_t>(place - parts.begin()), count});
    }
    return terms;
}

/// Totals and water of a trial answer. Negative trial amounts are taken as none: no composition has less than nothing.
void LinearProblem::set_composition(const std::vector<std::uint16_t>& columns, const std::vector<double>& amounts_mol) {
    double free_litres = fixed_.filled_to->L();
    double litres_per_kg = 0;
    std::fill(part_mol_.begin(), part_mol_.end(), 0.0);
    const auto put = [&](std::uint16_t reagent, double mol) {
        for (const auto& [part, count] : terms_of(reagent)) {
            part_mol_[part] += count * mol;
        }
    };
    for (std::size_t i = 0; i < columns.size(); ++i) {
        const double mol = std::max(amounts_mol[i], 0.0);
        free_litres -= mol * volume_per_mole(*table_, table_->reagents[columns[i]]).L();
        put(columns[i], mol);
    }
    for (const Portion& portion : fixed_.portions) {
        const double litres = volume_per_mole(*table_, table_->reagents[portion.reagent]).L();
        if (portion.amount) {
            free_litres -= portion.amount->mol() * litres;
        } else {
            litres_per_kg += portion.molality->mol_per_kg() * litres;
        }
    }
    water_kg_ = std::max(free_litres, 0.1 * fixed_.filled_to->L()) * density_kg_per_L_ /
                (1 + litres_per_kg * density_kg_per_L_);
    for (const Portion& portion : fixed_.portions) {
        put(portion.reagent, portion.amount ? portion.amount->mol() : portion.molality->mol_per_kg() * water_kg_);
    }
    for (std::size_t part = 0; part < part_mol_.size(); ++part) {
        // A trace keeps the mean charge of a system defined where a trial has none of it.
        solver_.set_total(part, Molality::mol_per_kg(std::max(part_mol_[part] / water_kg_, 1e-30)));
    }
}

bool LinearProblem::solve_once(const std::vector<std::uint16_t>& columns, std::vector<double>& amounts_mol) {
    const std::size_t size = columns.size();
    const std::size_t width = size + 1;
    matrix_.assign(size * width, 0.0);
    const auto at = [&](std::size_t row, std::size_t column) -> double& { return matrix_[row * width + column]; };
    const std::size_t charge_row = totals_.size();
    const std::size_t ionic_row = charge_row + 1;

    for (std::size_t column = 0; column < size; ++column) {
        for (const auto& [part, count] : terms_of(columns[column])) {
            const ComponentId component = shape_.parts()[part].component;
            for (std::size_t row = 0; row < totals_.size(); ++row) {
                if (totals_[row].component == component) {
                    at(row, column) += count;
                }
            }
            at(charge_row, column) += count * solver_.mean_charge(part);
            if (ionic_strength_) {
                at(ionic_row, column) += 0.5 * count * solver_.mean_square_charge(part);
            }
        }
    }
    for (std::size_t row = 0; row < totals_.size(); ++row) {
        at(row, size) = totals_[row].value * (totals_[row].per_kg_water ? water_kg_ : 1.0);
    }
    // What no column moves: the additives, and water's own ions.
    double charge = 0;
    double half_squares = 0;
    for (const Portion& portion : fixed_.portions) {
        const double mol = portion.amount ? portion.amount->mol() : portion.molality->mol_per_kg() * water_kg_;
        for (const auto& [part, count] : terms_of(portion.reagent)) {
            for (std::size_t row = 0; row < totals_.size(); ++row) {
                if (totals_[row].counts_fixed && totals_[row].component == shape_.parts()[part].component) {
                    at(row, size) -= mol * count;
                }
            }
            charge += mol * count * solver_.mean_charge(part);
            half_squares += 0.5 * mol * count * solver_.mean_square_charge(part);
        }
    }
    const double hydrogen = solver_.species(0).molality.mol_per_kg();
    const double hydroxide = solver_.species(1).molality.mol_per_kg();
    at(charge_row, size) = -charge - (hydrogen - hydroxide) * water_kg_;
    if (ionic_strength_) {
        const double wanted =
            ionic_strength_->value_mol * (ionic_strength_->per_litre ? fixed_.filled_to->L() : water_kg_);
        at(ionic_row, size) = wanted - half_squares - 0.5 * (hydrogen + hydroxide) * water_kg_;
    }
    if (!eliminate(matrix_, size)) {
        return false;
    }
    for (std::size_t column = 0; column < size; ++column) {
        amounts_mol[column] = at(column, size);
    }
    return true;
}

std::optional<LinearProblem::Answer> LinearProblem::solve(const std::vector<std::uint16_t>& columns, double precision) {
    // Start from the buffers' totals spread over all columns: a composition of about the right ionic strength.
    std::vector<double> amounts(columns.size(), 0.0);
    for (const Total& total : totals_) {
        const double share = total.value / static_cast<double>(columns.size());
        for (double& amount : amounts) {
            amount += share;
        }
    }
    std::vector<double> previous;
    for (int round = 0; round < 200; ++round) {
        previous = amounts;
        set_composition(columns, amounts);
        solver_.hold_at(ph_);
        if (!solve_once(columns, amounts)) {
            return std::nullopt;
        }
        double change = 0;
        double largest = 0;
        for (std::size_t i = 0; i < amounts.size(); ++i) {
            change = std::max(change, std::abs(amounts[i] - previous[i]));
            largest = std::max(largest, std::abs(amounts[i]));
        }
        if (change <= precision * largest) {
            return Answer{amounts, Mass::kilograms(water_kg_), true};
        }
    }
    return Answer{amounts, Mass::kilograms(water_kg_), false};
}

}  // namespace carboy
