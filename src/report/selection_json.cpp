#include "report/selection_json.h"

#include <fmt/format.h>

#include "report/json.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

ordered_json words_json(const std::vector<Trait>& traits) {
    ordered_json list = ordered_json::array();
    for (const Trait trait : traits) {
        list.push_back(trait_word(trait));
    }
    return list;
}

ordered_json job_json(const Selection& selection) {
    const Job& job = selection.job;
    ordered_json record{{"pH", job.ph.value()}};
    if (job.ph_to) {
        record["pH_to"] = job.ph_to->value();
    }
    record["temperature_C"] = job.at.celsius();
    record["prepare_at_C"] = job.prepare_at.celsius();
    record[job.concentration.unit == ConcentrationUnit::mol_per_kg ? "concentration_mol_per_kg"
                                                                   : "concentration_mol_per_L"] =
        job.concentration.value;
    if (job.range) {
        record["range_C"] = {job.range->first.celsius(), job.range->second.celsius()};
    }
    record["acid_mol_per_L"] = selection.acid.mol_per_L();
    record["base_mol_per_L"] = selection.base.mol_per_L();
    record["load_assumed"] = selection.load_assumed;
    if (job.hold_ph) {
        record["hold_pH"] = *job.hold_ph;
    }
    if (job.most_ionic_strength) {
        record[job.most_ionic_strength->per_litre ? "ionic_strength_limit_mol_per_L"
                                                  : "ionic_strength_limit_mol_per_kg"] =
            job.most_ionic_strength->value_mol;
    }
    record["avoid"] = words_json(job.avoid);
    record["want"] = words_json(job.want);
    if (job.clear_from_nm) {
        record["clear_from_nm"] = *job.clear_from_nm;
    }
    return record;
}

ordered_json standing_json(const Standing& standing, std::size_t rank, const Table& table) {
    ordered_json record{{"rank", rank},
                        {"system", table.systems[standing.system].name},
                        {"counter_ion", name_of(table, standing.counter_ion)},
                        {"working_pK", standing.working_pK},
                        {"buffer_value_mol_per_kg", standing.buffer_value.mol_per_kg()},
                        {"ionic_strength_mol_per_kg", standing.ionic_strength.mol_per_kg()},
                        {"pH_per_K", standing.ph_per_kelvin},
                        {"pH_on_twofold_dilution", standing.ph_on_dilution},
                        {"pH_after_acid", standing.after_acid.value()},
                        {"pH_after_base", standing.after_base.value()}};
    if (standing.over_range) {
        record["pH_over_range"] = {standing.over_range->first.value(), standing.over_range->second.value()};
    }
    record["moves"] = {{"load_pH", standing.moves_by_load},
                       {"temperature_pH", standing.moves_by_temperature},
                       {"dilution_pH", standing.moves_by_dilution},
                       {"all_pH", standing.moves}};
    record["pH_expanded_k2"] = standing.ph_expanded_k2;
    record["reason"] = standing.reason;
    record["doubts"] = standing.doubts;
    record["drawbacks"] = standing.drawbacks;
    ordered_json facts = ordered_json::array();
    for (const std::uint16_t index : standing.facts) {
        const Fact& fact = table.facts[index];
        ordered_json one{{"trait", trait_word(fact.trait)}, {"holds", fact.holds}};
        if (fact.trait == Trait::uv_cutoff) {
            one["wavelength_nm"] = fact.wavelength_nm;
        }
        one["text"] = fact.text;
        one["source"] = table.sources[fact.source].citation;
        one["evidence"] = evidence_word(fact.evidence);
        facts.push_back(std::move(one));
    }
    record["facts"] = std::move(facts);
    return record;
}

std::string csv_cell(std::string_view text) {
    std::string cell = "\"";
    for (const char c : text) {
        cell += c;
        if (c == '"') {
            cell += '"';
        }
    }
    return cell + "\"";
}

}  // namespace

ordered_json selection_json(const Selection& selection, const Table& table) {
    ordered_json record{{"kind", "selection"}, {"job", job_json(selection)}};
    ordered_json ranked = ordered_json::array();
    for (const Standing& standing : selection.ranked) {
        ranked.push_back(standing_json(standing, ranked.size() + 1, table));
    }
    record["ranked"] = std::move(ranked);
    ordered_json mixed = ordered_json::array();
    for (const MixedBuffer& one : selection.mixed) {
        ordered_json names = ordered_json::array();
        for (const std::uint16_t system : one.systems) {
            names.push_back(table.systems[system].name);
        }
        mixed.push_back({{"systems", std::move(names)},
                         {"least_buffer_value_mol_per_kg", one.least_buffer_value.mol_per_kg()},
                         {"weakest_at_pH", one.weakest_at.value()},
                         {"reason", one.reason}});
    }
    record["mixed"] = std::move(mixed);
    ordered_json excluded = ordered_json::array();
    for (const Excluded& one : selection.excluded) {
        excluded.push_back({{"system", table.systems[one.system].name},
                            {"code", one.code},
                            {"reason", one.reason},
                            {"source", one.source.empty() ? ordered_json(nullptr) : ordered_json(one.source)},
                            {"evidence", evidence_word(one.evidence)}});
    }
    record["excluded"] = std::move(excluded);
    record["activity_model"] = selection.activity_model;
    record["program"] = program_json(table);
    return record;
}

std::string selection_csv(const Selection& selection, const Table& table) {
    std::string text =
        "rank,system,counter_ion,working_pK,buffer_value_mol_per_kg,ionic_strength_mol_per_kg,pH_per_K,"
        "pH_on_twofold_dilution,pH_after_acid,pH_after_base,moves_pH,excluded_by,reason,source\n";
    std::size_t rank = 0;
    for (const Standing& s : selection.ranked) {
        text += fmt::format("{},{},{},{},{},{},{},{},{},{},{},,{},\n", ++rank, csv_cell(table.systems[s.system].name),
                            csv_cell(name_of(table, s.counter_ion)), s.working_pK, s.buffer_value.mol_per_kg(),
                            s.ionic_strength.mol_per_kg(), s.ph_per_kelvin, s.ph_on_dilution, s.after_acid.value(),
                            s.after_base.value(), s.moves, csv_cell(s.reason));
    }
    for (const Excluded& one : selection.excluded) {
        text += fmt::format(",{},,,,,,,,,,{},{},{}\n", csv_cell(table.systems[one.system].name), one.code,
                            csv_cell(one.reason), csv_cell(one.source));
    }
    return text;
}

}  // namespace carboy
