#include "carboy/sweep.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/error.h"
#include "carboy/prediction.h"
#include "carboy/titration.h"
#include "carboy/water.h"

namespace carboy {

namespace {

bool is_buffer_system(const Table& table, ComponentId id) {
    return id.kind == ComponentKind::system && table.systems[id.index].role == Role::buffer;
}

/// Moles of acid-base systems in the portions that scale, in the unit of the condition.
double own_total(const Table& table, const SweepSubject& subject, bool per_kg_water) {
    double sum = 0;
    const Preparation& preparation = subject.preparation;
    const double water = compose(table, preparation).water.kg();
    for (std::size_t i = 0; i < preparation.portions.size(); ++i) {
        const Portion& portion = preparation.portions[i];
        const double mol =
            portion.amount ? portion.amount->mol() : portion.molality.value_or(Molality{}).mol_per_kg() * water;
        for (const Supply& supply : table.reagents[portion.reagent].supplies) {
            sum += subject.scales[i] && is_buffer_system(table, supply.component) ? supply.count * mol : 0;
        }
    }
    return sum / (per_kg_water ? water : preparation.filled_to->L());
}

/// Totals of one subject at any value of the condition.
class Varied {
public:
    Varied(const Table& table, const SweepSubject& subject, const SweepCondition& condition)
        : table_(table), subject_(subject), condition_(condition), solution_(solution_of(table, subject.preparation)) {
        const bool counted = condition.what == Condition::salt || condition.what == Condition::concentration;
        if (counted && !condition.per_kg_water && !subject.preparation.filled_to) {
            throw Error(ErrorKind::input, "unusable_unit",
                        fmt::format("'{}' is given per kilogram of water, and so must be what is varied", subject.name),
                        condition.what == Condition::salt ? "--salt" : "--concentration", "write mol/kg or mmol/kg");
        }
        if (condition.what == Condition::concentration) {
            total_ = own_total(table, subject, condition.per_kg_water);
            if (!(total_ > 0)) {
                throw Error(ErrorKind::input, "no_buffer",
                            fmt::format("'{}' holds no buffer whose concentration could be varied", subject.name),
                            "--concentration", "name an acid-base system, or vary --salt");
            }
        }
        check();
    }

    Mixture at(double value) const {
        switch (condition_.what) {
            case Condition::temperature:
                return solution_.mixture;
            case Condition::dilution:
                return diluted(value);
            case Condition::salt:
                return salted(value);
            case Condition::concentration:
                return scaled(value);
        }
        return {};
    }

private:
    void check() const {
        for (const double value : condition_.values) {
            if (condition_.what == Condition::dilution && !(value >= 1)) {
                throw Error(ErrorKind::input, "bad_amount", fmt::format("a dilution of {:g} is none", value),
                            "--dilution", "1 is the solution as it is, 2 is twice its volume");
            }
            const bool amount = condition_.what == Condition::salt || condition_.what == Condition::concentration;
            if (amount && value < 0) {
                throw Error(ErrorKind::input, "bad_amount", fmt::format("{:g} is not an amount of anything", value),
                            condition_.what == Condition::salt ? "--salt" : "--concentration");
            }
        }
    }

    Mixture diluted(double factor) const {
        const double density = water_at(subject_.preparation.filled_at).density_kg_per_L;
        const double water = solution_.water.kg() + (factor - 1) * solution_.volume.L() * density;
        Mixture mixture;
        for (const auto& [component, total] : solution_.mixture.parts()) {
            mixture.add(component, total * (solution_.water.kg() / water));
        }
        return mixture;
    }

    Mixture salted(double value) const {
        Preparation preparation = subject_.preparation;
        Portion salt{condition_.salt, std::nullopt, std::nullopt};
        if (condition_.per_kg_water) {
            salt.molality = Molality::mol_per_kg(value);
        } else {
            salt.amount = Amount::mol(value * preparation.filled_to->L());
        }
        preparation.portions.push_back(salt);
        return compose(table_, preparation).mixture;
    }

    Mixture scaled(double value) const {
        Preparation preparation = subject_.preparation;
        for (std::size_t i = 0; i < preparation.portions.size(); ++i) {
            Portion& portion = preparation.portions[i];
            if (!subject_.scales[i]) {
                continue;
            }
            if (portion.amount) {
                portion.amount = *portion.amount * (value / total_);
            } else if (portion.molality) {
                portion.molality = *portion.molality * (value / total_);
            }
        }
        return compose(table_, preparation).mixture;
    }

    const Table& table_;
    const SweepSubject& subject_;
    const SweepCondition& condition_;
    Solution solution_;
    double total_ = 0;
};

SweepPoint point_of(EquilibriumSolver& solver, double value, const Table& table, const ActivityModel& model) {
    solver.solve();
    SweepPoint point;
    point.condition = value;
    point.ph = solver.ph();
    point.buffer_value = solver.buffer_value();
    point.ionic_strength = solver.ionic_strength();
    point.ph_expanded_k2 = ph_uncertainty(solver, table, model).expanded_k2;
    return point;
}

SweepCurve curve_of(const Table& table, const Varied& varied, const SweepSubject& subject,
                    const SweepCondition& condition, const ActivityModel& model) {
    SweepCurve curve{subject.name, subject.temperature, {}};
    curve.points.reserve(condition.values.size());
    if (condition.what == Condition::temperature) {
        const Mixture mixture = varied.at(0);
        for (const double value : condition.values) {
            EquilibriumSolver solver(table, mixture, Temperature::celsius(value), model);
            curve.points.push_back(point_of(solver, value, table, model));
        }
        return curve;
    }
    // Components are the same at every value, only totals move: one solver serves them all.
    EquilibriumSolver solver(table, varied.at(condition.values.front()), subject.temperature, model);
    for (const double value : condition.values) {
        const Mixture mixture = varied.at(value);
        for (std::size_t part = 0; part < solver.part_count(); ++part) {
            solver.set_total(part, mixture.parts()[part].total);
        }
        curve.points.push_back(point_of(solver, value, table, model));
    }
    return curve;
}

/// What is said of the ends of the range; a condition between them is no worse.
void add_warnings(Sweep& result, const Table& table, const Varied& varied, const SweepSubject& subject,
                  const ActivityModel& model) {
    const auto& values = result.condition.values;
    for (const double value : {values.back(), values.front()}) {
        const Temperature temperature =
            result.condition.what == Condition::temperature ? Temperature::celsius(value) : subject.temperature;
        for (Warning& warning : predict(table, varied.at(value), temperature, model).warnings) {
            if (result.curves.size() > 1) {
                warning.message = fmt::format("{}: {}", subject.name, warning.message);
            }
            const bool known = std::any_of(result.warnings.begin(), result.warnings.end(), [&](const Warning& other) {
                return other.code == warning.code &&
                       (result.curves.size() == 1 || other.message.rfind(subject.name + ": ", 0) == 0);
            });
            if (!known) {
                result.warnings.push_back(std::move(warning));
            }
        }
    }
}

}  // namespace

bool belongs_to_buffer(const Table& table, const Reagent& reagent) {
    bool has_system = false;
    for (const Supply& supply : reagent.supplies) {
        if (is_buffer_system(table, supply.component)) {
            return true;
        }
        has_system = has_system || supply.component.kind == ComponentKind::system;
    }
    return !has_system && reagent.strong_charge != 0;
}

Sweep sweep(const Table& table, const std::vector<SweepSubject>& subjects, const SweepCondition& condition,
            const ActivityModel& model) {
    Sweep result{condition, model.name(), {}, {}};
    std::vector<Varied> varied;
    varied.reserve(subjects.size());
    for (const SweepSubject& subject : subjects) {
        varied.emplace_back(table, subject, condition);
        result.curves.push_back(curve_of(table, varied.back(), subject, condition, model));
    }
    for (std::size_t i = 0; i < subjects.size(); ++i) {
        add_warnings(result, table, varied[i], subjects[i], model);
    }
    return result;
}

}  // namespace carboy
