#include "constants/formula.h"

#include "catch_shim.h"

using namespace carboy;

TEST_CASE("formula: counts, groups, hydrates, charges", "[constants][formula]") {
    const Formula phosphate = read_formula("Na2HPO4·7H2O");
    CHECK(phosphate.atoms.at("Na") == 2);
    CHECK(phosphate.atoms.at("H") == 15);
    CHECK(phosphate.atoms.at("O") == 11);
    CHECK(phosphate.charge == 0);
    CHECK(read_formula("Na2HPO4.7H2O").atoms == phosphate.atoms);
    CHECK(read_formula("HPO4^2-").charge == -2);
    CHECK(read_formula("Na+").charge == 1);
    CHECK(read_formula("N3-").charge == -1);
    CHECK(read_formula("N3-").atoms.at("N") == 3);
    CHECK(read_formula("B(OH)4-").atoms.at("O") == 4);
    CHECK(read_formula("(NH4)2SO4").atoms.at("H") == 8);
    CHECK(read_formula("C6H6Na2O7·1.5H2O").atoms.at("H") == 9);
    CHECK(read_formula("C6H6Na2O7·3/2H2O").atoms.at("O") == Approx(8.5));
    CHECK(read_formula("C8H16.5N2Na1.5O6S2").atoms.at("Na") == 1.5);
    CHECK(read_formula("Co").atoms.size() == 1);
    CHECK(read_formula("CO").atoms.size() == 2);
}

TEST_CASE("formula: what cannot be read says where", "[constants][formula]") {
    struct Case {
        const char* text;
        std::size_t position;
    };
    for (const Case& c : {Case{"", 0},
                          {"na", 0},
                          {"Na2HPO4·", 9},
                          {"Mg2^", 4},
                          {"Mg^+", 3},
                          {"(OH", 3},
                          {"H2O)", 3},
                          {"H2O!", 3},
                          {"Na 2", 2},
                          {"H--", 2},
                          {"H^2", 3},
                          {"7", 1}}) {
        INFO(c.text);
        try {
            read_formula(c.text);
            FAIL("was read");
        } catch (const FormulaError& error) {
            CHECK(error.position() == c.position);
            CHECK(std::string(error.what()).size() > 5);
        }
    }
}

TEST_CASE("formula: what is left over must be water", "[constants][formula]") {
    Formula rest = difference(read_formula("Na2HPO4·7H2O"), read_formula("Na2HPO4"));
    CHECK(only_water(rest));
    CHECK(only_water(difference(read_formula("CO2"), read_formula("H2CO3"))));
    CHECK_FALSE(only_water(difference(read_formula("NaCl"), read_formula("KCl"))));
    CHECK_FALSE(only_water(read_formula("H")));
}
