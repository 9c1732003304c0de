#include "constants/table_builder.h"

#include <algorithm>
#include <array>
#include <cmath>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "constants/arena.h"

namespace carboy {

namespace {

template <class T>
std::vector<T> copied(std::span<const T> items) {
    return {items.begin(), items.end()};
}

constexpr std::array evidence_words{"seen", "near", "secondary", "from memory", "common practice", "computed"};

}  // namespace

TableBuilder::TableBuilder(const Table& base)
    : arena_(std::make_shared<Arena>()),
      base_(base),
      sources_(copied(base.sources)),
      elements_(copied(base.elements)),
      hazards_(copied(base.hazards)),
      cautions_(copied(base.cautions)),
      vessels_(copied(base.vessels)),
      spectators_(copied(base.spectators)),
      systems_(copied(base.systems)),
      reagents_(copied(base.reagents)),
      facts_(copied(base.facts)) {
    arena_->base_owner = base.owner;
}

std::string_view TableBuilder::keep(std::string text) {
    return arena_->texts.emplace_back(std::move(text));
}

std::span<const std::string_view> TableBuilder::keep_all(const std::vector<std::string>& texts) {
    std::vector<std::string_view> views;
    for (const std::string& text : texts) {
        views.push_back(keep(text));
    }
    return keep_array(std::move(views));
}

std::optional<std::uint16_t> TableBuilder::source_index(const DocumentNode& at, const std::string& key) {
    const auto known = std::find_if(sources_.begin(), sources_.end(), [&](const Source& s) { return s.key == key; });
    if (known == sources_.end()) {
        at.fault(fmt::format("there is no source '{}'", key), "add it under 'sources' with its citation");
        return std::nullopt;
    }
    return static_cast<std::uint16_t>(known - sources_.begin());
}

TableBuilder::Provenance TableBuilder::read_provenance(const DocumentNode& node, Provenance inherited) {
    if (node.has("source")) {
        if (const auto index = source_index(node.at("source"), node.at("source").text())) {
            inherited.source = *index;
        }
    }
    if (node.has("evidence")) {
        const std::string word = node.at("evidence").text();
        const auto* const known = std::find(evidence_words.begin(), evidence_words.end(), word);
        if (known == evidence_words.end()) {
            node.at("evidence")
                .fault(fmt::format("'{}' is no evidence word", word),
                       fmt::format("one of: {}", fmt::join(evidence_words, ", ")));
        } else {
            inherited.evidence = static_cast<Evidence>(known - evidence_words.begin());
        }
    }
    return inherited;
}

Figure TableBuilder::read_figure(const DocumentNode& parent, const char* key, double lowest, double highest,
                                 Provenance inherited) {
    Figure figure = unknown_figure();
    if (!parent.has(key)) {
        return figure;
    }
    const DocumentNode node = parent.at(key);
    if (!node.is_object_with({"value", "uncertainty", "source", "evidence", "note"})) {
        return figure;
    }
    if (!node.has("value")) {
        node.fault("'value' is missing");
        return figure;
    }
    figure.value = node.at("value").number(lowest, highest);
    if (node.has("uncertainty")) {
        figure.uncertainty = node.at("uncertainty").number(1e-12, highest - lowest);
    }
    const Provenance provenance = read_provenance(node, inherited);
    figure.source = provenance.source;
    figure.evidence = provenance.evidence;
    return figure;
}

std::optional<Formula> TableBuilder::formula_at(const DocumentNode& node, const std::string& text) {
    try {
        return read_formula(text);
    } catch (const FormulaError& error) {
        node.fault(fmt::format("the formula '{}' cannot be read at character {}: {}", text, error.position() + 1,
                               error.what()),
                   "write it as Na2HPO4·7H2O, with a charge as + - ^2+ ^3-");
        return std::nullopt;
    }
}

double TableBuilder::molar_mass(const DocumentNode& node, const Formula& formula) {
    double mass = 0;
    for (const auto& [symbol, count] : formula.atoms) {
        const auto element =
            std::find_if(elements_.begin(), elements_.end(), [&s = symbol](const Element& e) { return e.symbol == s; });
        if (element == elements_.end()) {
            node.fault(fmt::format("there is no atomic weight for '{}'", symbol), "add it under 'elements'");
        } else {
            mass += count * element->standard_atomic_weight.value;
        }
    }
    return mass;
}

std::optional<ComponentId> TableBuilder::component(std::string_view name) const {
    const std::string folded = fold_name(name);
    for (std::size_t i = 0; i < spectators_.size(); ++i) {
        if (fold_name(spectators_[i].name) == folded) {
            return ComponentId{ComponentKind::spectator, static_cast<std::uint16_t>(i)};
        }
    }
    for (std::size_t i = 0; i < systems_.size(); ++i) {
        if (fold_name(systems_[i].name) == folded) {
            return ComponentId{ComponentKind::system, static_cast<std::uint16_t>(i)};
        }
    }
    return std::nullopt;
}

std::string TableBuilder::path_of(const char* kind, std::string_view name) const {
    const auto known = paths_.find(fmt::format("{} {}", kind, name));
    return known != paths_.end() ? known->second : fmt::format("{} {}", kind, name);
}

void TableBuilder::read_sources(const DocumentNode& document) {
    if (!document.has("sources")) {
        return;
    }
    for (const auto& [key, node] : document.at("sources").members()) {
        if (node.is_object_with({"citation", "note", "doi"})) {
            place(sources_, Source{keep(key), keep(node.required_text("citation")), keep(node.optional_text("note"))},
                  &Source::key, "source");
        }
    }
}

void TableBuilder::read_elements(const DocumentNode& document) {
    if (!document.has("elements")) {
        return;
    }
    for (const auto& [symbol, node] : document.at("elements").members()) {
        if (!node.is_object_with({"standard_atomic_weight", "uncertainty", "source", "evidence", "note"})) {
            continue;
        }
        Figure weight = unknown_figure();
        if (node.has("standard_atomic_weight")) {
            weight.value = node.at("standard_atomic_weight").number(1.0, 300.0);
        } else {
            node.fault("'standard_atomic_weight' is missing");
        }
        if (node.has("uncertainty")) {
            weight.uncertainty = node.at("uncertainty").number(1e-12, 5.0);
        }
        const Provenance provenance = read_provenance(node, {});
        weight.source = provenance.source;
        weight.evidence = provenance.evidence;
        place(elements_, Element{keep(symbol), weight}, &Element::symbol, "element");
    }
}

void TableBuilder::read_hazards(const DocumentNode& document) {
    if (!document.has("hazards")) {
        return;
    }
    for (const auto& [code, node] : document.at("hazards").members()) {
        if (node.is_object_with({"text", "source", "evidence"})) {
            const Provenance provenance = read_provenance(node, {});
            place(hazards_,
                  HazardStatement{keep(code), keep(node.required_text("text")), provenance.source, provenance.evidence},
                  &HazardStatement::code, "hazard");
        }
    }
}

void TableBuilder::read_cautions(const DocumentNode& document) {
    if (!document.has("cautions")) {
        return;
    }
    for (const auto& [key, node] : document.at("cautions").members()) {
        if (node.is_object_with({"text", "source", "evidence"})) {
            const Provenance provenance = read_provenance(node, {});
            place(cautions_,
                  Caution{keep(key), keep(node.required_text("text")), provenance.source, provenance.evidence},
                  &Caution::key, "caution");
        }
    }
}

void TableBuilder::read_spectators(const DocumentNode& document) {
    if (!document.has("spectators")) {
        return;
    }
    for (const DocumentNode& node : document.at("spectators").elements()) {
        if (!node.is_object_with(
                {"name", "names", "formula", "apparent_molar_volume_cm3_per_mol", "source", "evidence", "note"})) {
            continue;
        }
        Spectator spectator{};
        spectator.name = keep(node.required_text("name"));
        spectator.names = keep_all(node.optional_texts("names"));
        spectator.formula = keep(node.required_text("formula"));
        if (const auto formula = formula_at(node, std::string(spectator.formula))) {
            spectator.charge = static_cast<std::int8_t>(formula->charge);
            spectator.molar_mass_g_per_mol = molar_mass(node, *formula);
        }
        spectator.apparent_molar_volume_cm3_per_mol =
            read_figure(node, "apparent_molar_volume_cm3_per_mol", -200, 2000, read_provenance(node, {}));
        paths_[fmt::format("spectator {}", spectator.name)] = node.path();
        place(spectators_, spectator, &Spectator::name, "spectator");
    }
}

std::span<const std::uint16_t> TableBuilder::read_cautions_of(const DocumentNode& entry) {
    std::vector<std::uint16_t> indices;
    if (entry.has("cautions")) {
        for (const DocumentNode& node : entry.at("cautions").elements()) {
            const std::string key = node.text();
            const auto known =
                std::find_if(cautions_.begin(), cautions_.end(), [&](const Caution& c) { return c.key == key; });
            if (known == cautions_.end()) {
                node.fault(fmt::format("there is no caution '{}'", key), "add it under 'cautions' with its text");
            } else {
                indices.push_back(static_cast<std::uint16_t>(known - cautions_.begin()));
            }
        }
    }
    return keep_array(std::move(indices));
}

Table TableBuilder::finish(std::string version, std::string sha256) {
    resolve_counter_ions();
    check_usual_forms();
    check_reagents();
    index_names();
    Table table;
    table.version = keep(std::move(version));
    table.sha256 = keep(std::move(sha256));
    table.sources = keep_array(std::move(sources_));
    table.elements = keep_array(std::move(elements_));
    table.hazards = keep_array(std::move(hazards_));
    table.cautions = keep_array(std::move(cautions_));
    table.vessels = keep_array(std::move(vessels_));
    table.spectators = keep_array(std::move(spectators_));
    table.systems = keep_array(std::move(systems_));
    table.reagents = keep_array(std::move(reagents_));
    table.facts = keep_array(std::move(facts_));
    table.names = keep_array(std::move(names_));
    table.owner = arena_;
    return table;
}

}  // namespace carboy
