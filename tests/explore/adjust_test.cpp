#include <cmath>
#include <iostream>
#include <map>
#include <random>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/request_json.h"

#include "catch_shim.h"
#include "explore/mistakes.h"
#include "explore/simulated_batch.h"

using namespace carboy;
using carboy::test::ph_at;
using carboy::test::shown;
using carboy::test::simulate;

namespace {

struct TitrantAtHand {
    const char* label;
    double bench_C;
    Route route = Route::automatic;
};

const std::vector<TitrantAtHand> bottles{{"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C", 22},
                                         {"50 mM Tris-HCl, pH 8.0 at 37 C", 25},
                                         {"100 mM sodium phosphate, pH 7.2", 25},
                                         {"100 mM sodium phosphate, pH 7.0", 25, Route::salts},
                                         {"20 mM HEPES-KOH, 100 mM KCl, pH 7.4 at 37 C", 22},
                                         {"0.2 M sodium acetate, pH 5.0", 25},
                                         {"50 mM sodium citrate, pH 5.5", 25},
                                         {"100 mM glycine-HCl, pH 2.8", 25},
                                         {"50 mM sodium borate, pH 9.0", 25},
                                         {"50 mM MES-NaOH, pH 6.1 at 25 C", 20},
                                         {"20 mM MOPS-NaOH, pH 7.2 at 4 C", 25},
                                         {"50 mM potassium phosphate, pH 7.0 at 37 C", 25},
                                         {"20 mM imidazole-HCl, 200 mM NaCl, pH 7.0", 25},
                                         {"100 mM sodium bicarbonate, pH 9.5", 25}};

Request request(const TitrantAtHand& bottle, double litres = 1.0) {
    Request made = request_from_label(bottle.label, bundled_table());
    made.volume = Volume::litres(litres);
    made.prepare_at = Temperature::celsius(bottle.bench_C);
    made.route = bottle.route;
    return made;
}

Titrant titrant(const char* text) {
    return read_titrant(text, bundled_table());
}

Adjustment adjusted(const Request& request, double reading, const Titrant& with,
                    std::optional<Volume> not_filled = std::nullopt) {
    OffBatch batch;
    batch.request = request;
    batch.reading = PH(reading);
    batch.not_filled = not_filled;
    return adjust(bundled_table(), batch, with, davies_model());
}

/// The titrant that a bench would take for this reading.
Titrant needed(const Plan& plan, double reading) {
    const double expected = ph_at(plan.preparation, plan.request.prepare_at);
    return titrant(reading > expected ? "1 M HCl" : "1 M NaOH");
}

Preparation after(const Preparation& before, const Correction& correction, Amount amount, double litres) {
    Preparation then = before;
    then.portions.push_back({correction.titrant.reagent, amount, std::nullopt});
    then.filled_to = Volume::litres(litres + amount.mol() / correction.titrant.strength->mol_per_L());
    return then;
}

bool same_cause(const Mistake& a, const Mistake& b) {
    const bool factors = a.kind != MistakeKind::titrant_off || std::abs(*a.factor - *b.factor) < 0.05;
    return a.kind == b.kind && a.reagent == b.reagent && a.taken == b.taken && a.temperature == b.temperature &&
           factors && (a.kind != MistakeKind::mass_tenfold || a.factor == b.factor) &&
           (a.kind != MistakeKind::wrong_volume || a.factor == b.factor);
}

}  // namespace

TEST_CASE("adjust: the batch as read reads what was read, and the advice brings it to the target", "[adjust]") {
    std::mt19937_64 random(20261201);
    std::uniform_real_distribution<double> off(-1.2, 1.2);
    int corrected = 0;
    for (const TitrantAtHand& bottle : bottles) {
        for (int i = 0; i < 6; ++i) {
            const Request wanted = request(bottle, 0.7);
            const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
            const double reading = shown(ph_at(plan.preparation, wanted.prepare_at) + off(random));
            const Adjustment result = adjusted(wanted, reading, needed(plan, reading));
            INFO(bottle.label << " read as " << reading);
            if (result.verdict == Verdict::leave_it) {
                continue;
            }
            CHECK(ph_at(result.as_read, wanted.prepare_at) == Approx(reading).margin(1e-8));
            REQUIRE(result.correction);
            const Correction& correction = *result.correction;
            const Preparation then = after(result.as_read, correction, correction.amount, 0.7);
            CHECK(ph_at(then, wanted.use_at) == Approx(wanted.ph->value()).margin(1e-7));
            CHECK(ph_at(then, wanted.prepare_at) == Approx(correction.stop_reading.value()).margin(1e-7));
            CHECK(correction.predicted.ph.value() == Approx(wanted.ph->value()).margin(1e-7));
            CHECK(correction.at_once < correction.amount);
            CHECK(correction.least < correction.amount);
            CHECK(correction.most > correction.amount);
            ++corrected;
        }
    }
    CHECK(corrected > 70);
}

TEST_CASE("adjust: a whole charge short is that much strong acid", "[adjust]") {
    // Ideal activities, and a strong acid alone: 10 mmol/L short of HCl is 10 mmol of it, whatever the buffer.
    Request wanted = request({"0.1 M Tris-HCl, pH 8.0", 25});
    Plan plan = plan_recipe(bundled_table(), wanted, ideal_model());
    Mistake short_of_acid;
    short_of_acid.kind = MistakeKind::titrant_off;
    const double planned = plan.measure.back().amount.mol();
    short_of_acid.factor = (planned - 0.010) / planned;
    const auto batch = simulate(plan, short_of_acid);
    EquilibriumSolver solver(bundled_table(), compose(bundled_table(), batch.preparation).mixture, wanted.prepare_at,
                             ideal_model());
    solver.solve();
    OffBatch off;
    off.request = wanted;
    off.reading = solver.ph();
    const Adjustment result = adjust(bundled_table(), off, titrant("1 M HCl"), ideal_model());
    CHECK(result.off_by == OffBy::acid_missing);
    CHECK(result.off.mol() == Approx(0.010).epsilon(1e-6));
    REQUIRE(result.correction);
    // Nothing but the free H+ and OH- of the added volume comes on top.
    CHECK(result.correction->amount.mol() == Approx(0.010).epsilon(1e-4));
    CHECK(result.correction->volume.mL() == Approx(10.0).epsilon(1e-4));
}

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
    for (const TitrantAtHand& bottle : bottles) {
        const Request wanted = request(bottle);
        const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
        const Bench bench{bundled_table(), davies_model()};
        const VesselContent vessel = planned_vessel(bundled_table(), plan, std::nullopt);
        const double expected = ph_at(plan.preparation, wanted.prepare_at);
        const auto tried = single_mistakes(bench, plan, vessel);
        const auto planned_titrant = titrant_of(bundled_table(), plan);

        std::vector<Mistake> truths;
        for (const Suspect& suspect : tried) {
            if (suspect.mistake.kind != MistakeKind::meter) {
                truths.push_back(suspect.mistake);
            }
        }
        for (int i = 0; planned_titrant && i < 12; ++i) {
            const double factor = i % 2 == 0 ? too_little(random) : too_much(random);
            truths.push_back(titrant_off_by(plan, vessel, *planned_titrant, factor).mistake);
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
        const auto titrant_weight = [&](double ph) {
            double weight = 0;
            constexpr double step = 0.005;
            for (double factor = 0; planned_titrant && factor < 3; factor += step) {
                Mistake mistake = titrant_off_by(plan, vessel, *planned_titrant, factor + step / 2).mistake;
                if (std::abs(ph_at(simulate(plan, mistake).preparation, wanted.prepare_at) - ph) < 0.02) {
                    weight += prior(MistakeKind::titrant_off) * titrant_factor_share(factor, factor + step);
                }
            }
            return weight;
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
            const Adjustment result = adjusted(wanted, reading, needed(plan, reading));
            INFO(bottle.label << ": " << mistake_word(truth.kind) << " reads " << reading);
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

TEST_CASE("adjust: a batch not yet filled comes to its target at the mark", "[adjust]") {
    for (const char* label : {"50 mM Tris-HCl, 150 mM NaCl, pH 7.5 at 4 C", "20 mM HEPES-KOH, pH 7.4",
                              "50 mM Tris-HCl, 0.02 % w/v sodium azide, pH 8.0"}) {
        const Request wanted = request({label, 22});
        const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
        for (const double off : {-0.4, 0.4}) {
            const double reading = shown(ph_at(plan.preparation, wanted.prepare_at) + off);
            const Adjustment result = adjusted(wanted, reading, needed(plan, reading), Volume::millilitres(850));
            INFO(label);
            REQUIRE(result.correction);
            const Correction& correction = *result.correction;
            CHECK(ph_at(result.as_read, wanted.prepare_at) == Approx(reading).margin(1e-8));
            Preparation then = after(result.as_read, correction, correction.amount, 0.85);
            CHECK(ph_at(then, wanted.prepare_at) == Approx(correction.stop_reading.value()).margin(1e-7));
            CHECK(correction.volume_then.L() == Approx(then.filled_to->L()));
            then.filled_to = wanted.volume;
            for (const Portion& portion : plan.preparation.portions) {
                if (goes_in_last(bundled_table().reagents[portion.reagent], bundled_table())) {
                    then.portions.push_back(portion);
                }
            }
            CHECK(correction.finished_volume.L() == Approx(1.0));
            CHECK(ph_at(then, wanted.use_at) == Approx(wanted.ph->value()).margin(1e-7));
            CHECK(ph_at(then, wanted.prepare_at) == Approx(correction.finished_reading.value()).margin(1e-7));
        }
    }
}

TEST_CASE("adjust: weak acids and weighed bases serve as titrants", "[adjust]") {
    for (const auto& [label, reading, with] : std::vector<std::tuple<const char*, double, const char*>>{
             {"0.2 M sodium acetate, pH 5.0", 5.4, "acetic acid"},
             {"0.1 M sodium phosphate, pH 7.2", 7.6, "H3PO4 85 %"},
             {"50 mM Tris-HCl, pH 8.0", 7.6, "Tris"},
             {"50 mM Tris-HCl, pH 8.0", 7.6, "1 M ammonia"},
             {"0.2 M sodium acetate, pH 5.0", 4.6, "NaOH"}}) {
        const Request wanted = request({label, 25});
        const Adjustment result = adjusted(wanted, reading, titrant(with));
        INFO(label << " with " << with);
        REQUIRE(result.correction);
        const Correction& correction = *result.correction;
        CHECK(correction.titrant.reagent == titrant(with).reagent);
        Preparation then = result.as_read;
        then.portions.push_back({correction.titrant.reagent, correction.amount, std::nullopt});
        then.filled_to = std::max(Volume::litres(1) + correction.volume, Volume::litres(1));
        CHECK(ph_at(then, wanted.use_at) == Approx(wanted.ph->value()).margin(1e-7));
    }
}

TEST_CASE("adjust: what can still be weighed in brings the batch back to its recipe", "[adjust]") {
    // The dodecahydrate weighed as the anhydrous salt: 142 of 358 parts of it.
    const Request wanted = request({"100 mM sodium phosphate, pH 7.2", 25, Route::titrated});
    const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
    int weighed_in = 0;
    const Bench bench{bundled_table(), davies_model()};
    for (const Suspect& suspect : single_mistakes(bench, plan, planned_vessel(bundled_table(), plan, std::nullopt))) {
        if (!suspect.mistake.to_weigh_in) {
            continue;
        }
        Preparation mended = simulate(plan, suspect.mistake).preparation;
        const Weighing& more = *suspect.mistake.to_weigh_in;
        mended.portions.push_back({more.reagent, more.amount, std::nullopt});
        CHECK(ph_at(mended, wanted.use_at) == Approx(7.2).margin(1e-6));
        ++weighed_in;
    }
    CHECK(weighed_in >= 2);
}

TEST_CASE("adjust: a reading from before the titrant tells a reagent from a titrant", "[adjust]") {
    const Request wanted = request({"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C", 22});
    const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
    const Reagent* tris = find_reagent(bundled_table(), "Tris");
    const double planned_before = plan.readings.front().ph.value();
    for (const bool by_titrant : {true, false}) {
        // A tenth of the acid short, or EDTA left out: both leave the batch too basic.
        Mistake truth;
        truth.kind = by_titrant ? MistakeKind::titrant_off : MistakeKind::left_out;
        truth.factor = by_titrant ? 0.97 : 0.0;
        for (const Weighing& item : plan.weigh) {
            const bool edta = item.purpose == Purpose::additive && item.mass < Mass::grams(1);
            truth.reagent = edta ? item.reagent : truth.reagent;
        }
        REQUIRE((truth.reagent && tris != nullptr));
        const auto batch = simulate(plan, truth);
        OffBatch off;
        off.request = wanted;
        off.reading = PH(shown(ph_at(batch.preparation, wanted.prepare_at)));
        Preparation before = batch.preparation;
        before.portions.pop_back();  // the titrant stands last in the line
        before.filled_to = plan.dissolve_in;
        const double read_before = shown(ph_at(before, wanted.prepare_at));
        CHECK((std::abs(read_before - planned_before) < 0.01) == by_titrant);
        off.reading_before = PH(read_before);
        const Adjustment result = adjust(bundled_table(), off, titrant("1 M HCl"), davies_model());
        INFO(mistake_word(result.mistakes.front().kind));
        REQUIRE(result.expected_before);
        CHECK(result.expected_before->value() == Approx(planned_before).margin(1e-9));
        CHECK(result.mistakes.front().kind == truth.kind);
    }
}
