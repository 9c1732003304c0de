#include "carboy/booking.h"

#include <algorithm>
#include <cmath>
#include <map>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "carboy/error.h"
#include "carboy/notation.h"

#include "json/strict_json.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

/// Grams or millilitres.
struct Stated {
    double value = 0;
    bool liquid = false;
};

std::string written(const Stated& quantity) {
    // A hundredth of a milligram is what the finest usual balance reads; rounding there keeps sums from growing digits.
    return fmt::format("{} {}", std::round(quantity.value * 1e5) / 1e5, quantity.liquid ? "mL" : "g");
}

Stated read_quantity(const std::string& text, bool liquid, std::string_view where) {
    if (text == "0") {
        return {0, liquid};
    }
    // What a booking leaves behind may be nothing: `0 g`.
    if (text == "0 g" || text == "0 mL") {
        return {0, text == "0 mL"};
    }
    return liquid ? Stated{read_volume(text, where).mL(), true} : Stated{read_mass(text, where).g(), false};
}

Error fault(ErrorKind kind, const char* code, const std::string& message, std::string where, std::string help) {
    return {kind, code, message, std::move(where), std::move(help)};
}

ordered_json parsed_shelf(std::string_view text) {
    parse_strictly(text, "shelf");
    ordered_json shelf = ordered_json::parse(text);
    if (!shelf.is_object() || !shelf.contains("bottles") || !shelf.at("bottles").is_array()) {
        throw fault(ErrorKind::data, "invalid_shelf", "this is no shelf", "shelf",
                    "'carboy shelf check FILE' tells more");
    }
    if (!shelf.contains("journal")) {
        shelf["journal"] = ordered_json::array();
    }
    return shelf;
}

ordered_json& bottle_of(ordered_json& shelf, const std::string& id) {
    for (ordered_json& bottle : shelf.at("bottles")) {
        if (bottle.is_object() && bottle.value("id", std::string()) == id) {
            return bottle;
        }
    }
    throw fault(ErrorKind::input, "unknown_bottle", fmt::format("there is no bottle '{}' on this shelf", id), "recipe",
                "plan the recipe with this shelf");
}

std::vector<ordered_json> parsed_recipes(std::string_view lines) {
    std::vector<ordered_json> recipes;
    const auto take = [&](std::string_view text) {
        parse_strictly(text, "recipe");
        recipes.push_back(ordered_json::parse(text));
        const ordered_json& recipe = recipes.back();
        if (!recipe.is_object() || recipe.value("kind", std::string()) != "recipe") {
            throw fault(ErrorKind::input, "not_a_recipe", "this is not a recipe", "recipe",
                        "give what 'carboy recipe --shelf FILE --format json' writes");
        }
    };
    while (!lines.empty()) {
        const auto end = lines.find('\n');
        const std::string_view line = lines.substr(0, end);
        if (line.find_first_not_of(" \t\r") != std::string_view::npos) {
            take(line);
        }
        lines = end == std::string_view::npos ? std::string_view{} : lines.substr(end + 1);
    }
    if (recipes.empty()) {
        throw fault(ErrorKind::input, "not_a_recipe", "there is no recipe to book", "recipe",
                    "give what 'carboy recipe --shelf FILE --format json' writes");
    }
    return recipes;
}

/// What the recipes take of each bottle, in order of first use.
std::vector<std::pair<std::string, Stated>> taken_by(const std::vector<ordered_json>& recipes) {
    std::vector<std::pair<std::string, Stated>> taken;
    const auto add = [&](const ordered_json& item) {
        if (!item.contains("shelf_id") || !item.at("shelf_id").is_string()) {
            return;
        }
        const std::string id = item.at("shelf_id").get<std::string>();
        const bool liquid = !item.contains("mass_g");
        const double value = item.at(liquid ? "volume_mL" : "mass_g").get<double>();
        const auto known = std::find_if(taken.begin(), taken.end(), [&](const auto& one) { return one.first == id; });
        if (known == taken.end()) {
            taken.push_back({id, {value, liquid}});
        } else {
            known->second.value += value;
        }
    };
    for (const ordered_json& recipe : recipes) {
        for (const char* list : {"make_first", "weigh", "measure"}) {
            if (recipe.contains(list)) {
                std::for_each(recipe.at(list).begin(), recipe.at(list).end(), add);
            }
        }
    }
    return taken;
}

ordered_json ids_of(const std::vector<ordered_json>& recipes) {
    ordered_json ids = ordered_json::array();
    for (const ordered_json& recipe : recipes) {
        ordered_json one{{"recipe_id", recipe.value("recipe_id", std::string())}};
        if (recipe.contains("id")) {
            one["id"] = recipe.at("id");
        }
        ids.push_back(std::move(one));
    }
    return ids;
}

}  // namespace

Booked book(std::string_view shelf_json, std::string_view recipes_json, std::optional<Date> on, bool again) {
    ordered_json shelf = parsed_shelf(shelf_json);
    const auto recipes = parsed_recipes(recipes_json);
    ordered_json ids = ids_of(recipes);
    Booked booked;
    ordered_json& journal = shelf.at("journal");
    for (std::size_t i = 0; i < journal.size(); ++i) {
        if (!again && journal[i].at("recipes") == ids && !journal[i].value("undone", false)) {
            booked.number = i + 1;
            booked.already = true;
            return booked;
        }
    }
    ordered_json items = ordered_json::array();
    std::string missing;
    for (const auto& [id, quantity] : taken_by(recipes)) {
        ordered_json& bottle = bottle_of(shelf, id);
        Taking taking{id, written(quantity), {}};
        if (bottle.contains("left")) {
            Stated left = read_quantity(bottle.at("left").get<std::string>(), quantity.liquid, "shelf, " + id);
            if (left.value < quantity.value - 1e-5) {
                missing += fmt::format("{}{}: {} needed, {} left", missing.empty() ? "" : "; ", id, written(quantity),
                                       written(left));
                continue;
            }
            left.value = std::max(left.value - quantity.value, 0.0);
            taking.left = written(left);
            bottle["left"] = taking.left;
        }
        items.push_back({{"bottle", id}, {"amount", taking.amount}});
        booked.takings.push_back(std::move(taking));
    }
    if (!missing.empty()) {
        throw fault(ErrorKind::no_recipe, "short_on_shelf", fmt::format("nothing is booked: {}", missing), "shelf",
                    "plan the recipe anew with this shelf");
    }
    if (items.empty()) {
        throw fault(ErrorKind::input, "unknown_bottle", "the recipe takes nothing from a shelf", "recipe",
                    "plan it with --shelf");
    }
    ordered_json entry;
    if (on) {
        entry["on"] = on->text();
    }
    entry["recipes"] = std::move(ids);
    entry["took"] = std::move(items);
    journal.push_back(std::move(entry));
    booked.number = journal.size();
    booked.shelf_json = shelf.dump(2) + "\n";
    return booked;
}

Booked undo_booking(std::string_view shelf_json) {
    ordered_json shelf = parsed_shelf(shelf_json);
    ordered_json& journal = shelf.at("journal");
    for (std::size_t i = journal.size(); i-- > 0;) {
        ordered_json& entry = journal[i];
        if (entry.value("undone", false)) {
            continue;
        }
        Booked booked;
        for (const ordered_json& item : entry.at("took")) {
            const std::string id = item.at("bottle").get<std::string>();
            const std::string amount = item.at("amount").get<std::string>();
            ordered_json& bottle = bottle_of(shelf, id);
            Taking taking{id, amount, {}};
            if (bottle.contains("left")) {
                const bool liquid = amount.ends_with("mL");
                Stated left = read_quantity(bottle.at("left").get<std::string>(), liquid, "shelf, " + id);
                left.value += read_quantity(amount, liquid, "journal").value;
                taking.left = written(left);
                bottle["left"] = taking.left;
            }
            booked.takings.push_back(std::move(taking));
        }
        entry["undone"] = true;
        booked.number = i + 1;
        booked.shelf_json = shelf.dump(2) + "\n";
        return booked;
    }
    throw fault(ErrorKind::no_recipe, "nothing_to_undo", "no booking is left to undo", "shelf", "");
}

}  // namespace carboy
