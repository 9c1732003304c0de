#include "report/csv.h"
#include "report/json.h"
#include "report/titration_report.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

ordered_json volume_json(const std::optional<Volume>& volume) {
    return volume ? ordered_json(volume->mL()) : ordered_json(nullptr);
}

ordered_json points_json(const TitrationCurve& curve) {
    ordered_json list = ordered_json::array();
    for (std::size_t i = 0; i < curve.points.size(); ++i) {
        const TitrationPoint& point = curve.points[i];
        list.push_back({{"added_mL", point.added.mL()},
                        {"pH", point.ph.value()},
                        {"pH_expanded_k2", curve.ph_expanded_k2[i]},
                        {"slope_pH_per_mL", point.slope_per_mL},
                        {"buffer_value_mol_per_kg", point.buffer_value.mol_per_kg()},
                        {"ionic_strength_mol_per_kg", point.ionic_strength.mol_per_kg()}});
    }
    return list;
}

ordered_json equivalence_json(const TitrationCurve& curve, const Table& table) {
    ordered_json list = ordered_json::array();
    for (const EquivalencePoint& point : curve.equivalence) {
        ordered_json entry{{"added_mL", point.volume.mL()},
                           {"steepest_mL", volume_json(point.steepest)},
                           {"pH", point.ph.value()},
                           {"pH_with_a_tenth_more", point.ph_past.value()}};
        entry["system"] = point.system ? ordered_json(name_of(table, *point.system)) : ordered_json(nullptr);
        entry["step"] = point.system ? ordered_json(point.step + 1) : ordered_json(nullptr);
        list.push_back(std::move(entry));
    }
    return list;
}

ordered_json shifts_json(const TitrationCurve& curve) {
    ordered_json list = ordered_json::array();
    for (const ShiftCost& cost : curve.shifts) {
        ordered_json entry{{"shift_pH", cost.shift}, {"pH", cost.ph.value()}, {"added_mL", volume_json(cost.added)}};
        const double mol = cost.added ? cost.added->L() * curve.titrant_strength.mol_per_L() : 0;
        entry["added_mol"] = cost.added ? ordered_json(mol) : ordered_json(nullptr);
        entry["added_mol_per_L_of_sample"] =
            cost.added ? ordered_json(mol / curve.sample_volume.L()) : ordered_json(nullptr);
        list.push_back(std::move(entry));
    }
    return list;
}

}  // namespace

ordered_json titration_json(const TitrationCurve& curve, const TitrationWords& words, const Table& table) {
    const Reagent& reagent = table.reagents[curve.titrant];
    return {{"kind", "titration"},
            {"sample", words.sample},
            {"sample_volume_L", curve.sample_volume.L()},
            {"titrant",
             {{"reagent", reagent.name},
              {"formula", reagent.formula},
              {"cas", reagent.cas.empty() ? ordered_json(nullptr) : ordered_json(reagent.cas)},
              {"concentration_mol_per_L", curve.titrant_strength.mol_per_L()}}},
            {"temperature_C", curve.temperature.celsius()},
            {"activity_model", curve.activity_model},
            {"points", points_json(curve)},
            {"equivalence_points", equivalence_json(curve, table)},
            {"shifts", shifts_json(curve)},
            {"warnings", warnings_json(curve.warnings)},
            {"program", program_json(table)}};
}

std::string titration_csv(const TitrationCurve& curve) {
    Csv csv({"added_mL", "pH", "pH_expanded_k2", "slope_pH_per_mL", "buffer_value_mol_per_kg",
             "ionic_strength_mol_per_kg"});
    for (std::size_t i = 0; i < curve.points.size(); ++i) {
        const TitrationPoint& point = curve.points[i];
        csv.row({exact_number(point.added.mL()), exact_number(point.ph.value()), exact_number(curve.ph_expanded_k2[i]),
                 exact_number(point.slope_per_mL), exact_number(point.buffer_value.mol_per_kg()),
                 exact_number(point.ionic_strength.mol_per_kg())});
    }
    return csv.text();
}

}  // namespace carboy
