#include <algorithm>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <set>
#include <sstream>

#include "carboy/constants_file.h"

#include "catch_shim.h"
#include "constants/formula.h"
#include "constants/name.h"

using namespace carboy;

namespace {

std::vector<ConstantsDocument> documents() {
    std::vector<std::filesystem::path> paths;
    for (const auto& entry : std::filesystem::directory_iterator(std::string(CARBOY_DATA_DIR) + "/constants")) {
        paths.push_back(entry.path());
    }
    std::sort(paths.begin(), paths.end());
    std::vector<ConstantsDocument> read;
    for (const auto& path : paths) {
        std::ifstream file(path);
        std::ostringstream content;
        content << file.rdbuf();
        read.push_back({path.filename().string(), content.str()});
    }
    return read;
}

}  // namespace

TEST_CASE("bundled table: what a bench needs is there", "[constants]") {
    const Table& table = bundled_table();
    CHECK(table.systems.size() >= 106);
    CHECK(table.reagents.size() >= 120);
    CHECK(table.sha256.size() == 64);
    std::size_t steps = 0;
    for (const System& system : table.systems) {
        steps += system.steps.size();
    }
    CHECK(steps >= 175);
    for (const char* name :
         {"formate", "lactate", "benzoate", "propionate", "malate", "fumarate", "malonate", "ascorbate", "EDTA", "EGTA",
          "lysine", "alanine", "taurine", "azide", "fluoride", "Tris", "HEPES", "phosphate", "citric acid"}) {
        INFO(name);
        CHECK(find_system(table, name) != nullptr);
    }
    for (const char* name : {"NaH2PO4·H2O", "Na2HPO4.7H2O", "na2hpo4·12h2o", "7782-85-6", "citric acid monohydrate",
                             "HCl 37 %", "sodium acetate trihydrate", "borax", "KHP", "Tris base", "KH2PO4", "Na2HPO4",
                             "NaCl", "NaOH", "acetic acid"}) {
        INFO(name);
        CHECK((find_reagent(table, name) != nullptr || find_reagent_by_cas(table, name) != nullptr));
    }
}

TEST_CASE("bundled table: every CAS number passes its check digit", "[constants]") {
    for (const Reagent& reagent : bundled_table().reagents) {
        int sum = 0;
        int weight = 0;
        int check = -1;
        for (std::size_t i = reagent.cas.size(); i-- > 0;) {
            if (reagent.cas[i] == '-') {
                continue;
            }
            const int digit = reagent.cas[i] - '0';
            if (check < 0) {
                check = digit;
            } else {
                sum += digit * ++weight;
            }
        }
        INFO(reagent.name << " " << reagent.cas);
        CHECK(sum % 10 == check);
    }
}

TEST_CASE("bundled table: every reagent is neutral and is what it supplies", "[constants]") {
    const Table& table = bundled_table();
    for (const Reagent& reagent : table.reagents) {
        INFO(reagent.name);
        double mass = 0;
        double charge = 0;
        for (const Supply& supply : reagent.supplies) {
            if (supply.component.kind == ComponentKind::spectator) {
                const Spectator& spectator = table.spectators[supply.component.index];
                mass += supply.count * spectator.molar_mass_g_per_mol;
                charge += supply.count * spectator.charge;
            } else {
                const Species& base = table.systems[supply.component.index].species.back();
                mass += supply.count * base.molar_mass_g_per_mol;
                charge += supply.count * base.charge;
            }
        }
        // Protons make it neutral, water makes up the rest: the masses must differ by p H and k H2O with k a multiple
        // of 1/2.
        constexpr double hydrogen = 1.008;
        constexpr double water = 18.015;
        const double waters = (reagent.molar_mass_g_per_mol - mass + charge * hydrogen) / water;
        CHECK(std::abs(2 * waters - std::round(2 * waters)) < 1e-3);
        CHECK(reagent.molar_mass_g_per_mol > 10);
    }
}

TEST_CASE("bundled table: steps, charges and names hang together", "[constants]") {
    const Table& table = bundled_table();
    for (const System& system : table.systems) {
        INFO(system.name);
        REQUIRE(system.species.size() == system.steps.size() + 1);
        for (std::size_t i = 0; i < system.steps.size(); ++i) {
            CHECK(system.species[i].charge == system.species[i + 1].charge + 1);
            CHECK(system.steps[i].pK_25C.known());
            if (i > 0) {
                CHECK(system.steps[i].pK_25C.value > system.steps[i - 1].pK_25C.value);
            }
        }
    }
    for (const NameEntry& entry : table.names) {
        INFO(entry.key);
        CHECK(fold_name(entry.key) == entry.key);
        switch (entry.kind) {
            case EntryKind::system:
                CHECK(find_system(table, entry.key) == &table.systems[entry.index]);
                break;
            case EntryKind::spectator:
                CHECK(find_spectator(table, entry.key) == &table.spectators[entry.index]);
                break;
            case EntryKind::reagent:
                CHECK(find_reagent(table, entry.key) == &table.reagents[entry.index]);
                break;
            case EntryKind::formula:
                CHECK(find_named_formula(table, entry.key) == &table.formulas[entry.index]);
                break;
            case EntryKind::vessel:
                CHECK(find_vessel(table, entry.key) == &table.vessels[entry.index]);
                break;
        }
    }
    CHECK(std::is_sorted(table.names.begin(), table.names.end(),
                         [](const auto& a, const auto& b) { return a.key < b.key; }));
}

TEST_CASE("bundled table: one article of each chemistry is the usual one", "[constants]") {
    const Table& table = bundled_table();
    std::map<std::vector<std::pair<ComponentId, double>>, int> usual;
    for (const Reagent& reagent : table.reagents) {
        std::vector<std::pair<ComponentId, double>> key;
        for (const Supply& supply : reagent.supplies) {
            key.emplace_back(supply.component, supply.count);
        }
        std::sort(key.begin(), key.end());
        usual[key] += reagent.usual ? 1 : 0;
    }
    for (const auto& [key, count] : usual) {
        INFO(name_of(table, key.front().first) << " and " << key.size() - 1 << " more");
        CHECK(count == 1);
    }
}

TEST_CASE("bundled table: embedded and freshly read are the same", "[constants]") {
    const ConstantsOverlay fresh = lay_over(Table{}, documents());
    for (const auto& fault : fresh.faults) {
        UNSCOPED_INFO(fault.path << " " << fault.message);
    }
    REQUIRE(fresh.faults.empty());
    const Table& a = bundled_table();
    const Table& b = fresh.table;
    CHECK(a.sha256 == b.sha256);
    REQUIRE(a.systems.size() == b.systems.size());
    REQUIRE(a.reagents.size() == b.reagents.size());
    REQUIRE(a.names.size() == b.names.size());
    for (std::size_t i = 0; i < a.systems.size(); ++i) {
        CHECK(a.systems[i].name == b.systems[i].name);
        REQUIRE(a.systems[i].steps.size() == b.systems[i].steps.size());
        for (std::size_t s = 0; s < a.systems[i].steps.size(); ++s) {
            CHECK(a.systems[i].steps[s].pK_25C.value == b.systems[i].steps[s].pK_25C.value);
            CHECK(a.systems[i].steps[s].pK_25C.evidence == b.systems[i].steps[s].pK_25C.evidence);
            CHECK(a.systems[i].steps[s].note == b.systems[i].steps[s].note);
        }
    }
    for (std::size_t i = 0; i < a.reagents.size(); ++i) {
        CHECK(a.reagents[i].name == b.reagents[i].name);
        CHECK(a.reagents[i].molar_mass_g_per_mol == b.reagents[i].molar_mass_g_per_mol);
        CHECK(a.reagents[i].ghs.statements.size() == b.reagents[i].ghs.statements.size());
    }
}

TEST_CASE("bundled table: every figure has a source, every sheet its closing cautions", "[constants]") {
    const Table& table = bundled_table();
    for (const System& system : table.systems) {
        for (const Step& step : system.steps) {
            INFO(system.name);
            REQUIRE(step.pK_25C.source < table.sources.size());
            CHECK_FALSE(table.sources[step.pK_25C.source].citation.empty());
        }
    }
    int always = 0;
    for (const Caution& caution : table.cautions) {
        always += caution.key.starts_with("always-") ? 1 : 0;
    }
    CHECK(always >= 2);
}
