#include <algorithm>
#include <cmath>
#include <random>

#include <fmt/format.h>

#include "carboy/constraint_words.h"
#include "carboy/error.h"
#include "carboy/plan.h"
#include "carboy/request_json.h"
#include "carboy/shelf_file.h"

#include "catch_shim.h"
#include "plan/articles.h"

using namespace carboy;

namespace {

const Table& table = bundled_table();

Request request(const std::string& label, double litres = 1) {
    Request made = request_from_label(label, table);
    made.volume = Volume::litres(litres);
    return made;
}

ComponentId ion(const char* name) {
    return read_ion(name, table, "test");
}

double total(const Plan& plan, const char* name) {
    double mol = 0;
    for (const Portion& portion : plan.preparation.portions) {
        mol += portion.amount->mol() * count_of(table.reagents[portion.reagent], ion(name));
    }
    return mol;
}

Plan plan_of(const Request& wanted) {
    return plan_recipe(table, wanted, davies_model());
}

std::string refused(const Request& wanted) {
    try {
        plan_of(wanted);
    } catch (const Error& error) {
        CHECK(error.kind() == ErrorKind::no_recipe);
        return error.code();
    }
    return "made";
}

}  // namespace

TEST_CASE("constraints: no chloride, only potassium", "[constraints]") {
    for (const char* label : {"50 mM Tris, pH 8", "50 mM glycine, pH 2.6", "20 mM HEPES, pH 6"}) {
        INFO(label);
        Request wanted = request(label);
        CHECK(total(plan_of(wanted), "Cl-") + total(plan_of(wanted), "Na+") > 0);
        wanted.constraints.without = {ion("Cl-")};
        const Plan plan = plan_of(wanted);
        CHECK(total(plan, "Cl-") == 0);
        CHECK(plan.predicted.ph.value() == Approx(wanted.ph->value()).margin(1e-8));
    }
    Request potassium = request("50 mM phosphate, pH 7, ionic strength 0.3 M");
    allow_only(potassium.constraints, ion("potassium"), table);
    const Plan plan = plan_of(potassium);
    CHECK(total(plan, "Na+") == 0);
    CHECK(total(plan, "K+") > 0.1);
    CHECK(plan.predicted.ionic_strength.mol_per_kg() > 0.29);

    Request conflict = request("50 mM Tris-HCl, pH 8");
    conflict.constraints.without = {ion("Cl-")};
    CHECK(refused(conflict) == "constraint_conflict");
    Request salt = request("50 mM Tris-acetate, 100 mM NaCl, pH 8");
    salt.constraints.without = {ion("Na+")};
    CHECK(refused(salt) == "constraint_conflict");
}

TEST_CASE("constraints: an ion's total is held, with and beside an ionic strength", "[constraints]") {
    Request wanted = request("20 mM HEPES-NaOH, 30 mM NaCl, pH 7.4", 2);
    wanted.constraints.totals = {read_ion_total("Na+ = 150 mM", table, "test")};
    const Plan held = plan_of(wanted);
    CHECK(total(held, "Na+") == Approx(0.300).epsilon(1e-9));
    CHECK(held.predicted.ph.value() == Approx(7.4).margin(1e-8));

    wanted.ionic_strength = IonicStrengthTarget{0.2, false};
    const Plan both = plan_of(wanted);
    CHECK(total(both, "Na+") == Approx(0.300).epsilon(1e-9));
    CHECK(both.predicted.ionic_strength.mol_per_kg() == Approx(0.2).epsilon(1e-9));

    wanted.ionic_strength.reset();
    wanted.constraints.totals = {read_ion_total("Na+ = 35 mM", table, "test")};
    CHECK(refused(wanted) == "unreachable_total");
    // The least that it names can be made.
    Request plain = request("20 mM HEPES-NaOH, 30 mM NaCl, pH 7.4", 2);
    const double least = total(plan_of(plain), "Na+") / 2;
    wanted.constraints.totals = {read_ion_total(fmt::format("Na+ = {} M", least * 1.001), table, "test")};
    CHECK(refused(wanted) == "made");
}

TEST_CASE("constraints: so many weighings, a reagent to use or to avoid", "[constraints]") {
    Request wanted = request("50 mM Tris-HCl, 150 mM NaCl, pH 8");
    wanted.constraints.most_weighings = 2;
    CHECK(plan_of(wanted).weigh.size() == 2);
    wanted.constraints.most_weighings = 1;
    CHECK(refused(wanted) == "too_many_weighings");
    wanted.constraints.most_weighings.reset();

    const std::uint16_t salt = read_reagent("Tris hydrochloride", table, "test");
    wanted.constraints.use = {salt};
    const auto uses = [&](const Plan& plan) {
        const auto used = reagents_used(plan);
        return std::find(used.begin(), used.end(), salt) != used.end();
    };
    CHECK(uses(plan_of(wanted)));
    wanted.constraints.use.clear();
    wanted.route = Route::salts;
    CHECK(uses(plan_of(wanted)));
    wanted.constraints.avoid = {salt};
    CHECK(refused(wanted) == "no_reagent");
    wanted.constraints.avoid = {};
    wanted.constraints.use = {read_reagent("KH2PO4", table, "test")};
    CHECK(refused(wanted) == "unused_reagent");
}

TEST_CASE("rounding: a plan with its rounded amounts predicts what it states", "[rounding][laws]") {
    std::mt19937_64 random(20261204);
    const auto uniform = [&](double low, double high) {
        return std::uniform_real_distribution<double>(low, high)(random);
    };
    const std::vector<const char*> labels{
        "{} mM Tris-HCl, 1 mM EDTA, pH 8", "{} mM sodium phosphate, 0.1 mM DTT, pH 7.2",
        "{} mM HEPES-KOH, 0.02 mM ZnCl2, pH 7.5", "{} mM acetate, pH 5", "{} mM citrate, 50 mM NaCl, pH 5.5"};
    int stocks = 0;
    for (int trial = 0; trial < 120; ++trial) {
        Request wanted = request(fmt::format(fmt::runtime(labels[static_cast<std::size_t>(trial) % labels.size()]),
                                             std::round(uniform(5, 200))),
                                 std::round(uniform(1, 40)) / 20);
        wanted.route = trial % 3 == 0 ? Route::stocks : trial % 3 == 1 ? Route::salts : Route::automatic;
        const Mass reads_to = Mass::grams(std::pow(10.0, -static_cast<int>(uniform(2, 6))));
        wanted.balance = Balance{reads_to, 100 * reads_to};
        INFO("trial " << trial << ": " << wanted.label << ", " << wanted.volume.L() << " L, reads to " << reads_to.g());
        const Plan plan = plan_of(wanted);
        // Every mass is a multiple of the readability and no less than the minimum, or a warning says so.
        const auto is_multiple = [&](Mass mass) {
            const double steps = mass / reads_to;
            return std::abs(steps - std::round(steps)) < 1e-6;
        };
        const bool warned = std::any_of(plan.warnings.begin(), plan.warnings.end(),
                                        [](const Warning& one) { return one.code == "below_minimum_mass"; });
        Preparation rounded;
        rounded.filled_to = wanted.volume;
        rounded.filled_at = wanted.prepare_at;
        for (const Weighing& item : plan.weigh) {
            CHECK(is_multiple(item.mass));
            CHECK((warned || item.mass >= 0.999 * wanted.balance->minimum));
            const Reagent& article = table.reagents[item.reagent];
            const double assay = article.assay.known() ? article.assay.value : 1;
            rounded.portions.push_back(
                {item.reagent, Amount::mol(item.mass.g() * assay / article.molar_mass_g_per_mol), std::nullopt});
        }
        for (const Stock& stock : plan.stocks) {
            ++stocks;
            CHECK((stock.mass.g() == 0 || is_multiple(stock.mass)));
        }
        for (const Measurement& item : plan.measure) {
            rounded.portions.push_back(
                {item.reagent, Amount::mol(item.volume.L() * item.strength.mol_per_L()), std::nullopt});
        }
        const Prediction again = predict(table, compose(table, rounded).mixture, wanted.use_at, davies_model());
        CHECK(again.ph.value() == Approx(plan.predicted.ph.value()).margin(1e-6));
        REQUIRE(plan.rounding);
        CHECK(plan.predicted.ph.value() - plan.rounding->ph == Approx(wanted.ph->value()).margin(1e-7));
    }
    CHECK(stocks > 30);
}

TEST_CASE("rounding: ten times the readability moves it about ten times as much", "[rounding]") {
    Request wanted = request("50 mM HEPES-NaOH, 0.5 mM EDTA, pH 7.5", 0.25);
    wanted.balance = Balance{Mass::grams(1e-5), Mass::grams(1e-5)};
    CHECK(std::abs(plan_of(wanted).rounding->ph) < 0.01);
    wanted.balance = Balance{Mass::grams(0.05), Mass::grams(0.05)};
    // 46.5 mg of EDTA become 50 mg: 7 %.
    CHECK(plan_of(wanted).rounding->largest_relative == Approx(50 / 46.53 - 1).margin(2e-3));
}

TEST_CASE("routes: the ranking names a reason for every place", "[plan]") {
    const Plan plan = plan_of(request("50 mM sodium phosphate, pH 7"));
    REQUIRE(plan.ways.size() == 4);
    CHECK(plan.ways.front().route == plan.route);
    for (const Way& way : plan.ways) {
        CHECK_FALSE(way.reason.empty());
    }
    Request one = request("50 mM sodium phosphate, pH 7");
    one.route = Route::salts;
    CHECK(plan_of(one).ways.empty());
    one.route = Route::dilution;
    CHECK(refused(one) == "no_stock_to_dilute");
}

TEST_CASE("plan: a minor buffer keeps the ion that the label names", "[plan]") {
    const Plan plan = plan_of(request("50 mM Tris-HCl, 5 mM potassium phosphate, pH 7.5"));
    CHECK(total(plan, "K+") >= 0.005 * (1 - 1e-9));
    CHECK(plan.predicted.ph.value() == Approx(7.5).margin(1e-8));
}

TEST_CASE("plan: bulky things leave room for water", "[plan]") {
    for (const char* label : {"50 % v/v glycerol, 50 mM sodium phosphate, pH 7", "8 M urea, 50 mM Tris-HCl, pH 8",
                              "6 M guanidine hydrochloride, 50 mM sodium phosphate, pH 7", "5 M NaCl"}) {
        INFO(label);
        const Plan plan = plan_of(request(label));
        CHECK(plan.start_with <= plan.dissolve_in);
        CHECK(plan.dissolve_in <= plan.request.volume);
        // No more water to begin with than there is in the finished solution.
        CHECK(plan.start_with.L() <= compose(table, plan.preparation).water.kg());
    }
}
