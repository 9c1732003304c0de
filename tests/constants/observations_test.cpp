#include <algorithm>
#include <string>

#include "carboy/constants_file.h"
#include "carboy/prediction.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

std::string rule(const std::string& when, const std::string& text = "Seen at pH {pH}.", const std::string& more = "") {
    return R"({"schema":"carboy-constants/1","observations":{"house_rule":{"text":")" + text +
           R"(","weight":60,"when":)" + when + more + R"(,"source":"common-practice","evidence":"common practice"}}})";
}

bool has_fault(const std::string& document, const std::string& path_end, const std::string& words) {
    const auto overlay = lay_over(bundled_table(), document);
    return std::any_of(overlay.faults.begin(), overlay.faults.end(), [&](const ConstantsFault& fault) {
        return fault.path.ends_with(path_end) && fault.message.find(words) != std::string::npos;
    });
}

}  // namespace

TEST_CASE("observations: a rule of one's own needs data only", "[constants][colleague]") {
    const auto overlay = lay_over(
        bundled_table(), rule(R"({"with":[{"any_of":["acetate"],"least_mol_per_kg":0.01}],"pH":{"from":4,"to":6}})",
                              "Acetate at pH {pH}: {subject}.", R"(,"pH_standard_uncertainty":0.3)"));
    REQUIRE(overlay.faults.empty());
    REQUIRE(overlay.changes.size() == 1);
    CHECK(overlay.changes[0].kind == "observation");
    const Table& table = overlay.table;
    Mixture mixture;
    mixture.add(id_of(table, *find_system(table, "acetate")), Molality::mol_per_kg(0.1));
    mixture.add(id_of(table, *find_spectator(table, "Na+")), Molality::mol_per_kg(0.05));
    const Prediction seen = predict(table, mixture, Temperature{}, davies_model());
    REQUIRE(seen.warnings.size() == 1);
    CHECK(seen.warnings[0].code == "house_rule");
    CHECK(seen.warnings[0].message.find("acetate") != std::string::npos);
    CHECK(seen.warnings[0].message.find('{') == std::string::npos);
    CHECK(seen.uncertainty.expanded_k2 > 0.6);
    CHECK(seen.uncertainty.expanded_k2 < 0.62);
    CHECK(predict(bundled_table(), mixture, Temperature{}, davies_model()).warnings.empty());
}

TEST_CASE("observations: a bundled rule is replaced by its code", "[constants][overlay][colleague]") {
    const std::string other =
        R"({"schema":"carboy-constants/1","observations":{"primary_amine":{"text":"Not for us.","weight":1,)"
        R"("when":{"pH":{"from":15}},"source":"common-practice","evidence":"common practice"}}})";
    const auto overlay = lay_over(bundled_table(), other);
    REQUIRE(overlay.faults.empty());
    CHECK(overlay.changes[0].replaced);
    CHECK(overlay.table.observations.size() == bundled_table().observations.size());
}

TEST_CASE("observations: faults are told with their path", "[constants][bad][colleague]") {
    CHECK(has_fault(rule(R"({"pH":{"from":9,"to":4}})"), "/house_rule/when/pH", "'from' below 'to'"));
    CHECK(has_fault(rule(R"({"pH":{}})"), "/house_rule/when/pH", "'from', 'to' or both"));
    CHECK(has_fault(rule(R"({"colour":"red"})"), "/house_rule/when", "'colour' is not known"));
    CHECK(has_fault(rule(R"({"with":[{"any_of":["unobtainium"]}]})"), "/any_of/0", "no system, ion or solute"));
    CHECK(has_fault(rule(R"({"with":[{"any_of":[]}]})"), "/with/0", "'any_of' names"));
    CHECK(has_fault(rule(R"({"reagents":["moonshine"]})"), "/reagents/0", "no reagent"));
    CHECK(has_fault(rule(R"({"hazard_statements":["H999"]})"), "/hazard_statements/0", "no hazard statement"));
    CHECK(has_fault(rule(R"({"stages":["drunk"]})"), "/stages/0", "no stage"));
    CHECK(has_fault(rule(R"({"product":{"of":{"Xx+":1},"log10_above":-5}})"), "/of/Xx+", "no species"));
    // Maleate and fumarate have one formula.
    CHECK(
        has_fault(rule(R"({"product":{"of":{"C4H2O4^2-":1},"log10_above":-5}})"), "/of/C4H2O4^2-", "several systems"));
    CHECK(lay_over(bundled_table(), rule(R"({"product":{"of":{"maleate:C4H2O4^2-":1},"log10_above":-5}})"))
              .faults.empty());
    CHECK(has_fault(rule(R"({"pH":{"from":9}})", "See {moon}."), "/house_rule", "no place 'moon'"));
    CHECK(has_fault(rule(R"({"recipe":true})", "Text.", R"(,"pH_standard_uncertainty":0.1)"), "/house_rule",
                    "what is dissolved"));
    CHECK(has_fault(R"({"schema":"carboy-constants/1","observations":{"x":{}}})", "/x", "'weight' is missing"));
}
