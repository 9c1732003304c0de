#include "explore/select_mixed.h"

#include <algorithm>
#include <cmath>
#include <numbers>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/equilibrium.h"

#include "explore/select_facts.h"

namespace carboy {

namespace {

constexpr std::size_t grid_points = 41;
constexpr std::size_t most_proposals_of_a_size = 5;

/// Buffer value of one system per mole, along the range of pH.
struct Curve {
    std::uint16_t system;
    std::vector<double> per_mol;
};

double ph_at(const Job& job, std::size_t point) {
    const double share = static_cast<double>(point) / (grid_points - 1);
    return job.ph.value() + share * (job.ph_to->value() - job.ph.value());
}

Curve curve_of(const Table& table, const Job& job, std::uint16_t system, const ActivityModel& model) {
    Curve curve{system, {}};
    Mixture mixture;
    mixture.add({ComponentKind::system, system}, Molality::mol_per_kg(job.concentration.value));
    EquilibriumSolver solver(table, mixture, job.at, model);
    for (std::size_t point = 0; point < grid_points; ++point) {
        solver.hold_at(PH(ph_at(job, point)));
        const double water =
            std::numbers::ln10 * (solver.species(0).molality + solver.species(1).molality).mol_per_kg();
        curve.per_mol.push_back((solver.buffer_value().mol_per_kg() - water) / job.concentration.value);
    }
    return curve;
}

/// The mixture really solved along the range, its pH imposed: the weakest point of all of it together, water included.
MixedBuffer verified(const Table& table, const Job& job, const std::vector<std::uint16_t>& systems,
                     const ActivityModel& model) {
    MixedBuffer mixed;
    mixed.systems = systems;
    Mixture mixture;
    const double share = job.concentration.value / static_cast<double>(systems.size());
    for (const std::uint16_t system : systems) {
        mixture.add({ComponentKind::system, system}, Molality::mol_per_kg(share));
    }
    EquilibriumSolver solver(table, mixture, job.at, model);
    for (std::size_t point = 0; point < grid_points; ++point) {
        const PH ph(ph_at(job, point));
        solver.hold_at(ph);
        if (point == 0 || solver.buffer_value() < mixed.least_buffer_value) {
            mixed.least_buffer_value = solver.buffer_value();
            mixed.weakest_at = ph;
        }
    }
    std::vector<std::string> steps;
    for (const std::uint16_t index : systems) {
        const System& system = table.systems[index];
        for (std::size_t step = 0; step < system.steps.size(); ++step) {
            const double pK = thermodynamic_pK(system, step, job.at);
            if (pK > job.ph.value() - 1 && pK < job.ph_to->value() + 1) {
                steps.push_back(fmt::format("{:.1f}", pK));
            }
        }
    }
    std::sort(steps.begin(), steps.end(), [](const auto& a, const auto& b) { return std::stod(a) < std::stod(b); });
    mixed.reason =
        fmt::format("at least {:.1f} % of the best anywhere from pH {:g} to {:g}, least at {:.1f}; pK {}",
                    100 * mixed.least_buffer_value.mol_per_kg() / (std::numbers::ln10 / 4 * job.concentration.value),
                    job.ph.value(), job.ph_to->value(), mixed.weakest_at.value(), fmt::join(steps, ", "));
    return mixed;
}

struct Proposal {
    std::vector<std::uint16_t> systems;
    double least = 0;
};

double least_of(const std::vector<const Curve*>& curves) {
    double least = std::numeric_limits<double>::infinity();
    for (std::size_t point = 0; point < grid_points; ++point) {
        double sum = 0;
        for (const Curve* curve : curves) {
            sum += curve->per_mol[point];
        }
        least = std::min(least, sum / static_cast<double>(curves.size()));
    }
    return least;
}

/// Every set of `size` systems, those with the highest weakest point kept.
void extend(const std::vector<Curve>& curves, std::size_t from, std::vector<const Curve*>& chosen, std::size_t size,
            std::vector<Proposal>& best) {
    if (chosen.size() == size) {
        Proposal proposal{{}, least_of(chosen)};
        for (const Curve* curve : chosen) {
            proposal.systems.push_back(curve->system);
        }
        const auto place =
            std::find_if(best.begin(), best.end(), [&](const Proposal& other) { return other.least < proposal.least; });
        best.insert(place, std::move(proposal));
        best.resize(std::min(best.size(), most_proposals_of_a_size));
        return;
    }
    for (std::size_t i = from; i < curves.size(); ++i) {
        chosen.push_back(&curves[i]);
        extend(curves, i + 1, chosen, size, best);
        chosen.pop_back();
    }
}

}  // namespace

std::vector<MixedBuffer> mixed_buffers(const Table& table, const Job& job, const ActivityModel& model,
                                       std::vector<Excluded>& excluded) {
    std::vector<Curve> curves;
    for (std::size_t i = 0; i < table.systems.size(); ++i) {
        const auto system = static_cast<std::uint16_t>(i);
        if (table.systems[i].role != Role::buffer) {
            continue;
        }
        if (auto fact = excluded_by_fact(table, job, system)) {
            excluded.push_back(std::move(*fact));
            continue;
        }
        Standing facts;
        facts.system = system;
        add_facts(facts, table, job);
        if (!facts.drawbacks.empty()) {
            excluded.push_back({system,
                                "drawback",
                                fmt::format("{}", fmt::join(facts.drawbacks, "; ")),
                                {},
                                Evidence::common_practice});
            continue;
        }
        Curve curve = curve_of(table, job, system, model);
        // One that holds nowhere in the range only takes the place of one that does.
        if (*std::max_element(curve.per_mol.begin(), curve.per_mol.end()) > 0.3) {
            curves.push_back(std::move(curve));
        }
    }
    std::vector<MixedBuffer> mixed;
    for (std::size_t size = 1; size <= 3; ++size) {
        std::vector<Proposal> best;
        std::vector<const Curve*> chosen;
        extend(curves, 0, chosen, size, best);
        for (const Proposal& proposal : best) {
            mixed.push_back(verified(table, job, proposal.systems, model));
        }
    }
    std::stable_sort(mixed.begin(), mixed.end(), [](const MixedBuffer& a, const MixedBuffer& b) {
        return a.least_buffer_value > b.least_buffer_value;
    });
    return mixed;
}

}  // namespace carboy
