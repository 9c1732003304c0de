#include "report/fit_json.h"

#include <array>

#include <fmt/format.h>

#include "report/json.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

constexpr std::array unknown_words{"pK", "titrant_strength", "amount", "carbonate", "offset", "slope"};
constexpr std::array reading_words{"pH", "mV", "degree"};

std::string_view unit_of(const FreeParameter& parameter, ReadingKind reading) {
    switch (parameter.unknown) {
        case Unknown::pK:
            return "1";
        case Unknown::titrant_strength:
        case Unknown::amount:
            return "times stated";
        case Unknown::carbonate:
            return "mol/mol";
        case Unknown::offset:
            return reading == ReadingKind::millivolt ? "mV" : "pH";
        case Unknown::slope:
            return "times ideal";
    }
    return {};
}

ordered_json parameters_json(const Fit& fit, const Table& table) {
    ordered_json list = ordered_json::array();
    for (const FittedParameter& p : fit.parameters) {
        ordered_json one{{"unknown", unknown_words[static_cast<std::size_t>(p.parameter.unknown)]},
                         {"name", parameter_name(p.parameter, table)}};
        if (p.parameter.unknown == Unknown::pK) {
            one["system"] = table.systems[p.parameter.system].name;
            one["step"] = p.parameter.step + 1;
            one["pK_25C"] = p.pK_25C;
        } else if (p.parameter.unknown == Unknown::amount) {
            one["reagent"] = table.reagents[p.parameter.reagent].name;
        }
        one["unit"] = unit_of(p.parameter, fit.problem.reading);
        one["start"] = p.start;
        one["value"] = p.value;
        one["standard_error"] = p.standard_error;
        one["lower_95"] = p.lower_95;
        one["upper_95"] = p.upper_95;
        if (p.stated) {
            one[p.parameter.unknown == Unknown::amount ? "amount_mol" : "strength_mol_per_L"] = p.value * *p.stated;
        }
        list.push_back(std::move(one));
    }
    return list;
}

}  // namespace

ordered_json fit_json(const Fit& fit, const Table& table, std::string_view what) {
    ordered_json record{{"kind", "fit"},
                        {"data", what},
                        {"temperature_C", fit.problem.at.celsius()},
                        {"reading", reading_words[static_cast<std::size_t>(fit.problem.reading)]},
                        {"parameters", parameters_json(fit, table)},
                        {"correlation", fit.correlation},
                        {"chi_square", fit.chi_square},
                        {"degrees_of_freedom", fit.degrees_of_freedom},
                        {"scaled_by_scatter", fit.scaled_by_scatter},
                        {"t_quantile_95", fit.t_quantile}};
    ordered_json residuals = ordered_json::array();
    for (const FitResidual& r : fit.residuals) {
        residuals.push_back({{"titrant_mL", r.titrant.mL()},
                             {"reading", r.reading},
                             {"fitted", r.fitted},
                             {"difference_in_u", r.weighted}});
    }
    record["residuals"] = std::move(residuals);
    record["highest_ionic_strength_mol_per_kg"] = fit.highest_ionic_strength_mol_per_kg;
    record["activity_model"] = fit.activity_model;
    record["pH_from_activity_model"] = fit.model_uncertainty;
    record["iterations"] = fit.iterations;
    record["warnings"] = warnings_json(fit.warnings);
    record["program"] = program_json(table);
    return record;
}

std::string fit_csv(const Fit& fit) {
    const std::string_view unit = reading_words[static_cast<std::size_t>(fit.problem.reading)];
    std::string text = fmt::format("volume_mL,{0},fitted_{0},difference_in_u\n", unit);
    for (const FitResidual& r : fit.residuals) {
        text += fmt::format("{},{},{},{}\n", r.titrant.mL(), r.reading, r.fitted, r.weighted);
    }
    return text;
}

}  // namespace carboy
