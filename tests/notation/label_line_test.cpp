#include "carboy/notation.h"

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
    const Label tris = label_of("50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, pH 7.5 at 4 °C");
    REQUIRE(tris.buffers.size() == 1);
    CHECK(system_of(tris.buffers[0]) == "Tris");
    CHECK(ion_of(tris.buffers[0]) == "Cl-");
    CHECK(tris.buffers[0].concentration.value == Approx(0.05));
    REQUIRE(tris.additives.size() == 2);
    CHECK(reagent_of(tris.additives[0]) == "NaCl");
    CHECK(reagent_of(tris.additives[1]) == "C10H14N2Na2O8·2H2O");
    CHECK(tris.ph->value() == 7.5);
    CHECK(tris.ph_at->celsius() == 4);

    const Label phosphate = label_of("0.1 M sodium phosphate, pH 7.20 at 25 C, ionic strength 0.30 M");
    CHECK(system_of(phosphate.buffers.at(0)) == "phosphate");
    CHECK(ion_of(phosphate.buffers[0]) == "Na+");
    CHECK(phosphate.ionic_strength->value_mol == Approx(0.3));
    CHECK(phosphate.ionic_strength->per_litre);

    CHECK(ion_of(label_of("20 mM HEPES-KOH, pH 7.4").buffers.at(0)) == "K+");
    const Label wide = label_of("50 mM acetic acid, 50 mM sodium phosphate, 50 mM borate, pH 8.6");
    REQUIRE(wide.buffers.size() == 3);
    CHECK(system_of(wide.buffers[0]) == "acetate");
    CHECK(system_of(wide.buffers[2]) == "borate");
    CHECK_FALSE(wide.ph_at);
}

TEST_CASE("label: order, case, spaces and dashes do not matter", "[notation][label]") {
    for (const char* line :
         {"pH 7.5 at 4 C, 50 mM Tris-HCl", "50mM TRIS-HCL,PH 7.5 at 4C", "50 mM tris hcl, ph=7.5 at 4 Cel",
          "50 mM Tris–HCl, pH: 7.5 at 277.15 K", "Tris-HCl 50 mM, pH7.5 at 4 °C", "50 mM TrisHCl buffer, pH 7.5 at 4C",
          "50 mM Tris\u2011HCl,\u00A0pH 7.5 at 4 C", "0.05 mol/L THAM-HCl, pH 7.5 at 4 C",
          "50\u00A0mM Tris\u00B7HCl, pH 7.5 @ 4 C", "50 mM of Tris/HCl, pH 7.5 at 4 C",
          "50\u2009mM\u2009Tris.HCl BUFFER, pH\u00A07.5 at 4\u202F°C"}) {
        INFO(line);
        const Label label = label_of(line);
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
                          {"TrisHCl", "Tris", "Cl-"},
                          {"Bis-TrisHCl", "bis-tris", "Cl-"},
                          {"NaHEPES", "HEPES", "Na+"},
                          {"KPi", "phosphate", "K+"},
                          {"Tris-phosphate", "Tris", "phosphate"},
                          {"Tris-sulfate", "Tris", "sulfate"},
                          {"HEPES-Tris", "HEPES", "Tris"},
                          {"triethylammonium bicarbonate", "carbonate", "triethylamine"},
                          {"carbonate-bicarbonate", "carbonate", ""},
                          {"sodium azide", "azide", "Na+"},
                          {"Tris - HCl", "Tris", "Cl-"},
                          {"2-amino-2-methyl-1,3-propanediol-HCl", "AMPD", "Cl-"}}) {
        INFO(c.name);
        const auto named = read_buffer_name(c.name, bundled_table());
        REQUIRE(named);
        CHECK(name_of(bundled_table(), named->system) == c.system);
        CHECK((named->counter_ion ? name_of(bundled_table(), *named->counter_ion) : "") == c.ion);
    }
    for (const char* none : {"magnesium acetate", "calcium acetate", "NaCl", "sucrose", "ammonium chloride",
                             "Na2HPO4.7H2O", "disodium hydrogen phosphate", "nonsense-HCl", "Tris-Tris",
                             "citrate-phosphate", "Tris-EDTA", "NaHCO3", "names", "buffer", " buffer", "", " ", "-"}) {
        INFO(none);
        CHECK_FALSE(read_buffer_name(none, bundled_table()));
    }
}

TEST_CASE("label: additives by formula, name, CAS number, with commas inside a name", "[notation][label]") {
    const Label label = label_of(
        "20 mM HEPES-KOH, 5 mM MgCl2.6H2O, 0.02 % w/v sodium azide, 10 % v/v glycerol, 1 mM 3483-12-3, pH 7.4");
    REQUIRE(label.additives.size() == 4);
    CHECK(reagent_of(label.additives[0]) == "MgCl2·6H2O");
    CHECK(reagent_of(label.additives[1]) == "NaN3");
    CHECK(reagent_of(label.additives[3]) == "C4H10O2S2");
    CHECK(system_of(label_of("50 mM 2-amino-2-methyl-1,3-propanediol, pH 8.8").buffers.at(0)) == "AMPD");
}

TEST_CASE("label: commas inside names, items without a space after the comma", "[notation][label]") {
    const Label label = label_of(
        "20 mM Tris,5 mM N,N-bis(2-hydroxyethyl)glycine,1,4-dithiothreitol 1 mM, 5 mM ethylene "
        "glycol-bis(2-aminoethylether)-N,N,N',N'-tetraacetic acid,2-mercaptoethanol 2 mM,pH 8");
    REQUIRE(label.buffers.size() == 2);
    CHECK(system_of(label.buffers[1]) == "bicine");
    REQUIRE(label.additives.size() == 3);
    CHECK(reagent_of(label.additives[0]) == "C4H10O2S2");
    CHECK(reagent_of(label.additives[1]) == "C14H24N2O10");
    CHECK(reagent_of(label.additives[2]) == "C2H6OS");
    CHECK(system_of(label_of("5 mM (2R,3R)-tartaric acid, pH 4").buffers.at(0)) == "tartrate");
    CHECK(system_of(label_of("50 mM 2,2',2''-nitrilotriethanol, pH 8").buffers.at(0)) == "triethanolamine");
    // A formula that ends in a digit is no locant, and neither is a pH.
    CHECK(label_of("20 mM MES,25 mM Na2HPO4,25 mM NaCl,pH 7.4").additives.size() == 2);
    CHECK(label_of("pH 7.4,150mM NaCl,20mM MES").additives.size() == 1);
}

TEST_CASE("label: a system that is added brings its usual form, or the counter-ion named", "[notation][label]") {
    const auto added = [](const char* item) {
        return reagent_of(label_of(std::string(item) + ", 20 mM Tris, pH 8").additives.at(0));
    };
    CHECK(added("1 mM EDTA") == "C10H14N2Na2O8·2H2O");
    CHECK(added("1 mM sodium EDTA") == "C10H14N2Na2O8·2H2O");
    CHECK(added("1 mM potassium EDTA") == "C10H14K2N2O8·2H2O");
    CHECK(added("5 mM azide") == "NaN3");
    CHECK(added("5 mM sulfate") == "Na2SO4");
    CHECK(added("5 mM ammonium sulfate") == "(NH4)2SO4");
    CHECK(added("5 mM magnesium sulfate") == "MgSO4·7H2O");
    // Common practice, no source: who writes MgCl2 has the hexahydrate, but who says anhydrous means it.
    CHECK(added("5 mM MgCl2") == "MgCl2·6H2O");
    CHECK(added("5 mM magnesium chloride anhydrous") == "MgCl2");
    CHECK(added("5 g/L MgCl2") == "MgCl2");
}

TEST_CASE("label: how benches shorten it", "[notation][label]") {
    CHECK(label_of("1M Tris pH 8.0").ph->value() == 8.0);
    CHECK(label_of("1M Tris pH8.0 at 4C").ph_at->celsius() == 4);
    for (const char* line :
         {"50 mM Tris/HCl, pH 7.4", "50 mM Tris·HCl, pH 7.4", "50 mM Tris, pH 7.4 (HCl)", "50 mM Tris, pH 7.4 with HCl",
          "50 mM Tris, pH 7.4 with HCl at 25 C", "50 mM Tris, pH 7.4 at 25 C (HCl)"}) {
        INFO(line);
        const Label label = label_of(line);
        CHECK(system_of(label.buffers.at(0)) == "Tris");
        CHECK(ion_of(label.buffers[0]) == "Cl-");
    }
    CHECK(label_of("Tris-HCl 50 mM pH 7.5").buffers.size() == 1);
    CHECK(ion_of(label_of("20 mM HEPES, 150 mM NaCl pH: 7.4 (KOH) at 25 C").buffers.at(0)) == "K+");
    // A counter-ion in the name stands, and what is beside the pH may repeat it or be the buffer's own acid.
    CHECK(ion_of(label_of("50 mM Tris-HCl, pH 8 (HCl)").buffers.at(0)) == "Cl-");
    CHECK(ion_of(label_of("3 M sodium acetate, pH 5.2 (acetic acid)").buffers.at(0)) == "Na+");
    CHECK(ion_of(label_of("20 mM HEPES, 5 mM sodium acetate, pH 7.4 (KOH)").buffers.at(0)) == "K+");
    // A salt of a buffer names the buffer when nothing else could hold the pH.
    const Label acetate = label_of("3 M NaOAc, pH 5.2");
    CHECK(system_of(acetate.buffers.at(0)) == "acetate");
    CHECK(ion_of(acetate.buffers[0]) == "Na+");
    CHECK(system_of(label_of("0.1 M KH2PO4, pH 7").buffers.at(0)) == "phosphate");
    // Beside a buffer it is a salt to weigh.
    CHECK(label_of("50 mM imidazole, 50 mM NaH2PO4, pH 8").additives.size() == 1);
}

TEST_CASE("label: conditions of the pH in brackets, degrees in words", "[notation][label]") {
    for (const char* line :
         {"50 mM Tris-HCl, pH 7.5 (4C)", "50 mM Tris-HCl, pH 7.5 (at 4 C)", "50 mM Tris-HCl (pH 7.5 at 4 C)",
          "50 mM Tris-HCl, pH 7.5 at 4 degC", "50 mM Tris-HCl, pH 7.5 at 4 ° C"}) {
        INFO(line);
        const Label label = label_of(line);
        CHECK(label.ph->value() == 7.5);
        CHECK(label.ph_at->celsius() == 4);
        CHECK(ion_of(label.buffers.at(0)) == "Cl-");
    }
    const Label both = label_of("20 mM HEPES, pH 7.4 (KOH) (37 C)");
    CHECK(both.ph_at->celsius() == 37);
    CHECK(ion_of(both.buffers.at(0)) == "K+");
}

TEST_CASE("label: items divided by semicolon, plus and 'and'", "[notation][label]") {
    for (const char* line :
         {"50 mM Tris-HCl; 150 mM NaCl; 1 mM EDTA; pH 7.5", "50 mM Tris-HCl + 150 mM NaCl + 1 mM EDTA, pH 7.5",
          "50 mM Tris-HCl, 150 mM NaCl and 1 mM EDTA, pH 7.5", "50 mM Tris-HCl, 150 mM NaCl, and 1 mM EDTA, pH 7.5",
          "50 mM Tris-HCl AND 150 mM NaCl;1 mM EDTA pH 7.5"}) {
        INFO(line);
        const Label label = label_of(line);
        REQUIRE(label.buffers.size() == 1);
        REQUIRE(label.additives.size() == 2);
        CHECK(reagent_of(label.additives[0]) == "NaCl");
        CHECK(label.ph->value() == 7.5);
    }
}

TEST_CASE("label: a percent alone of a solid is by mass and volume", "[notation][label]") {
    // Common practice, no source.
    const Label label = label_of("20 mM Tris-HCl, 0.1 % SDS, pH 8");
    REQUIRE(label.additives.size() == 1);
    CHECK(label.additives[0].concentration.unit == ConcentrationUnit::g_per_L);
    CHECK(label.additives[0].concentration.value == Approx(1));
}

TEST_CASE("label: both forms of one buffer name it", "[notation][label]") {
    struct Case {
        const char* name;
        const char* system;
        const char* ion;
    };
    for (const Case& c : {Case{"K2HPO4/KH2PO4", "phosphate", "K+"},
                          {"NaH2PO4/Na2HPO4", "phosphate", "Na+"},
                          {"carbonate-bicarbonate", "carbonate", ""},
                          {"Na2CO3/NaHCO3", "carbonate", "Na+"},
                          {"acetic acid/sodium acetate", "acetate", "Na+"},
                          {"acetic acid - sodium acetate", "acetate", "Na+"},
                          {"Tris/Tris-HCl", "Tris", "Cl-"}}) {
        INFO(c.name);
        const Label label = label_of(std::string("50 mM ") + c.name + ", pH 7");
        REQUIRE(label.buffers.size() == 1);
        CHECK(system_of(label.buffers[0]) == c.system);
        CHECK(ion_of(label.buffers[0]) == c.ion);
        CHECK_FALSE(label.buffers[0].named_form);
    }
}

TEST_CASE("label: salts of two systems are the buffer that their name says", "[notation][label]") {
    const BufferItem bicarbonate = label_of("25 mM NH4HCO3, pH 8").buffers.at(0);
    CHECK(system_of(bicarbonate) == "carbonate");
    CHECK(ion_of(bicarbonate) == "ammonia");
    const BufferItem teaa = label_of("100 mM TEAA, pH 7").buffers.at(0);
    CHECK(system_of(teaa) == "acetate");
    CHECK(ion_of(teaa) == "triethylamine");
    CHECK(system_of(label_of("1 M TEAB, pH 8.5").buffers.at(0)) == "carbonate");
}

TEST_CASE("label: the article that a buffer's name is the name of", "[notation][label]") {
    struct Case {
        const char* line;
        const char* form;  ///< empty: the name leaves it open
    };
    for (const Case& c : {Case{"3 M sodium acetate, pH 5.2", "C2H3NaO2·3H2O"},
                          {"3 M NaAc, pH 5.2", "C2H3NaO2·3H2O"},
                          {"50 mM sodium acetate buffer, pH 5.2", "C2H3NaO2·3H2O"},
                          {"50 mM trisodium citrate, pH 5", "C6H5Na3O7·2H2O"},
                          {"50 mM Na2HPO4, pH 7", "Na2HPO4"},
                          {"50 mM Na2HPO4.7H2O, pH 7", "Na2HPO4·7H2O"},
                          {"50 mM K2HPO4, pH 7", "K2HPO4"},
                          {"20 mM HEPES sodium salt, pH 7.4", "C8H17N2NaO4S"},
                          {"0.1 M ammonium acetate, pH 7", "C2H7NO2"},
                          {"0.1 M Na2CO3, pH 10", "Na2CO3"},
                          {"0.1 M sodium bicarbonate, pH 9", "NaHCO3"},
                          {"25 mM borax, pH 9", "Na2B4O7·10H2O"},
                          {"0.5 M EDTA, pH 8", "C10H14N2Na2O8·2H2O"},
                          {"50 mM Tris hydrochloride, pH 8", "C4H12ClNO3"},
                          {"20 mM L-lactic acid, pH 4", "C3H6O3"},
                          {"50 mM HEPES, pH 7.4", ""},
                          {"50 mM MES, pH 6", ""},
                          {"50 mM Tris-HCl, pH 8", ""},
                          {"50 mM sodium phosphate, pH 7", ""},
                          {"50 mM citric acid, pH 4", ""},
                          {"50 mM acetic acid, pH 4", ""}}) {
        INFO(c.line);
        const BufferItem item = label_of(c.line).buffers.at(0);
        CHECK((item.named_form ? bundled_table().reagents[*item.named_form].formula : "") == c.form);
    }
}

TEST_CASE("label: without a pH a salt is dissolved as it is", "[notation][label]") {
    const Label label = label_of("3 M sodium acetate, 1 mM EDTA");
    CHECK(label.buffers.empty());
    REQUIRE(label.additives.size() == 2);
    CHECK(label_of("25 mM borax").additives.at(0).concentration.value == Approx(0.025));
    CHECK(label_of("50 mM Tris hydrochloride").additives.size() == 1);
}

TEST_CASE("label: an addition holds the pH when nothing else can", "[notation][label]") {
    const Label label = label_of("0.5 M EDTA, pH 8.0");
    REQUIRE(label.buffers.size() == 1);
    CHECK(system_of(label.buffers[0]) == "EDTA");
    CHECK(label.additives.empty());

    struct Case {
        const char* line;
        const char* system;
        const char* ion;
        double molarity;
        std::size_t additives;
    };
    for (const Case& c :
         {Case{"50 mM sodium ascorbate, pH 6", "ascorbate", "Na+", 0.05, 0},
          {"0.5 M EDTA disodium salt dihydrate, pH 8", "EDTA", "Na+", 0.5, 0},
          {"3 M NaOAc, 1 mM EDTA, pH 5.2", "acetate", "Na+", 3, 1},  // the usual buffer before the chelator
          {"50 mM NH4Cl, 150 mM NaCl, pH 9", "ammonia", "Cl-", 0.05, 1},
          {"25 mM borax, pH 9", "borate", "Na+", 0.1, 0},  // four borates each
          {"100 mM EDTA, 5 mM magnesium sulfate, pH 8", "EDTA", "", 0.1, 1}}) {
        INFO(c.line);
        const Label promoted = label_of(c.line);
        REQUIRE(promoted.buffers.size() == 1);
        CHECK(system_of(promoted.buffers[0]) == c.system);
        CHECK(ion_of(promoted.buffers[0]) == c.ion);
        CHECK(promoted.buffers[0].concentration.value == Approx(c.molarity));
        CHECK(promoted.additives.size() == c.additives);
    }
}

TEST_CASE("label: salts alone need no pH", "[notation][label]") {
    const Label label = label_of("150 mM NaCl, 5 mM KCl");
    CHECK(label.buffers.empty());
    CHECK(label.additives.size() == 2);
    CHECK_FALSE(label.ph);
}

TEST_CASE("label: what is wrong is named and pointed at", "[notation][label][bad-input]") {
    for (const Refusal& refusal : std::initializer_list<Refusal>{
             {"", "empty_line", "", "nothing"},
             {"50 mM Tris-HCl, pH 7.5,", "empty_item", ",", "beside this separator"},
             {"50 mM Tris-HCl,, pH 7.5", "empty_item", ",", "beside this separator"},
             {", 50 mM Tris-HCl, pH 7.5", "empty_item", ",", "beside this separator"},
             {"50 mM Trsi-HCl, pH 7.5", "unknown_name", "Trsi-HCl", "'Trsi-HCl'"},
             {"50 mM HEPSE, pH 7.5", "unknown_name", "HEPSE", "'HEPSE'"},
             {"50 mM Tris-HCl, 150 mM NaCk, pH 7.5", "unknown_name", "NaCk", "'NaCk'"},
             {"50 mM Tris-Tris, pH 7.5", "unknown_name", "Tris-Tris", "'Tris-Tris'"},
             {"50 mM citrate-phosphate, pH 5", "two_systems", "citrate-phosphate", "two systems"},
             {"10 mM Tris-EDTA, pH 8", "two_systems", "Tris-EDTA", "two systems"},
             {"50 mM Tris-HCl", "missing_ph", "50 mM Tris-HCl", "no pH"},
             {"pH 7.5", "no_buffer", "pH 7.5", "pH 7.5"},
             {"150 mM NaCl, pH 7.5", "no_buffer", "pH 7.5", "no buffer"},
             {"5 mM magnesium sulfate, pH 7", "no_buffer", "pH 7", "no buffer"},
             {"5 mM EDTA, 5 mM EGTA, pH 8", "no_buffer", "5 mM EGTA", "'5 mM EGTA'"},
             {"50 mM NaH2PO4, 50 mM Na2HPO4, pH 7", "no_buffer", "50 mM Na2HPO4", "not the only one"},
             {"ionic strength 0.1 M, 1 mM NaCl", "missing_ph", "ionic strength 0.1 M", "without a pH"},
             {"50 mM, pH 7.5", "missing_name", "50 mM", "50 mM of what"},
             {"50 mM of, pH 7.5", "missing_name", "50 mM of", "50 mM of what"},
             {"50 Tris-HCl, pH 7.5", "unknown_unit", "Tris-HCl", "'Tris-HCl'"},
             {"NaCl 150 mm, 50 mM Tris, pH 8", "unknown_unit", "mm", "'mm'"},
             {"NaCl -150 mM, 50 mM Tris, pH 8", "negative_quantity", "-150", "'-150'"},
             {"NaCl 0,5 M, 50 mM Tris, pH 8", "decimal_comma", "0,5", "'0,5'"},
             {"Tris-HCl, pH 7.5", "missing_quantity", "Tris-HCl", "no amount"},
             {"HCl 37 %, pH 7.5", "missing_quantity", "HCl 37 %", "'HCl 37 %' has no amount"},
             {"what is this, pH 7.5", "unreadable_item", "what is this", "'what is this'"},
             {"5-10 mM Tris, pH 8", "unreadable_item", "5-10 mM Tris", "'5-10 mM Tris'"},
             {"50 mM Tris-HCl, pH", "not_a_number", "", "a number is expected"},
             {"50 mM Tris-HCl, pH seven", "not_a_number", "seven", "'seven'"},
             {"50 mM Tris-HCl, pH 17", "ph_out_of_range", "17", "pH 17"},
             {"50 mM Tris-HCl, pH -3", "ph_out_of_range", "-3", "pH -3"},
             {"50 mM Tris-HCl, pH 7,5", "decimal_comma", "7,5", "'7,5'"},
             {"50 mM Tris-HCl, pH 7.5 at", "not_a_number", "", "a number is expected"},
             {"50 mM Tris-HCl, pH 7.5 at 4", "missing_unit", "4", "4 has no unit"},
             {"50 mM Tris-HCl, pH 7.5 at 4 mL", "wrong_quantity", "4 mL", "a volume; a temperature is expected"},
             {"50 mM Tris-HCl, pH 7.5 at 4 C today", "trailing_text", "today", "'today'"},
             {"50 mM Tris-HCl, pH 7.5 room temperature", "not_a_number", "room temperature", "'room temperature'"},
             {"50 mM Tris-HCl, pH 7.5 M", "trailing_text", "M", "'M'"},
             {"50 mM Tris-HCl, pH 7.5, pH 8", "duplicate_item", "pH 8", "a second pH"},
             {"50 mM Tris-HCl, 20 mM Tris, pH 7.5", "duplicate_item", "20 mM Tris", "Tris stands twice"},
             {"50 mM Tris-HCl, 1 mM NaCl, 2 mM NaCl, pH 7.5", "duplicate_item", "2 mM NaCl", "stands twice"},
             {"50 mM Tris-HCl, 1 mM MgCl2, 2 mM MgCl2.6H2O, pH 8", "duplicate_item", "2 mM MgCl2.6H2O", "stands twice"},
             {"50 mM Tris-HCl, ionic strength 0.1 M, ionic strength 0.2 M, pH 7", "duplicate_item",
              "ionic strength 0.2 M", "a second ionic strength"},
             {"50 mM Tris-HCl, ionic strength 0.1, pH 7", "missing_unit", "0.1", "0.1 has no unit"},
             {"50 mM Tris-HCl, ionic strength, pH 7", "not_a_number", ",", "a number is expected"},
             {"50 mM Tris-HCl, ionic strength 4 C, pH 7", "wrong_quantity", "4 C",
              "a temperature; a concentration is expected"},
             {"50 mM Tris-HCl, ionic strength 4 g/L, pH 7", "unusable_unit", "4 g/L", "mol/L or mol/kg"},
             {"50 mM Tris-HCl, ionic strength 0.1 M at 4 C, pH 7", "trailing_text", "at 4 C", "'at 4 C'"},
             {"50 mM Tris-HCl at 4 C, pH 7.5", "misplaced_temperature", "at 4 C", "a temperature"},
             {"50 mM Tris-HCl (pH 7.5) cold", "missing_comma", "pH 7.5) cold", "a pH"},
             {"50 mM Tris-HCl pH 7.5, pH 8", "duplicate_item", "pH 8", "a second pH"},
             {"50 mM Tris, pH 7.5 (XYZ)", "unknown_name", "XYZ", "'XYZ'"},
             {"50 mM Tris, pH 7.5 with sucrose", "unknown_name", "sucrose", "'sucrose'"},
             {"50 mM Tris, pH 7.5 (HCl) with HNO3", "duplicate_item", "HNO3", "a second titrant"},
             {"50 mM Tris, pH 7.5 (4 C) at 25 C", "duplicate_item", "25 C", "a second temperature"},
             {"50 mM Tris, pH 7.5 at RT", "not_a_number", "RT", "'RT'"},
             {"50 mM Tris, pH 7.5 (RT)", "not_a_number", "RT", "'RT'"},
             {"50 mM Tris, pH 7.5 at room temperature", "not_a_number", "room temperature", "'room temperature'"},
             {"50 mM Tris, pH 7.5, 4 C", "misplaced_temperature", "4 C", "a temperature stands alone"},
             {"50 mM Tris-acetate, pH 8 (HCl)", "two_counter_ions", "HCl", "'HCl'"},
             {"50 mM Tris-HCl, 20 mM sodium phosphate, pH 8 (KOH)", "two_counter_ions", "KOH", "'KOH'"},
             {"50 mM Tris, pH 7.5 (HCl", "trailing_text", "(HCl", "'(HCl'"},
             {"50 mM Tris, pH 7.5 with", "unknown_name", "", "no acid or base"},
             {"50 mM Tris-HCl ionic strength 0.1 M, pH 7.5", "missing_comma", "ionic strength 0.1 M",
              "an ionic strength"},
             {"50 mM Tris-HCl;; pH 7.5", "empty_item", ";", "beside this separator"},
             {"50 mM Tris-HCl + + 1 mM EDTA, pH 7.5", "empty_item", "+", "beside this separator"},
             {"and 50 mM Tris-HCl, pH 7.5", "unreadable_item", "and 50 mM Tris-HCl", "cannot be read"},
             {"-50 mM Tris-HCl, pH 7.5", "negative_quantity", "-50", "'-50'"},
             {"0 mM Tris-HCl, pH 7.5", "zero_quantity", "0 mM", "'0 mM'"},
             {"1e999 M Tris-HCl, pH 7.5", "number_out_of_range", "1e999", "'1e999'"},
             {"50 C Tris-HCl, pH 7.5", "wrong_quantity", "50 C", "a temperature; a concentration is expected"},
             {"50 mL Tris-HCl, pH 7.5", "wrong_quantity", "50 mL", "a volume; a concentration is expected"},
             {"50 g/L Tris-HCl, pH 7.5", "unusable_unit", "50 g/L", "mol/L or mol/kg"},
             {"1 % w/v Tris-HCl, pH 7.5", "unusable_unit", "1 % w/v", "mol/L or mol/kg"},
             {"1 N Tris-HCl, pH 7.5", "unusable_unit", "1 N", "'1 N'"},
             {"50 mM Tris, 5 % v/v NaCl, pH 8", "unusable_unit", "5 % v/v", "sodium chloride"},
             {"50 % Tris-HCl, pH 7.5", "unusable_unit", "50 %", "mol/L or mol/kg"},
             {"50 mM Tris, 10 % glycerol, pH 7.5", "unknown_unit", "10 %", "glycerol is a liquid"},
             {"50 mM Tris, ionic strength 1 %, pH 7.5", "unknown_unit", "%", "of what"},
             {"50 mM Na2HPO4/KH2PO4, pH 7", "unknown_name", "Na2HPO4/KH2PO4", "'Na2HPO4/KH2PO4'"},
             {"1 000 mM Tris-HCl, pH 7.5", "not_a_number", "1 000", "'1 000'"},
             {"10x phosphate-buffered saline, pH 7.4", "unknown_formula", "10x", "named formula"},
             {"0,5 M Tris-HCl, pH 7.5", "decimal_comma", "0,5", "'0,5'"},
             {"50 mM Tris-HCl\x01, pH 7.5", "control_character", "", "byte 15"},
             {"50 mM Tris-HCl\n, pH 7.5", "control_character", "", "byte 15"},
             {std::string("50 mM\0 Tris, pH 7.5", 20), "control_character", "", "byte 6"},
             {"50 mM \u009BTris, pH 7.5", "control_character", "", "byte 7"},
             {"50 mM \u202ETris, pH 7.5", "control_character", "", "byte 7"},
             {"50 mM Tr\xFFis, pH 7.5", "not_utf8", "", "byte 9"},
             {"50 mM \xC0\xAFTris, pH 7.5", "not_utf8", "", "byte 7"},
             {"50 mM \xED\xA0\x80, pH 7.5", "not_utf8", "", "byte 7"},
             {"50 mM Tris, pH 7.5 \xE2\x82", "not_utf8", "", "byte 20"},
             {std::string(4097, 'a'), "line_too_long", "", "4097 bytes"}}) {
        check_refused(refusal, "label", label_of);
    }
}

TEST_CASE("label: a chemistry that no reagent brings is no fault of the line", "[notation][label]") {
    try {
        label_of("50 mM hypochlorite, 20 mM Tris, pH 7.5");
        FAIL("was read");
    } catch (const Error& error) {
        CHECK(error.kind() == ErrorKind::no_recipe);
        CHECK(error.code() == "no_reagent");
    }
}

TEST_CASE("label: the nearest known name is offered", "[notation][label]") {
    const auto help = [](const char* line) { return help_of(line, label_of); };
    CHECK(help("50 mM Trsi-HCl, pH 7.5").find("Tris-HCl") != std::string::npos);
    CHECK(help("50 mM sodium fosphate, pH 7.5").find("sodium phosphate") != std::string::npos);
    CHECK(help("50 mM HEPSE, pH 7.5").find("HEPES") != std::string::npos);
    CHECK(help("50 mM Tris-HCl, 150 mM NaCk, pH 7.5").find("NaCl") != std::string::npos);
    CHECK(help("50 mM imidazol, pH 7").find("imidazole") != std::string::npos);
    CHECK(help("50 mM HEP, pH 7") == "did you mean HEPES, HEPPS, HEPPSO?");
    CHECK(help("20 mM soduim phosphate, pH 7.4").starts_with("did you mean sodium phosphate"));
    CHECK(help("20 mM potasium phosphate, pH 7.4").starts_with("did you mean potassium phosphate"));
    CHECK(help("20 mM citrate-phosphate, pH 5") == "write an item for each, as in 50 mM citrate, 50 mM phosphate");
    CHECK(help("50 mn Tris, pH 8") == "did you mean mM?");  // not the mL or mg of another kind
    CHECK(help("50 mK Tris, pH 8") == "did you mean mM?");
    CHECK(help("50 mM xyzzyxyzzy, pH 7").find("constants list") != std::string::npos);
    CHECK(nearest_names("HEPSE", bundled_table(), 1) == std::vector<std::string>{"HEPES"});
    CHECK(nearest_names("", bundled_table()).empty());
    CHECK(nearest_words("volum", {"label", "volume", "route"}) == std::vector<std::string>{"volume"});
}
