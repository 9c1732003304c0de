#include <random>

#include "carboy/concentration.h"
#include "carboy/notation.h"

#include "catch_shim.h"
#include "notation/refusal.h"

using namespace carboy;
using carboy::test::check_refused;
using carboy::test::help_of;
using carboy::test::Refusal;

namespace {

Preparation mixture_of(const std::string& line) {
    return read_mixture(line, bundled_table(), Temperature{});
}

std::string formula_of(const Portion& portion) {
    return std::string(bundled_table().reagents[portion.reagent].formula);
}

}  // namespace

TEST_CASE("mixture: the lines of the contract", "[notation][mixture]") {
    const Preparation molal = mixture_of("25 mmol/kg KH2PO4, 25 mmol/kg Na2HPO4");
    REQUIRE(molal.portions.size() == 2);
    CHECK_FALSE(molal.filled_to);
    CHECK(molal.portions[0].molality->mol_per_kg() == Approx(0.025));

    const Preparation poured = mixture_of("50 mL of 0.1 M KH2PO4, 29.1 mL of 0.1 M NaOH, to 100 mL");
    REQUIRE(poured.portions.size() == 2);
    CHECK(poured.filled_to->L() == Approx(0.1));
    CHECK(poured.portions[1].amount->mol() == Approx(0.00291));

    const Preparation weighed = mixture_of("6.057 g Tris, 34.5 mL of 1 M HCl, to 1 L");
    // Weighed moles count the table's nominal assay.
    const Reagent& tris = bundled_table().reagents[weighed.portions[0].reagent];
    CHECK(weighed.portions[0].amount->mol() == Approx(6.057 / 121.135 * tris.assay.value).epsilon(1e-4));
    CHECK(weighed.portions[1].amount->mol() == Approx(0.0345));

    const Preparation lactate = mixture_of("0.12 mol/kg lactic acid, 0.08 mol/kg sodium lactate, 0.15 mol/kg HCl");
    CHECK(lactate.portions.size() == 3);
}

TEST_CASE("mixture: other ways of writing it", "[notation][mixture]") {
    CHECK(formula_of(mixture_of("1 g Na2HPO4·7H2O, to 1 L").portions[0]) == "Na2HPO4·7H2O");
    CHECK(formula_of(mixture_of("1 g of 7782-85-6, to 1 L").portions[0]) == "Na2HPO4·7H2O");
    CHECK(formula_of(mixture_of("7782-85-6 1 g, to 1 L").portions[0]) == "Na2HPO4·7H2O");
    CHECK(formula_of(mixture_of("2-mercaptoethanol 5 mM").portions[0]) == "C2H6OS");
    CHECK(mixture_of("1 g Tris, 2 g Tris, to 1 L").portions.size() == 2);  // added twice
    CHECK(mixture_of("50 mL of Tris 10 mM, to 1 L").portions[0].amount->mol() == Approx(0.0005));
    CHECK(mixture_of("50 mL 10 mM Tris, to 1 L").portions[0].amount->mol() == Approx(0.0005));
    CHECK(mixture_of("25 mM Tris, to 2 L").portions[0].amount->mol() == Approx(0.05));
    CHECK(mixture_of("25 mM Tris").filled_to->L() == 1);
    CHECK(formula_of(mixture_of("6.5 g Tris HCl, to 1 L").portions[0]) == "C4H12ClNO3");
    CHECK(formula_of(mixture_of("50 mL of 1 M Tris-HCl, to 1 L").portions[0]) == "C4H12ClNO3");
    CHECK(mixture_of("Tris 25 mM, HCl 10 mM").portions[0].amount->mol() == Approx(0.025));
}

TEST_CASE("mixture: a liquid by volume is the table's grade; strengths by percent and normality",
          "[notation][mixture]") {
    // 12 mL of 37 % w/w hydrochloric acid, density 1.19 g/mL: 12 x 1.19 x 0.37 / 36.458 = 0.1449 mol.
    CHECK(mixture_of("12 mL of HCl 37 %, to 1 L").portions[0].amount->mol() == Approx(0.1449).epsilon(2e-3));
    CHECK(mixture_of("12 mL of 37 % w/w HCl, to 1 L").portions[0].amount->mol() == Approx(0.1449).epsilon(2e-3));
    // Glacial acetic acid: 17.4 mol/L.
    CHECK(mixture_of("10 mL acetic acid, to 1 L").portions[0].amount->mol() == Approx(0.174).epsilon(5e-3));
    // 1 N sulfuric acid is 0.5 mol/L.
    CHECK(mixture_of("10 mL of 1 N H2SO4, to 1 L").portions[0].amount->mol() == Approx(0.005));
    CHECK(mixture_of("10 mL of 1 N HCl, to 1 L").portions[0].amount->mol() == Approx(0.010));
    // 50 % w/w NaOH, density 1.52 g/mL: 19.0 mol/L.
    CHECK(mixture_of("1 mL of 50 % w/w NaOH, to 1 L").portions[0].amount->mol() == Approx(0.0190).epsilon(5e-3));
    // Grams of a solution count its mass percent: 10 x 0.37 / 36.458.
    CHECK(mixture_of("10 g HCl 37 %, to 1 L").portions[0].amount->mol() == Approx(0.10149).epsilon(1e-4));
    // 5 % w/v is 50 g/L: 10 mL hold 0.5 g of NaCl, 58.44 g/mol.
    CHECK(mixture_of("10 mL of 5 % w/v NaCl, to 1 L").portions[0].amount->mol() == Approx(0.5 / 58.44).epsilon(2e-3));
    CHECK(mixture_of("10 mL of 5 % NaCl, to 1 L").portions[0].amount->mol() == Approx(0.5 / 58.44).epsilon(2e-3));
}

TEST_CASE("concentration: equivalents of strong acids and bases", "[notation][concentration]") {
    const auto equivalents = [](const char* name) {
        return equivalents_per_mole(*find_reagent(bundled_table(), name), bundled_table());
    };
    CHECK(equivalents("HCl") == 1);
    CHECK(equivalents("HNO3") == 1);
    CHECK(equivalents("H2SO4") == 2);
    CHECK(equivalents("NaOH") == -1);
    for (const char* none :
         {"NaCl", "acetic acid", "phosphoric acid", "Tris", "Tris hydrochloride", "NaHSO4", "sucrose", "oxalic acid"}) {
        INFO(none);
        REQUIRE(find_reagent(bundled_table(), none) != nullptr);
        CHECK(equivalents(none) == 0);
    }
}

TEST_CASE("mixture: what is wrong is named and pointed at", "[notation][mixture][bad-input]") {
    for (const Refusal& refusal : std::initializer_list<Refusal>{
             {"", "empty_line", "", "nothing"},
             {"to 1 L", "empty_mixture", "to 1 L", "nothing is put together"},
             {"6 g Tris", "missing_final_volume", "6 g", "final volume is missing"},
             {"6 g Tris, 1 L", "missing_final_volume", "6 g", "final volume is missing"},
             {"34 mL of 1 M HCl", "missing_final_volume", "34 mL", "final volume is missing"},
             {"6 g Tris to 1 L", "missing_comma", "to 1 L", "a final volume"},
             {"6 g Tris, to 1 L, 2 g NaCl", "misplaced_final_volume", "to 1 L", "not the last item"},
             {"6 g Tris, to 1 L, to 2 L", "misplaced_final_volume", "to 1 L", "not the last item"},
             {"6 g Tris, to", "not_a_number", "", "a number is expected"},
             {"6 g Tris, to 1", "missing_unit", "1", "1 has no unit"},
             {"6 g Tris, to 1 g", "wrong_quantity", "1 g", "a mass; a volume is expected"},
             {"6 g Tris, to 0 L", "zero_quantity", "0 L", "more than zero"},
             {"6 g Tris, to -1 L", "negative_quantity", "-1", "'-1'"},
             {"6 g Tris, to 1 L at 4 C", "trailing_text", "at 4 C", "'at 4 C'"},
             {"6 g Triss, to 1 L", "unknown_name", "Triss", "'Triss'"},
             {"10 mL water, to 1 L", "unknown_name", "water", "'water'"},
             {"25 mM phosphate", "unknown_name", "phosphate", "'phosphate' is no reagent but a system"},
             {"25 mM potassium phosphate", "unknown_name", "potassium phosphate", "'potassium phosphate'"},
             {"5 g sodium phosphate, to 1 L", "unknown_name", "sodium phosphate", "'sodium phosphate'"},
             {"50 mL of phosphate, to 1 L", "unknown_name", "phosphate", "'phosphate'"},
             {"50 mL of NaCl, to 1 L", "missing_strength", "50 mL of NaCl", "sodium chloride is a solid"},
             {"50 mL of 0.1 M, to 1 L", "missing_name", "0.1 M", "0.1 M of what"},
             {"50 mL of, to 1 L", "missing_name", "50 mL of", "50 mL of what"},
             {"50 mL of 4 C HCl, to 1 L", "wrong_quantity", "4 C", "a temperature; a concentration is expected"},
             {"50 mL of 5 mL HCl, to 1 L", "wrong_quantity", "5 mL", "a volume; a concentration is expected"},
             {"50 mL of 0.1 mm HCl, to 1 L", "unknown_unit", "mm", "'mm'"},
             {"50 mL of 5 % acetic acid, to 1 L", "unknown_unit", "5 %", "acetic acid glacial is a liquid"},
             {"5 % HCl", "unknown_unit", "5 %", "is a solution"},
             {"50 mL of 5 % w/w HCl, to 1 L", "unknown_density", "5 % w/w", "5 % w/w"},
             {"1 mL of 51 % w/w NaOH, to 1 L", "unknown_density", "51 % w/w", "51 % w/w"},
             {"50 mL of 0.1 mol/kg HCl, to 1 L", "unusable_unit", "0.1 mol/kg", "per kilogram of water"},
             {"50 mL of 1 N NaCl, to 1 L", "unusable_unit", "1 N", "sodium chloride"},
             {"50 mL of 20 % w/w NaCl, to 1 L", "unknown_density", "20 % w/w", "20 % w/w"},
             {"5 mL of 45 % w/w NaOH, to 1 L", "unknown_density", "45 % w/w", "45 % w/w"},
             {"37 % w/w HCl", "unusable_unit", "37 % w/w", "density"},
             {"5 % v/v NaCl", "unusable_unit", "5 % v/v", "sodium chloride"},
             {"500 mL of 1 M HCl, 600 mL of 1 M NaOH, to 1 L", "overfull", "600 mL", "1100 mL"},
             {"Tris", "missing_quantity", "Tris", "'Tris' has no amount"},
             {"nothing known", "unreadable_item", "nothing known", "'nothing known'"},
             {"Tris 10 mm", "unknown_unit", "mm", "'mm'"},
             {"25 mM", "missing_name", "25 mM", "25 mM of what"},
             {"25 C Tris, to 1 L", "wrong_quantity", "25 C", "a temperature; an amount is expected"},
             {"10x Tris, to 1 L", "wrong_quantity", "10x", "a strength"},
             {"5 mmol Tris, to 1 L", "unknown_unit", "mmol", "'mmol'"},
             {"-1 g Tris, to 1 L", "negative_quantity", "-1", "'-1'"},
             {"1,5 g Tris, to 1 L", "decimal_comma", "1,5", "'1,5'"},
             {"1 g Tris,, to 1 L", "empty_item", ",", "beside this separator"},
             {"1 g Tris, to 1 L,", "empty_item", ",", "beside this separator"}}) {
        check_refused(refusal, "mixture", mixture_of);
    }
}

TEST_CASE("mixture: items divided by semicolon and plus, an article by its own name", "[notation][mixture]") {
    CHECK(mixture_of("6 g Tris; to 1 L").portions.size() == 1);
    CHECK(mixture_of("50 mL of 0.1 M KH2PO4 + 29.1 mL of 0.1 M NaOH, to 100 mL").portions.size() == 2);
    // The L-acid is another article than the usual DL-acid, also where moles are asked for.
    const auto portion = mixture_of("10 mM L-malic acid").portions.at(0);
    CHECK(bundled_table().reagents[portion.reagent].name == "L-malic acid");
}

TEST_CASE("mixture: the help says what to write", "[notation][mixture]") {
    const auto help = [](const char* line) { return help_of(line, mixture_of); };
    CHECK(help("25 mM phosphate").find("disodium hydrogen phosphate") != std::string::npos);
    CHECK(help("6 g potassium phosphate, to 1 L").find("potassium dihydrogen phosphate") != std::string::npos);
    CHECK(help("50 mL of NaCl, to 1 L") == "write it like 50 mL of 0.1 M NaCl");
    CHECK(help("6 g Tris") == "end the line with it, as in: to 1 L");
    CHECK(help("6 g Triss, to 1 L").find("Tris") != std::string::npos);
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
                                          "+",         "\u00A0",
                                          "\u202F",    ";",
                                          "/",         "*",
                                          "N,N",       "2''",
                                          "\u2212",    "HCl 37 %",
                                          "% w/v",     "mol/kg",
                                          "1 N",       "0",
                                          "kg",        "\xC2",
                                          "\xFF",      "\x01"};
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
                // `EDTA-HCl` is understood, but no article is one.
                REQUIRE((error.kind() == ErrorKind::input || error.code() == "no_reagent"));
                REQUIRE_FALSE(error.code().empty());
                REQUIRE(error.excerpt().begin <= error.excerpt().text.size());
                REQUIRE(error.excerpt().begin + error.excerpt().length <= error.excerpt().text.size() + 1);
            }
        }
    }
    CHECK(read_fine > 0);
}
