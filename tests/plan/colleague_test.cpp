// What a good colleague says: each rule of the bundled table speaks when it should and is silent when it should not.

#include <algorithm>

#include "carboy/notation.h"
#include "carboy/plan.h"
#include "carboy/request_json.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

Plan planned(const std::string& label, Route route = Route::automatic) {
    Request request = request_from_label(label, bundled_table());
    request.volume = Volume::litres(1);
    request.route = route;
    return plan_recipe(bundled_table(), request, davies_model());
}

bool says(const std::vector<Warning>& warnings, std::string_view code) {
    return std::any_of(warnings.begin(), warnings.end(), [&](const Warning& w) { return w.code == code; });
}

struct Case {
    const char* code;
    const char* speaks;  ///< label
    const char* silent;  ///< label
};

// Labels near the line on either side where one is known; otherwise without the partner.
constexpr Case cases[] = {
    {"acid_liberates_gas", "50 mM acetate, 0.02 % w/v sodium azide, pH 4.5", "50 mM Tris, 3 mM sodium azide, pH 8"},
    {"azide_with_metal", "50 mM Tris, 3 mM sodium azide, 1 mM ZnCl2, pH 7.1", "50 mM Tris, 3 mM sodium azide, pH 8"},
    {"fluoride_in_acid", "50 mM acetate, 10 mM NaF, pH 4.5", "50 mM Tris, 10 mM NaF, pH 8"},
    {"calcium_phosphate", "20 mM sodium phosphate, 2 mM CaCl2, pH 7.4", "20 mM HEPES, 2 mM CaCl2, pH 7.4"},
    {"calcium_phosphate", "20 mM sodium phosphate, 2 mM CaCl2, pH 7.4", "1 mM sodium phosphate, 0.1 mM CaCl2, pH 6"},
    {"magnesium_phosphate", "0.1 M sodium phosphate, 10 mM MgCl2, pH 8", "10 mM sodium phosphate, 0.5 mM MgCl2, pH 7"},
    {"magnesium_ammonium_phosphate", "50 mM sodium phosphate, 0.1 M NH4Cl, 5 mM MgCl2, pH 8.5",
     "50 mM sodium phosphate, 0.1 M NH4Cl, pH 8.5"},
    {"metal_phosphate", "20 mM sodium phosphate, 1 mM MnCl2, pH 7", "20 mM PIPES, 1 mM MnCl2, pH 6.8"},
    {"calcium_carbonate", "20 mM sodium carbonate, 2 mM CaCl2, pH 9", "20 mM sodium carbonate, pH 9"},
    {"magnesium_carbonate", "50 mM sodium carbonate, 20 mM MgCl2, pH 10", "50 mM Tris, 20 mM MgCl2, pH 8"},
    {"metal_carbonate", "20 mM sodium carbonate, 1 mM MnCl2, pH 9", "20 mM HEPES, 1 mM MnCl2, pH 7.5"},
    {"magnesium_hydroxide", "0.1 M CAPS, 5 mM MgCl2, pH 10.5", "0.1 M CHES, 5 mM MgCl2, pH 9"},
    {"calcium_hydroxide", "0.5 M KCl, 50 mM calcium hydroxide", "1 mM calcium hydroxide"},
    {"hydrolysing_metal", "50 mM Tris, 1 mM ZnCl2, pH 8", "50 mM MES, 1 mM ZnCl2, pH 6"},
    {"metal_hydroxide", "50 mM CHES, 1 mM MnCl2, pH 9", "50 mM HEPES, 1 mM MnCl2, pH 7.4"},
    {"calcium_sulfate", "50 mM HEPES, 0.1 M Na2SO4, 50 mM CaCl2, pH 7.4",
     "50 mM HEPES, 1 mM Na2SO4, 1 mM CaCl2, pH 7.4"},
    {"calcium_oxalate", "50 mM HEPES, 1 mM sodium oxalate, 1 mM CaCl2, pH 7", "50 mM HEPES, 1 mM sodium oxalate, pH 7"},
    {"calcium_citrate", "50 mM sodium citrate, 10 mM CaCl2, pH 6", "50 mM sodium citrate, pH 6"},
    {"calcium_fluoride", "50 mM HEPES, 10 mM NaF, 2 mM CaCl2, pH 7.4", "50 mM HEPES, 10 mM NaF, pH 7.4"},
    {"magnesium_fluoride", "50 mM HEPES, 50 mM NaF, 10 mM MgCl2, pH 7.4", "50 mM HEPES, 10 mM MgCl2, pH 7.4"},
    {"potassium_dodecyl_sulfate", "50 mM potassium phosphate, 5 mM sodium dodecyl sulfate, pH 7",
     "50 mM sodium phosphate, 5 mM sodium dodecyl sulfate, pH 7"},
    {"guanidinium_dodecyl_sulfate", "50 mM Tris, 1 M guanidine hydrochloride, 5 mM sodium dodecyl sulfate, pH 8",
     "50 mM Tris, 5 mM sodium dodecyl sulfate, pH 8"},
    {"dodecyl_sulfate_in_the_cold", "50 mM Tris, 5 mM sodium dodecyl sulfate, pH 8 at 4 C",
     "50 mM Tris, 5 mM sodium dodecyl sulfate, pH 8"},
    {"edta_acid", "50 mM glycine, 20 mM EDTA disodium salt dihydrate, pH 2",
     "50 mM Tris, 20 mM EDTA disodium salt dihydrate, pH 8"},
    {"benzoic_acid", "50 mM acetate, 0.1 M sodium benzoate, pH 4", "50 mM acetate, 0.1 M sodium benzoate, pH 6"},
    {"boric_acid_solubility", "1 M sodium borate, pH 7.5", "0.1 M sodium borate, pH 9"},
    {"dissolves_on_titration", "50 mM PIPES, pH 6.8", "50 mM MES, pH 6"},
    {"over_solubility", "7 M NaCl", "1 M NaCl"},
    {"crystallises_in_the_cold", "0.4 M Tris, 5 M NaCl, pH 8 at 4 C", "0.4 M Tris, 5 M NaCl, pH 8"},
    {"chelator_with_metal", "50 mM Tris, 5 mM EDTA, 5 mM MgCl2, pH 8", "50 mM Tris, 5 mM EDTA, pH 8"},
    {"metal_binding", "50 mM sodium citrate, 5 mM MgCl2, pH 6", "50 mM histidine, 5 mM MgCl2, pH 6"},
    {"amine_binds_metal", "50 mM histidine, 5 mM NiCl2, pH 6", "50 mM histidine, pH 6"},
    {"sodium_binding", "0.1 M EDTA sodium, pH 9", "1 mM EDTA, 50 mM Tris, pH 8"},
    {"tris_borate", "89 mM Tris, 89 mM borate, pH 8.3", "89 mM Tris-HCl, pH 8.3"},
    {"borate_with_polyol", "50 mM sodium borate, 1 M glycerol, pH 8.5", "50 mM sodium borate, pH 8.5"},
    {"polyborate", "0.1 M sodium borate, pH 9", "10 mM sodium borate, pH 9"},
    {"urea_concentrated", "50 mM Tris, 6 M urea, pH 8", "50 mM Tris, 0.5 M urea, pH 8"},
    {"urea_heat", "50 mM Tris, 0.5 M urea, pH 8", "50 mM Tris, pH 8"},
    {"guanidine_concentrated", "50 mM Tris, 4 M guanidine hydrochloride, pH 8", "50 mM Tris, pH 8"},
    {"cosolvent_concentrated", "50 mM Tris, 4 M glycerol, pH 8", "50 mM Tris, 0.5 M glycerol, pH 8"},
    {"lactone_drift", "50 mM sodium D-gluconate, 50 mM acetate, pH 4", "50 mM Tris, 50 mM sodium D-gluconate, pH 8"},
    {"weak_buffering", "50 mM Tris, pH 6", "50 mM Tris, pH 8"},
    {"weak_buffering", "50 mM Tris, pH 6", "25 mM Tris, 192 mM glycine, pH 8.3"},
    {"unbuffered", "150 mM NaCl", "150 mM NaCl, 10 mM Tris, pH 8"},
    {"dilute_buffer", "1 mM sodium phosphate, pH 7", "50 mM sodium phosphate, pH 7"},
    {"carbonate_open", "50 mM sodium carbonate, pH 9.6", "50 mM glycine, pH 9.6"},
    {"carbon_dioxide_uptake", "20 mM glycine, pH 9.6", "20 mM Tris, pH 8"},
    {"ammonia_loss", "50 mM ammonium chloride, pH 9", "50 mM Tris, 50 mM NH4Cl, pH 7.2"},
    {"volatile_amine", "50 mM triethylamine, pH 10", "50 mM Tris, pH 8"},
    {"electrode_sodium_error", "50 mM NaCl, 50 mM sodium hydroxide", "50 mM NaCl, 50 mM Tris, pH 8"},
    {"electrode_tris", "50 mM Tris, pH 8", "50 mM HEPES, pH 7.4"},
    {"electrode_low_ionic_strength", "1 mM sodium phosphate, pH 7", "50 mM sodium phosphate, pH 7"},
    {"warms_up", "1 M Tris-HCl, pH 8", "50 mM Tris-HCl, pH 8"},
    {"warms_up_much", "2 M Tris-HCl, pH 7.5", "50 mM Tris-HCl, pH 8"},
    {"add_last_reductant", "50 mM Tris, 1 mM DTT, pH 8", "50 mM Tris, pH 8"},
    {"tcep_with_phosphate", "50 mM sodium phosphate, 1 mM TCEP hydrochloride, pH 7",
     "50 mM HEPES, 1 mM TCEP hydrochloride, pH 7"},
    {"do_not_autoclave", "50 mM Tris, 3 mM sodium azide, pH 8", "50 mM Tris, pH 8"},
    {"foams", "50 mM Tris, 5 mM sodium dodecyl sulfate, pH 8", "50 mM Tris, pH 8"},
    {"primary_amine", "50 mM Tris, pH 8", "50 mM HEPES, pH 7.4"},
    {"peroxide_in_light", "50 mM HEPES, pH 7.4", "50 mM MOPS, pH 7.2"},
};

}  // namespace

TEST_CASE("colleague: every rule speaks and is silent in its place", "[colleague]") {
    for (const Case& one : cases) {
        INFO(one.code << ": " << one.speaks << " / " << one.silent);
        CHECK(says(planned(one.speaks).warnings, one.code));
        CHECK_FALSE(says(planned(one.silent).warnings, one.code));
    }
}

TEST_CASE("colleague: every rule of the table is tried above", "[colleague]") {
    // Those that no label line leads to are tried by mixture below.
    constexpr std::string_view by_mixture[] = {"gas_in_acid", "hypochlorite_with_ammonia", "much_titrant"};
    for (const Observation& rule : bundled_table().observations) {
        INFO(rule.code);
        const bool tried =
            std::any_of(std::begin(cases), std::end(cases), [&](const Case& one) { return rule.code == one.code; });
        CHECK((tried || std::find(std::begin(by_mixture), std::end(by_mixture), rule.code) != std::end(by_mixture)));
    }
}

TEST_CASE("colleague: mixtures alone are spoken of too", "[colleague][safety]") {
    const Table& table = bundled_table();
    const auto predicted = [&](std::initializer_list<std::pair<const char*, double>> totals) {
        Mixture mixture;
        for (const auto& [name, molality] : totals) {
            const System* system = find_system(table, name);
            mixture.add(system != nullptr ? id_of(table, *system) : id_of(table, *find_spectator(table, name)),
                        Molality::mol_per_kg(molality));
        }
        return predict(table, mixture, Temperature{}, davies_model());
    };
    CHECK(says(predicted({{"azide", 0.01}, {"Na+", 0.005}}).warnings, "gas_in_acid"));
    CHECK_FALSE(says(predicted({{"azide", 0.01}, {"Na+", 0.01}}).warnings, "gas_in_acid"));
    CHECK(says(predicted({{"hypochlorite", 0.01}, {"Na+", 0.01}, {"ammonia", 0.01}}).warnings,
               "hypochlorite_with_ammonia"));
    CHECK_FALSE(says(predicted({{"hypochlorite", 0.01}, {"Na+", 0.01}}).warnings, "hypochlorite_with_ammonia"));
    // Advice on the making-up is not for a mixture that is only calculated.
    CHECK_FALSE(says(predicted({{"Tris", 0.05}, {"Cl-", 0.02}}).warnings, "primary_amine"));
}

TEST_CASE("colleague: few and each once, the heaviest first", "[colleague]") {
    for (const char* label :
         {"50 mM Tris-HCl, 150 mM NaCl, 1 mM EDTA, 1 mM DTT, pH 8", "20 mM HEPES-KOH, 100 mM KCl, 5 mM MgCl2, pH 7.4",
          "10 mM sodium phosphate, 150 mM NaCl, pH 7.4", "89 mM Tris, 89 mM borate, 2 mM EDTA, pH 8.3",
          "25 mM Tris, 192 mM glycine, 3.5 mM sodium dodecyl sulfate, pH 8.3", "8 M urea, 50 mM Tris-HCl, pH 8",
          "50 mM ammonium hydrogen carbonate, pH 8", "0.1 M sodium acetate, pH 5"}) {
        INFO(label);
        const Plan plan = planned(label);
        CHECK(plan.warnings.size() <= 5);
        for (std::size_t i = 1; i < plan.warnings.size(); ++i) {
            CHECK(plan.warnings[i - 1].weight >= plan.warnings[i].weight);
            CHECK(std::none_of(plan.warnings.begin(), plan.warnings.begin() + static_cast<std::ptrdiff_t>(i),
                               [&](const Warning& other) { return other.code == plan.warnings[i].code; }));
        }
    }
}

TEST_CASE("colleague: what the model leaves out stands in the uncertainty", "[colleague][uncertainty]") {
    const Prediction bare = planned("50 mM Tris, 5 mM EDTA, pH 8").predicted;
    const Prediction with = planned("50 mM Tris, 5 mM EDTA, 5 mM MgCl2, pH 8").predicted;
    CHECK(bare.uncertainty.unmodelled == 0);
    CHECK(with.uncertainty.unmodelled == Approx(0.15));
    CHECK(with.uncertainty.expanded_k2 > 0.3);
    // No pH is better known than the scale itself: never ± 0.00.
    for (const char* label : {"50 mM sodium phosphate, pH 7", "0.1 M sodium acetate, pH 4.76", "50 mM Tris, pH 8"}) {
        CHECK(planned(label).predicted.uncertainty.expanded_k2 >= 0.01);
    }
}

TEST_CASE("colleague: the vessel warms by the heat of neutralisation", "[colleague][heat]") {
    // About 0.55 mol of HCl with Tris, 47.45 kJ/mol, in 0.8 to 0.9 kg: 7 to 8 K.
    const Plan plan = planned("1 M Tris-HCl, pH 8", Route::titrated);
    CHECK(plan.temperature_rise_K > 6);
    CHECK(plan.temperature_rise_K < 9);
    CHECK(planned("50 mM sodium phosphate, pH 7", Route::salts).temperature_rise_K == 0);
}
