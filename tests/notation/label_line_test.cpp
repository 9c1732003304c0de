#include "carboy/error.h"
#include "carboy/notation.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

Label read(const char* line) {
    return read_label(line, bundled_table());
}

std::string system_of(const BufferItem& item) {
    return std::string(name_of(bundled_table(), item.system));
}

std::string ion_of(const BufferItem& item) {
    return item.counter_ion ? std::string(name_of(bundled_table(), *item.counter_ion)) : std::string();
}

std::string reagent_of(const AdditiveItem& item) {
    return std::string(bundled_table().reagents[item.reagent].formula);
}

}  // namespace

TEST_CASE("label: the lines of the contract", "[notation][label]") {
    const Label tris = read("50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 °C");
    REQUIRE(tris.buffers.size() == 1);
    CHECK(system_of(tris.buffers[0]) == "Tris");
    CHECK(ion_of(tris.buffers[0]) == "Cl-");
    CHECK(tris.buffers[0].concentration.value == Approx(0.05));
    REQUIRE(tris.additives.size() == 2);
    CHECK(reagent_of(tris.additives[0]) == "NaCl");
    CHECK(reagent_of(tris.additives[1]) == "C10H14N2Na2O8·2H2O");
    CHECK(tris.ph->value() == 7.5);
    CHECK(tris.ph_at->celsius() == 4);

    const Label phosphate = read("0.1 M sodium phosphate, pH 7.20 at 25 C, ionic strength 0.30 M");
    CHECK(system_of(phosphate.buffers.at(0)) == "phosphate");
    CHECK(ion_of(phosphate.buffers[0]) == "Na+");
    CHECK(phosphate.ionic_strength->value_mol == Approx(0.3));
    CHECK(phosphate.ionic_strength->per_litre);

    CHECK(ion_of(read("20 mM HEPES-KOH, pH 7.4").buffers.at(0)) == "K+");
    const Label wide = read("50 mM acetic acid, 50 mM sodium phosphate, 50 mM borate, pH 8.6");
    REQUIRE(wide.buffers.size() == 3);
    CHECK(system_of(wide.buffers[0]) == "acetate");
    CHECK(system_of(wide.buffers[2]) == "borate");
    CHECK_FALSE(wide.ph_at);
}

TEST_CASE("label: order, case, spaces and dashes do not matter", "[notation][label]") {
    for (const char* line :
         {"pH 7.5 at 4 C, 50 mM Tris-HCl", "50mM TRIS-HCL,PH 7.5 at 4C", "50 mM tris hcl, ph=7.5 at 4 Cel",
          "50 mM Tris–HCl, pH: 7.5 at 277.15 K", "Tris-HCl 50 mM, pH7.5 at 4 °C", "50 mM TrisHCl buffer, pH 7.5 at 4C",
          "50 mM Tris\u2011HCl,\u00A0pH 7.5 at 4 C", "0.05 mol/L THAM-HCl, pH 7.5 at 4 C"}) {
        INFO(line);
        const Label label = read(line);
        REQUIRE(label.buffers.size() == 1);
        CHECK(system_of(label.buffers[0]) == "Tris");
        CHECK(ion_of(label.buffers[0]) == "Cl-");
        CHECK(label.buffers[0].concentration.value == Approx(0.05));
        CHECK(label.ph->value() == 7.5);
        CHECK(label.ph_at->celsius() == Approx(4));
    }
}

TEST_CASE("label: counter-ions in every fashion", "[notation][label]") {
    struct Case {
        const char* name;
        const char* system;
        const char* ion;
    };
    for (const Case& c : {Case{"sodium acetate", "acetate", "Na+"},
                          {"HEPES-NaOH", "HEPES", "Na+"},
                          {"potassium phosphate", "phosphate", "K+"},
                          {"glycine-HCl", "glycine", "Cl-"},
                          {"Tris-acetate", "Tris", "acetate"},
                          {"ammonium acetate", "acetate", "ammonia"},
                          {"Tris-borate", "Tris", "borate"},
                          {"citric acid", "citrate", ""},
                          {"Tris", "Tris", ""},
                          {"imidazole-HCl", "imidazole", "Cl-"},
                          {"Tris-HNO3", "Tris", "NO3-"},
                          {"2-amino-2-methyl-1,3-propanediol-HCl", "AMPD", "Cl-"}}) {
        INFO(c.name);
        const auto named = read_buffer_name(c.name, bundled_table());
        REQUIRE(named);
        CHECK(name_of(bundled_table(), named->system) == c.system);
        CHECK((named->counter_ion ? name_of(bundled_table(), *named->counter_ion) : "") == c.ion);
    }
    for (const char* none : {"magnesium acetate", "calcium acetate", "NaCl", "sucrose", "ammonium chloride",
                             "Na2HPO4.7H2O", "disodium hydrogen phosphate", "nonsense-HCl"}) {
        INFO(none);
        CHECK_FALSE(read_buffer_name(none, bundled_table()));
    }
}

TEST_CASE("label: additives by formula, name, CAS number, with commas inside a name", "[notation][label]") {
    const Label label =
        read("20 mM HEPES-KOH, 5 mM MgCl2.6H2O, 0.02 % w/v sodium azide, 10 % v/v glycerol, 1 mM 3483-12-3, pH 7.4");
    REQUIRE(label.additives.size() == 4);
    CHECK(reagent_of(label.additives[0]) == "MgCl2·6H2O");
    CHECK(reagent_of(label.additives[1]) == "NaN3");
    CHECK(reagent_of(label.additives[3]) == "C4H10O2S2");
    CHECK(system_of(read("50 mM 2-amino-2-methyl-1,3-propanediol, pH 8.8").buffers.at(0)) == "AMPD");
}

TEST_CASE("label: how benches shorten it", "[notation][label]") {
    CHECK(read("1M Tris pH 8.0").ph->value() == 8.0);
    CHECK(read("1M Tris pH8.0 at 4C").ph_at->celsius() == 4);
    for (const char* line :
         {"50 mM Tris/HCl, pH 7.4", "50 mM Tris·HCl, pH 7.4", "50 mM Tris, pH 7.4 (HCl)", "50 mM Tris, pH 7.4 with HCl",
          "50 mM Tris, pH 7.4 with HCl at 25 C", "50 mM Tris, pH 7.4 at 25 C (HCl)"}) {
        INFO(line);
        const Label label = read(line);
        CHECK(system_of(label.buffers.at(0)) == "Tris");
        CHECK(ion_of(label.buffers[0]) == "Cl-");
    }
    // A salt of a buffer names the buffer when nothing else could hold the pH.
    const Label acetate = read("3 M NaOAc, pH 5.2");
    CHECK(system_of(acetate.buffers.at(0)) == "acetate");
    CHECK(ion_of(acetate.buffers[0]) == "Na+");
    CHECK(system_of(read("0.1 M KH2PO4, pH 7").buffers.at(0)) == "phosphate");
    // Beside a buffer it is a salt to weigh.
    CHECK(read("50 mM imidazole, 50 mM NaH2PO4, pH 8").additives.size() == 1);
}

TEST_CASE("label: an addition holds the pH when nothing else can", "[notation][label]") {
    const Label label = read("0.5 M EDTA, pH 8.0");
    REQUIRE(label.buffers.size() == 1);
    CHECK(system_of(label.buffers[0]) == "EDTA");
    CHECK(label.additives.empty());
}

TEST_CASE("label: salts alone need no pH", "[notation][label]") {
    const Label label = read("150 mM NaCl, 5 mM KCl");
    CHECK(label.buffers.empty());
    CHECK(label.additives.size() == 2);
    CHECK_FALSE(label.ph);
}

TEST_CASE("label: what is wrong is named and pointed at", "[notation][label][bad-input]") {
    struct Case {
        const char* line;
        const char* code;
        const char* at;
    };
    const std::vector<Case> cases{
        {"", "empty_line", ""},
        {"50 mM Tris-HCl, pH 7.5,", "empty_item", ","},
        {"50 mM Tris-HCl,, pH 7.5", "empty_item", ","},
        {", 50 mM Tris-HCl, pH 7.5", "empty_item", ","},
        {"50 mM Trsi-HCl, pH 7.5", "unknown_name", "Trsi-HCl"},
        {"50 mM HEPSE, pH 7.5", "unknown_name", "HEPSE"},
        {"50 mM Tris-HCl, 150 mM NaCk, pH 7.5", "unknown_name", "NaCk"},
        {"50 mM Tris-HCl", "missing_ph", "50 mM Tris-HCl"},
        {"pH 7.5", "no_buffer", ""},
        {"150 mM NaCl, pH 7.5", "no_buffer", ""},
        {"50 mM, pH 7.5", "missing_name", "50 mM"},
        {"50 Tris-HCl, pH 7.5", "unknown_unit", "Tris-HCl"},
        {"Tris-HCl, pH 7.5", "missing_quantity", "Tris-HCl"},
        {"what is this, pH 7.5", "unreadable_item", "what is this"},
        {"50 mM Tris-HCl, pH", "not_a_number", ""},
        {"50 mM Tris-HCl, pH seven", "not_a_number", "seven"},
        {"50 mM Tris-HCl, pH 17", "ph_out_of_range", "17"},
        {"50 mM Tris-HCl, pH -3", "ph_out_of_range", "-3"},
        {"50 mM Tris-HCl, pH 7,5", "decimal_comma", "7,5"},
        {"50 mM Tris-HCl, pH 7.5 at", "not_a_number", ""},
        {"50 mM Tris-HCl, pH 7.5 at 4", "missing_unit", "4"},
        {"50 mM Tris-HCl, pH 7.5 at 4 mL", "wrong_quantity", "4 mL"},
        {"50 mM Tris-HCl, pH 7.5 at 4 C today", "trailing_text", "today"},
        {"50 mM Tris-HCl, pH 7.5 room temperature", "trailing_text", "room temperature"},
        {"50 mM Tris, pH 7.5 (XYZ)", "unknown_name", "XYZ"},
        {"10 mM Tris-EDTA, pH 8", "unknown_name", "Tris-EDTA"},
        {"25 mM borax, pH 9", "no_buffer", ""},
        {"5 mM magnesium sulfate, 150 mM NaCl, pH 7", "no_buffer", ""},
        {"50 mM Tris, pH 7.5 with sucrose", "unknown_name", "sucrose"},
        {"50 mM Tris-HCl, pH 7.5, pH 8", "duplicate_item", "pH 8"},
        {"50 mM Tris-HCl, 20 mM Tris, pH 7.5", "duplicate_item", "20 mM Tris"},
        {"50 mM Tris-HCl, 1 mM NaCl, 2 mM NaCl, pH 7.5", "duplicate_item", "2 mM NaCl"},
        {"50 mM Tris-HCl, ionic strength 0.1 M, ionic strength 0.2 M, pH 7", "duplicate_item", "ionic strength 0.2 M"},
        {"50 mM Tris-HCl, ionic strength 0.1, pH 7", "missing_unit", "0.1"},
        {"50 mM Tris-HCl, ionic strength 4 C, pH 7", "wrong_quantity", "4 C"},
        {"50 mM Tris-HCl, ionic strength 4 g/L, pH 7", "unusable_unit", "4 g/L"},
        {"50 mM Tris-HCl, ionic strength 0.1 M at 4 C, pH 7", "trailing_text", "at 4 C"},
        {"50 mM Tris-HCl at 4 C, pH 7.5", "misplaced_temperature", "at 4 C"},
        {"-50 mM Tris-HCl, pH 7.5", "negative_quantity", "-50"},
        {"0 mM Tris-HCl, pH 7.5", "zero_quantity", "0 mM"},
        {"1e999 M Tris-HCl, pH 7.5", "number_out_of_range", "1e999"},
        {"50 C Tris-HCl, pH 7.5", "wrong_quantity", "50 C"},
        {"50 mL Tris-HCl, pH 7.5", "wrong_quantity", "50 mL"},
        {"50 g/L Tris-HCl, pH 7.5", "unusable_unit", "50 g/L"},
        {"1 N Tris-HCl, pH 7.5", "unusable_unit", "1 N"},
        {"50 % Tris-HCl, pH 7.5", "unknown_unit", "%"},
        {"10x phosphate-buffered saline, pH 7.4", "unknown_formula", "10x"},
        {"0,5 M Tris-HCl, pH 7.5", "decimal_comma", "0,5"},
        {"50 mM Tris-HCl; 150 mM NaCl; pH 7.5", "unknown_name", "Tris-HCl; 150 mM NaCl; pH 7.5"},
        {"5 mM EDTA, 5 mM EGTA, pH 8", "no_buffer", "5 mM EGTA"},
        {"ionic strength 0.1 M, 1 mM NaCl", "missing_ph", ""},
        {"50 mM Tris-HCl\x01, pH 7.5", "control_character", ""},
        {"50 mM Tris-HCl\n, pH 7.5", "control_character", ""},
        {"50 mM Tr\xFFis, pH 7.5", "not_utf8", ""},
        {"50 mM \xC0\xAFTris, pH 7.5", "not_utf8", ""},
    };
    for (const Case& c : cases) {
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
            CHECK(error.message().size() > 8);
            CHECK(error.where().starts_with("label"));
        }
    }
    CHECK_THROWS_AS(read(std::string(5000, 'a').c_str()), Error);
}

TEST_CASE("label: the nearest known name is offered", "[notation][label]") {
    const auto help_of = [](const char* line) {
        try {
            read(line);
        } catch (const Error& error) {
            return error.help();
        }
        return std::string();
    };
    CHECK(help_of("50 mM Trsi-HCl, pH 7.5").find("Tris-HCl") != std::string::npos);
    CHECK(help_of("50 mM sodium fosphate, pH 7.5").find("sodium phosphate") != std::string::npos);
    CHECK(help_of("50 mM HEPSE, pH 7.5").find("HEPES") != std::string::npos);
    CHECK(help_of("50 mM Tris-HCl, 150 mM NaCk, pH 7.5").find("NaCl") != std::string::npos);
    CHECK(help_of("50 mM imidazol, pH 7").find("imidazole") != std::string::npos);
}
