#include "carboy/titration.h"

#include <algorithm>
#include <cmath>

namespace carboy {

namespace {

/// Every component of both, in the order the solver keeps.
Mixture both(const Solution& sample, const Solution& titrant) {
    Mixture mixture;
    for (const Solution* solution : {&sample, &titrant}) {
        for (const auto& [component, total] : solution->mixture.parts()) {
            mixture.add(component, total);
        }
    }
    return mixture;
}

double mol_in(const Solution& solution, ComponentId component) {
    for (const auto& [id, total] : solution.mixture.parts()) {
        if (id == component) {
            return total.mol_per_kg() * solution.water.kg();
        }
    }
    return 0;
}

}  // namespace

Titration::Titration(const Table& table, const Solution& sample, const Solution& titrant, Temperature temperature,
                     const ActivityModel& model)
    : table_(&table),
      sample_water_kg_(sample.water.kg()),
      titrant_water_kg_per_L_(titrant.water.kg() / titrant.volume.L()),
      sample_volume_(sample.volume),
      solver_(table, both(sample, titrant), temperature, model) {
    for (std::size_t i = 0; i < solver_.part_count(); ++i) {
        const ComponentId id = solver_.component(i);
        const int top = id.kind == ComponentKind::system ? table.systems[id.index].species.front().charge
                                                         : table.spectators[id.index].charge;
        parts_.push_back({id, mol_in(sample, id), mol_in(titrant, id) / titrant.volume.L(), top});
    }
}

PH Titration::ph_at(Volume added) {
    const double litres = added.L();
    const double water = sample_water_kg_ + titrant_water_kg_per_L_ * litres;
    for (std::size_t i = 0; i < parts_.size(); ++i) {
        solver_.set_total(i,
                          Molality::mol_per_kg((parts_[i].sample_mol + parts_[i].titrant_mol_per_L * litres) / water));
    }
    solver_.solve();
    return solver_.ph();
}

Mixture Titration::mixture_at(Volume added) const {
    const double water = sample_water_kg_ + titrant_water_kg_per_L_ * added.L();
    Mixture mixture;
    for (const Part& part : parts_) {
        const double mol = part.sample_mol + part.titrant_mol_per_L * added.L();
        mixture.add(part.component, Molality::mol_per_kg(mol / water));
    }
    return mixture;
}

TitrationPoint Titration::at(Volume added) {
    // A drop small against what changes the pH of pure water, large against the rounding of a pH.
    const Volume drop = std::max(added * 1e-7, sample_volume_ * 1e-9);
    const Volume before = added < drop ? Volume{} : added - drop;
    const Volume after = added + drop;
    const double rise = ph_at(after).value() - ph_at(before).value();
    TitrationPoint point;
    point.added = added;
    point.slope_per_mL = rise / (after - before).mL();
    point.ph = ph_at(added);
    point.buffer_value = solver_.buffer_value();
    point.ionic_strength = solver_.ionic_strength();
    return point;
}

int Titration::direction() {
    return at(Volume{}).slope_per_mL < 0 ? -1 : 1;
}

std::optional<Volume> Titration::volume_to(PH ph) {
    const auto above = [&](Volume added) { return ph_at(added) > ph; };
    const bool start = above(Volume{});
    // Eight steps a decade: a curve does not turn and come back within a third more titrant.
    constexpr double most = 1000;
    Volume low;
    Volume high = sample_volume_ * 1e-6;
    while (above(high) == start) {
        if (high > most * sample_volume_) {
            return std::nullopt;
        }
        low = high;
        high = high * std::pow(10.0, 0.125);
    }
    for (int halving = 0; halving < 100 && (high - low) > high * 1e-14; ++halving) {
        const Volume middle = (low + high) / 2;
        (above(middle) == start ? low : high) = middle;
    }
    return (low + high) / 2;
}

std::vector<Titration::Equivalent> Titration::equivalents() const {
    // Protons leave in the order of the pK. Between two steps the charge that the strong ions and the fully protonated
    // forms leave over equals the totals of all steps before; both sides are linear in the titrant's volume.
    struct Place {
        std::size_t part;
        std::size_t step;
        double pK;
    };
    std::vector<Place> places;
    double charge = 0;
    double charge_per_L = 0;
    for (std::size_t i = 0; i < parts_.size(); ++i) {
        charge += parts_[i].top_charge * parts_[i].sample_mol;
        charge_per_L += parts_[i].top_charge * parts_[i].titrant_mol_per_L;
        const bool present = parts_[i].sample_mol > 0 || parts_[i].titrant_mol_per_L > 0;
        const std::size_t steps = parts_[i].component.kind == ComponentKind::system && present
                                      ? table_->systems[parts_[i].component.index].steps.size()
                                      : 0;
        for (std::size_t step = 0; step < steps; ++step) {
            places.push_back({i, step, solver_.pK(i, step)});
        }
    }
    std::stable_sort(places.begin(), places.end(), [](const Place& a, const Place& b) { return a.pK < b.pK; });

    std::vector<Equivalent> found;
    for (std::size_t k = 0; k <= places.size(); ++k) {
        if (k > 0) {
            charge -= parts_[places[k - 1].part].sample_mol;
            charge_per_L -= parts_[places[k - 1].part].titrant_mol_per_L;
        }
        const double litres = -charge / charge_per_L;
        if (!std::isfinite(litres) || litres <= 1e-9 * sample_volume_.L()) {
            continue;
        }
        Equivalent equivalent;
        equivalent.volume = Volume::litres(litres);
        const double before = k > 0 ? std::max(places[k - 1].pK, 0.0) : 0.0;
        const double water = solver_.water().pKw;
        const double after = k < places.size() ? std::min(places[k].pK, water) : water;
        equivalent.gap_pK = after - before;
        // Alkali completes the step before, acid the one after.
        const std::size_t complete = charge_per_L > 0 ? k - 1 : k;
        if (complete < places.size()) {
            equivalent.system = parts_[places[complete].part].component;
            equivalent.step = places[complete].step;
        }
        found.push_back(equivalent);
    }
    std::stable_sort(found.begin(), found.end(),
                     [](const Equivalent& a, const Equivalent& b) { return a.volume < b.volume; });
    return found;
}

}  // namespace carboy
