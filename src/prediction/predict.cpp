#include <cmath>

#include <fmt/format.h>

#include "carboy/equilibrium.h"
#include "carboy/prediction.h"

#include "prediction/hand_estimate.h"

namespace carboy {

namespace {

void warn_of_ionic_strength(Prediction& prediction, const ActivityModel& model) {
    const double ionic_strength = prediction.ionic_strength.mol_per_kg();
    if (ionic_strength <= model.trusted_to_mol_per_kg() || model.name() == "ideal") {
        return;
    }
    const double expanded = 2 * model.ph_uncertainty(prediction.ionic_strength);
    prediction.warnings.push_back(
        {"ionic_strength_beyond_model",
         fmt::format(
             "Ionic strength {:.2f} mol/kg is above {:g} mol/kg, the range of the {} model. Expect the pH to be off "
             "by up to {:.2f}; trust the meter, or check at working strength after dilution.",
             ionic_strength, model.trusted_to_mol_per_kg(), model.name() == "davies" ? "Davies" : "Debye-Hückel",
             expanded)});
}

void warn_of_unknown_temperature_dependence(Prediction& prediction, const Table& table) {
    constexpr double reach = 2.0;  // a step more than 2 pH units away holds under 1 % in its other form
    for (const UsedConstant& used : prediction.constants) {
        const System& system = table.systems[used.system];
        const bool takes_part = std::abs(used.pK - prediction.ph.value()) < reach;
        if (takes_part && pK_is_extrapolated(system, used.step, prediction.temperature)) {
            prediction.warnings.push_back(
                {"temperature_dependence_unknown",
                 fmt::format(
                     "The table does not know how pK{} of {} moves with temperature at {:g} °C; its value at 25 °C "
                     "is used. The pH at {:g} °C is a guess: set it with a meter at that temperature.",
                     used.step + 1, system.name, prediction.temperature.celsius(), prediction.temperature.celsius())});
        }
    }
}

}  // namespace

Prediction predict(const Table& table, const Mixture& mixture, Temperature temperature, const ActivityModel& model) {
    EquilibriumSolver solver(table, mixture, temperature, model);
    solver.solve();

    Prediction prediction;
    prediction.temperature = temperature;
    prediction.ph = solver.ph();
    prediction.ionic_strength = solver.ionic_strength();
    prediction.buffer_value = solver.buffer_value();
    prediction.charge_residual = solver.charge_residual();
    prediction.hand_estimate = hand_estimate(table, mixture);
    prediction.activity_model = model.name();
    prediction.water = solver.water();
    prediction.water_activity = solver.water_activity();
    prediction.species.reserve(solver.species_count());
    for (std::size_t i = 0; i < solver.species_count(); ++i) {
        const auto species = solver.species(i);
        const std::string_view owner = species.part == EquilibriumSolver::water_part
                                           ? std::string_view("water")
                                           : name_of(table, solver.component(species.part));
        prediction.particles += species.molality;
        prediction.species.push_back(
            {owner, species.formula, species.charge, species.molality, species.activity_coefficient});
    }
    for (std::size_t part = 0; part < solver.part_count(); ++part) {
        const ComponentId component = solver.component(part);
        if (component.kind != ComponentKind::system) {
            continue;
        }
        const System& system = table.systems[component.index];
        for (std::size_t step = 0; step < system.steps.size(); ++step) {
            prediction.constants.push_back(
                {component.index, step, thermodynamic_pK(system, step, Temperature{}), solver.pK(part, step)});
        }
    }
    prediction.uncertainty = ph_uncertainty(solver, table, model);
    warn_of_ionic_strength(prediction, model);
    warn_of_unknown_temperature_dependence(prediction, table);
    return prediction;
}

}  // namespace carboy
