#include "report/json.h"

#include <fmt/format.h>

#include "constants/sha256.h"
#include "report/cautions.h"
#include "report/steps.h"

namespace carboy {

using nlohmann::json;
using nlohmann::ordered_json;

ordered_json program_json(const Table& table) {
    return {{"name", "carboy"},
            {"version", CARBOY_VERSION},
            {"constants_version", table.version},
            {"constants_sha256", table.sha256}};
}

ordered_json warnings_json(const std::vector<Warning>& warnings) {
    ordered_json list = ordered_json::array();
    for (const Warning& warning : warnings) {
        list.push_back({{"code", warning.code}, {"message", warning.message}});
    }
    return list;
}

namespace {

ordered_json species_json(const Prediction& prediction) {
    ordered_json list = ordered_json::array();
    for (const PredictedSpecies& species : prediction.species) {
        list.push_back({{"system", species.owner},
                        {"formula", species.formula},
                        {"charge", species.charge},
                        {"molality_mol_per_kg", species.molality.mol_per_kg()},
                        {"activity_coefficient", species.activity_coefficient}});
    }
    return list;
}

ordered_json constants_json(const Prediction& prediction, const Table& table) {
    ordered_json list = ordered_json::array();
    for (const UsedConstant& used : prediction.constants) {
        const System& system = table.systems[used.system];
        const Figure& figure = system.steps[used.step].pK_25C;
        list.push_back({{"system", system.name},
                        {"step", used.step + 1},
                        {"pK_25C", used.pK_25C},
                        {"pK", used.pK},
                        {"source", table.sources[figure.source].citation},
                        {"evidence", evidence_word(figure.evidence)}});
    }
    return list;
}

std::string_view unit_code(ConcentrationUnit unit) {
    switch (unit) {
        case ConcentrationUnit::mol_per_L:
            return "mol/L";
        case ConcentrationUnit::mol_per_kg:
            return "mol/kg";
        case ConcentrationUnit::g_per_L:
            return "g/L";
        case ConcentrationUnit::percent_w_w:
            return "% w/w";
        case ConcentrationUnit::percent_v_v:
            return "% v/v";
        case ConcentrationUnit::normal:
            return "N";
    }
    return {};
}

/// What narrows the recipe; keys only where something does, so that ids of plain requests stay as they are.
void add_constraints(json& canonical, const Request& request, const Table& table) {
    const Constraints& constraints = request.constraints;
    const auto names = [&](const char* key, const std::vector<std::uint16_t>& reagents) {
        for (const std::uint16_t reagent : reagents) {
            canonical[key].push_back(table.reagents[reagent].name);
        }
    };
    names("use", constraints.use);
    names("avoid", constraints.avoid);
    for (const ComponentId ion : constraints.without) {
        canonical["without"].push_back(name_of(table, ion));
    }
    for (const auto& total : constraints.totals) {
        canonical["totals"].push_back({{"ion", name_of(table, total.ion)},
                                       {"concentration", total.concentration.value},
                                       {"unit", unit_code(total.concentration.unit)}});
    }
    if (constraints.most_weighings) {
        canonical["most_weighings"] = *constraints.most_weighings;
    }
    if (request.balance) {
        canonical["balance_g"] = {request.balance->readability.g(), request.balance->minimum.g()};
    }
    if (request.measure_with) {
        canonical["measure_with"] = table.vessels[*request.measure_with].name;
    }
    if (request.strength != 1) {
        canonical["strength"] = request.strength;
    }
}

/// The request as understood, whatever its spelling was; keys sorted.
json canonical_request(const Plan& plan, const Table& table) {
    const Request& request = plan.request;
    json buffers = json::array();
    for (const BufferItem& item : request.buffers) {
        json buffer{{"system", name_of(table, item.system)},
                    {"concentration", item.concentration.value},
                    {"unit", unit_code(item.concentration.unit)}};
        if (item.counter_ion) {
            buffer["counter_ion"] = name_of(table, *item.counter_ion);
        }
        if (item.named_form) {
            buffer["named_form"] = table.reagents[*item.named_form].name;
        }
        buffers.push_back(std::move(buffer));
    }
    json additives = json::array();
    for (const AdditiveItem& item : request.additives) {
        additives.push_back({{"reagent", table.reagents[item.reagent].name},
                             {"concentration", item.concentration.value},
                             {"unit", unit_code(item.concentration.unit)}});
    }
    json canonical{{"buffers", std::move(buffers)},
                   {"additives", std::move(additives)},
                   {"use_at_C", request.use_at.celsius()},
                   {"prepare_at_C", request.prepare_at.celsius()},
                   {"volume_L", request.volume.L()},
                   {"route", route_word(request.route)},
                   {"activity_model", plan.predicted.activity_model}};
    add_constraints(canonical, request, table);
    if (request.ph) {
        canonical["pH"] = request.ph->value();
    }
    if (request.ionic_strength) {
        canonical["ionic_strength"] = request.ionic_strength->value_mol;
        canonical["ionic_strength_per_litre"] = request.ionic_strength->per_litre;
    }
    return canonical;
}

ordered_json target_json(const Request& request) {
    ordered_json target = ordered_json::object();
    if (request.ph) {
        target["pH"] = request.ph->value();
    }
    target["temperature_C"] = request.use_at.celsius();
    if (request.ionic_strength) {
        target[request.ionic_strength->per_litre ? "ionic_strength_mol_per_L" : "ionic_strength_mol_per_kg"] =
            request.ionic_strength->value_mol;
    }
    return target;
}

std::string_view purpose_code(Purpose purpose) {
    switch (purpose) {
        case Purpose::buffer:
            return "buffer";
        case Purpose::titrant:
            return "titrant";
        case Purpose::additive:
            return "additive";
        case Purpose::ionic_strength:
            return "ionic_strength";
        case Purpose::ion_total:
            return "ion_total";
    }
    return {};
}

ordered_json article_json(const Reagent& reagent) {
    // A solution of several reagents has neither formula nor molar mass.
    const bool substance = reagent.molar_mass_g_per_mol > 0;
    return {{"reagent", reagent.name},
            {"formula", substance ? ordered_json(reagent.formula) : ordered_json(nullptr)},
            {"cas", reagent.cas.empty() ? ordered_json(nullptr) : ordered_json(reagent.cas)},
            {"molar_mass_g_per_mol", substance ? ordered_json(reagent.molar_mass_g_per_mol) : ordered_json(nullptr)}};
}

ordered_json text_or_null(const std::string& text) {
    return text.empty() ? ordered_json(nullptr) : ordered_json(text);
}

void add_bottle(ordered_json& entry, const Bottle* bottle) {
    entry["shelf_id"] = bottle != nullptr ? ordered_json(bottle->id) : ordered_json(nullptr);
    if (bottle != nullptr) {
        entry["lot"] = text_or_null(bottle->lot);
        entry["expires"] = bottle->expires ? ordered_json(bottle->expires->text()) : ordered_json(nullptr);
        entry["location"] = text_or_null(bottle->location);
    }
}

ordered_json stocks_json(const Plan& plan, const Table& table) {
    ordered_json list = ordered_json::array();
    for (const Stock& stock : plan.stocks) {
        ordered_json entry = article_json(table.reagents[stock.reagent]);
        if (stock.mass.g() > 0) {
            entry["mass_g"] = stock.mass.g();
        } else {
            entry["volume_mL"] = stock.liquid.mL();
        }
        entry["fill_to_mL"] = stock.volume.mL();
        entry["concentration_mol_per_L"] = stock.strength.mol_per_L();
        add_bottle(entry, stock.bottle);
        list.push_back(std::move(entry));
    }
    return list;
}

ordered_json weigh_json(const Plan& plan, const Table& table) {
    ordered_json list = ordered_json::array();
    for (const Weighing& item : plan.weigh) {
        const Reagent& reagent = table.reagents[item.reagent];
        ordered_json entry = article_json(reagent);
        entry["assay"] = reagent.counted_assay();
        entry["mass_g"] = item.mass.g();
        entry["role"] = purpose_code(item.purpose);
        add_bottle(entry, item.bottle);
        list.push_back(std::move(entry));
    }
    return list;
}

ordered_json measure_json(const Plan& plan, const Table& table) {
    ordered_json list = ordered_json::array();
    for (const Measurement& item : plan.measure) {
        ordered_json entry = article_json(table.reagents[item.reagent]);
        entry["concentration_mol_per_L"] = item.strength.mol_per_L();
        entry["volume_mL"] = item.volume.mL();
        entry["role"] = purpose_code(item.purpose);
        if (item.vessel) {
            entry["vessel"] = table.vessels[*item.vessel].name;
        }
        if (item.stock) {
            entry["stock"] = *item.stock;
        }
        add_bottle(entry, item.bottle);
        list.push_back(std::move(entry));
    }
    return list;
}

ordered_json ways_json(const Plan& plan) {
    ordered_json list = ordered_json::array();
    for (const Way& way : plan.ways) {
        list.push_back({{"route", route_word(way.route)}, {"possible", way.possible}, {"reason", way.reason}});
    }
    return list;
}

ordered_json readings_json(const Plan& plan) {
    ordered_json list = ordered_json::array();
    for (const Reading& reading : plan.readings) {
        list.push_back({{"after", stage_word(reading.stage)},
                        {"volume_mL", reading.volume.mL()},
                        {"temperature_C", plan.request.prepare_at.celsius()},
                        {"pH", reading.ph.value()},
                        {"pH_expanded_k2", reading.uncertainty_k2}});
    }
    return list;
}

ordered_json counter_ions_json(const Plan& plan, const Table& table) {
    ordered_json list = ordered_json::array();
    for (const CounterIonChoice& choice : plan.counter_ions) {
        list.push_back({{"system", name_of(table, choice.system)},
                        {"counter_ion", name_of(table, choice.counter_ion)},
                        {"named_by_label", choice.named_by_label}});
    }
    return list;
}

void add_cautions(ordered_json& record, const Plan& plan, const Table& table) {
    const Cautions all = cautions_of(plan, table);
    ordered_json hazards = ordered_json::array();
    for (const std::uint16_t index : all.hazardous) {
        const Reagent& reagent = table.reagents[index];
        ordered_json statements = ordered_json::array();
        for (const std::uint16_t statement : reagent.ghs.statements) {
            statements.push_back(table.hazards[statement].code);
        }
        hazards.push_back({{"reagent", reagent.name},
                           {"signal_word", reagent.ghs.signal_word.empty() ? ordered_json(nullptr)
                                                                           : ordered_json(reagent.ghs.signal_word)},
                           {"statements", std::move(statements)}});
    }
    record["cautions"] = std::move(hazards);
    ordered_json advice = ordered_json::array();
    for (const Advice& one : all.advice) {
        advice.push_back({{"about", one.subjects}, {"text", table.cautions[one.caution].text}});
    }
    record["advice"] = std::move(advice);
}

}  // namespace

ordered_json prediction_json(const Prediction& prediction, const Table& table) {
    ordered_json record{{"kind", "prediction"},
                        {"temperature_C", prediction.temperature.celsius()},
                        {"pH", prediction.ph.value()},
                        {"ionic_strength_mol_per_kg", prediction.ionic_strength.mol_per_kg()},
                        {"buffer_value_mol_per_kg", prediction.buffer_value.mol_per_kg()},
                        {"osmolality_ideal_osmol_per_kg", prediction.particles.mol_per_kg()},
                        {"charge_residual_mol_per_kg", prediction.charge_residual.mol_per_kg()}};
    record["hand_estimate_pH"] =
        prediction.hand_estimate ? ordered_json(prediction.hand_estimate->value()) : ordered_json(nullptr);
    record["activity"] = {{"model", prediction.activity_model},
                          {"debye_huckel_A", prediction.water.debye_huckel_A},
                          {"pKw", prediction.water.pKw}};
    record["species"] = species_json(prediction);
    record["constants"] = constants_json(prediction, table);
    record["uncertainty"] = {{"pH_expanded_k2", prediction.uncertainty.expanded_k2},
                             {"pH_from_constants", prediction.uncertainty.constants},
                             {"pH_from_activity_model", prediction.uncertainty.activity},
                             {"pH_from_what_is_left_out", prediction.uncertainty.unmodelled},
                             {"pH_reproducibility", prediction.uncertainty.reproducibility}};
    record["warnings"] = warnings_json(prediction.warnings);
    record["program"] = program_json(table);
    return record;
}

std::string recipe_id(const Plan& plan, const Table& table) {
    json canonical = canonical_request(plan, table);
    canonical["constants_sha256"] = table.sha256;
    if (!plan.shelf_sha256.empty()) {
        canonical["shelf_sha256"] = plan.shelf_sha256;
    }
    return sha256_hex(canonical.dump());
}

ordered_json recipe_json(const Plan& plan, const Table& table) {
    const Request& request = plan.request;
    ordered_json record{{"kind", "recipe"}};
    if (!request.id.empty()) {
        record["id"] = request.id;
    }
    record["recipe_id"] = recipe_id(plan, table);
    record["label"] = request.label;
    record["volume_L"] = request.volume.L();
    record["target"] = target_json(request);
    record["prepare_at_C"] = request.prepare_at.celsius();
    record["route"] = route_word(plan.route);
    record["counter_ions"] = counter_ions_json(plan, table);
    if (request.strength != 1) {
        record["strength"] = request.strength;
        record["working_volume_mL"] = request.strength * request.volume.mL();
    }
    if (!plan.stocks.empty()) {
        record["make_first"] = stocks_json(plan, table);
    }
    record["weigh"] = weigh_json(plan, table);
    record["measure"] = measure_json(plan, table);
    record["fill_to_mL"] = request.volume.mL();
    record["readings"] = readings_json(plan);
    record["steps"] = steps_of(plan, table);
    record["predicted"] = prediction_json(plan.predicted, table);
    if (plan.as_bottled) {
        record["as_bottled"] = prediction_json(*plan.as_bottled, table);
    }
    if (plan.rounding) {
        record["rounding"] = {{"pH_change", plan.rounding->ph},
                              {"largest_relative_change", plan.rounding->largest_relative},
                              {"reagent", table.reagents[plan.rounding->largest_reagent].name}};
    }
    record["ways"] = ways_json(plan);
    add_cautions(record, plan, table);
    record["warnings"] = warnings_json(plan.warnings);
    record["program"] = program_json(table);
    return record;
}

ordered_json error_json(const Error& error, std::string_view id) {
    ordered_json record{{"kind", "error"}};
    if (!id.empty()) {
        record["id"] = id;
    }
    record["code"] = error.code();
    record["message"] = error.message();
    record["where"] = error.where();
    record["help"] = error.help();
    return record;
}

}  // namespace carboy
