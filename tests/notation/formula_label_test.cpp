#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/request_json.h"

#include "catch_shim.h"
#include "notation/refusal.h"

using namespace carboy;
using carboy::test::check_refused;
using carboy::test::help_of;
using carboy::test::Refusal;

namespace {

Label label_of(const std::string& line) {
    return read_label(line, bundled_table());
}

/// mol/L of an additive on the label, 0 when it is not on it.
double added(const Label& label, const char* reagent) {
    const Reagent& wanted = *find_reagent(bundled_table(), reagent);
    for (const AdditiveItem& item : label.additives) {
        if (&bundled_table().reagents[item.reagent] == &wanted) {
            return amount_in(item.concentration, Volume::litres(1), wanted, bundled_table()).mol();
        }
    }
    return 0;
}

std::string ion_of(const BufferItem& item) {
    return item.counter_ion ? std::string(name_of(bundled_table(), *item.counter_ion)) : std::string();
}

}  // namespace

// The proportions are common practice, no source: 137 mM NaCl, 2.7 mM KCl, 10 mM Na2HPO4, 1.8 mM KH2PO4.
TEST_CASE("formula: ten times phosphate-buffered saline", "[notation][formula]") {
    for (const char* line : {"10x phosphate-buffered saline, pH 7.4 at 25 C", "10x PBS, pH 7.4 at 25 C",
                             "10xPBS pH 7.4 at 25 C", "pH 7.4 at 25 C, 10 X pbs buffer", "PBS 10x, pH 7.4 (25 C)",
                             "10\u00D7 phosphate buffered saline, pH 7.4 at 25 C"}) {
        INFO(line);
        const Label label = label_of(line);
        CHECK(label.strength == 10);
        CHECK(label.ph->value() == 7.4);
        CHECK(label.ph_at->celsius() == 25);
        REQUIRE(label.buffers.size() == 1);
        CHECK(name_of(bundled_table(), label.buffers[0].system) == "phosphate");
        CHECK(ion_of(label.buffers[0]) == "Na+");
        CHECK(label.buffers[0].concentration.value == Approx(0.1));
        CHECK(added(label, "NaCl") == Approx(1.37));
        CHECK(added(label, "KCl") == Approx(0.027));
        CHECK(added(label, "KH2PO4") == Approx(0.018));
    }
}

TEST_CASE("formula: a name alone is the working strength, with the formula's own pH", "[notation][formula]") {
    const Label saline = label_of("PBS");
    CHECK(saline.strength == 1);
    CHECK(saline.ph->value() == 7.4);
    CHECK(added(saline, "NaCl") == Approx(0.137));
    const Label tris = label_of("10x TBS");
    CHECK(tris.ph->value() == 7.5);
    CHECK(tris.buffers.at(0).concentration.value == Approx(0.5));
    CHECK(ion_of(tris.buffers[0]) == "Cl-");
    CHECK(label_of("10x TBS, pH 7.6").ph->value() == 7.6);
    // Half strength is used as it is: nothing is diluted.
    const Label half = label_of("0.5x PBS");
    CHECK(half.strength == 1);
    CHECK(added(half, "NaCl") == Approx(0.0685));
}

TEST_CASE("formula: without a pH it is made as written, with one its acid follows from that", "[notation][formula]") {
    const Label written = label_of("50x TAE");
    CHECK_FALSE(written.ph);
    CHECK(written.buffers.empty());
    CHECK(written.strength == 50);
    CHECK(added(written, "Tris") == Approx(2));
    CHECK(added(written, "acetic acid") == Approx(1));
    CHECK(added(written, "EDTA") == Approx(0.05));
    const Label titrated = label_of("1x TAE, pH 8.3");
    REQUIRE(titrated.buffers.size() == 1);
    CHECK(ion_of(titrated.buffers[0]) == "acetate");
    CHECK(added(titrated, "acetic acid") == 0);
    CHECK(added(titrated, "EDTA") == Approx(0.001));
    const Label citrate = label_of("20x SSC");
    CHECK(citrate.buffers.empty());
    CHECK(added(citrate, "NaCl") == Approx(3));
    CHECK(added(citrate, "trisodium citrate dihydrate") == Approx(0.3));
    const BufferItem form = label_of("20x SSC, pH 7").buffers.at(0);
    REQUIRE(form.named_form);
    CHECK(bundled_table().reagents[*form.named_form].name == "trisodium citrate dihydrate");
}

TEST_CASE("formula: what stands beside it is added as written", "[notation][formula]") {
    const Label label = label_of("10x PBS, 100 mM NaCl, 5 mM EDTA, 20 mM sodium phosphate, 10 mM HEPES");
    CHECK(added(label, "NaCl") == Approx(1.47));
    CHECK(added(label, "EDTA") == Approx(0.005));
    REQUIRE(label.buffers.size() == 2);
    CHECK(label.buffers[0].concentration.value == Approx(0.12));
    CHECK(label.buffers[1].concentration.value == Approx(0.01));
    // Grams per litre and moles add up.
    CHECK(added(label_of("1x DPBS, 58.44 g/L NaCl"), "NaCl") == Approx((8 + 58.44) / 58.44).epsilon(1e-3));
}

TEST_CASE("formula: brought to pH with another acid", "[notation][formula]") {
    CHECK(ion_of(label_of("1x TBS, pH 7.5 (HNO3)").buffers.at(0)) == "NO3-");
    CHECK(ion_of(label_of("1x PBS, pH 7.4 (KOH)").buffers.at(0)) == "K+");
}

TEST_CASE("formula: a request carries the strength", "[notation][formula][request]") {
    CHECK(request_from_label("10x TBS", bundled_table()).strength == 10);
    const Request request = read_request(R"({"label":"20x SSPE","volume":"1 L"})", bundled_table());
    CHECK(request.strength == 20);
    CHECK(request.ph->value() == 7.4);
}

TEST_CASE("formula: every one of the table can be put on a label", "[notation][formula]") {
    CHECK(bundled_table().formulas.size() >= 12);
    for (const NamedFormula& formula : bundled_table().formulas) {
        INFO(formula.name);
        const std::string name(formula.name);
        CHECK(label_of("5x " + name).strength == 5);
        CHECK(label_of(name + ", pH 8").buffers.size() >= 1);
        for (const std::string_view other : formula.names) {
            INFO(other);
            CHECK(label_of(std::string(other)).strength == 1);
        }
    }
}

TEST_CASE("formula: what is wrong is named and pointed at", "[notation][formula][bad-input]") {
    for (const Refusal& refusal :
         std::initializer_list<Refusal>{{"10x PSB, pH 7.4", "unknown_formula", "PSB", "'PSB'"},
                                        {"10x Tris-HCl, pH 7.4", "unknown_formula", "Tris-HCl", "'Tris-HCl'"},
                                        {"10x, pH 7.4", "missing_name", "10x", "10x of what"},
                                        {"0x PBS", "number_out_of_range", "0x", "'0x'"},
                                        {"5000x PBS", "number_out_of_range", "5000x", "'5000x'"},
                                        {"-2x PBS", "negative_quantity", "-2", "'-2'"},
                                        {"1x PBS, 1x TBS", "duplicate_item", "1x TBS", "a second formula"},
                                        {"1x PBS, pH 7.4 (HCl)", "two_counter_ions", "HCl", "'HCl'"},
                                        {"1x TAE, 20 mM HEPES", "missing_ph", "20 mM HEPES", "no pH"},
                                        {"1x PBS, 10 mmol/kg NaCl", "unusable_unit", "1x PBS", "mol/kg"},
                                        {"1x PBS, 10 mmol/kg sodium phosphate", "unusable_unit", "1x PBS", "mol/kg"}}) {
        check_refused(refusal, "label", label_of);
    }
    CHECK(help_of("10x PSB, pH 7.4", label_of) == "did you mean PBS?");
}
