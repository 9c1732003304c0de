#include "carboy/constants_file.h"

#include <algorithm>

#include "carboy/equilibrium.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

/// A document around one section.
std::string document(const std::string& section) {
    return R"({"schema":"carboy-constants/1",)" + section + "}";
}

std::string a_system(const std::string& more = "", const std::string& step_more = "",
                     const std::string& name = "test acid") {
    return document(R"("systems":[{"name":")" + name + R"(","species":["C7H6O2","C7H5O2-"],"counter_ions":["Na+"],)" +
                    more + R"("steps":[{"pK_25C":{"value":4.2,"uncertainty":0.01},)" + step_more +
                    R"("source":"goldberg-2002","evidence":"seen"}]}])");
}

std::string a_reagent(const std::string& changed_key = "", const std::string& changed_value = "") {
    std::string text = "\"reagents\":[{";
    const std::pair<const char*, const char*> members[] = {{"name", R"("test salt")"},
                                                           {"names", "[]"},
                                                           {"formula", R"("NaCl")"},
                                                           {"cas", R"("7647-14-5")"},
                                                           {"supplies", R"({"Na+":1,"Cl-":1})"},
                                                           {"state", R"("solid")"},
                                                           {"ghs", R"({"signal_word":null,"statements":[]})"}};
    bool first = true;
    for (const auto& [key, value] : members) {
        text += (first ? "\"" : ",\"") + std::string(key) + "\":" + (key == changed_key ? changed_value : value);
        first = false;
    }
    if (!changed_key.empty() && text.find("\"" + changed_key + "\"") == std::string::npos) {
        text += ",\"" + changed_key + "\":" + changed_value;
    }
    return document(text + "}]");
}

}  // namespace

TEST_CASE("constants file: adds and replaces entry by entry, indices stay", "[constants][overlay]") {
    const Table& base = bundled_table();
    const auto added = lay_over(base, a_system());
    REQUIRE(added.faults.empty());
    REQUIRE(added.changes.size() == 1);
    CHECK_FALSE(added.changes[0].replaced);
    CHECK(added.table.systems.size() == base.systems.size() + 1);
    CHECK(find_system(added.table, "Test-Acid") == &added.table.systems.back());
    CHECK(added.table.version == std::string(base.version) + "+overlay");
    CHECK(added.table.sha256 != base.sha256);
    for (std::size_t i = 0; i < base.reagents.size(); ++i) {
        CHECK(added.table.reagents[i].name == base.reagents[i].name);
    }

    const std::string replacing = document(
        R"("systems":[{"name":"Tris","species":["C4H12NO3+","C4H11NO3"],"counter_ions":["Cl-"],
            "steps":[{"pK_25C":{"value":8.1},"source":"mine"}]}], "sources":{"mine":{"citation":"own measurement"}})");
    const auto replaced = lay_over(base, replacing);
    REQUIRE(replaced.faults.empty());
    CHECK(replaced.table.systems.size() == base.systems.size());
    const System* tris = find_system(replaced.table, "Tris");
    REQUIRE(tris != nullptr);
    CHECK(tris->steps[0].pK_25C.value == 8.1);
    CHECK(id_of(replaced.table, *tris) == id_of(base, *find_system(base, "Tris")));
    CHECK(std::any_of(replaced.changes.begin(), replaced.changes.end(),
                      [](const ConstantsChange& change) { return change.replaced && change.name == "Tris"; }));
    // The base is untouched.
    CHECK(find_system(base, "Tris")->steps[0].pK_25C.value != 8.1);
}

TEST_CASE("constants file: a published expression in T", "[constants][overlay]") {
    // Bates RG, Hetzer HB, J. Phys. Chem. 65, 667 (1961): pK of Tris 0 to 50 °C; from memory. Values at 0, 25, 37, 50
    // °C as their table has them: 8.850, 8.075, 7.747, 7.436 (from memory).
    const auto overlay = lay_over(
        bundled_table(),
        document(R"("systems":[{"name":"Tris by Bates","species":["C4H12NO3+","C4H11NO3"],"counter_ions":["Cl-"],
            "steps":[{"pK_25C":{"value":8.072},"expression":{"terms":{"1/T":2981.4,"1":-3.5888,"T":0.005571},"from_C":0,"to_C":50},
                      "source":"goldberg-2002"}]}])"));
    REQUIRE(overlay.faults.empty());
    const System* system = find_system(overlay.table, "Tris by Bates");
    REQUIRE(system != nullptr);
    CHECK(thermodynamic_pK(*system, 0, Temperature::celsius(0)) == Approx(8.850).margin(0.005));
    CHECK(thermodynamic_pK(*system, 0, Temperature::celsius(25)) == Approx(8.075).margin(0.005));
    CHECK(thermodynamic_pK(*system, 0, Temperature::celsius(37)) == Approx(7.747).margin(0.006));
    CHECK(thermodynamic_pK(*system, 0, Temperature::celsius(50)) == Approx(7.436).margin(0.006));
    CHECK_FALSE(pK_is_extrapolated(*system, 0, Temperature::celsius(50)));
    CHECK(pK_is_extrapolated(*system, 0, Temperature::celsius(60)));
}

TEST_CASE("constants file: a concentration constant becomes a thermodynamic one", "[constants][overlay]") {
    // pK(EGTA4-) 9.47 in 0.1 mol/L KCl: Davies adds A f(I) (1 + 16 - 9) = 0.5098 x 0.2102 x 8 = 0.857.
    const System* egta = find_system(bundled_table(), "EGTA");
    REQUIRE(egta != nullptr);
    REQUIRE(egta->steps.back().reference_ionic_strength_mol_per_kg == Approx(0.1));
    CHECK(thermodynamic_pK(*egta, egta->steps.size() - 1, Temperature{}) - egta->steps.back().pK_25C.value ==
          Approx(0.857).margin(0.002));
}

TEST_CASE("constants file: every fault is told with its path", "[constants][overlay][bad-input]") {
    struct Case {
        std::string text;
        std::string path;
        std::string words;
    };
    const std::vector<Case> cases{
        {"", "", "not JSON"},
        {"{", "", "line 1"},
        {"[]", "", "object is expected"},
        {R"({"systems":[]})", "", "'schema' is missing"},
        {R"({"schema":"carboy-constants/99"})", "/schema", "not a format"},
        {R"({"schema":"carboy-constants/1","systms":[]})", "", "'systms' is not known"},
        {R"({"schema":"carboy-constants/1","schema":"carboy-constants/1"})", "", "stands twice"},
        {document(R"("systems":{})"), "/systems", "array is expected"},
        {document(R"("systems":[3])"), "/systems/0", "object is expected"},
        {document(R"("systems":[{"species":["H+"],"steps":[]}])"), "/systems/0", "'name' is missing"},
        {a_system(R"("role":"buffr",)"), "/systems/0/role", "no role"},
        {a_system(R"("colour":"red",)"), "/systems/0", "'colour' is not known"},
        {a_system(R"("usual_form":"no such salt",)"), "/systems/0/usual_form", "no reagent"},
        {a_system(R"("cautions":["no-such"],)"), "/systems/0/cautions/0", "no caution"},
        {a_system("", R"("enthalpy_kJ_per_mol":{"value":4000},)"), "/systems/0/steps/0/enthalpy_kJ_per_mol/value",
         "outside"},
        {a_system("", R"("enthalpy_kJ_per_mol":{"value":"4"},)"), "/systems/0/steps/0/enthalpy_kJ_per_mol/value",
         "number is expected"},
        {a_system("", R"("enthalpy_kJ_per_mol":4,)"), "/systems/0/steps/0/enthalpy_kJ_per_mol", "object is expected"},
        {a_system("", R"("pk":{"value":4},)"), "/systems/0/steps/0", "'pk' is not known"},
        {a_system("", R"("expression":{"terms":{"1/T":1000},"from_C":50,"to_C":0},)"), "/systems/0/steps/0/expression",
         "below"},
        {a_system("", R"("expression":{"terms":{"1/T":1000},"from_C":0,"to_C":50},)"), "/systems/0/steps/0/expression",
         "at 25 °C"},
        {document(
             R"("systems":[{"name":"x","species":["C7H6O2","C7H5O2-"],"steps":[{"pK_25C":{"value":4.2},"source":"nobody"}]}])"),
         "/systems/0/steps/0/source", "no source 'nobody'"},
        {document(R"("systems":[{"name":"x","species":["C7H6O2","C7H5O2-"],"steps":[{"pK_25C":{"value":4.2}}]}])"),
         "/systems/0/steps/0", "'source' is missing"},
        {document(
             R"("systems":[{"name":"x","species":["C7H6O2"],"steps":[{"pK_25C":{"value":4.2},"source":"goldberg-2002"}]}])"),
         "/systems/0", "need 2 species"},
        {document(
             R"("systems":[{"name":"x","species":["C7H5O2-","C7H6O2"],"steps":[{"pK_25C":{"value":4.2},"source":"goldberg-2002"}]}])"),
         "/systems/0", "not the loss of one H+"},
        {document(
             R"("systems":[{"name":"x","species":["Qq","C7H5O2-"],"steps":[{"pK_25C":{"value":4.2},"source":"goldberg-2002"}]}])"),
         "/systems/0", "no atomic weight for 'Qq'"},
        {a_system("", "", "a\\u0001b"), "/systems/0/name", "control character"},
        {document(R"("spectators":[{"name":"Xx","formula":"na+"}])"), "/spectators/0", "cannot be read"},
        {a_reagent("cas", R"("7647-14-6")"), "/reagents/0", "check digit"},
        {a_reagent("formula", R"("KCl")"), "/reagents/0/supplies", "left over"},
        {a_reagent("supplies", R"({"Na+":1})"), "/reagents/0/supplies", "left over"},
        {a_reagent("supplies", R"({"Xx+":1})"), "/reagents/0/supplies/Xx+", "no system, ion or solute"},
        {a_reagent("supplies", R"({"Na+":-1,"Cl-":1})"), "/reagents/0/supplies/Na+", "outside"},
        {a_reagent("state", R"("gas")"), "/reagents/0", "no state"},
        {a_reagent("state", R"("solution")"), "/reagents/0", "needs a strength"},
        {a_reagent("assay", R"({"nominal":1.5})"), "/reagents/0/assay/nominal", "outside"},
        {a_reagent("density_g_per_mL", R"({"value":99})"), "/reagents/0/density_g_per_mL/value", "outside"},
        {a_reagent("ghs", R"({"signal_word":"Beware","statements":[]})"), "/reagents/0/ghs/signal_word",
         "no GHS signal word"},
        {a_reagent("ghs", R"({"signal_word":"Danger","statements":["H999"]})"), "/reagents/0/ghs/statements/0",
         "no hazard statement"},
        {a_reagent("names", R"(["KCl"])"), "/reagents/0", "also a name of reagent"},
        {a_reagent("strength", R"({"mol_per_L":1,"mass_percent":2})"), "/reagents/0/strength", "one of them"},
        {a_reagent("usual", R"("yes")"), "/reagents/0/usual", "true or false"},
        {document(R"("elements":{"Xx":{"standard_atomic_weight":1e9}})"), "/elements/Xx/standard_atomic_weight",
         "outside"},
        {document(R"("sources":{"x":{"citaton":"?"}})"), "/sources/x", "did you mean"}};
    CHECK(cases.size() >= 40);
    for (const Case& c : cases) {
        INFO(c.text);
        const auto overlay = lay_over(bundled_table(), c.text);
        const bool told = std::any_of(overlay.faults.begin(), overlay.faults.end(), [&](const ConstantsFault& fault) {
            return fault.path == c.path && (fault.message + " " + fault.help).find(c.words) != std::string::npos;
        });
        for (const auto& fault : overlay.faults) {
            UNSCOPED_INFO("told: " << fault.path << ": " << fault.message << " | " << fault.help);
        }
        CHECK(told);
    }
}

TEST_CASE("constants file: all faults at once, not only the first", "[constants][overlay]") {
    const auto overlay =
        lay_over(bundled_table(), document(R"("systems":[{"name":"x","species":["C7H6O2","C7H5O2-"],"role":"?",
        "steps":[{"pK_25C":{"value":99},"source":"nobody"}]}],"reagents":[{"name":"y"}])"));
    CHECK(overlay.faults.size() >= 6);
}
