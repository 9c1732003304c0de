#include <algorithm>
#include <cmath>
#include <tuple>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/selection.h"

#include "explore/select_facts.h"
#include "explore/select_mixed.h"
#include "explore/select_trial.h"

namespace carboy {

namespace {

/// Without a stated load: so much of the buffer's concentration each way. Common practice, no source: what hand sums
/// leave out.
constexpr double assumed_load_share = 0.05;
/// Without a stated range: bench, bath and cold room differ by this much. Own assumption.
constexpr double assumed_span_K = 5.0;
/// One pH from a pK a buffer has 0.19 of its concentration in buffer value, a third of the best. Common practice, no
/// source: work within 1 pH of a pK.
constexpr double least_share_of_best = 0.33;

void check_temperature(Temperature temperature, const char* where) {
    if (!(temperature.celsius() >= 0 && temperature.celsius() <= 100)) {
        throw Error(ErrorKind::input, "temperature_out_of_range",
                    fmt::format("{:g} °C is outside 0 to 100 °C", temperature.celsius()), where,
                    "buffers are computed for liquid water");
    }
}

void check(const Job& job) {
    check_temperature(job.at, "--at");
    if (!(job.concentration.value > 0) || job.concentration.value > 10) {
        throw Error(ErrorKind::input, "bad_amount", "a buffer's concentration must be above zero and up to 10 mol/L",
                    "--concentration", "give one, such as '50 mM'");
    }
    if (job.range) {
        check_temperature(job.range->first, "--range");
        check_temperature(job.range->second, "--range");
        if (!(job.range->first < job.range->second)) {
            throw Error(ErrorKind::input, "bad_range", "the temperature range must go from cold to warm", "--range",
                        "write it as '4 C:37 C'");
        }
    }
    if (job.ph_to && !(job.ph < *job.ph_to)) {
        throw Error(ErrorKind::input, "bad_range", "the range of pH must go upwards", "--ph", "write it as 5:8");
    }
}

std::optional<Excluded> excluded_by_figure(const Standing& standing, const Job& job, Molality most_salt) {
    const auto computed = [&](const char* code, std::string reason) {
        return Excluded{standing.system, code, std::move(reason), "computed", Evidence::computed};
    };
    if (job.hold_ph && standing.moves_by_load > *job.hold_ph) {
        return computed("moves_too_much", fmt::format("the load moves it by {:.2f} pH, more than {:g}",
                                                      standing.moves_by_load, *job.hold_ph));
    }
    if (job.most_ionic_strength && standing.ionic_strength > most_salt) {
        return computed("too_much_salt",
                        fmt::format("its ionic strength of {:.4f} mol/kg is above the limit of {:.4f} mol/kg",
                                    standing.ionic_strength.mol_per_kg(), most_salt.mol_per_kg()));
    }
    return std::nullopt;
}

Molality as_molality(const IonicStrengthTarget& limit, Temperature filled_at) {
    const double per_kg = limit.per_litre ? 1.0 / water_at(filled_at).density_kg_per_L : 1.0;
    return Molality::mol_per_kg(limit.value_mol * per_kg);
}

void judge(Selection& selection, const Table& table, std::uint16_t system, const Load& load, const Span& span,
           Molality most_salt, const ActivityModel& model, const Shelf* shelf) {
    const Job& job = selection.job;
    if (auto fact = excluded_by_fact(table, job, system)) {
        selection.excluded.push_back(std::move(*fact));
        return;
    }
    const double share = share_of_best(table, job, system, model);
    if (share < least_share_of_best) {
        selection.excluded.push_back(
            {system, "too_far_from_pK",
             fmt::format("at pH {:g} it gives {:.0f} % of the best buffer value; one pH from a pK it would be 33 %",
                         job.ph.value(), 100 * std::max(share, 0.0)),
             "Common practice of the bench: work within 1 pH of a pK.", Evidence::common_practice});
        return;
    }
    try {
        Standing standing = try_system(table, job, system, load, span, model, shelf);
        if (auto figure = excluded_by_figure(standing, job, most_salt)) {
            selection.excluded.push_back(std::move(*figure));
            return;
        }
        add_facts(standing, table, job);
        add_reason(standing, job);
        selection.ranked.push_back(std::move(standing));
    } catch (const Error& error) {
        if (error.kind() == ErrorKind::defect) {
            throw;
        }
        const bool shelf_is_short = shelf != nullptr && error.code() == "short_on_shelf";
        selection.excluded.push_back({system, shelf_is_short ? "not_on_shelf" : "no_recipe", error.message(),
                                      shelf_is_short ? "the shelf" : "computed", Evidence::computed});
    }
}

}  // namespace

Selection select_buffers(const Table& table, const Job& job, const ActivityModel& model, const Shelf* shelf) {
    check(job);
    Selection selection;
    selection.job = job;
    selection.activity_model = model.name();
    selection.load_assumed = !job.acid && !job.base;
    const Molarity assumed = Molarity::mol_per_L(assumed_load_share * job.concentration.value);
    selection.acid = job.acid.value_or(selection.load_assumed ? assumed : Molarity{});
    selection.base = job.base.value_or(selection.load_assumed ? assumed : Molarity{});
    if (job.ph_to) {
        selection.mixed = mixed_buffers(table, job, model, selection.excluded);
        return selection;
    }
    Span span{Temperature::celsius(std::max(job.at.celsius() - assumed_span_K, 0.0)),
              Temperature::celsius(std::min(job.at.celsius() + assumed_span_K, 100.0))};
    if (job.range) {
        span = {job.range->first, job.range->second};
    }
    const Molality most_salt =
        job.most_ionic_strength ? as_molality(*job.most_ionic_strength, job.prepare_at) : Molality{};
    for (std::size_t system = 0; system < table.systems.size(); ++system) {
        if (table.systems[system].role == Role::buffer) {
            judge(selection, table, static_cast<std::uint16_t>(system), {selection.acid, selection.base}, span,
                  most_salt, model, shelf);
        }
    }
    std::stable_sort(selection.ranked.begin(), selection.ranked.end(), [](const Standing& a, const Standing& b) {
        return std::tuple(!a.drawbacks.empty(), !a.doubts.empty(), a.moves) <
               std::tuple(!b.drawbacks.empty(), !b.doubts.empty(), b.moves);
    });
    return selection;
}

}  // namespace carboy
