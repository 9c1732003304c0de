#include "report/csv.h"
#include "report/json.h"
#include "report/sweep_report.h"

namespace carboy {

using nlohmann::ordered_json;

ordered_json sweep_json(const Sweep& sweep, const Table& table) {
    const ConditionWords words = words_of(sweep.condition, table);
    ordered_json curves = ordered_json::array();
    for (const SweepCurve& curve : sweep.curves) {
        ordered_json points = ordered_json::array();
        for (const SweepPoint& point : curve.points) {
            points.push_back({{words.key, point.condition},
                              {"pH", point.ph.value()},
                              {"pH_expanded_k2", point.ph_expanded_k2},
                              {"buffer_value_mol_per_kg", point.buffer_value.mol_per_kg()},
                              {"ionic_strength_mol_per_kg", point.ionic_strength.mol_per_kg()}});
        }
        ordered_json entry{{"solution", curve.name}};
        if (sweep.condition.what != Condition::temperature) {
            entry["temperature_C"] = curve.temperature.celsius();
        }
        entry["points"] = std::move(points);
        curves.push_back(std::move(entry));
    }
    ordered_json record{{"kind", "sweep"}, {"condition", words.key}};
    if (sweep.condition.what == Condition::salt) {
        record["salt"] = table.reagents[sweep.condition.salt].name;
    }
    record["activity_model"] = sweep.activity_model;
    record["curves"] = std::move(curves);
    record["warnings"] = warnings_json(sweep.warnings);
    record["program"] = program_json(table);
    return record;
}

std::string sweep_csv(const Sweep& sweep, const Table& table) {
    Csv csv({"solution", words_of(sweep.condition, table).key, "pH", "pH_expanded_k2", "buffer_value_mol_per_kg",
             "ionic_strength_mol_per_kg"});
    for (const SweepCurve& curve : sweep.curves) {
        for (const SweepPoint& point : curve.points) {
            csv.row({curve.name, exact_number(point.condition), exact_number(point.ph.value()),
                     exact_number(point.ph_expanded_k2), exact_number(point.buffer_value.mol_per_kg()),
                     exact_number(point.ionic_strength.mol_per_kg())});
        }
    }
    return csv.text();
}

}  // namespace carboy
