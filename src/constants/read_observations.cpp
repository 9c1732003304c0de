#include <algorithm>
#include <array>
#include <cmath>
#include <utility>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "constants/arena.h"
#include "constants/name.h"
#include "constants/table_builder.h"

namespace carboy {

namespace {

constexpr double none = std::numeric_limits<double>::quiet_NaN();
constexpr std::array moment_words{std::pair("dissolved", Moment::dissolved), std::pair("titrated", Moment::titrated),
                                  std::pair("filled", Moment::filled), std::pair("in use", Moment::in_use)};

Range read_range(const DocumentNode& when, const char* key, double lowest, double highest) {
    Range range{none, none};
    if (!when.has(key)) {
        return range;
    }
    const DocumentNode node = when.at(key);
    if (!node.is_object_with({"from", "to"})) {
        return range;
    }
    if (node.has("from")) {
        range.from = node.at("from").number(lowest, highest);
    }
    if (node.has("to")) {
        range.to = node.at("to").number(lowest, highest);
    }
    if (range.open() || range.from > range.to) {
        node.fault("a range has 'from', 'to' or both, 'from' below 'to'");
    }
    return range;
}

std::uint8_t read_moments(const DocumentNode& when) {
    if (!when.has("stages")) {
        return static_cast<std::uint8_t>(Moment::in_use);
    }
    unsigned moments = 0;
    for (const DocumentNode& node : when.at("stages").elements()) {
        const std::string word = node.text();
        const auto* const known =
            std::find_if(moment_words.begin(), moment_words.end(), [&](const auto& m) { return m.first == word; });
        if (known == moment_words.end()) {
            node.fault(fmt::format("'{}' is no stage", word), "dissolved, titrated, filled or in use");
        } else {
            moments |= static_cast<unsigned>(known->second);
        }
    }
    return static_cast<std::uint8_t>(moments);
}

/// Every {place} of a text must be one that the program can fill in.
void check_places(const DocumentNode& node, std::string_view text) {
    for (std::size_t open = text.find('{'); open != std::string_view::npos; open = text.find('{', open + 1)) {
        const std::size_t close = text.find('}', open);
        const std::string_view place = text.substr(open + 1, close == std::string_view::npos ? 0 : close - open - 1);
        if (std::find(std::begin(observation_places), std::end(observation_places), place) ==
            std::end(observation_places)) {
            node.fault(fmt::format("the text has no place '{}' to fill in", place),
                       fmt::format("one of: {}", fmt::join(observation_places, ", ")));
        }
    }
}

}  // namespace

Presence TableBuilder::read_presence(const DocumentNode& node) {
    Presence presence{{}, 0, 0};
    if (!node.is_object_with({"any_of", "least_mol_per_kg"})) {
        return presence;
    }
    std::vector<ComponentId> ids;
    if (node.has("any_of")) {
        for (const DocumentNode& name : node.at("any_of").elements()) {
            if (const auto id = component(name.text())) {
                ids.push_back(*id);
                presence.marks |= mark_of(*id);
            } else {
                name.fault(fmt::format("there is no system, ion or solute '{}'", name.text()));
            }
        }
    }
    if (ids.empty()) {
        node.fault("'any_of' names the systems, ions or solutes that are looked for");
    }
    presence.any_of = keep_array(std::move(ids));
    presence.least_mol_per_kg = node.has("least_mol_per_kg") ? node.at("least_mol_per_kg").number(0, 50) : 0;
    return presence;
}

/// `HPO4^2-`, or `maleate:C4H2O4^2-` where several systems have such a formula.
std::optional<ProductFactor> TableBuilder::product_factor(const DocumentNode& at, const std::string& name) const {
    if (name == "H+" || name == "OH-") {
        return ProductFactor{name == "H+" ? ProductFactor::Of::hydrogen_ion : ProductFactor::Of::hydroxide, {}, 0, 1};
    }
    const std::size_t colon = name.find(':');
    const std::string owner = colon == std::string::npos ? std::string() : fold_name(name.substr(0, colon));
    const std::string formula = colon == std::string::npos ? name : name.substr(colon + 1);
    std::vector<ProductFactor> found;
    for (std::size_t i = 0; i < spectators_.size(); ++i) {
        if (owner.empty() && (spectators_[i].formula == formula || spectators_[i].name == formula)) {
            found.push_back(
                {ProductFactor::Of::component, {ComponentKind::spectator, static_cast<std::uint16_t>(i)}, 0, 1});
        }
    }
    for (std::size_t i = 0; i < systems_.size(); ++i) {
        if (!owner.empty() && fold_name(systems_[i].name) != owner) {
            continue;
        }
        for (std::size_t k = 0; k < systems_[i].species.size(); ++k) {
            if (systems_[i].species[k].formula == formula) {
                found.push_back({ProductFactor::Of::component,
                                 {ComponentKind::system, static_cast<std::uint16_t>(i)},
                                 static_cast<std::uint8_t>(k),
                                 1});
            }
        }
    }
    if (found.size() != 1) {
        at.fault(found.empty() ? fmt::format("there is no species '{}'", name)
                               : fmt::format("'{}' is a species of several systems", name),
                 "write its formula as the table does, or SYSTEM:FORMULA");
        return std::nullopt;
    }
    return found.front();
}

void TableBuilder::read_product(const DocumentNode& node, Observation& observation) {
    if (!node.is_object_with({"of", "log10_above"})) {
        return;
    }
    if (!node.has("of") || !node.has("log10_above")) {
        node.fault("a product needs 'of' and 'log10_above'");
        return;
    }
    std::vector<ProductFactor> factors;
    for (const auto& [name, power] : node.at("of").members()) {
        if (auto factor = product_factor(power, name)) {
            factor->power = static_cast<std::uint8_t>(power.number(1, 10));
            factors.push_back(*factor);
        }
    }
    observation.product = keep_array(std::move(factors));
    observation.log10_product_above = node.at("log10_above").number(-100, 10);
}

void TableBuilder::read_when(const DocumentNode& node, Observation& observation) {
    if (!node.is_object_with({"with", "reagents", "hazard_statements", "product", "stages", "recipe", "pH",
                              "temperature_C", "ionic_strength_mol_per_kg", "buffer_value_mol_per_kg", "pK_distance",
                              "share_of_best_buffering", "solubility_share", "temperature_rise_K", "titrant_share"})) {
        return;
    }
    observation.moments = read_moments(node);
    observation.pH = read_range(node, "pH", -2, 16);
    observation.temperature_C = read_range(node, "temperature_C", 0, 100);
    observation.ionic_strength_mol_per_kg = read_range(node, "ionic_strength_mol_per_kg", 0, 50);
    observation.buffer_value_mol_per_kg = read_range(node, "buffer_value_mol_per_kg", 0, 50);
    observation.pK_distance = read_range(node, "pK_distance", 0, 20);
    observation.share_of_best_buffering = read_range(node, "share_of_best_buffering", 0, 100);
    observation.solubility_share = read_range(node, "solubility_share", 0, 1000);
    observation.temperature_rise_K = read_range(node, "temperature_rise_K", -100, 200);
    observation.titrant_share = read_range(node, "titrant_share", 0, 1);
    std::vector<Presence> with;
    if (node.has("with")) {
        for (const DocumentNode& one : node.at("with").elements()) {
            with.push_back(read_presence(one));
        }
    }
    if (node.has("product")) {
        read_product(node.at("product"), observation);
        // Each factor must be there for the product to be anything: a quick way to see that it is not.
        for (const ProductFactor& factor : observation.product) {
            if (factor.of == ProductFactor::Of::component) {
                with.push_back({keep_array(std::vector{factor.component}), 0, mark_of(factor.component)});
            }
        }
    }
    observation.with = keep_array(std::move(with));
    std::vector<std::uint16_t> reagents;
    if (node.has("reagents")) {
        for (const DocumentNode& name : node.at("reagents").elements()) {
            const std::string folded = fold_name(name.text());
            const auto known = std::find_if(reagents_.begin(), reagents_.end(),
                                            [&](const Reagent& r) { return fold_name(r.name) == folded; });
            if (known == reagents_.end()) {
                name.fault(fmt::format("there is no reagent '{}'", name.text()));
            } else {
                reagents.push_back(static_cast<std::uint16_t>(known - reagents_.begin()));
            }
        }
    }
    observation.reagents = keep_array(std::move(reagents));
    std::vector<std::uint16_t> statements;
    if (node.has("hazard_statements")) {
        for (const DocumentNode& statement : node.at("hazard_statements").elements()) {
            const auto known = std::find_if(hazards_.begin(), hazards_.end(),
                                            [&](const HazardStatement& h) { return h.code == statement.text(); });
            if (known == hazards_.end()) {
                statement.fault(fmt::format("there is no hazard statement '{}'", statement.text()));
            } else {
                statements.push_back(static_cast<std::uint16_t>(known - hazards_.begin()));
            }
        }
    }
    observation.statements = keep_array(std::move(statements));
    observation.of_recipe = (node.has("recipe") && node.at("recipe").boolean()) || !observation.reagents.empty() ||
                            !observation.statements.empty() ||
                            observation.moments != static_cast<std::uint8_t>(Moment::in_use) ||
                            !observation.share_of_best_buffering.open() || !observation.solubility_share.open() ||
                            !observation.temperature_rise_K.open() || !observation.titrant_share.open();
}

void TableBuilder::read_observations(const DocumentNode& document) {
    if (!document.has("observations")) {
        return;
    }
    for (const auto& [code, node] : document.at("observations").members()) {
        if (!node.is_object_with(
                {"text", "weight", "when", "instead_of", "pH_standard_uncertainty", "source", "evidence", "note"})) {
            continue;
        }
        Observation observation{};
        observation.code = keep(code);
        observation.text = keep(node.required_text("text"));
        check_places(node, observation.text);
        if (node.has("weight")) {
            observation.weight = static_cast<std::uint8_t>(node.at("weight").number(0, 100));
        } else {
            node.fault("'weight' is missing", "0 to 100: the heaviest is said first");
        }
        if (!node.has("source") || !node.has("evidence")) {
            node.fault("'source' and 'evidence' are needed", "say where it comes from, if only common practice");
        }
        const Provenance provenance = read_provenance(node, {});
        observation.source = provenance.source;
        observation.evidence = provenance.evidence;
        observation.instead_of = keep_all(node.optional_texts("instead_of"));
        if (node.has("when")) {
            read_when(node.at("when"), observation);
        } else {
            node.fault("'when' is missing", "say what must be seen before this is said");
        }
        if (node.has("pH_standard_uncertainty")) {
            observation.pH_standard_uncertainty = node.at("pH_standard_uncertainty").number(1e-3, 5);
            if (observation.of_recipe) {
                node.fault("a pH is in doubt because of what is dissolved, not of how it is made",
                           "leave out the conditions on stages, reagents and the recipe");
            }
        }
        place(observations_, observation, &Observation::code, "observation");
    }
}

}  // namespace carboy
