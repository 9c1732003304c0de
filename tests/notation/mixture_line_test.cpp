#include <random>

#include "carboy/error.h"
#include "carboy/notation.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

Preparation read(const char* line) {
    return read_mixture(line, bundled_table(), Temperature{});
}

std::string formula_of(const Portion& portion) {
    return std::string(bundled_table().reagents[portion.reagent].formula);
}

}  // namespace

TEST_CASE("mixture: the lines of the contract", "[notation][mixture]") {
    const Preparation molal = read("25 mmol/kg KH2PO4, 25 mmol/kg Na2HPO4");
    REQUIRE(molal.portions.size() == 2);
    CHECK_FALSE(molal.filled_to);
    CHECK(molal.portions[0].molality->mol_per_kg() == Approx(0.025));

    const Preparation poured = read("50 mL of 0.1 M KH2PO4, 29.1 mL of 0.1 M NaOH, to 100 mL");
    REQUIRE(poured.portions.size() == 2);
    CHECK(poured.filled_to->L() == Approx(0.1));
    CHECK(poured.portions[1].amount->mol() == Approx(0.00291));

    const Preparation weighed = read("6.057 g Tris, 34.5 mL of 1 M HCl, to 1 L");
    // Weighed moles count the table's nominal assay.
    const Reagent& tris = bundled_table().reagents[weighed.portions[0].reagent];
    CHECK(weighed.portions[0].amount->mol() == Approx(6.057 / 121.135 * tris.assay.value).epsilon(1e-4));
    CHECK(weighed.portions[1].amount->mol() == Approx(0.0345));

    const Preparation lactate = read("0.12 mol/kg lactic acid, 0.08 mol/kg sodium lactate, 0.15 mol/kg HCl");
    CHECK(lactate.portions.size() == 3);
}

TEST_CASE("mixture: other ways of writing it", "[notation][mixture]") {
    CHECK(formula_of(read("1 g Na2HPO4·7H2O, to 1 L").portions[0]) == "Na2HPO4·7H2O");
    CHECK(formula_of(read("1 g of 7782-85-6, to 1 L").portions[0]) == "Na2HPO4·7H2O");
    CHECK(read("25 mM Tris").filled_to->L() == 1);
    CHECK(formula_of(read("6.5 g Tris HCl, to 1 L").portions[0]) == "C4H12ClNO3");
    CHECK(formula_of(read("50 mL of 1 M Tris-HCl, to 1 L").portions[0]) == "C4H12ClNO3");
    CHECK(read("Tris 25 mM, HCl 10 mM").portions[0].amount->mol() == Approx(0.025));
}

TEST_CASE("mixture: a liquid by volume is the table's grade; strengths by percent and normality",
          "[notation][mixture]") {
    // 12 mL of 37 % w/w hydrochloric acid, density 1.19 g/mL: 12 x 1.19 x 0.37 / 36.458 = 0.1449 mol.
    CHECK(read("12 mL of HCl 37 %, to 1 L").portions[0].amount->mol() == Approx(0.1449).epsilon(2e-3));
    CHECK(read("12 mL of 37 % w/w HCl, to 1 L").portions[0].amount->mol() == Approx(0.1449).epsilon(2e-3));
    // Glacial acetic acid: 17.4 mol/L.
    CHECK(read("10 mL acetic acid, to 1 L").portions[0].amount->mol() == Approx(0.174).epsilon(5e-3));
    // 1 N sulfuric acid is 0.5 mol/L.
    CHECK(read("10 mL of 1 N H2SO4, to 1 L").portions[0].amount->mol() == Approx(0.005));
    CHECK(read("10 mL of 1 N HCl, to 1 L").portions[0].amount->mol() == Approx(0.010));
    // 50 % w/w NaOH, density 1.52 g/mL: 19.0 mol/L.
    CHECK(read("1 mL of 50 % w/w NaOH, to 1 L").portions[0].amount->mol() == Approx(0.0190).epsilon(5e-3));
}

TEST_CASE("mixture: what is wrong is named and pointed at", "[notation][mixture][bad-input]") {
    struct Case {
        const char* line;
        const char* code;
        const char* at;
    };
    for (const Case& c :
         std::initializer_list<Case>{{"", "empty_line", ""},
                                     {"to 1 L", "empty_mixture", "1 L"},
                                     {"6 g Tris", "missing_final_volume", "6 g"},
                                     {"34 mL of 1 M HCl", "missing_final_volume", "34 mL"},
                                     {"6 g Tris, to 1 L, 2 g NaCl", "misplaced_final_volume", "to 1 L"},
                                     {"6 g Tris, to 1", "missing_unit", "1"},
                                     {"6 g Tris, to 1 g", "wrong_quantity", "1 g"},
                                     {"6 g Tris, to 0 L", "trailing_text", "0 L"},
                                     {"6 g Tris, to 1 L at 4 C", "trailing_text", "at 4 C"},
                                     {"6 g Triss, to 1 L", "unknown_name", "Triss"},
                                     {"25 mM phosphate", "unknown_name", "phosphate"},
                                     {"25 mM potassium phosphate", "unknown_name", "potassium phosphate"},
                                     {"50 mL of NaCl, to 1 L", "missing_strength", "50 mL of NaCl"},
                                     {"50 mL of 0.1 M, to 1 L", "missing_name", "50 mL of 0.1 M"},
                                     {"50 mL of 4 C HCl, to 1 L", "wrong_quantity", "4 C"},
                                     {"50 mL of 0.1 mol/kg HCl, to 1 L", "unusable_unit", "0.1 mol/kg"},
                                     {"50 mL of 1 N NaCl, to 1 L", "unusable_unit", "1 N"},
                                     {"50 mL of 20 % w/w NaCl, to 1 L", "unknown_density", "20 % w/w"},
                                     {"500 mL of 1 M HCl, 600 mL of 1 M NaOH, to 1 L", "overfull", ""},
                                     {"Tris", "missing_quantity", "Tris"},
                                     {"25 mM", "missing_name", "25 mM"},
                                     {"25 C Tris, to 1 L", "wrong_quantity", "25 C"},
                                     {"10x Tris, to 1 L", "wrong_quantity", "10x"},
                                     {"-1 g Tris, to 1 L", "negative_quantity", "-1"},
                                     {"1 g Tris,, to 1 L", "empty_item", ","},
                                     {"1 g Tris, to 1 L,", "empty_item", ","},
                                     {"5 % v/v NaCl", "unusable_unit", "5 % v/v"},
                                     {"2 g HCl 1 M, to 1 L", "unusable_unit", "2 g"}}) {
        INFO(c.line);
        try {
            read(c.line);
            FAIL("was read");
        } catch (const Error& error) {
            INFO(error.code() << ": " << error.message() << " | " << error.help());
            CHECK(error.kind() == ErrorKind::input);
            CHECK(error.code() == c.code);
            CHECK(error.excerpt().text.substr(std::min(error.excerpt().begin, error.excerpt().text.size()),
                                              std::string(c.at).size()) == c.at);
        }
    }
}

TEST_CASE("lines made of any tokens are read or refused, never worse", "[notation][fuzz]") {
    const std::vector<std::string> tokens{"50",        "mM",
                                          "Tris",      "-",
                                          "HCl",       ",",
                                          ", ",        " ",
                                          "pH",        "7.5",
                                          "at",        "4",
                                          "C",         "°C",
                                          "NaCl",      "to",
                                          "1 L",       "of",
                                          "g",         "mL",
                                          "0.1 M",     "ionic strength",
                                          "%",         "w/v",
                                          "x",         "1e999",
                                          "-1",        "\u00B5",
                                          "\xC2\xB7",  "2-amino-2-methyl-1,3-propanediol",
                                          "Na2HPO4",   ".7H2O",
                                          "(",         ")",
                                          "'",         "\t",
                                          "EDTA",      "sodium",
                                          "phosphate", "=",
                                          "10",        "\u2013",
                                          "N",         "ium",
                                          "buffer",    "1,3",
                                          ".",         "e",
                                          "+"};
    std::mt19937_64 random(20261201);
    const auto pick = [&] { return tokens[std::uniform_int_distribution<std::size_t>(0, tokens.size() - 1)(random)]; };
    int read_fine = 0;
    for (int trial = 0; trial < 20000; ++trial) {
        std::string line;
        const int length = std::uniform_int_distribution<int>(1, 14)(random);
        for (int i = 0; i < length; ++i) {
            line += pick() + (trial % 2 == 0 ? " " : "");
        }
        for (const bool label : {true, false}) {
            try {
                if (label) {
                    read_label(line, bundled_table());
                } else {
                    read_mixture(line, bundled_table(), Temperature{});
                }
                ++read_fine;
            } catch (const Error& error) {
                INFO(line);
                REQUIRE(error.kind() == ErrorKind::input);
                REQUIRE(error.excerpt().begin <= error.excerpt().text.size());
            }
        }
    }
    CHECK(read_fine > 0);
}
