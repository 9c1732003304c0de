#include <cmath>
#include <iostream>
#include <map>
#include <random>

#include <fmt/format.h>

#include "carboy/error.h"

#include "catch_shim.h"
#include "explore/mistakes.h"
#include "explore/simulated_batch.h"

using namespace carboy;
using carboy::test::adjusted;
using carboy::test::after;
using carboy::test::Job;
using carboy::test::jobs;
using carboy::test::needed;
using carboy::test::ph_at;
using carboy::test::request;
using carboy::test::shown;
using carboy::test::simulate;

namespace {

bool same_cause(const Mistake& a, const Mistake& b) {
    const bool factors = a.kind != MistakeKind::titrant_off || std::abs(*a.factor - *b.factor) < 0.05;
    return a.kind == b.kind && a.reagent == b.reagent && a.taken == b.taken && a.temperature == b.temperature &&
           factors && (a.kind != MistakeKind::mass_tenfold || a.factor == b.factor) &&
           (a.kind != MistakeKind::wrong_volume || a.factor == b.factor);
}

}  // namespace

TEST_CASE("adjust: single mistakes are recovered, and titrant errors put right", "[adjust][recovery]") {
    // A mistake is called distinguishable when (1) the batch reads more than 0.05 away from what it should read, and
    // (2) no other mistake tried of at least its weight would read the same within 0.02. The weight of a mistake is the
    // prior of its kind shared among the alternatives of that kind; of a titrant error of a certain size, the prior
    // times the share of titrant errors that read the same within 0.02.
    std::mt19937_64 random(4242);
    std::uniform_real_distribution<double> too_little(0.4, 0.97);
    std::uniform_real_distribution<double> too_much(1.03, 1.6);
    int all = 0;
    int distinguishable = 0;
    int right = 0;
    double worst_pH = 0;
    double worst_one_shot = 0;
    std::map<std::string_view, std::pair<int, int>> by_kind;
    for (const Job& job : jobs()) {
        const Request wanted = request(job);
        const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
        const Bench bench{bundled_table(), davies_model()};
        const Contents contents = planned_contents(bundled_table(), plan, std::nullopt);
        const double expected = ph_at(plan.preparation, wanted.prepare_at);
        const auto tried = single_mistakes(bench, plan, contents);
        const auto planned_titrant = titrant_of(bundled_table(), plan);

        std::vector<Mistake> truths;
        for (const Suspect& suspect : tried) {
            if (suspect.mistake.kind != MistakeKind::meter) {
                truths.push_back(suspect.mistake);
            }
        }
        for (int i = 0; planned_titrant && i < 12; ++i) {
            const double factor = i % 2 == 0 ? too_little(random) : too_much(random);
            truths.push_back(titrant_off_by(plan, contents, *planned_titrant, factor).mistake);
        }
        struct Read {
            Mistake mistake;
            double reading;
            double weight;
        };
        std::vector<Read> readings;
        std::map<MistakeKind, int> of_kind;
        for (const Suspect& suspect : tried) {
            try {
                const auto batch = simulate(plan, suspect.mistake);
                const double reading = ph_at(batch.preparation, batch.read_at);
                if (suspect.mistake.kind == MistakeKind::meter || std::abs(reading - expected) > 0.02) {
                    readings.push_back({suspect.mistake, reading, 0});
                    ++of_kind[suspect.mistake.kind];
                }
            } catch (const Error&) {
                // no room for water: not a batch that anyone has
            }
        }
        for (Read& read : readings) {
            read.weight = prior(read.mistake.kind) / of_kind[read.mistake.kind];
        }
        // What share of titrant errors reads within 0.02 of a pH.
        std::vector<std::pair<double, double>> titrant_readings;  // pH, and the share of errors that give it
        constexpr double step = 0.005;
        for (double factor = 0; planned_titrant && factor < 3; factor += step) {
            const Mistake mistake = titrant_off_by(plan, contents, *planned_titrant, factor + step / 2).mistake;
            titrant_readings.emplace_back(ph_at(simulate(plan, mistake).preparation, wanted.prepare_at),
                                          titrant_factor_share(factor, factor + step));
        }
        const auto titrant_weight = [&](double ph) {
            double share = 0;
            for (const auto& [reads, of_errors] : titrant_readings) {
                share += std::abs(reads - ph) < 0.02 ? of_errors : 0.0;
            }
            return prior(MistakeKind::titrant_off) * share;
        };

        for (const Mistake& truth : truths) {
            double exact = 0;
            test::SimulatedBatch batch;
            try {
                batch = simulate(plan, truth);
                exact = ph_at(batch.preparation, batch.read_at);
            } catch (const Error&) {
                continue;
            }
            ++all;
            const double reading = shown(exact);
            if (std::abs(exact - expected) <= 0.05) {
                continue;
            }
            const bool by_titrant = truth.kind == MistakeKind::titrant_off;
            double weight = titrant_weight(exact);
            bool alone = true;
            if (!by_titrant) {
                const double of_titrant = weight;
                for (const Read& read : readings) {
                    weight = same_cause(read.mistake, truth) ? read.weight : weight;
                }
                alone = weight > of_titrant;
            }
            for (const Read& read : readings) {
                alone = alone && (same_cause(read.mistake, truth) || std::abs(read.reading - exact) > 0.02 ||
                                  read.weight < weight);
            }
            const Adjustment result = adjusted(plan, reading, needed(plan, reading));
            INFO(job.label << ": " << mistake_word(truth.kind) << " reads " << reading);
            if (alone) {
                ++distinguishable;
                const bool first = !result.mistakes.empty() && same_cause(result.mistakes.front(), truth);
                right += first ? 1 : 0;
                auto& [tallied, hit] = by_kind[mistake_word(truth.kind)];
                ++tallied;
                hit += first ? 1 : 0;
            }
            const bool titrant_error = by_titrant || truth.kind == MistakeKind::titrant_forgotten ||
                                       truth.kind == MistakeKind::titrant_other_strength ||
                                       truth.kind == MistakeKind::set_at_bench ||
                                       truth.kind == MistakeKind::set_at_other_temperature;
            if (titrant_error && result.correction) {
                const Correction& correction = *result.correction;
                // As it is told: what may go in at once must not overshoot ...
                const double start = exact;
                const double at_once =
                    ph_at(after(batch.preparation, correction, correction.at_once, 1.0), wanted.prepare_at);
                const double stop = shown(correction.stop_reading.value());
                CHECK((at_once - stop) * (start - stop) >= -1e-4);
                // ... then in small portions until the meter shows the reading.
                double low = correction.at_once.mol();
                double high = 3 * correction.amount.mol();
                for (int i = 0; i < 60; ++i) {
                    const double middle = (low + high) / 2;
                    const double now =
                        ph_at(after(batch.preparation, correction, Amount::mol(middle), 1.0), wanted.prepare_at);
                    ((now - stop) * (start - stop) > 0 ? low : high) = middle;
                }
                const double reached =
                    ph_at(after(batch.preparation, correction, Amount::mol(low), 1.0), wanted.use_at);
                worst_pH = std::max(worst_pH, std::abs(reached - wanted.ph->value()));
                CHECK(std::abs(reached - wanted.ph->value()) <= 0.01);
                const double one_shot =
                    ph_at(after(batch.preparation, correction, correction.amount, 1.0), wanted.use_at);
                // Far from the buffer's range a hundredth on the meter is much acid: there the volume alone is no
                // guide.
                if (std::abs(exact - expected) < 2) {
                    worst_one_shot = std::max(worst_one_shot, std::abs(one_shot - wanted.ph->value()));
                }
            }
        }
    }
    std::cout << fmt::format("adjust: {} batches, {} distinguishable ({:.0f} %), right cause first in {} ({:.1f} %)\n",
                             all, distinguishable, 100.0 * distinguishable / all, right,
                             100.0 * right / distinguishable);
    for (const auto& [kind, tally] : by_kind) {
        std::cout << fmt::format("  {:28} {:3} of {:3}\n", kind, tally.second, tally.first);
    }
    std::cout << fmt::format(
        "adjust: worst pH after a titrant error is put right by the meter {:.4f}, by the volume alone, read within "
        "2 of its pH, {:.4f}\n",
        worst_pH, worst_one_shot);
    CHECK(all > 250);
    CHECK(right >= 0.9 * distinguishable);
}
