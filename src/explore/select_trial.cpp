#include "explore/select_trial.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/plan.h"
#include "carboy/preparation.h"

namespace carboy {

namespace {

PH ph_of(const Table& table, const Mixture& mixture, Temperature temperature, const ActivityModel& model) {
    EquilibriumSolver solver(table, mixture, temperature, model);
    solver.solve();
    return solver.ph();
}

/// The mixture with a strong acid (chloride) or base (sodium) added, per kilogram of water.
Mixture loaded(const Table& table, const Mixture& mixture, const char* ion, double mol_per_kg) {
    Mixture result = mixture;
    result.add(id_of(table, *find_spectator(table, ion)), Molality::mol_per_kg(mol_per_kg));
    return result;
}

Mixture diluted_twofold(const Mixture& mixture) {
    Mixture half;
    for (const Mixture::Part& part : mixture.parts()) {
        half.add(part.component, part.total / 2);
    }
    return half;
}

/// Where acid and base form of the step nearest to the pH would be equal: pH - log10(m_base / m_acid).
double working_pK(const EquilibriumSolver& solver, ComponentId system) {
    double nearest = std::numeric_limits<double>::infinity();
    const double ph = solver.ph().value();
    for (std::size_t i = 1; i < solver.species_count(); ++i) {
        const auto acid = solver.species(i - 1);
        const auto base = solver.species(i);
        if (acid.part != base.part || acid.part == EquilibriumSolver::water_part ||
            solver.component(acid.part) != system) {
            continue;
        }
        const double pK = ph - std::log10(base.molality / acid.molality);
        if (std::isfinite(pK) && std::abs(pK - ph) < std::abs(nearest - ph)) {
            nearest = pK;
        }
    }
    return nearest;
}

Request request_for(const Job& job, ComponentId system) {
    Request request;
    request.buffers.push_back({system, job.concentration, std::nullopt});
    request.ph = job.ph;
    request.use_at = job.at;
    request.prepare_at = job.prepare_at;
    request.volume = Volume::litres(1);
    return request;
}

/// pH per kelvin around the temperature of use, by a central difference of 1 K, one-sided at the ends of the range.
double drift(const Table& table, const Mixture& mixture, Temperature at, const ActivityModel& model) {
    const Temperature colder = Temperature::celsius(std::max(at.celsius() - 1.0, 0.0));
    const Temperature warmer = Temperature::celsius(std::min(at.celsius() + 1.0, 100.0));
    return (ph_of(table, mixture, warmer, model).value() - ph_of(table, mixture, colder, model).value()) /
           (warmer.celsius() - colder.celsius());
}

}  // namespace

double share_of_best(const Table& table, const Job& job, std::uint16_t system, const ActivityModel& model) {
    const double total = job.concentration.value;
    Mixture mixture;
    mixture.add({ComponentKind::system, system}, Molality::mol_per_kg(total));
    EquilibriumSolver solver(table, mixture, job.at, model);
    solver.hold_at(job.ph);
    const double water = std::numbers::ln10 * (solver.species(0).molality + solver.species(1).molality).mol_per_kg();
    return (solver.buffer_value().mol_per_kg() - water) / (std::numbers::ln10 / 4 * total);
}

Standing try_system(const Table& table, const Job& job, std::uint16_t system, const Load& load, const Span& span,
                    const ActivityModel& model, const Shelf* shelf) {
    const ComponentId id{ComponentKind::system, system};
    const Request request = request_for(job, id);
    const Plan plan = shelf != nullptr ? plan_recipe(*shelf, request, model) : plan_recipe(table, request, model);
    // Bottles are reagents of the shelf's own table; systems keep their places in it.
    const Table& used = shelf != nullptr ? shelf->table() : table;
    const Composed composed = compose(used, plan.preparation);
    const Mixture& mixture = composed.mixture;
    EquilibriumSolver solver(table, mixture, job.at, model);
    solver.solve();
    const double ph = solver.ph().value();
    const double kg_per_L = composed.water.kg() / plan.preparation.filled_to->L();

    Standing standing;
    standing.system = system;
    standing.counter_ion = plan.counter_ions.front().counter_ion;
    standing.working_pK = working_pK(solver, id);
    standing.buffer_value = solver.buffer_value();
    standing.ionic_strength = solver.ionic_strength();
    standing.ph_expanded_k2 = plan.predicted.uncertainty.expanded_k2;
    standing.ph_per_kelvin = drift(table, mixture, job.at, model);
    standing.ph_on_dilution = ph_of(table, diluted_twofold(mixture), job.at, model).value() - ph;
    standing.after_acid = ph_of(table, loaded(table, mixture, "Cl-", load.acid.mol_per_L() / kg_per_L), job.at, model);
    standing.after_base = ph_of(table, loaded(table, mixture, "Na+", load.base.mol_per_L() / kg_per_L), job.at, model);
    const PH coldest = ph_of(table, mixture, span.coldest, model);
    const PH warmest = ph_of(table, mixture, span.warmest, model);
    if (job.range) {
        standing.over_range = std::pair(coldest, warmest);
    }
    standing.moves_by_load =
        std::max(std::abs(standing.after_acid.value() - ph), std::abs(standing.after_base.value() - ph));
    standing.moves_by_temperature = std::max(std::abs(coldest.value() - ph), std::abs(warmest.value() - ph));
    standing.moves_by_dilution = std::abs(standing.ph_on_dilution);
    standing.moves = standing.moves_by_load + standing.moves_by_temperature + standing.moves_by_dilution;
    for (const std::uint16_t reagent : reagents_used(plan)) {
        if (shelf == nullptr && used.reagents[reagent].rarely_stocked) {
            standing.drawbacks.push_back(fmt::format("few benches keep {}", used.reagents[reagent].name));
        }
    }
    return standing;
}

}  // namespace carboy
