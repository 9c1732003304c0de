#include <algorithm>
#include <cmath>
#include <map>
#include <random>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "carboy/error.h"
#include "carboy/plan.h"
#include "carboy/request_json.h"
#include "carboy/shelf_file.h"

#include "catch_shim.h"
#include "plan/articles.h"

using namespace carboy;
using nlohmann::json;

namespace {

Shelf shelf_of(const json& bottles, const char* today = nullptr) {
    const json document{{"schema", "carboy-shelf/1"}, {"bottles", bottles}};
    ShelfReading reading = read_shelf(bundled_table(), document.dump(), davies_model());
    INFO((reading.faults.empty() ? std::string() : reading.faults.front().path + " " + reading.faults.front().message));
    REQUIRE(reading.faults.empty());
    if (today != nullptr) {
        reading.shelf.today = Date::read(today);
    }
    return std::move(reading.shelf);
}

std::vector<ConstantsFault> faults_of(const std::string& text) {
    return read_shelf(bundled_table(), text, davies_model()).faults;
}

Request request(const std::string& label, double litres = 1, Route route = Route::automatic) {
    Request made = request_from_label(label, bundled_table());
    made.volume = Volume::litres(litres);
    made.route = route;
    return made;
}

Plan planned(const Shelf& shelf, const std::string& label, double litres = 1, Route route = Route::automatic) {
    return plan_recipe(shelf, request(label, litres, route), davies_model());
}

Error refusal(const Shelf& shelf, const Request& wanted) {
    try {
        plan_recipe(shelf, wanted, davies_model());
    } catch (const Error& error) {
        return error;
    }
    FAIL("a recipe was found for " << wanted.label);
    return {ErrorKind::defect, "", ""};
}

const Weighing& weighed(const Plan& plan, const std::string& bottle) {
    const auto found = std::find_if(plan.weigh.begin(), plan.weigh.end(), [&](const Weighing& item) {
        return item.bottle != nullptr && item.bottle->id == bottle;
    });
    REQUIRE(found != plan.weigh.end());
    return *found;
}

bool warns(const Plan& plan, const char* code) {
    return std::any_of(plan.warnings.begin(), plan.warnings.end(),
                       [&](const Warning& warning) { return warning.code == code; });
}

double ph_of(const Table& table, const Preparation& preparation, Temperature at) {
    return predict(table, compose(table, preparation).mixture, at, davies_model()).ph.value();
}

/// What a plan takes from each bottle, in moles of its article.
std::map<std::string, double> taken(const Plan& plan) {
    std::map<std::string, double> moles;
    const auto add = [&](const auto& items) {
        for (const auto& item : items) {
            if (item.bottle != nullptr) {
                moles[item.bottle->id] += item.amount.mol();
            }
        }
    };
    add(plan.weigh);
    add(plan.measure);
    add(plan.stocks);
    return moles;
}

}  // namespace

TEST_CASE("shelf: assay and water content of the lot are weighed for", "[shelf]") {
    const Shelf shelf = shelf_of({{{"id", "T"}, {"reagent", "Tris"}, {"assay", 0.96}, {"water_content", 0.05}},
                                  {{"id", "H"}, {"reagent", "HCl"}, {"strength", "2 N"}}});
    const Plan plan = planned(shelf, "50 mM Tris-HCl, pH 8");
    // 50 mmol of Tris, 121.14 g/mol, at 0.96 x 0.95.
    CHECK(weighed(plan, "T").mass.g() == Approx(0.05 * 121.14 / (0.96 * 0.95)).epsilon(1e-4));
    CHECK(plan.measure.back().strength.mol_per_L() == 2);
}

TEST_CASE("shelf: the hydrate that is there", "[shelf]") {
    const Shelf shelf =
        shelf_of({{{"id", "D"}, {"reagent", "Na2HPO4·12H2O"}}, {{"id", "M"}, {"reagent", "NaH2PO4·2H2O"}}});
    const Plan plan = planned(shelf, "20 mM sodium phosphate, pH 7.4");
    CHECK(plan.route == Route::salts);
    // 358.14 and 156.01 g/mol, IUPAC standard atomic weights.
    const double moles = weighed(plan, "D").mass.g() / 358.14 + weighed(plan, "M").mass.g() / 156.01;
    CHECK(moles == Approx(0.02).epsilon(1e-4));
}

TEST_CASE("shelf: strengths as bottles state them are the same acid", "[shelf]") {
    // 37 % w/w at 1.19 g/mL: 0.37 x 1190 g/L / 36.458 g/mol = 12.077 mol/L.
    const Shelf shelf =
        shelf_of({{{"id", "T"}, {"reagent", "Tris"}},
                  {{"id", "H"}, {"reagent", "HCl"}, {"strength", "37 % w/w"}, {"density_g_per_mL", 1.19}}});
    CHECK(planned(shelf, "50 mM Tris-HCl, pH 8").measure.back().strength.mol_per_L() == Approx(12.077).epsilon(1e-3));
}

TEST_CASE("shelf: open before closed, the first to expire first, expired last and with a warning", "[shelf]") {
    const json acid{{"id", "H"}, {"reagent", "HCl"}, {"strength", "1 M"}};
    const auto used = [&](const json& a, const json& b) {
        const Shelf shelf = shelf_of({a, b, acid}, "2026-12-01");
        return planned(shelf, "50 mM Tris-HCl, pH 8").weigh.front().bottle->id;
    };
    const auto tris = [](const char* id, json more) {
        more.update({{"id", id}, {"reagent", "Tris"}});
        return more;
    };
    CHECK(used(tris("closed", json::object()), tris("open", {{"opened", "2026-01-01"}})) == "open");
    CHECK(used(tris("late", {{"expires", "2029-01-01"}}), tris("soon", {{"expires", "2027-01-01"}})) == "soon");
    CHECK(used(tris("expired", {{"expires", "2026-11-30"}, {"opened", "2026-01-01"}}), tris("good", json::object())) ==
          "good");
    CHECK(used(tris("today", {{"expires", "2026-12-01"}}), tris("closed", json::object())) == "today");

    const Shelf only = shelf_of({tris("expired", {{"expires", "2026-11-30"}}), acid}, "2026-12-01");
    CHECK(warns(planned(only, "50 mM Tris-HCl, pH 8"), "bottle_expired"));
    const Shelf undated = shelf_of({tris("dated", {{"expires", "2026-11-30"}}), acid});
    CHECK(warns(planned(undated, "50 mM Tris-HCl, pH 8"), "expiry_not_judged"));
}

TEST_CASE("shelf: two bottles where one is not enough, and a warning before one is empty", "[shelf]") {
    const Shelf shelf = shelf_of({{{"id", "A"}, {"reagent", "NaCl"}, {"left", "5 g"}, {"opened", "2026-01-01"}},
                                  {{"id", "B"}, {"reagent", "NaCl"}, {"left", "4 g"}},
                                  {{"id", "T"}, {"reagent", "Tris"}},
                                  {{"id", "H"}, {"reagent", "HCl"}, {"strength", "1 M"}}});
    // 150 mM of NaCl in 1 L is 8.766 g.
    const Plan plan = planned(shelf, "50 mM Tris-HCl, 150 mM NaCl, pH 8");
    CHECK(weighed(plan, "A").mass.g() == Approx(5).epsilon(1e-9));
    CHECK(weighed(plan, "B").mass.g() == Approx(3.766).margin(2e-3));
    CHECK(warns(plan, "bottle_nearly_empty"));
    const Error error = refusal(shelf, request("50 mM Tris-HCl, 160 mM NaCl, pH 8"));
    CHECK(error.code() == "short_on_shelf");
    CHECK(error.kind() == ErrorKind::no_recipe);
    CHECK(error.message().find("9.35 g needed, 9 g left in A, B") != std::string::npos);
}

TEST_CASE("shelf: a stock of the buffer is diluted, with what it brings of the salt left out", "[shelf]") {
    const Shelf shelf = shelf_of({{{"id", "S"}, {"solution", "0.5 M Tris-HCl, 1 M NaCl, pH 8.0"}},
                                  {{"id", "N"}, {"reagent", "NaCl"}},
                                  {{"id", "H"}, {"reagent", "HCl"}, {"strength", "1 M"}}});
    const Plan plan = planned(shelf, "50 mM Tris-HCl, 150 mM NaCl, pH 8", 2);
    CHECK(plan.route == Route::dilution);
    REQUIRE(plan.measure.front().bottle != nullptr);
    CHECK(plan.measure.front().volume.mL() == Approx(200).epsilon(1e-6));
    CHECK(weighed(plan, "N").amount.mol() == Approx(2 * (0.150 - 0.100)).epsilon(1e-6));
    CHECK(plan.predicted.ph.value() == Approx(8).margin(0.021));
    // The stock has too much salt for this one.
    CHECK(refusal(shelf, request("50 mM Tris-HCl, 50 mM NaCl, pH 8", 1, Route::dilution)).code() == "short_on_shelf");
}

TEST_CASE("shelf: EDTA from its stock of pH 8 stands for the disodium salt", "[shelf]") {
    const Shelf shelf = shelf_of({{{"id", "E"}, {"solution", "0.5 M EDTA, pH 8.0"}},
                                  {{"id", "T"}, {"reagent", "Tris"}},
                                  {{"id", "H"}, {"reagent", "HCl"}, {"strength", "1 M"}}});
    const Plan plan = planned(shelf, "10 mM Tris-HCl, 1 mM EDTA, pH 8");
    CHECK(plan.measure.front().volume.mL() == Approx(2).epsilon(1e-6));
    CHECK(plan.predicted.ph.value() == Approx(8).margin(1e-8));
}

TEST_CASE("shelf: random shelves and targets", "[shelf][laws]") {
    const Table& table = bundled_table();
    std::mt19937_64 random(20261203);
    const auto uniform = [&](double low, double high) {
        return std::uniform_real_distribution<double>(low, high)(random);
    };
    const auto chance = [&](double p) { return uniform(0, 1) < p; };
    const std::vector<std::string> articles{"Tris",
                                            "Tris hydrochloride",
                                            "HEPES",
                                            "HEPES sodium salt",
                                            "NaH2PO4·H2O",
                                            "Na2HPO4",
                                            "Na2HPO4·7H2O",
                                            "KH2PO4",
                                            "K2HPO4",
                                            "acetic acid",
                                            "sodium acetate trihydrate",
                                            "sodium acetate",
                                            "NaCl",
                                            "KCl",
                                            "MES",
                                            "glycine",
                                            "NaHCO3",
                                            "Na2CO3",
                                            "citric acid monohydrate",
                                            "trisodium citrate dihydrate"};
    const std::vector<std::string> titrants{"HCl", "NaOH", "KOH"};
    const std::vector<std::string> labels{"{} mM Tris-HCl, pH {:.2f}",
                                          "{} mM HEPES-NaOH, pH {:.2f}",
                                          "{} mM sodium phosphate, 100 mM NaCl, pH {:.2f}",
                                          "{} mM potassium phosphate, pH {:.2f}",
                                          "{} mM sodium acetate, pH {:.2f}",
                                          "{} mM sodium citrate, pH {:.2f}",
                                          "{} mM MES-KOH, 50 mM KCl, pH {:.2f}",
                                          "{} mM Tris-HCl, 20 mM sodium phosphate, pH {:.2f}"};
    const std::vector<double> centres{8.1, 7.5, 7.1, 7.0, 4.8, 5.5, 6.1, 7.6};
    int made = 0;
    int short_of = 0;
    int otherwise = 0;
    for (int trial = 0; trial < 400; ++trial) {
        json bottles = json::array();
        for (const std::string& article : articles) {
            for (int copies = chance(0.15) ? 2 : 1; copies > 0; --copies) {
                if (chance(0.55)) {
                    json bottle{{"id", fmt::format("B{}", bottles.size())}, {"reagent", article}};
                    const bool liquid = article == "acetic acid";
                    if (chance(0.6)) {
                        bottle["left"] = liquid ? fmt::format("{:.3f} mL", uniform(0.5, 60))
                                                : fmt::format("{:.4f} g", uniform(0.2, 60));
                    }
                    if (!liquid && chance(0.5)) {
                        bottle["assay"] = uniform(0.9, 1);
                    }
                    if (chance(0.5)) {
                        bottle["expires"] = fmt::format("20{:02}-06-30", 25 + static_cast<int>(uniform(0, 4)));
                    }
                    bottles.push_back(bottle);
                }
            }
        }
        for (const std::string& titrant : titrants) {
            if (chance(0.7)) {
                bottles.push_back({{"id", fmt::format("B{}", bottles.size())},
                                   {"reagent", titrant},
                                   {"strength", fmt::format("{:.3f} M", uniform(0.2, 6))},
                                   {"left", fmt::format("{:.1f} mL", uniform(5, 500))}});
            }
        }
        const Shelf shelf = shelf_of(bottles, "2026-12-01");
        const auto which = static_cast<std::size_t>(uniform(0, static_cast<double>(labels.size())));
        Request wanted = request(
            fmt::format(fmt::runtime(labels[which]), std::round(uniform(5, 150)), centres[which] + uniform(-0.8, 0.8)),
            uniform(0.1, 2));
        wanted.prepare_at = Temperature::celsius(uniform(15, 30));
        INFO("trial " << trial << ": " << wanted.label << ", " << wanted.volume.L() << " L");
        try {
            const Plan plan = plan_recipe(shelf, wanted, davies_model());
            ++made;
            REQUIRE(plan.predicted.ph.value() == Approx(wanted.ph->value()).margin(1e-7));
            REQUIRE(ph_of(shelf.table(), plan.preparation, wanted.use_at) == Approx(wanted.ph->value()).margin(1e-7));
            for (const Weighing& item : plan.weigh) {
                REQUIRE(item.bottle != nullptr);
            }
            for (const auto& [id, mol] : taken(plan)) {
                const auto bottle = std::find_if(shelf.bottles().begin(), shelf.bottles().end(),
                                                 [&, &name = id](const Bottle& one) { return one.id == name; });
                const auto left = shelf.left(*bottle);
                REQUIRE((!left || mol <= left->mol() * (1 + 1e-9)));
                if (shelf.expired(*bottle)) {
                    REQUIRE(warns(plan, "bottle_expired"));
                }
            }
        } catch (const Error& error) {
            INFO(error.message());
            REQUIRE(error.kind() == ErrorKind::no_recipe);
            if (error.code() != "short_on_shelf") {
                ++otherwise;
                continue;
            }
            ++short_of;
            // Confirmed by putting there what the message says is missing: all that the recipe from the table takes.
            const Plan open = plan_recipe(table, wanted, davies_model());
            json filled = bottles;
            int named = 0;
            for (const Portion& portion : open.preparation.portions) {
                const Reagent& reagent = table.reagents[portion.reagent];
                if (error.message().find(std::string(reagent.name)) != std::string::npos) {
                    ++named;
                    json bottle{{"id", fmt::format("new {}", named)}, {"reagent", std::string(reagent.name)}};
                    if (is_solution(reagent) && reagent.state == State::solution) {
                        bottle["strength"] = fmt::format("{} M", reagent.strength_mol_per_L.value);
                    }
                    filled.push_back(bottle);
                }
            }
            REQUIRE(named > 0);
            const Shelf whole = shelf_of(filled, "2026-12-01");
            REQUIRE_NOTHROW(plan_recipe(whole, wanted, davies_model()));
        }
    }
    INFO(made << " made, " << short_of << " short, " << otherwise << " otherwise");
    CHECK(made > 150);
    CHECK(short_of > 50);
}

TEST_CASE("shelf: every fault of a file is told with its path", "[shelf][bad-input]") {
    const auto has = [](const std::vector<ConstantsFault>& faults, const std::string& path, const std::string& words) {
        return std::any_of(faults.begin(), faults.end(), [&](const ConstantsFault& fault) {
            return fault.path == path && (fault.message + " " + fault.help).find(words) != std::string::npos;
        });
    };
    CHECK(has(faults_of("{"), "", "line 1"));
    CHECK(has(faults_of("[]"), "", "object"));
    CHECK(has(faults_of(R"({"schema":"carboy-shelf/9","bottles":[]})"), "", "carboy-shelf/1"));
    CHECK(has(faults_of(R"({"schema":"carboy-shelf/1"})"), "", "bottles"));
    const auto faults = faults_of(R"({"schema":"carboy-shelf/1","bottles":[
        {"id":"1","reagent":"Trsi"},
        {"id":"2","reagent":"Tris","expires":"2026-02-30"},
        {"id":"2","reagent":"Tris"},
        {"id":"4","reagent":"Tris","left":"5 mL"},
        {"id":"5","reagent":"HCl","strength":"37 % w/w"},
        {"id":"6","reagent":"HCl","strength":"1 K"},
        {"id":"7","solution":"0.5 M EDTA, pH 8","assay":0.9},
        {"id":"8","solution":"0.5 M sodium acetate, pH 1"},
        {"id":"9","reagent":"Tris","assay":1.5},
        {"id":"10","reagent":"Tris","colour":"white"},
        {"reagent":"Tris"}]})");
    CHECK(has(faults, "/bottles/0/reagent", "did you mean Tris"));
    CHECK(has(faults, "/bottles/1/expires", "2026-12-31"));
    CHECK(has(faults, "/bottles/2/id", "stands twice"));
    CHECK(has(faults, "/bottles/3/left", "mass"));
    CHECK(has(faults, "/bottles/4/strength", "density"));
    CHECK(has(faults, "/bottles/5/strength", ""));
    CHECK(has(faults, "/bottles/6/assay", "solution"));
    CHECK(has(faults, "/bottles/7/solution", "too acid"));
    CHECK(has(faults, "/bottles/8/assay", ""));
    CHECK(has(faults, "/bottles/9", "colour"));
    CHECK(has(faults, "/bottles/10", "id"));
}
