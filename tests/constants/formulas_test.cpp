#include <algorithm>
#include <string>

#include "carboy/concentration.h"
#include "carboy/constants_file.h"
#include "carboy/notation.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

/// A document with one formula of these members.
ConstantsOverlay with_formula(const std::string& members) {
    return lay_over(bundled_table(), R"({"schema":"carboy-constants/1","formulas":[{)" + members +
                                         R"(,"source":"common-practice","evidence":"common practice"}]})");
}

bool has_fault(const ConstantsOverlay& overlay, const std::string& words) {
    return std::any_of(overlay.faults.begin(), overlay.faults.end(), [&](const ConstantsFault& fault) {
        return fault.message.find(words) != std::string::npos && fault.path.starts_with("/formulas/0");
    });
}

}  // namespace

TEST_CASE("formulas: found by any name, each with its evidence", "[constants][formula]") {
    const Table& table = bundled_table();
    REQUIRE(find_named_formula(table, "PBS") != nullptr);
    CHECK(find_named_formula(table, "pbs") == find_named_formula(table, "Phosphate-Buffered Saline"));
    CHECK(find_named_formula(table, "no such thing") == nullptr);
    for (const NamedFormula& formula : table.formulas) {
        INFO(formula.name);
        CHECK_FALSE(formula.items.empty());
        CHECK((formula.evidence == Evidence::common_practice || formula.evidence == Evidence::from_memory));
        CHECK_FALSE(table.sources[formula.source].citation.empty());
        // Every name leads back to its own formula.
        CHECK(find_named_formula(table, formula.name) == &formula);
        for (const std::string_view name : formula.names) {
            INFO(name);
            CHECK(find_named_formula(table, name) == &formula);
        }
    }
}

TEST_CASE("formulas: a file may add one, and a label take it", "[constants][formula]") {
    const auto overlay = with_formula(
        R"("name":"house wash","names":["HW"],"pH":7.2,"items":[{"reagent":"HEPES","mmol_per_L":10,"part":"buffer","counter_ion":"K+"},{"reagent":"KCl","g_per_L":7.455}])");
    REQUIRE(overlay.faults.empty());
    CHECK(overlay.changes.at(0).kind == "formula");
    CHECK_FALSE(overlay.changes[0].replaced);
    CHECK(find_named_formula(overlay.table, "PBS") != nullptr);
    const Label label = read_label("4x HW", overlay.table);
    CHECK(label.strength == 4);
    CHECK(label.ph->value() == 7.2);
    CHECK(label.buffers.at(0).concentration.value == Approx(0.04));
    CHECK(name_of(overlay.table, *label.buffers[0].counter_ion) == "K+");
    CHECK(label.additives.at(0).concentration.value == Approx(29.82));
}

TEST_CASE("formulas: a file may put its own in the place of a bundled one", "[constants][formula]") {
    const auto overlay = with_formula(
        R"("name":"Tris-buffered saline","names":["TBS"],"pH":7.6,"items":[{"reagent":"Tris","mmol_per_L":20,"part":"buffer"},{"reagent":"NaCl","mmol_per_L":137}])");
    REQUIRE(overlay.faults.empty());
    CHECK(overlay.changes.at(0).replaced);
    CHECK(overlay.table.formulas.size() == bundled_table().formulas.size());
    CHECK(read_label("10x TBS", overlay.table).buffers.at(0).concentration.value == Approx(0.2));
}

TEST_CASE("formulas: faults are named by their place", "[constants][formula][bad-input]") {
    const std::string item = R"({"reagent":"NaCl","mmol_per_L":10})";
    const auto of_item = [](const std::string& members) {
        return with_formula(R"("name":"wash","items":[{)" + members + "}]");
    };
    CHECK(has_fault(with_formula(R"("name":"wash","items":[])"), "needs 'items'"));
    CHECK(has_fault(with_formula(R"("name":"wash")"), "needs 'items'"));
    CHECK(has_fault(with_formula(R"("name":"wash","pH":7,"items":[)" + item + "]"), "an item that holds it"));
    CHECK(has_fault(with_formula(R"("name":"wash","pH":70,"items":[)" + item + "]"), "70"));
    CHECK(has_fault(with_formula(R"("name":"wash","names":["PBS"],"items":[)" + item + "]"), "also a name of formula"));
    CHECK(has_fault(of_item(R"("reagent":"unobtainium","mmol_per_L":1)"), "no reagent 'unobtainium'"));
    CHECK(has_fault(of_item(R"("reagent":"NaCl")"), "one concentration"));
    CHECK(has_fault(of_item(R"("reagent":"NaCl","mmol_per_L":1,"g_per_L":1)"), "one concentration"));
    CHECK(has_fault(of_item(R"("reagent":"NaCl","mmol_per_L":-1)"), "-1"));
    CHECK(has_fault(of_item(R"("reagent":"NaCl","percent_v_v":1)"), "is a solid"));
    CHECK(has_fault(of_item(R"("reagent":"NaCl","mmol_per_L":1,"part":"filler")"), "no part of a formula"));
    CHECK(has_fault(of_item(R"("reagent":"NaCl","mmol_per_L":1,"part":"buffer")"), "does not bring one system"));
    CHECK(has_fault(of_item(R"("reagent":"NaCl","mmol_per_L":1,"counter_ion":"Na+")"), "only a buffer"));
    CHECK(has_fault(of_item(R"("reagent":"Tris","mmol_per_L":1,"part":"buffer","counter_ion":"Xx")"),
                    "no ion or system"));
    CHECK(has_fault(of_item(R"("reagent":"NaCl","mmol_per_L":1,"colour":"red")"), "colour"));
}
