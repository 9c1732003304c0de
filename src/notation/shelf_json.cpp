#include <algorithm>
#include <cmath>
#include <set>

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include "carboy/error.h"
#include "carboy/notation.h"
#include "carboy/shelf_file.h"

#include "constants/document_node.h"
#include "constants/sha256.h"
#include "json/strict_json.h"
#include "notation/reagent_name.h"
#include "notation/shelf_builder.h"

namespace carboy {

namespace {

constexpr auto format_word = "carboy-shelf/1";

/// What an empty bottle is booked down to.
bool is_none(const std::string& text) {
    return text == "0" || text == "0 g" || text == "0 mL";
}

/// Runs what may throw an input error and notes it at a node.
template <class Read>
bool noted(const DocumentNode& node, Read read) {
    try {
        read();
        return true;
    } catch (const Error& error) {
        node.fault(error.message(), error.help());
        return false;
    }
}

/// One entry of the list, in the making.
class BottleReader {
public:
    BottleReader(const Table& table, ShelfBuilder& builder) : table_(table), builder_(builder) {}

    void read(const DocumentNode& node) {
        if (!node.is_object_with({"id", "reagent", "solution", "assay", "water_content", "strength", "density_g_per_mL",
                                  "left", "lot", "opened", "expires", "location", "note"})) {
            return;
        }
        Bottle bottle;
        bottle.id = node.required_text("id");
        if (!bottle.id.empty() && !ids_.insert(bottle.id).second) {
            node.at("id").fault(fmt::format("'{}' stands twice", bottle.id), "give every bottle an id of its own");
        }
        bottle.lot = node.optional_text("lot");
        bottle.location = node.optional_text("location");
        bottle.opened = date(node, "opened");
        bottle.expires = date(node, "expires");
        std::optional<Reagent> reagent;
        if (node.has("solution")) {
            reagent = read_solution(node, bottle);
        } else {
            reagent = read_article(node, bottle);
        }
        if (!reagent) {
            return;
        }
        if (node.has("left")) {
            read_left(node.at("left"), *reagent, bottle);
        }
        builder_.add(*reagent, std::move(bottle));
    }

private:
    static std::optional<Date> date(const DocumentNode& node, const char* key) {
        if (!node.has(key)) {
            return std::nullopt;
        }
        const std::string text = node.at(key).text();
        const auto read = Date::read(text);
        if (!read) {
            node.at(key).fault(fmt::format("'{}' is no date", text), "write it as 2026-12-31");
        }
        return read;
    }

    std::optional<Reagent> read_solution(const DocumentNode& node, Bottle& bottle) {
        for (const char* key : {"reagent", "assay", "water_content", "strength", "density_g_per_mL"}) {
            if (node.has(key)) {
                node.at(key).fault(fmt::format("a bottle with a 'solution' has no '{}'", key),
                                   "the solution's line says all of it");
                return std::nullopt;
            }
        }
        std::optional<Reagent> reagent;
        noted(node.at("solution"),
              [&] { reagent = builder_.made(node.at("solution").text(), node.path() + "/solution", bottle); });
        return reagent;
    }

    std::optional<Reagent> read_article(const DocumentNode& node, Bottle& bottle) {
        const std::string name = node.required_text("reagent");
        const Reagent* article = reagent_named(table_, name);
        if (article == nullptr) {
            if (!name.empty()) {
                const auto near = nearest_names(name, table_, 1);
                node.at("reagent").fault(
                    fmt::format("the table has no reagent called '{}'", name),
                    near.empty() ? "'carboy constants list reagents' shows every reagent; --constants adds one"
                                 : fmt::format("did you mean {}?", near.front()));
            }
            return std::nullopt;
        }
        const auto index = static_cast<std::uint16_t>(article - table_.reagents.data());
        bottle.article = index;
        if (node.has("strength")) {
            return read_strength(node, index);
        }
        if (node.has("density_g_per_mL")) {
            node.at("density_g_per_mL").fault("a density is for a solution with its 'strength' in % w/w");
        }
        return builder_.solid(index, read_assay(node));
    }

    /// Mass fraction of the article in the bottle; water by lot comes off.
    static std::optional<double> read_assay(const DocumentNode& node) {
        if (!node.has("assay") && !node.has("water_content")) {
            return std::nullopt;
        }
        const double assay = node.has("assay") ? node.at("assay").number(1e-3, 1.0) : 1.0;
        const double water = node.has("water_content") ? node.at("water_content").number(0.0, 0.99) : 0.0;
        return assay * (1 - water);
    }

    std::optional<Reagent> read_strength(const DocumentNode& node, std::uint16_t index) {
        const DocumentNode at = node.at("strength");
        const std::string text = at.text();
        std::optional<Reagent> reagent;
        noted(at, [&] {
            const Concentration strength = read_concentration(text, at.path());
            if (!(strength.value > 0)) {
                throw Error(ErrorKind::input, "bad_amount", "a strength must be above zero");
            }
            Reagent article = table_.reagents[index];
            if (strength.unit == ConcentrationUnit::percent_w_w) {
                if (!node.has("density_g_per_mL")) {
                    throw Error(ErrorKind::input, "missing_density", "% w/w needs the density of the solution", {},
                                "give it as \"density_g_per_mL\"");
                }
                article.density_g_per_mL.value = node.at("density_g_per_mL").number(0.5, 3.0);
                article.mass_percent.value = strength.value;
            }
            const Amount in_a_litre = amount_in(strength, Volume::litres(1), article, table_);
            reagent = builder_.solution(index, Molarity::mol_per_L(in_a_litre.mol()), text);
        });
        return reagent;
    }

    static void read_left(const DocumentNode& node, const Reagent& reagent, Bottle& bottle) {
        const std::string text = node.text();
        noted(node, [&] {
            const bool liquid = reagent.strength_mol_per_L.known();
            try {
                if (liquid) {
                    bottle.volume_left = is_none(text) ? Volume{} : read_volume(text, node.path());
                } else {
                    bottle.mass_left = is_none(text) ? Mass{} : read_mass(text, node.path());
                }
            } catch (const Error& error) {
                throw Error(ErrorKind::input, error.code(), error.message(), error.where(),
                            liquid ? "what is left of a liquid is a volume, such as 250 mL, or 0"
                                   : "what is left of a solid is a mass, such as 250 g, or 0");
            }
        });
    }

    const Table& table_;
    ShelfBuilder& builder_;
    std::set<std::string> ids_;
};

}  // namespace

ShelfReading read_shelf(const Table& table, std::string_view json_text, const ActivityModel& model,
                        std::string_view where) {
    ShelfBuilder builder(table, model);
    std::vector<ConstantsFault> faults;
    nlohmann::json document;
    try {
        document = parse_strictly(json_text, where);
    } catch (const Error& error) {
        faults.push_back({{}, error.message(), error.help()});
        return {builder.finish(true), std::move(faults)};
    }
    const DocumentNode node(document, {}, faults);
    if (node.is_object_with({"schema", "note", "bottles", "journal"})) {
        if (!node.has("schema") || node.at("schema").text() != format_word) {
            node.fault("this is no shelf that this program reads",
                       fmt::format("begin with \"schema\": \"{}\"", format_word));
        } else if (!node.has("bottles")) {
            node.fault("'bottles' is missing");
        } else {
            BottleReader reader(table, builder);
            for (const DocumentNode& entry : node.at("bottles").elements()) {
                reader.read(entry);
            }
        }
    }
    Shelf shelf = builder.finish(true);
    shelf.sha256 = sha256_hex(std::string(json_text));
    return {std::move(shelf), std::move(faults)};
}

Shelf with_stocks(const Table& table, const Shelf* shelf, const std::vector<std::string>& stocks,
                  const ActivityModel& model) {
    ShelfBuilder builder = shelf != nullptr ? ShelfBuilder(*shelf, table, model) : ShelfBuilder(table, model);
    std::string all = shelf != nullptr ? shelf->sha256 : std::string();
    std::size_t number = 0;
    for (const std::string& line : stocks) {
        Bottle bottle;
        bottle.id = fmt::format("stock {}", ++number);
        const Reagent reagent = builder.made(line, fmt::format("--stock {}", number), bottle);
        builder.add(reagent, std::move(bottle));
        all += "\n" + line;
    }
    Shelf made = builder.finish(shelf != nullptr && shelf->complete());
    made.today = shelf != nullptr ? shelf->today : std::nullopt;
    made.sha256 = sha256_hex(all);
    return made;
}

}  // namespace carboy
