#include <algorithm>
#include <array>

#include "carboy/constants.h"

#include "constants/name.h"

namespace carboy {

namespace {

/// Index of the entry of this kind with this name, or -1.
int find(const Table& table, EntryKind kind, std::string_view name) {
    const std::string folded = fold_name(name);
    auto entry = std::lower_bound(table.names.begin(), table.names.end(), folded,
                                  [](const NameEntry& e, const std::string& key) { return e.key < key; });
    for (; entry != table.names.end() && entry->key == folded; ++entry) {
        if (entry->kind == kind) {
            return entry->index;
        }
    }
    return -1;
}

}  // namespace

std::string_view evidence_word(Evidence evidence) {
    constexpr std::array words{std::string_view("seen"),
                               std::string_view("near"),
                               std::string_view("secondary"),
                               std::string_view("from memory"),
                               std::string_view("common practice"),
                               std::string_view("computed")};
    return words[static_cast<std::size_t>(evidence)];
}

const System* find_system(const Table& table, std::string_view name) {
    const int index = find(table, EntryKind::system, name);
    return index < 0 ? nullptr : &table.systems[static_cast<std::size_t>(index)];
}

const Spectator* find_spectator(const Table& table, std::string_view name) {
    const int index = find(table, EntryKind::spectator, name);
    return index < 0 ? nullptr : &table.spectators[static_cast<std::size_t>(index)];
}

const Reagent* find_reagent(const Table& table, std::string_view name) {
    const int index = find(table, EntryKind::reagent, name);
    return index < 0 ? nullptr : &table.reagents[static_cast<std::size_t>(index)];
}

const Reagent* find_reagent_by_cas(const Table& table, std::string_view cas) {
    const Reagent* found = nullptr;
    for (const Reagent& reagent : table.reagents) {
        if (reagent.cas == cas && (found == nullptr || (reagent.usual && !found->usual))) {
            found = &reagent;
        }
    }
    return found;
}

const Vessel* find_vessel(const Table& table, std::string_view name) {
    const int index = find(table, EntryKind::vessel, name);
    return index < 0 ? nullptr : &table.vessels[static_cast<std::size_t>(index)];
}

const NamedFormula* find_named_formula(const Table& table, std::string_view name) {
    const int index = find(table, EntryKind::formula, name);
    return index < 0 ? nullptr : &table.formulas[static_cast<std::size_t>(index)];
}

ComponentId id_of(const Table& table, const System& system) {
    return {ComponentKind::system, static_cast<std::uint16_t>(&system - table.systems.data())};
}

ComponentId id_of(const Table& table, const Spectator& spectator) {
    return {ComponentKind::spectator, static_cast<std::uint16_t>(&spectator - table.spectators.data())};
}

std::optional<ComponentId> find_component(const Table& table, std::string_view name) {
    if (const Spectator* spectator = find_spectator(table, name)) {
        return id_of(table, *spectator);
    }
    const System* system = find_system(table, name);
    return system != nullptr ? std::optional(id_of(table, *system)) : std::nullopt;
}

std::string_view name_of(const Table& table, ComponentId id) {
    return id.kind == ComponentKind::system ? table.systems[id.index].name : table.spectators[id.index].name;
}

}  // namespace carboy
