#include "carboy/request_json.h"

#include <algorithm>
#include <initializer_list>
#include <string>
#include <vector>

#include <fmt/format.h>
#include <fmt/ranges.h>
#include <nlohmann/json.hpp>

#include "carboy/constraint_words.h"
#include "carboy/error.h"
#include "carboy/notation.h"

#include "json/strict_json.h"
#include "notation/reagent_name.h"

namespace carboy {

using nlohmann::json;

namespace {

Error fault(std::string code, const std::string& message, std::string where, std::string help = {}) {
    return {ErrorKind::input, std::move(code), message, std::move(where), std::move(help)};
}

/// An object being read: knows its path, and that every key must be one of those asked for.
class Reader {
public:
    Reader(const json& object, std::string path, std::initializer_list<const char*> keys)
        : object_(object), path_(std::move(path)) {
        if (!object.is_object()) {
            throw fault("wrong_type", "an object is expected here", path_);
        }
        const std::vector<std::string> known(keys.begin(), keys.end());
        for (const auto& [key, value] : object.items()) {
            if (std::find(known.begin(), known.end(), key) == known.end()) {
                const auto near = nearest_words(key, known);
                throw fault("unknown_key", fmt::format("the key '{}' is not known here", key), path_,
                            near.empty() ? fmt::format("known keys: {}", fmt::join(known, ", "))
                                         : fmt::format("did you mean '{}'?", near.front()));
            }
        }
    }

    bool has(const char* key) const { return object_.contains(key); }
    std::string path_to(const char* key) const { return path_ + ", " + key; }

    std::string text(const char* key) const {
        const json& value = at(key);
        if (!value.is_string()) {
            throw fault("wrong_type", fmt::format("'{}' must be text in quotes", key), path_to(key),
                        "quantities carry their unit, as \"50 mmol/L\"");
        }
        return value.get<std::string>();
    }

    double number(const char* key) const {
        const json& value = at(key);
        if (!value.is_number()) {
            throw fault("wrong_type", fmt::format("'{}' must be a number", key), path_to(key));
        }
        return value.get<double>();
    }

    const json& array(const char* key) const {
        const json& value = at(key);
        if (!value.is_array()) {
            throw fault("wrong_type", fmt::format("'{}' must be an array", key), path_to(key));
        }
        return value;
    }

    const json& at(const char* key) const {
        if (!has(key)) {
            throw fault("missing_key", fmt::format("'{}' is missing", key), path_);
        }
        return object_.at(key);
    }

private:
    const json& object_;
    std::string path_;
};

ComponentId counter_ion(const Reader& reader, const char* key, const Table& table) {
    const std::string name = reader.text(key);
    if (const auto ion = find_component(table, name)) {
        return *ion;
    }
    const auto near = nearest_names(name, table, 1);
    throw fault("unknown_name", fmt::format("the table has no ion called '{}'", name), reader.path_to(key),
                near.empty() ? "" : fmt::format("did you mean {}?", near.front()));
}

/// What `system` holds: a system with or without its counter-ion, or the article to make it from.
BufferItem named_buffer(const Reader& reader, const Table& table) {
    const std::string name = reader.text("system");
    BufferItem item;
    item.concentration = read_concentration(reader.text("concentration"), reader.path_to("concentration"));
    if (const auto named = read_buffer_name(name, table)) {
        item.system = named->system;
        item.counter_ion = named->counter_ion;
        item.named_form = form_named(table, name, named->system);
        return item;
    }
    const Reagent* reagent = reagent_named(table, name);
    const auto brought = reagent == nullptr ? std::nullopt : buffer_brought_by(table, *reagent);
    if (!brought) {
        const auto near = nearest_buffer_names(name, table, 1);
        throw fault("unknown_name", fmt::format("the table has no system called '{}'", name), reader.path_to("system"),
                    near.empty() ? "'carboy constants list' shows every system"
                                 : fmt::format("did you mean {}?", near.front()));
    }
    item.system = brought->buffer.system;
    item.counter_ion = brought->buffer.counter_ion;
    item.named_form = article_meant(table, *reagent, name, item.concentration.unit);
    item.concentration.value *= brought->count;
    return item;
}

BufferItem read_buffer(const json& value, const std::string& path, const Table& table) {
    const Reader reader(value, path, {"system", "concentration", "cation", "anion"});
    BufferItem item = named_buffer(reader, table);
    if (item.concentration.unit != ConcentrationUnit::mol_per_L &&
        item.concentration.unit != ConcentrationUnit::mol_per_kg) {
        throw fault("unusable_unit", "a buffer's concentration is given in mol/L or mol/kg",
                    reader.path_to("concentration"));
    }
    for (const char* key : {"cation", "anion"}) {
        if (reader.has(key)) {
            const ComponentId ion = counter_ion(reader, key, table);
            // The salt that the name is of holds as long as its ion does.
            item.named_form = ion == item.counter_ion ? item.named_form : std::nullopt;
            item.counter_ion = ion;
        }
    }
    return item;
}

AdditiveItem read_additive(const json& value, const std::string& path, const Table& table) {
    const Reader reader(value, path, {"reagent", "concentration"});
    AdditiveItem item;
    item.reagent = read_reagent(reader.text("reagent"), table, reader.path_to("reagent"));
    item.concentration = read_concentration(reader.text("concentration"), reader.path_to("concentration"));
    return item;
}

IonicStrengthTarget read_ionic_strength(const Reader& target) {
    const Concentration value = read_concentration(target.text("ionic_strength"), target.path_to("ionic_strength"));
    if (value.unit != ConcentrationUnit::mol_per_L && value.unit != ConcentrationUnit::mol_per_kg) {
        throw fault("unusable_unit", "an ionic strength is given in mol/L or mol/kg", target.path_to("ionic_strength"));
    }
    return {value.value, value.unit == ConcentrationUnit::mol_per_L};
}

void read_spelt_out(const Reader& reader, Request& request, const std::string& where, const Table& table) {
    std::size_t index = 0;
    for (const json& value : reader.array("buffers")) {
        request.buffers.push_back(read_buffer(value, fmt::format("{}, buffers[{}]", where, index++), table));
    }
    if (request.buffers.empty()) {
        throw fault("missing_buffer", "'buffers' is empty", where + ", buffers", "name at least one system");
    }
    index = 0;
    if (reader.has("additives")) {
        for (const json& value : reader.array("additives")) {
            request.additives.push_back(read_additive(value, fmt::format("{}, additives[{}]", where, index++), table));
        }
    }
    const Reader target(reader.at("target"), where + ", target", {"pH", "temperature", "ionic_strength"});
    const double ph = target.number("pH");
    if (!(ph >= -2 && ph <= 16)) {
        throw fault("ph_out_of_range", fmt::format("pH {:g} is outside -2 to 16", ph), where + ", target, pH");
    }
    request.ph = PH(ph);
    if (target.has("temperature")) {
        request.use_at = read_temperature(target.text("temperature"), where + ", target, temperature");
    }
    if (target.has("ionic_strength")) {
        request.ionic_strength = read_ionic_strength(target);
    }
}

Constraints read_constraints(const json& value, const std::string& path, const Table& table) {
    const Reader reader(value, path, {"only", "without", "use", "avoid", "hold", "most_weighings"});
    Constraints constraints;
    const auto each = [&](const char* key, auto take) {
        if (!reader.has(key)) {
            return;
        }
        for (const json& name : reader.array(key)) {
            if (!name.is_string()) {
                throw fault("wrong_type", fmt::format("'{}' lists names in quotes", key), reader.path_to(key));
            }
            take(name.get<std::string>(), reader.path_to(key));
        }
    };
    each("only", [&](const std::string& name, const std::string& at) {
        allow_only(constraints, read_ion(name, table, at), table);
    });
    each("without", [&](const std::string& name, const std::string& at) {
        constraints.without.push_back(read_ion(name, table, at));
    });
    each("use", [&](const std::string& name, const std::string& at) {
        constraints.use.push_back(read_reagent(name, table, at));
    });
    each("avoid", [&](const std::string& name, const std::string& at) {
        constraints.avoid.push_back(read_reagent(name, table, at));
    });
    each("hold", [&](const std::string& text, const std::string& at) {
        constraints.totals.push_back(read_ion_total(text, table, at));
    });
    if (reader.has("most_weighings")) {
        const json& most = reader.at("most_weighings");
        if (!most.is_number_unsigned()) {
            throw fault("wrong_type", "'most_weighings' must be a whole number", reader.path_to("most_weighings"));
        }
        constraints.most_weighings = most.get<std::size_t>();
    }
    return constraints;
}

Route read_route(const Reader& reader) {
    const std::string word = reader.text("route");
    if (const auto route = route_of(word)) {
        return *route;
    }
    throw fault("unknown_route", fmt::format("there is no route '{}'", word), reader.path_to("route"),
                "the routes are any, titrated, salts, stocks and dilution");
}

/// A request read from its document.
Request request_of(const json& document, const std::string& where, const Table& table) {
    const Reader reader(document, where,
                        {"id", "label", "buffers", "additives", "target", "volume", "prepare_at", "route",
                         "constraints", "balance", "minimum_mass", "measure_with"});
    Request request;
    if (reader.has("label")) {
        for (const char* key : {"buffers", "additives", "target"}) {
            if (reader.has(key)) {
                throw fault("label_and_parts", fmt::format("a request has a label or '{}', not both", key),
                            reader.path_to(key));
            }
        }
        request = request_from_label(reader.text("label"), table, reader.path_to("label"));
    } else {
        read_spelt_out(reader, request, where, table);
    }
    if (reader.has("id")) {
        request.id = reader.text("id");
    }
    request.volume = read_volume(reader.text("volume"), reader.path_to("volume"));
    if (reader.has("prepare_at")) {
        request.prepare_at = read_temperature(reader.text("prepare_at"), reader.path_to("prepare_at"));
    }
    if (reader.has("route")) {
        request.route = read_route(reader);
    }
    if (reader.has("constraints")) {
        request.constraints = read_constraints(reader.at("constraints"), reader.path_to("constraints"), table);
    }
    if (reader.has("balance")) {
        const std::string minimum = reader.has("minimum_mass") ? reader.text("minimum_mass") : std::string();
        request.balance = read_balance(reader.text("balance"),
                                       minimum.empty() ? std::nullopt : std::optional<std::string_view>(minimum),
                                       reader.path_to("balance"));
    } else if (reader.has("minimum_mass")) {
        throw fault("missing_key", "'minimum_mass' belongs to a 'balance'", reader.path_to("minimum_mass"),
                    "give the balance's readability, such as \"0.1 mg\"");
    }
    if (reader.has("measure_with")) {
        request.measure_with = read_vessel(reader.text("measure_with"), table, reader.path_to("measure_with"));
    }
    return request;
}

}  // namespace

Request request_from_label(std::string_view label, const Table& table, std::string_view where) {
    Label read = read_label(label, table, where);
    Request request;
    request.label = std::string(label);
    request.buffers = std::move(read.buffers);
    request.additives = std::move(read.additives);
    request.ph = read.ph;
    request.use_at = read.ph_at.value_or(Temperature{});
    request.ionic_strength = read.ionic_strength;
    request.strength = read.strength;
    return request;
}

Request read_request(std::string_view json_text, const Table& table, std::string_view where) {
    const json document = parse_strictly(json_text, where);
    try {
        return request_of(document, std::string(where), table);
    } catch (Error& error) {
        // Whoever reads many answers must know which request went wrong.
        if (document.is_object() && document.contains("id") && document.at("id").is_string()) {
            error.with_id(document.at("id").get<std::string>());
        }
        throw;
    }
}

}  // namespace carboy
