#include "carboy/error.h"
#include "carboy/notation.h"

#include "catch_shim.h"

using namespace carboy;

TEST_CASE("quantities: as the trade writes them and as UCUM codes", "[notation]") {
    CHECK(read_volume("2 L", "v").L() == 2);
    CHECK(read_volume("500mL", "v").L() == Approx(0.5));
    CHECK(read_volume("250 µL", "v").L() == Approx(250e-6));
    CHECK(read_volume("250 μL", "v").L() == Approx(250e-6));  // the Greek letter, which looks the same
    CHECK(read_volume("2.5dL", "v").L() == Approx(0.25));
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
}

TEST_CASE("quantities: what is wrong is named, pointed at and mended", "[notation][bad-input]") {
    struct Case {
        char kind;
        const char* text;
        const char* code;
        const char* at;  ///< the bytes under the caret
    };
    for (const Case& c : {
             Case{'v', "", "empty_line", ""},
             {'v', "   ", "empty_line", ""},
             {'v', "L", "not_a_number", "L"},
             {'v', "one L", "not_a_number", "one"},
             {'v', "1", "missing_unit", "1"},
             {'v', "1 litre", "unknown_unit", "litre"},
             {'v', "1 mm", "unknown_unit", "mm"},
             {'v', "1 M", "wrong_quantity", "1 M"},
             {'v', "25 C", "wrong_quantity", "25 C"},
             {'v', "-1 L", "negative_quantity", "-1"},
             {'v', "0 L", "zero_quantity", "0 L"},
             {'v', "1e999 L", "number_out_of_range", "1e999"},
             {'v', "1e9 L", "number_out_of_range", "1e9 L"},
             {'v', "1 L of it", "trailing_text", "of it"},
             {'v', "1,5 L", "decimal_comma", "1,5"},
             {'v', "1,000 mL", "decimal_comma", "1,000"},
             {'v', "inf L", "not_a_number", "inf"},
             {'v', "nan L", "not_a_number", "nan"},
             {'v', "0x10 L", "unknown_unit", "x10"},
             {'t', "25", "missing_unit", "25"},
             {'t', "25 F", "unknown_unit", "F"},
             {'t', "-300 C", "temperature_out_of_range", "-300 C"},
             {'t', "5 mL", "wrong_quantity", "5 mL"},
             {'m', "5 mL", "wrong_quantity", "5 mL"},
             {'m', "5 lb", "unknown_unit", "lb"},
             {'c', "50 mm", "unknown_unit", "mm"},
             {'c', "50 MM", "unknown_unit", "MM"},
             {'c', "50 %", "unknown_unit", "%"},
             {'c', "50", "missing_unit", "50"},
             {'c', "--5 mM", "not_a_number", "--5"},
             {'c', "5 mM mM", "trailing_text", "mM"},
             {'c', "10x", "wrong_quantity", "10x"},
             {'p', "seven", "not_a_number", "seven"},
             {'p', "17", "ph_out_of_range", "17"},
             {'p', "-3", "ph_out_of_range", "-3"},
             {'p', "7.4 M", "trailing_text", "M"},
         }) {
        INFO("'" << c.text << "'");
        try {
            switch (c.kind) {
                case 'v':
                    read_volume(c.text, "--volume");
                    break;
                case 't':
                    read_temperature(c.text, "--at");
                    break;
                case 'm':
                    read_mass(c.text, "mass");
                    break;
                case 'c':
                    read_concentration(c.text, "concentration");
                    break;
                default:
                    read_ph(c.text, "pH");
                    break;
            }
            FAIL("was read");
        } catch (const Error& error) {
            INFO(error.code() << ": " << error.message());
            CHECK(error.kind() == ErrorKind::input);
            CHECK(error.code() == c.code);
            CHECK(error.excerpt().text.substr(error.excerpt().begin, std::string(c.at).size()) == c.at);
            CHECK(error.message().size() > 8);
        }
    }
}

TEST_CASE("quantities: near spellings are offered", "[notation]") {
    const auto help_of = [](const char* text) {
        try {
            read_concentration(text, "c");
        } catch (const Error& error) {
            return error.help();
        }
        return std::string();
    };
    CHECK(help_of("50 mm") == "did you mean mM?");
    CHECK(help_of("50 mol/l/").find("mol/L") != std::string::npos);
}

TEST_CASE("quantities: the place counts characters, not bytes", "[notation]") {
    try {
        read_volume("5 µX", "--volume");
        FAIL("was read");
    } catch (const Error& error) {
        CHECK(error.where() == "--volume, column 3");
    }
}
