#include <algorithm>
#include <array>
#include <limits>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "constants/arena.h"
#include "constants/table_builder.h"

namespace carboy {

namespace {

constexpr std::array words{
    std::string_view("phosphate"),      std::string_view("carboxylate"),  std::string_view("amine"),
    std::string_view("tertiary-amine"), std::string_view("zwitterion"),   std::string_view("metal-binding"),
    std::string_view("uv-cutoff"),      std::string_view("volatile"),     std::string_view("toxic"),
    std::string_view("controlled"),     std::string_view("cell-use"),     std::string_view("radicals-in-light"),
    std::string_view("diol-binding"),   std::string_view("gas-exchange"), std::string_view("short-lived")};

}  // namespace

std::span<const std::string_view> trait_words() {
    return words;
}

std::string_view trait_word(Trait trait) {
    return words[static_cast<std::size_t>(trait)];
}

std::optional<Trait> trait_of(std::string_view word) {
    const auto* const known = std::find(words.begin(), words.end(), word);
    return known == words.end() ? std::nullopt : std::optional(static_cast<Trait>(known - words.begin()));
}

const Fact* find_fact(const Table& table, std::uint16_t system, Trait trait) {
    const auto known = std::find_if(table.facts.begin(), table.facts.end(),
                                    [&](const Fact& fact) { return fact.system == system && fact.trait == trait; });
    return known == table.facts.end() ? nullptr : &*known;
}

/// A fact takes the place of what was said of the same trait of the same system.
void TableBuilder::place_fact(const Fact& fact) {
    const auto known = std::find_if(facts_.begin(), facts_.end(), [&](const Fact& other) {
        return other.system == fact.system && other.trait == fact.trait;
    });
    changes.push_back(
        {"trait", fmt::format("{} of {}", trait_word(fact.trait), systems_[fact.system].name), known != facts_.end()});
    if (known != facts_.end()) {
        *known = fact;
    } else {
        facts_.push_back(fact);
    }
}

void TableBuilder::read_traits(const DocumentNode& document) {
    if (!document.has("traits")) {
        return;
    }
    for (const DocumentNode& node : document.at("traits").elements()) {
        if (!node.is_object_with(
                {"trait", "systems", "holds", "wavelength_nm", "text", "source", "evidence", "note"})) {
            continue;
        }
        const std::string word = node.required_text("trait");
        const auto trait = trait_of(word);
        if (!trait) {
            node.fault(fmt::format("'{}' is no trait", word), fmt::format("one of: {}", fmt::join(words, ", ")));
            continue;
        }
        if (!node.has("source")) {
            node.fault("'source' is missing", "every fact says where it comes from");
        }
        const Provenance provenance = read_provenance(node, {});
        Fact fact{*trait,
                  0,
                  !node.has("holds") || node.at("holds").boolean(),
                  std::numeric_limits<double>::quiet_NaN(),
                  keep(node.required_text("text")),
                  provenance.source,
                  provenance.evidence};
        if ((fact.trait == Trait::uv_cutoff) != node.has("wavelength_nm")) {
            node.fault(node.has("wavelength_nm") ? "only a uv-cutoff has a wavelength" : "'wavelength_nm' is missing");
        } else if (fact.trait == Trait::uv_cutoff) {
            fact.wavelength_nm = node.at("wavelength_nm").number(150, 400);
        }
        const auto names = node.optional_texts("systems");
        if (names.empty()) {
            node.fault("'systems' is missing", "name the systems that have the trait");
        }
        for (const std::string& name : names) {
            const auto id = component(name);
            if (!id || id->kind != ComponentKind::system) {
                node.at("systems").fault(fmt::format("there is no system '{}'", name),
                                         "'carboy constants list' shows them all");
                continue;
            }
            fact.system = id->index;
            place_fact(fact);
        }
    }
}

}  // namespace carboy
