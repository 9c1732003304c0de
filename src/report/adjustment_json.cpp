#include "report/adjustment_json.h"

#include "report/adjustment_text.h"
#include "report/json.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

ordered_json notes_json(const std::vector<Warning>& notes) {
    ordered_json list = ordered_json::array();
    for (const Warning& note : notes) {
        list.push_back({{"code", note.code}, {"message", note.message}});
    }
    return list;
}

ordered_json or_null(const std::optional<PH>& ph) {
    return ph ? ordered_json(ph->value()) : ordered_json(nullptr);
}

ordered_json article_json(const Reagent& reagent) {
    return {{"reagent", reagent.name},
            {"formula", reagent.formula},
            {"cas", reagent.cas.empty() ? ordered_json(nullptr) : ordered_json(reagent.cas)}};
}

ordered_json titrant_json(const Titrant& titrant, const Table& table) {
    ordered_json record = article_json(table.reagents[titrant.reagent]);
    record["concentration_mol_per_L"] =
        titrant.strength ? ordered_json(titrant.strength->mol_per_L()) : ordered_json(nullptr);
    return record;
}

/// Keys of an amount of titrant: by volume, or by mass where it is weighed.
void add_amount(ordered_json& record, const std::string& name, const Titrant& titrant, Amount amount,
                const Table& table) {
    if (titrant.strength) {
        record[name + "_mL"] = titrant_volume(titrant, amount).mL();
    } else {
        record[name + "_g"] = titrant_mass(titrant, amount, table).g();
    }
}

ordered_json correction_json(const Correction& correction, const Table& table) {
    ordered_json record{{"titrant", titrant_json(correction.titrant, table)}, {"add_mol", correction.amount.mol()}};
    add_amount(record, "add", correction.titrant, correction.amount, table);
    add_amount(record, "add_at_once", correction.titrant, correction.at_once, table);
    add_amount(record, "add_at_least", correction.titrant, correction.least, table);
    add_amount(record, "add_at_most", correction.titrant, correction.most, table);
    record["stop_reading_pH"] = correction.stop_reading.value();
    record["volume_after_titrant_mL"] = correction.volume_then.mL();
    record["finished_volume_mL"] = correction.finished_volume.mL();
    record["finished_reading_pH"] = correction.finished_reading.value();
    record["concentration_off_percent"] = 100 * correction.concentration_off;
    record["predicted"] = prediction_json(correction.predicted, table);
    return record;
}

ordered_json mistake_json(const Mistake& mistake, const Adjustment& adjustment, const Table& table) {
    const auto article = [&](const std::optional<std::uint16_t>& index) {
        return index ? ordered_json(table.reagents[*index].name) : ordered_json(nullptr);
    };
    ordered_json record{
        {"kind", mistake_word(mistake.kind)},
        {"message", mistake_text(mistake, adjustment, table)},
        {"reagent", article(mistake.reagent)},
        {"taken", article(mistake.taken)},
        {"factor", mistake.factor ? ordered_json(*mistake.factor) : ordered_json(nullptr)},
        {"temperature_C", mistake.temperature ? ordered_json(mistake.temperature->celsius()) : ordered_json(nullptr)},
        {"reading_pH", mistake.reading.value()},
        {"reading_before_pH", or_null(mistake.before)},
        {"reading_pH_expanded_k2", mistake.reading_expanded_k2},
        {"consistent", mistake.consistent},
        {"plausibility", mistake.plausibility}};
    record["correction"] = nullptr;
    if (mistake.correction) {
        ordered_json correction{{"add_mol", mistake.correction->amount.mol()}};
        add_amount(correction, "add", mistake.correction->titrant, mistake.correction->amount, table);
        correction["stop_reading_pH"] = mistake.correction->stop_reading.value();
        correction["concentration_off_percent"] = 100 * mistake.correction->concentration_off;
        record["correction"] = std::move(correction);
    }
    record["weigh_in"] = nullptr;
    if (mistake.to_weigh_in) {
        ordered_json weighing = article_json(table.reagents[mistake.to_weigh_in->reagent]);
        weighing["mass_g"] = mistake.to_weigh_in->mass.g();
        record["weigh_in"] = std::move(weighing);
    }
    return record;
}

}  // namespace

ordered_json adjustment_json(const Adjustment& adjustment, const Table& table) {
    const Request& request = adjustment.plan.request;
    const double litres = adjustment.present_volume.L();
    ordered_json record{{"kind", "adjustment"},
                        {"recipe_id", recipe_id(adjustment.plan, table)},
                        {"label", request.label},
                        {"volume_L", request.volume.L()},
                        {"present_volume_mL", adjustment.present_volume.mL()},
                        {"target", {{"pH", request.ph->value()}, {"temperature_C", request.use_at.celsius()}}},
                        {"prepare_at_C", request.prepare_at.celsius()},
                        {"reading_pH", adjustment.batch.reading.value()},
                        {"expected_pH", adjustment.expected.value()},
                        {"expected_pH_expanded_k2", adjustment.expected_expanded_k2},
                        {"reading_before_pH", or_null(adjustment.batch.reading_before)},
                        {"expected_before_pH", or_null(adjustment.expected_before)},
                        {"off",
                         {{"what", off_by_word(adjustment.off_by)},
                          {"amount_mol", adjustment.off.mol()},
                          {"amount_mmol_per_L", 1e3 * adjustment.off.mol() / litres}}},
                        {"verdict", verdict_word(adjustment.verdict)},
                        {"reasons", notes_json(adjustment.reasons)}};
    record["correction"] =
        adjustment.correction ? correction_json(*adjustment.correction, table) : ordered_json(nullptr);
    ordered_json mistakes = ordered_json::array();
    for (const Mistake& mistake : adjustment.mistakes) {
        mistakes.push_back(mistake_json(mistake, adjustment, table));
    }
    record["mistakes"] = std::move(mistakes);
    record["warnings"] = notes_json(adjustment.warnings);
    record["program"] = prediction_json(adjustment.plan.predicted, table).at("program");
    return record;
}

}  // namespace carboy
