#include <cmath>
#include <random>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/plan.h"
#include "carboy/request_json.h"

#include "catch_shim.h"
#include "plan/stockroom.h"

using namespace carboy;

namespace {

Request request(const std::string& label, double litres = 1.0, Route route = Route::automatic, double bench = 25) {
    Request made = request_from_label(label, bundled_table());
    made.volume = Volume::litres(litres);
    made.route = route;
    made.prepare_at = Temperature::celsius(bench);
    return made;
}

Plan planned(const std::string& label, double litres = 1.0, Route route = Route::automatic, double bench = 25) {
    return plan_recipe(bundled_table(), request(label, litres, route, bench), davies_model());
}

double ph_of(const Preparation& preparation, Temperature temperature) {
    const Table& table = bundled_table();
    return predict(table, compose(table, preparation).mixture, temperature, davies_model()).ph.value();
}

std::string cas(std::uint16_t reagent) {
    return std::string(bundled_table().reagents[reagent].cas);
}

Error failure(const std::string& label, Route route = Route::automatic) {
    try {
        planned(label, 1.0, route);
    } catch (const Error& error) {
        return error;
    }
    FAIL("a recipe was found for " << label);
    return {ErrorKind::defect, "", ""};
}

}  // namespace

TEST_CASE("plan: Henderson-Hasselbalch by hand, ideal activities, no volumes", "[plan]") {
    // 0.1 mol of acetic acid at pH = pK: half of it neutralised, 0.05 mol of NaOH less the free H+ (1.75e-5 mol/kg x
    // water).
    Request wanted = request("0.1 M sodium acetate, pH 4.756", 1.0, Route::titrated);
    const Plan plan = plan_recipe(bundled_table(), wanted, ideal_model());
    REQUIRE(plan.measure.size() == 2);
    CHECK(plan.measure[1].purpose == Purpose::titrant);
    CHECK(plan.measure[1].amount.mol() == Approx(0.05).margin(2e-5));
}

TEST_CASE("plan: titrated and salts are the same composition", "[plan]") {
    for (const char* label :
         {"0.1 M sodium phosphate, pH 7.2", "50 mM potassium phosphate, 100 mM KCl, pH 6.8",
          "0.1 M sodium acetate, pH 4.9", "50 mM HEPES-NaOH, pH 7.5", "0.1 M sodium carbonate, pH 9.8"}) {
        INFO(label);
        const Plan titrated = planned(label, 1.0, Route::titrated);
        const Plan salts = planned(label, 1.0, Route::salts);
        CHECK(titrated.route == Route::titrated);
        CHECK(salts.route == Route::salts);
        CHECK(titrated.readings.size() == 4);
        CHECK(salts.readings.size() == 2);
        CHECK(salts.predicted.ph.value() == Approx(titrated.predicted.ph.value()).margin(1e-9));
        CHECK(salts.predicted.ionic_strength.mol_per_kg() ==
              Approx(titrated.predicted.ionic_strength.mol_per_kg()).epsilon(1e-9));
    }
}

TEST_CASE("plan: half the volume takes half of everything", "[plan][laws]") {
    for (const char* label :
         {"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 C", "20 mmol/kg HEPES-KOH, 5 mmol/kg MgCl2, pH 7.4",
          "50 mM acetic acid, 50 mM sodium phosphate, 50 mM borate, pH 8.6",
          "0.2 M sodium citrate, pH 5, ionic strength 1 M"}) {
        INFO(label);
        const Plan whole = planned(label, 1.0);
        const Plan half = planned(label, 0.5);
        CHECK(half.predicted.ph.value() == Approx(whole.predicted.ph.value()).margin(1e-10));
        REQUIRE(half.preparation.portions.size() == whole.preparation.portions.size());
        for (std::size_t i = 0; i < half.preparation.portions.size(); ++i) {
            CHECK(2 * half.preparation.portions[i].amount->mol() ==
                  Approx(whole.preparation.portions[i].amount->mol()).epsilon(1e-9));
        }
    }
}

TEST_CASE("plan: any feasible target comes out exactly, at any pair of temperatures", "[plan][laws]") {
    const Table& table = bundled_table();
    std::mt19937_64 random(20261201);
    const auto uniform = [&](double low, double high) {
        return std::uniform_real_distribution<double>(low, high)(random);
    };
    int made = 0;
    int refused = 0;
    for (int trial = 0; trial < 600; ++trial) {
        Request wanted;
        const std::size_t buffers = std::uniform_int_distribution<std::size_t>(1, 3)(random);
        double pK = 7;
        for (std::size_t b = 0; b < buffers; ++b) {
            const auto index = std::uniform_int_distribution<std::size_t>(0, table.systems.size() - 1)(random);
            const ComponentId id{ComponentKind::system, static_cast<std::uint16_t>(index)};
            const bool twice = std::any_of(wanted.buffers.begin(), wanted.buffers.end(),
                                           [&](const auto& item) { return item.system == id; });
            if (twice || table.systems[index].role != Role::buffer) {
                continue;
            }
            wanted.buffers.push_back(
                {id,
                 {uniform(0.001, 0.2), b % 2 == 0 ? ConcentrationUnit::mol_per_L : ConcentrationUnit::mol_per_kg},
                 {}});
            pK = table.systems[index].steps[0].pK_25C.value;
        }
        if (wanted.buffers.empty()) {
            continue;
        }
        if (trial % 3 == 0) {
            const Reagent* salt = find_reagent(table, trial % 2 == 0 ? "NaCl" : "(NH4)2SO4");
            wanted.additives.push_back(
                {static_cast<std::uint16_t>(salt - table.reagents.data()), {uniform(0.001, 0.2)}});
        }
        wanted.ph = PH(std::clamp(pK + uniform(-1.5, 1.5), 1.5, 12.5));
        wanted.use_at = Temperature::celsius(uniform(0, 60));
        wanted.prepare_at = Temperature::celsius(uniform(10, 30));
        wanted.volume = Volume::litres(uniform(0.05, 20));
        wanted.route = trial % 2 == 0 ? Route::automatic : trial % 4 == 1 ? Route::titrated : Route::salts;
        INFO("trial " << trial << ", " << name_of(table, wanted.buffers[0].system) << " at pH " << wanted.ph->value());
        try {
            const Plan plan = plan_recipe(table, wanted, davies_model());
            ++made;
            REQUIRE(plan.predicted.ph.value() == Approx(wanted.ph->value()).margin(1e-8));
            REQUIRE(ph_of(plan.preparation, wanted.use_at) == Approx(wanted.ph->value()).margin(1e-8));
            for (std::size_t b = 0; b < wanted.buffers.size(); ++b) {
                double total = 0;
                for (const Portion& portion : plan.preparation.portions) {
                    for (const Supply& supply : table.reagents[portion.reagent].supplies) {
                        total +=
                            supply.component == wanted.buffers[b].system ? supply.count * portion.amount->mol() : 0.0;
                    }
                    REQUIRE(portion.amount->mol() >= 0);
                }
                const double water = compose(table, plan.preparation).water.kg();
                const Concentration& asked = wanted.buffers[b].concentration;
                const double expected =
                    asked.value * (asked.unit == ConcentrationUnit::mol_per_kg ? water : wanted.volume.L());
                // An ammonia buffer beside ammonium sulfate holds that too.
                REQUIRE(total >= expected * (1 - 1e-8));
            }
            for (const Reading& reading : plan.readings) {
                REQUIRE(std::isfinite(reading.ph.value()));
                REQUIRE(reading.volume <= 1.0000001 * wanted.volume);
            }
        } catch (const Error& error) {
            INFO(error.message());
            REQUIRE(error.kind() == ErrorKind::no_recipe);
            ++refused;
        }
    }
    CHECK(made > 250);
    CHECK(refused > 10);
}

TEST_CASE("plan: ionic strength asked for is the one made", "[plan]") {
    const Plan plan =
        planned("50 mM sodium phosphate, pH 7.4 at 37 C, ionic strength 0.30 M", 2.0, Route::automatic, 22);
    const double water = compose(bundled_table(), plan.preparation).water.kg();
    CHECK(plan.predicted.ionic_strength.mol_per_kg() * water / 2.0 == Approx(0.30).epsilon(1e-9));
    CHECK(std::any_of(plan.weigh.begin(), plan.weigh.end(), [](const Weighing& item) {
        return item.purpose == Purpose::ionic_strength && cas(item.reagent) == "7647-14-5";
    }));
    const Plan molal = planned("50 mM potassium phosphate, pH 7.4, ionic strength 0.25 mol/kg");
    CHECK(molal.predicted.ionic_strength.mol_per_kg() == Approx(0.25).epsilon(1e-9));
    CHECK(std::any_of(molal.weigh.begin(), molal.weigh.end(), [](const Weighing& item) {
        return item.purpose == Purpose::ionic_strength && cas(item.reagent) == "7447-40-7";
    }));
}

TEST_CASE("plan: the counter-ion of the label decides what goes in", "[plan]") {
    const auto brings = [](const Plan& plan, const char* ion) {
        const ComponentId id = id_of(bundled_table(), *find_spectator(bundled_table(), ion));
        for (const Portion& portion : plan.preparation.portions) {
            for (const Supply& supply : bundled_table().reagents[portion.reagent].supplies) {
                if (supply.component == id) {
                    return true;
                }
            }
        }
        return false;
    };
    const Plan potassium = planned("20 mM HEPES-KOH, pH 7.4");
    CHECK(brings(potassium, "K+"));
    CHECK_FALSE(brings(potassium, "Na+"));
    REQUIRE(potassium.counter_ions.size() == 1);
    CHECK(potassium.counter_ions[0].named_by_label);
    const Plan usual = planned("20 mM HEPES, pH 7.4");
    CHECK(brings(usual, "Na+"));
    CHECK_FALSE(usual.counter_ions[0].named_by_label);
    // Glycine takes acid below its neutral point and alkali above it.
    CHECK(brings(planned("50 mM glycine, pH 2.6"), "Cl-"));
    CHECK(brings(planned("50 mM glycine, pH 9.6"), "Na+"));
}

TEST_CASE("plan: Tris made warm for use in the cold reads as much lower as its pK moves", "[plan]") {
    const Plan plan = planned("50 mM Tris-HCl, pH 7.5 at 4 C", 1.0, Route::automatic, 22);
    const System& tris = *find_system(bundled_table(), "Tris");
    const double shift =
        thermodynamic_pK(tris, 0, Temperature::celsius(22)) - thermodynamic_pK(tris, 0, Temperature::celsius(4));
    CHECK(plan.readings.back().ph.value() == Approx(7.5 + shift).margin(0.01));
}

TEST_CASE("plan: titrants that fit the volume", "[plan]") {
    const Table& table = bundled_table();
    const Stockroom stockroom(table, {}, nullptr);
    const Chemistry hydrochloric = stockroom.alone(id_of(table, *find_spectator(table, "Cl-"))).value();
    const auto strength = [&](double mol, double litres) {
        const auto shares =
            stockroom.shares(hydrochloric, Amount::mol(mol), Stockroom::Wanted::titrant, Volume::litres(litres), {});
        return table.reagents[shares.at(0).reagent].strength_mol_per_L.value;
    };
    CHECK(strength(0.05, 1) == 1);     // 50 mL of a litre
    CHECK(strength(0.0002, 1) < 0.5);  // 1 mol/L would be a fifth of a millilitre
    CHECK(strength(0.5, 1) >= 5);      // half a litre of 1 mol/L would not do
}

TEST_CASE("plan: why there is no recipe", "[plan][bad-input]") {
    const Error too_acid = failure("50 mM sodium acetate, pH 2.5");
    CHECK(too_acid.kind() == ErrorKind::no_recipe);
    CHECK(too_acid.code() == "unreachable_target");
    CHECK(too_acid.message().find("too acid") != std::string::npos);
    CHECK(too_acid.message().find("3.03") != std::string::npos);
    CHECK(too_acid.help().find("acetate-HCl") != std::string::npos);
    CHECK_NOTHROW(planned("50 mM acetate-HCl, pH 2.5"));

    const Error too_basic = failure("50 mM Tris-HCl, pH 11");
    CHECK(too_basic.message().find("too basic") != std::string::npos);
    CHECK(too_basic.help().find("Tris-NaOH") != std::string::npos);
    CHECK_NOTHROW(planned("50 mM Tris-NaOH, pH 11"));

    const Error salts = failure("50 mM sodium acetate, pH 2.5", Route::salts);
    CHECK(salts.kind() == ErrorKind::no_recipe);

    const Error ionic = failure("0.1 M sodium phosphate, pH 7.2, ionic strength 0.05 M");
    CHECK(ionic.code() == "unreachable_ionic_strength");
    CHECK(ionic.message().find("alone bring") != std::string::npos);
    // The least it names can be made.
    const double least = planned("0.1 M sodium phosphate, pH 7.2").predicted.ionic_strength.mol_per_kg();
    CHECK_NOTHROW(planned(fmt::format("0.1 M sodium phosphate, pH 7.2, ionic strength {:.4f} mol/kg", least * 1.001)));

    CHECK(failure("50 mM triethanolamine-HCl, pH 3.0", Route::salts).kind() == ErrorKind::no_recipe);
    CHECK(failure("1 M sodium acetate, 50 mM MES, pH 1").kind() == ErrorKind::no_recipe);
}

TEST_CASE("plan: a salt of a doubly charged ion is weighed as that salt", "[plan]") {
    const Plan plan = planned("20 mM HEPES-KOH, 5 mM magnesium acetate, pH 7.5");
    // 5 mmol of the tetrahydrate, 214.45 g/mol.
    CHECK(std::any_of(plan.weigh.begin(), plan.weigh.end(), [](const Weighing& item) {
        return item.purpose == Purpose::additive && std::abs(item.mass.g() - 1.0723) < 1e-3;
    }));
}

TEST_CASE("plan: azide goes in after the pH is set, and a warning stands above it in acid", "[plan][safety]") {
    const Table& table = bundled_table();
    CHECK(goes_in_last(*find_reagent(table, "sodium azide"), table));
    CHECK_FALSE(goes_in_last(*find_reagent(table, "NaCl"), table));
    // No reading before filling has azide in it.
    const Plan with = planned("50 mM Tris-HCl, 0.02 % w/v sodium azide, pH 8");
    const Plan without = planned("50 mM Tris-HCl, pH 8");
    CHECK(with.readings.front().ph.value() == Approx(without.readings.front().ph.value()).margin(1e-9));
    CHECK(with.warnings.empty());
    const Plan acid = planned("50 mM acetate, 0.02 % w/v sodium azide, pH 4.5");
    REQUIRE_FALSE(acid.warnings.empty());
    CHECK(acid.warnings.front().code == "acid_liberates_gas");
}

TEST_CASE("plan: salts without a pH are weighed as written", "[plan]") {
    const Plan plan = planned("150 mM NaCl, 5 mM KCl", 2.0);
    REQUIRE(plan.weigh.size() == 2);
    CHECK(plan.weigh[0].mass.g() == Approx(0.3 * 58.44).epsilon(1e-3));
    CHECK(plan.predicted.ph.value() == Approx(7.0).margin(0.01));
}

TEST_CASE("plan: warnings that matter and no others", "[plan]") {
    const auto has = [](const Plan& plan, const char* code) {
        const auto in = [&](const std::vector<Warning>& list) {
            return std::any_of(list.begin(), list.end(), [&](const Warning& warning) { return warning.code == code; });
        };
        return in(plan.warnings) || in(plan.predicted.warnings);
    };
    CHECK_FALSE(has(planned("50 mM Tris-HCl, pH 8"), "weak_buffering"));
    CHECK(has(planned("50 mM Tris-HCl, pH 6"), "weak_buffering"));
    CHECK_FALSE(has(planned("50 mM sodium phosphate, pH 7"), "ionic_strength_beyond_model"));
    CHECK(has(planned("1 M sodium phosphate, pH 7"), "ionic_strength_beyond_model"));
    CHECK(has(planned("50 mM bis-tris propane, pH 7 at 4 C"), "temperature_dependence_unknown"));
    CHECK_FALSE(has(planned("50 mM bis-tris propane, pH 7 at 25 C"), "temperature_dependence_unknown"));
    CHECK(planned("1 M sodium phosphate, pH 7").predicted.uncertainty.expanded_k2 >
          planned("50 mM sodium phosphate, pH 7").predicted.uncertainty.expanded_k2);
}
