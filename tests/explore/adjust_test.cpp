#include <cmath>
#include <random>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/request_json.h"

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
using carboy::test::titrant;

TEST_CASE("adjust: the batch as read reads what was read, and the advice brings it to the target", "[adjust]") {
    std::mt19937_64 random(20261201);
    std::uniform_real_distribution<double> off(-1.2, 1.2);
    int corrected = 0;
    for (const Job& job : jobs()) {
        for (int i = 0; i < 6; ++i) {
            const Request wanted = request(job, 0.7);
            const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
            const double reading = shown(ph_at(plan.preparation, wanted.prepare_at) + off(random));
            const Adjustment result = adjusted(plan, reading, needed(plan, reading));
            INFO(job.label << " read as " << reading);
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
    off.reading = solver.ph();
    const Adjustment result = adjust(bundled_table(), plan, off, titrant("1 M HCl"), ideal_model());
    CHECK(result.off_by == OffBy::acid_missing);
    CHECK(result.off.mol() == Approx(0.010).epsilon(1e-6));
    REQUIRE(result.correction);
    // Nothing but the free H+ and OH- of the added volume comes on top.
    CHECK(result.correction->amount.mol() == Approx(0.010).epsilon(1e-4));
    CHECK(result.correction->volume.mL() == Approx(10.0).epsilon(1e-4));
}

TEST_CASE("adjust: a batch not yet filled comes to its target at the mark", "[adjust]") {
    for (const char* label : {"50 mM Tris-HCl, 150 mM NaCl, pH 7.5 at 4 C", "20 mM HEPES-KOH, pH 7.4",
                              "50 mM Tris-HCl, 0.02 % w/v sodium azide, pH 8.0"}) {
        const Request wanted = request({label, 22});
        const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
        for (const double off : {-0.4, 0.4}) {
            const double reading = shown(ph_at(plan.preparation, wanted.prepare_at) + off);
            const Adjustment result = adjusted(plan, reading, needed(plan, reading), Volume::millilitres(850));
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
        const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
        const Adjustment result = adjusted(plan, reading, titrant(with));
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
    for (const Suspect& suspect : single_mistakes(bench, plan, planned_contents(bundled_table(), plan, std::nullopt))) {
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
        off.reading = PH(shown(ph_at(batch.preparation, wanted.prepare_at)));
        Preparation before = batch.preparation;
        before.portions.pop_back();  // the titrant stands last in the line
        before.filled_to = plan.dissolve_in;
        const double read_before = shown(ph_at(before, wanted.prepare_at));
        CHECK((std::abs(read_before - planned_before) < 0.01) == by_titrant);
        off.reading_before = PH(read_before);
        const Adjustment result = adjust(bundled_table(), plan, off, titrant("1 M HCl"), davies_model());
        INFO(mistake_word(result.mistakes.front().kind));
        REQUIRE(result.expected_before);
        CHECK(result.expected_before->value() == Approx(planned_before).margin(1e-9));
        CHECK(result.mistakes.front().kind == truth.kind);
    }
}

TEST_CASE("adjust: a concentrate comes to its target diluted", "[adjust]") {
    Request wanted = request({"100 mM sodium phosphate, 1.37 M NaCl, pH 7.4", 25});
    wanted.strength = 10;
    const Plan plan = plan_recipe(bundled_table(), wanted, davies_model());
    const double reading = shown(ph_at(plan.preparation, wanted.prepare_at) - 0.3);
    const Adjustment result = adjusted(plan, reading, titrant("5 M NaOH"));
    REQUIRE(result.correction);
    Preparation then = after(result.as_read, *result.correction, result.correction->amount, 1.0);
    CHECK(ph_at(then, wanted.prepare_at) == Approx(result.correction->stop_reading.value()).margin(1e-7));
    // Put right, the concentrate reads what the recipe's sheet says of it, but for the little volume.
    CHECK(result.correction->stop_reading.value() == Approx(ph_at(plan.preparation, wanted.prepare_at)).margin(0.01));
    // Davies' equation is out of its range in it, and that is told.
    CHECK(result.expected_expanded_k2 > 0.1);
    CHECK(result.warnings.front().code == "ionic_strength_beyond_model");
    then.filled_to = 10 * *then.filled_to;
    CHECK(ph_at(then, wanted.use_at) == Approx(7.4).margin(1e-6));
}
