#include <cmath>

#include "carboy/notation.h"

#include "catch_shim.h"
#include "notation/refusal.h"

using namespace carboy;
using carboy::test::check_refused;
using carboy::test::help_of;
using carboy::test::Refusal;

TEST_CASE("quantities: as the trade writes them and as UCUM codes", "[notation]") {
    CHECK(read_volume("2 L", "v").L() == 2);
    CHECK(read_volume("500mL", "v").L() == Approx(0.5));
    CHECK(read_volume("250 µL", "v").L() == Approx(250e-6));
    CHECK(read_volume("250 μL", "v").L() == Approx(250e-6));  // the Greek letter, which looks the same
    CHECK(read_volume("2.5dL", "v").L() == Approx(0.25));
    CHECK(read_volume("250 ml", "v").L() == Approx(0.25));
    CHECK(read_volume("250\u00A0mL", "v").L() == Approx(0.25));  // the fixed spaces of typography
    CHECK(read_volume(" 250\u202FmL ", "v").L() == Approx(0.25));
    CHECK(read_volume(".5 L", "v").L() == Approx(0.5));
    CHECK(read_volume("1e-3 L", "v").L() == Approx(0.001));
    CHECK(read_mass("10 g", "m").g() == 10);
    CHECK(read_mass("250 mg", "m").g() == Approx(0.25));
    CHECK(read_mass("3 kg", "m").g() == Approx(3000));
    CHECK(read_mass("3 ug", "m").g() == Approx(3e-6));
    CHECK(read_temperature("4 C", "t").celsius() == 4);
    CHECK(read_temperature("25°C", "t").celsius() == 25);
    CHECK(read_temperature("37 Cel", "t").celsius() == 37);
    CHECK(read_temperature("310.15 K", "t").celsius() == Approx(37));
    CHECK(read_temperature("-20 C", "t").celsius() == -20);
    CHECK(read_temperature("\u221220 °C", "t").celsius() == -20);  // the typographic minus
    CHECK(read_ph("7.40", "p").value() == 7.4);
    CHECK(read_ph("-0.5", "p").value() == -0.5);

    const auto same = [](const char* text, double value, ConcentrationUnit unit) {
        INFO(text);
        const Concentration read = read_concentration(text, "c");
        CHECK(read.value == Approx(value));
        CHECK(read.unit == unit);
    };
    using enum ConcentrationUnit;
    same("50 mM", 0.05, mol_per_L);
    same("50mM", 0.05, mol_per_L);
    same("5 µM", 5e-6, mol_per_L);
    same("5 nM", 5e-9, mol_per_L);
    same("0.1 mol/L", 0.1, mol_per_L);
    same("20 mmol/L", 0.02, mol_per_L);
    same("20 mmol/kg", 0.02, mol_per_kg);
    same("9 g/L", 9, g_per_L);
    same("2 mg/mL", 2, g_per_L);
    same("0.9 % w/v", 9, g_per_L);
    same("0.9% (w/v)", 9, g_per_L);
    same("10 % v/v", 10, percent_v_v);
    same("37 % w/w", 37, percent_w_w);
    same("1 N", 1, normal);
    same("0 M", 0, mol_per_L);
    same("5 μmol/l", 5e-6, mol_per_L);
    same("5 nmol/L", 5e-9, mol_per_L);
    same("50 µg/mL", 0.05, g_per_L);
    same("1E-3 M", 1e-3, mol_per_L);
    same("+5 mM", 5e-3, mol_per_L);
}

TEST_CASE("quantities: a prefix costs no precision", "[notation]") {
    // As written in decimal: exactly the double nearest to it, so that outputs print what was typed.
    CHECK(read_concentration("7 mM", "c").value == 0.007);
    CHECK(read_concentration("0.3 uM", "c").value == 3e-7);
    CHECK(read_volume("29.1 mL", "v").L() == 0.0291);
    CHECK_FALSE(std::signbit(read_concentration("-0 M", "c").value));
}

TEST_CASE("quantities: what is wrong is named and pointed at", "[notation][bad-input]") {
    for (const Refusal& refusal :
         std::initializer_list<Refusal>{{"", "empty_line", "", "nothing"},
                                        {"  \u00A0 ", "empty_line", "", "nothing"},
                                        {"L", "not_a_number", "L", "'L'"},
                                        {"one L", "not_a_number", "one", "'one'"},
                                        {"inf L", "not_a_number", "inf", "'inf'"},
                                        {"nan L", "not_a_number", "nan", "'nan'"},
                                        {"--1 L", "not_a_number", "--1", "'--1'"},
                                        {", L", "not_a_number", ",", "','"},
                                        {"1 000 mL", "not_a_number", "1 000", "'1 000'"},
                                        {"1.2.3 L", "not_a_number", "1.2.3", "'1.2.3'"},
                                        {"1", "missing_unit", "1", "1 has no unit"},
                                        {"1 fathom", "unknown_unit", "fathom", "'fathom'"},
                                        {"1 mm", "unknown_unit", "mm", "'mm'"},
                                        {"1 ML", "unknown_unit", "ML", "'ML'"},
                                        {"0x10 L", "unknown_unit", "x10", "'x10'"},
                                        {"1 M", "wrong_quantity", "1 M", "a concentration; a volume is expected"},
                                        {"25 C", "wrong_quantity", "25 C", "a temperature; a volume is expected"},
                                        {"5 g", "wrong_quantity", "5 g", "a mass; a volume is expected"},
                                        {"10x", "wrong_quantity", "10x", "a strength"},
                                        {"-1 L", "negative_quantity", "-1", "'-1' is negative"},
                                        {"\u22121 L", "negative_quantity", "\u22121", "negative"},
                                        {"0 L", "zero_quantity", "0 L", "'0 L'"},
                                        {"1e999 L", "number_out_of_range", "1e999", "'1e999'"},
                                        {"1e-999 L", "number_out_of_range", "1e-999", "'1e-999'"},
                                        {"1e9 L", "number_out_of_range", "1e9 L", "outside 1 nL to 100000 L"},
                                        {"1 L of it", "trailing_text", "of it", "'of it'"},
                                        {"1,5 L", "decimal_comma", "1,5", "'1,5'"},
                                        {"1,000 mL", "decimal_comma", "1,000", "'1,000'"}}) {
        check_refused(refusal, "--volume", [](const std::string& text) { read_volume(text, "--volume"); });
    }
    for (const Refusal& refusal :
         std::initializer_list<Refusal>{{"25", "missing_unit", "25", "25 has no unit"},
                                        {"25 F", "unknown_unit", "F", "'F'"},
                                        {"5 mL", "wrong_quantity", "5 mL", "a volume; a temperature is expected"},
                                        {"-300 C", "temperature_out_of_range", "-300 C", "'-300 C'"},
                                        {"0 K", "temperature_out_of_range", "0 K", "'0 K'"}}) {
        check_refused(refusal, "--at", [](const std::string& text) { read_temperature(text, "--at"); });
    }
    for (const Refusal& refusal :
         std::initializer_list<Refusal>{{"5 mL", "wrong_quantity", "5 mL", "a volume; a mass is expected"},
                                        {"5 lb", "unknown_unit", "lb", "'lb'"},
                                        {"0 g", "zero_quantity", "0 g", "a mass must be more than zero"}}) {
        check_refused(refusal, "mass", [](const std::string& text) { read_mass(text, "mass"); });
    }
    for (const Refusal& refusal : std::initializer_list<Refusal>{{"50 MM", "unknown_unit", "MM", "'MM'"},
                                                                 {"50 m", "unknown_unit", "m", "'m'"},
                                                                 {"50 %", "unknown_unit", "%", "of what"},
                                                                 {"50", "missing_unit", "50", "50 has no unit"},
                                                                 {"5 mol", "unknown_unit", "mol", "'mol'"},
                                                                 {"5 mM mM", "trailing_text", "mM", "'mM'"},
                                                                 {"5 µX", "unknown_unit", "µX", "'µX'"}}) {
        check_refused(refusal, "c", [](const std::string& text) { read_concentration(text, "c"); });
    }
    for (const Refusal& refusal : std::initializer_list<Refusal>{{"seven", "not_a_number", "seven", "'seven'"},
                                                                 {"17", "ph_out_of_range", "17", "pH 17"},
                                                                 {"-3", "ph_out_of_range", "-3", "pH -3"},
                                                                 {"7.4 M", "trailing_text", "M", "'M'"},
                                                                 {"7,4", "decimal_comma", "7,4", "'7,4'"}}) {
        check_refused(refusal, "pH", [](const std::string& text) { read_ph(text, "pH"); });
    }
}

TEST_CASE("quantities: near spellings of the right kind are offered", "[notation]") {
    const auto concentration = [](const char* text) {
        return help_of(text, [](const std::string& typed) { read_concentration(typed, "c"); });
    };
    const auto volume = [](const char* text) {
        return help_of(text, [](const std::string& typed) { read_volume(typed, "v"); });
    };
    CHECK(concentration("50 mm") == "did you mean mM?");
    CHECK(concentration("50 MM") == "did you mean mM?");
    CHECK(concentration("50 mMol/L") == "did you mean mmol/L?");
    CHECK(concentration("50 mol/l/").find("mol/L") != std::string::npos);
    CHECK(concentration("5 mmol") == "write mmol/L or mmol/kg");
    CHECK(concentration("5 %") == "write % w/v, % v/v or % w/w");
    CHECK(concentration("0,5 M").find("decimal point") != std::string::npos);
    CHECK(volume("1 mm") == "did you mean mL?");
    CHECK(volume("2 litres") == "write L");
    CHECK(volume("25 C") == "write it like 500 mL");
}

TEST_CASE("quantities: the place counts characters, not bytes", "[notation]") {
    try {
        read_volume("5 µX", "--volume");
        FAIL("was read");
    } catch (const Error& error) {
        CHECK(error.where() == "--volume, column 3");
    }
    try {
        read_volume("250\u00A0µL\u00A0µX", "--volume");
        FAIL("was read");
    } catch (const Error& error) {
        CHECK(error.where() == "--volume, column 8");
        CHECK(error.excerpt().begin == 10);
    }
}
