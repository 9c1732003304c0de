#include "notation/reagent_name.h"

#include <algorithm>
#include <cmath>
#include <initializer_list>
#include <string>

#include "constants/name.h"
#include "notation/buffer_name.h"
#include "notation/line.h"
#include "plan/articles.h"

namespace carboy {

namespace {

bool says_any(std::string_view name, std::initializer_list<std::string_view> words) {
    const std::string lowered = lower_case(name);
    return std::any_of(words.begin(), words.end(),
                       [&](std::string_view word) { return lowered.find(word) != std::string::npos; });
}

/// `HCl 37 %`, `NaOH 5 N`, `sodium hydroxide pellets`.
bool says_strength(std::string_view name) {
    for (std::size_t i = 1; i < name.size(); ++i) {
        if (name[i - 1] == ' ' && name[i] >= '0' && name[i] <= '9') {
            return true;
        }
    }
    return says_any(name, {"%", "pellet", "concentrat"});
}

/// The system, the counter-ion, and nothing else.
bool is_salt_of(const Reagent& reagent, const NamedBuffer& named) {
    return reagent.supplies.size() == 2 &&
           std::all_of(reagent.supplies.begin(), reagent.supplies.end(), [&](const Supply& supply) {
               return supply.component == named.system || supply.component == named.counter_ion;
           });
}

}  // namespace

const Reagent* reagent_named(const Table& table, std::string_view name) {
    const Reagent* reagent = find_reagent(table, name);
    return reagent != nullptr ? reagent : find_reagent_by_cas(table, name);
}

const Reagent* reagent_adding(const Table& table, const NamedBuffer& named) {
    const System& system = table.systems[named.system.index];
    const Reagent* usual = find_reagent(table, system.usual_form);
    if (!named.counter_ion) {
        return usual;
    }
    // `sodium EDTA` means the disodium salt, not the first of the four.
    if (usual != nullptr && is_salt_of(*usual, named)) {
        return usual;
    }
    const Reagent* found = nullptr;
    for (const Reagent& reagent : table.reagents) {
        if (is_salt_of(reagent, named) && (found == nullptr || (reagent.usual && !found->usual))) {
            found = &reagent;
        }
    }
    return found;
}

std::vector<const Reagent*> salts_named(const Table& table, const NamedBuffer& named) {
    std::vector<const Reagent*> salts;
    for (const Reagent& reagent : table.reagents) {
        if (reagent.usual && is_salt_of(reagent, named)) {
            salts.push_back(&reagent);
        }
    }
    return salts;
}

std::uint16_t article_meant(const Table& table, const Reagent& reagent, std::string_view name, ConcentrationUnit unit) {
    const auto index = static_cast<std::uint16_t>(&reagent - table.reagents.data());
    const bool in_moles = unit == ConcentrationUnit::mol_per_L || unit == ConcentrationUnit::mol_per_kg;
    if (!in_moles || reagent.usual || name == reagent.cas) {
        return index;
    }
    const std::uint16_t usual_index = usual_article(table, index);
    const Reagent& usual = table.reagents[usual_index];
    // `MgCl2` is the formula of the anhydrous salt, but most who write it have the hexahydrate.
    const bool its_hydrate = usual.formula != reagent.formula &&
                             usual.formula.substr(0, usual.formula.find("\u00B7")) == reagent.formula &&
                             !says_any(name, {"hydrat", "hydrous"});
    // `HCl` names the concentrated acid, `NaOH` the pellets; for moles the solution of known strength does better.
    const bool its_solution = usual.formula == reagent.formula && usual.state == State::solution &&
                              !usual.mass_percent.known() && !says_strength(name);
    return its_hydrate || its_solution ? usual_index : index;
}

namespace {

/// `ammonium bicarbonate` for NH4HCO3: the name tells the buffer from its counter-ion.
std::optional<BroughtBuffer> buffer_of_two_systems(const Table& table, const Reagent& reagent) {
    const auto buffer_in = [&](std::string_view name) -> std::optional<BroughtBuffer> {
        const auto named = buffer_with_ion(name, table);
        for (const Supply& supply : reagent.supplies) {
            if (named && named->counter_ion && is_salt_of(reagent, *named) && supply.component == named->system) {
                return BroughtBuffer{*named, supply.count};
            }
        }
        return std::nullopt;
    };
    auto found = buffer_in(reagent.name);
    for (std::size_t i = 0; i < reagent.names.size() && !found; ++i) {
        found = buffer_in(reagent.names[i]);
    }
    return found;
}

}  // namespace

std::optional<BroughtBuffer> buffer_brought_by(const Table& table, const Reagent& reagent) {
    const auto systems = std::count_if(reagent.supplies.begin(), reagent.supplies.end(), [](const Supply& supply) {
        return supply.component.kind == ComponentKind::system;
    });
    if (systems == 2) {
        return buffer_of_two_systems(table, reagent);
    }
    std::optional<Supply> system;
    std::optional<ComponentId> ion;
    for (const Supply& supply : reagent.supplies) {
        const bool is_system = supply.component.kind == ComponentKind::system;
        if (is_system ? system.has_value() : ion.has_value()) {
            return std::nullopt;
        }
        if (is_system) {
            system = supply;
        } else if (table.spectators[supply.component.index].charge != 0) {
            ion = supply.component;
        }
    }
    return system ? std::optional(BroughtBuffer{{system->component, ion}, system->count}) : std::nullopt;
}

std::optional<std::uint16_t> form_named(const Table& table, std::string_view name, ComponentId system) {
    const std::string_view plain = without_the_word_buffer(name);
    const Reagent* reagent = reagent_named(table, plain);
    const auto brings_it = [&](const Supply& supply) { return supply.component == system; };
    if (reagent == nullptr || std::none_of(reagent->supplies.begin(), reagent->supplies.end(), brings_it)) {
        return std::nullopt;
    }
    const std::uint16_t article = article_meant(table, *reagent, plain, ConcentrationUnit::mol_per_L);
    const bool bare = reagent->supplies.size() == 1;
    const bool leaves_it_open = table.reagents[article].usual || fold_name(plain) == fold_name(name_of(table, system));
    return bare && leaves_it_open ? std::nullopt : std::optional(article);
}

bool can_hold(const Table& table, ComponentId system, PH ph) {
    constexpr double farthest = 3.0;
    const auto steps = table.systems[system.index].steps;
    return std::any_of(steps.begin(), steps.end(),
                       [&](const Step& step) { return std::abs(step.pK_25C.value - ph.value()) <= farthest; });
}

}  // namespace carboy
