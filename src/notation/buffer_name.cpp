#include "notation/buffer_name.h"

#include <algorithm>
#include <array>
#include <cstdlib>
#include <string>
#include <vector>

#include "carboy/notation.h"

#include "constants/name.h"
#include "notation/line.h"
#include "notation/reagent_name.h"

namespace carboy {

namespace {

// No name in any table is longer; it bounds the work on what cannot be a name.
constexpr std::size_t longest_name = 256;

// Between a buffer and its counter-ion: hyphens and dashes, the dot of a salt, a slash; spaces besides.
constexpr std::array joints{std::string_view("-"),      std::string_view("\u2010"), std::string_view("\u2011"),
                            std::string_view("\u2012"), std::string_view("\u2013"), std::string_view("\u2014"),
                            std::string_view("\u2212"), std::string_view("."),      std::string_view("\u00B7"),
                            std::string_view("/")};

/// A name divided in two.
struct Division {
    std::string_view left;
    std::string_view right;
};

std::vector<Division> divisions(std::string_view text) {
    std::vector<Division> found;
    for (std::size_t i = 1; i < text.size(); ++i) {
        const std::string_view rest = text.substr(i);
        const auto* joint = std::find_if(joints.begin(), joints.end(), [&](std::string_view j) {
            return rest.front() == j.front() && rest.starts_with(j);
        });
        const std::size_t length = joint == joints.end() ? space_length(rest) : joint->size();
        if (length > 0 && length < rest.size()) {
            found.push_back({text.substr(0, i), rest.substr(length)});
        }
    }
    return found;
}

/// Names of cations end in -ium: `ammonium`, `triethylammonium`.
bool is_cation_name(std::string_view word) {
    return fold_name(word).ends_with("ium");
}

bool can_be_cation(const System& system) {
    return system.species.front().charge > 0;
}
bool can_be_anion(const System& system) {
    return system.species.back().charge < 0;
}

/// True when one of two systems can be the other's counter-ion: it must be able to take the charge that the other
/// leaves, and an additive (a chelator, a preservative) is one only where the table or the word says so. `Tris-sulfate`
/// and `ammonium benzoate` are one thing each, `Tris-EDTA` and `citrate-phosphate` are two.
bool may_pair(const Table& table, const System& left, const System& right, std::string_view left_name) {
    const bool opposite = (can_be_cation(left) && can_be_anion(right)) || (can_be_anion(left) && can_be_cation(right));
    const auto lists = [&](const System& a, const System& b) {
        return std::find(a.counter_ions.begin(), a.counter_ions.end(), id_of(table, b)) != a.counter_ions.end();
    };
    const bool both_buffers = left.role == Role::buffer && right.role == Role::buffer;
    return opposite && (both_buffers || is_cation_name(left_name) || lists(left, right) || lists(right, left));
}

/// Ions of higher charge are no counter-ions: magnesium acetate is a salt to weigh, not an acetate buffer brought to pH
/// with a magnesium base.
const Spectator* ion_named(const Table& table, std::string_view name) {
    const Spectator* spectator = find_spectator(table, name);
    return spectator != nullptr && std::abs(spectator->charge) == 1 ? spectator : nullptr;
}

std::optional<NamedBuffer> divided(const Table& table, const Division& division) {
    const System* left = find_system(table, division.left);
    const System* right = find_system(table, division.right);
    if (left != nullptr && right != nullptr) {
        if (left == right && fold_name(division.left) != fold_name(division.right)) {
            return NamedBuffer{id_of(table, *left), std::nullopt};  // `carbonate-bicarbonate`
        }
        if (left == right || !may_pair(table, *left, *right, division.left)) {
            return std::nullopt;
        }
        // `ammonium acetate` is acetate made with ammonia; `Tris-acetate` is Tris made with acetic acid.
        return is_cation_name(division.left) ? NamedBuffer{id_of(table, *right), id_of(table, *left)}
                                             : NamedBuffer{id_of(table, *left), id_of(table, *right)};
    }
    // `ammonium chloride` is a salt to weigh, not a way to name an ammonia buffer.
    if (left != nullptr && !(can_be_cation(*left) && is_cation_name(division.left))) {
        if (const Spectator* ion = ion_named(table, division.right)) {
            return NamedBuffer{id_of(table, *left), id_of(table, *ion)};
        }
    }
    if (right != nullptr) {
        if (const Spectator* ion = ion_named(table, division.left)) {
            return NamedBuffer{id_of(table, *right), id_of(table, *ion)};
        }
    }
    return std::nullopt;
}

bool is_capital(char c) {
    return c >= 'A' && c <= 'Z';
}

/// Written together, as in `TrisHCl` and `NaHEPES`: the longest known buffer wins. A formula that is a reagent is none.
std::optional<NamedBuffer> joined(const Table& table, std::string_view text) {
    if (find_reagent(table, text) != nullptr) {
        return std::nullopt;
    }
    for (std::size_t i = text.size() - 1; i > 1; --i) {
        if (find_system(table, text.substr(0, i)) != nullptr) {
            if (auto named = divided(table, {text.substr(0, i), text.substr(i)})) {
                return named;
            }
        }
    }
    // The ion's symbol first: only a capital after it tells `NaMES` from a word that happens to begin so.
    constexpr std::size_t longest_symbol = 3;
    for (std::size_t i = 1; i <= longest_symbol && i + 1 < text.size(); ++i) {
        if (is_capital(text.front()) && is_capital(text[i]) && ion_named(table, text.substr(0, i)) != nullptr) {
            if (auto named = divided(table, {text.substr(0, i), text.substr(i)})) {
                return named;
            }
        }
    }
    return std::nullopt;
}

/// One side of `Na2HPO4/NaH2PO4`.
std::optional<NamedBuffer> side_of_pair(const Table& table, std::string_view text) {
    if (auto named = buffer_with_ion(text, table)) {
        return named;
    }
    const Reagent* reagent = reagent_named(table, text);
    const auto brought = reagent == nullptr ? std::nullopt : buffer_brought_by(table, *reagent);
    return brought && brought->count == 1 ? std::optional(brought->buffer) : std::nullopt;
}

/// Two forms of one system, as in `K2HPO4/KH2PO4` and `acetic acid-sodium acetate`: the system with the counter-ion of
/// either. Forms of different counter-ions are no name for a buffer.
std::optional<NamedBuffer> conjugate_pair(const Table& table, const Division& division) {
    const auto left = side_of_pair(table, division.left);
    const auto right = left ? side_of_pair(table, division.right) : std::nullopt;
    if (!right || left->system != right->system || fold_name(division.left) == fold_name(division.right) ||
        (left->counter_ion && right->counter_ion && left->counter_ion != right->counter_ion)) {
        return std::nullopt;
    }
    return NamedBuffer{left->system, left->counter_ion ? left->counter_ion : right->counter_ion};
}

}  // namespace

std::string_view without_the_word_buffer(std::string_view text) {
    constexpr std::string_view word = "buffer";
    const std::string lowered = lower_case(text);
    if (!lowered.ends_with(word)) {
        return text;
    }
    const std::string_view before = text.substr(0, text.size() - word.size());
    for (std::size_t i = 0; i < before.size(); ++i) {
        if (const std::size_t space = space_length(before.substr(i)); space > 0 && i + space == before.size()) {
            return before.substr(0, i);
        }
    }
    return text;
}

std::optional<NamedBuffer> buffer_with_ion(std::string_view text, const Table& table) {
    if (text.empty() || text.size() > longest_name) {
        return std::nullopt;
    }
    if (const System* system = find_system(table, text)) {
        return NamedBuffer{id_of(table, *system), std::nullopt};
    }
    for (const Division& division : divisions(text)) {
        if (auto named = divided(table, division)) {
            return named;
        }
    }
    return joined(table, text);
}

std::optional<NamedBuffer> read_buffer_name(std::string_view text, const Table& table) {
    text = without_the_word_buffer(text);
    if (auto named = buffer_with_ion(text, table)) {
        return named;
    }
    if (text.size() > longest_name || reagent_named(table, text) != nullptr) {
        return std::nullopt;
    }
    for (const Division& division : divisions(text)) {
        if (auto named = conjugate_pair(table, division)) {
            return named;
        }
    }
    return std::nullopt;
}

std::optional<std::pair<ComponentId, ComponentId>> two_systems_named(std::string_view text, const Table& table) {
    text = without_the_word_buffer(text);
    for (const Division& division : text.size() > longest_name ? std::vector<Division>{} : divisions(text)) {
        const System* left = find_system(table, division.left);
        const System* right = find_system(table, division.right);
        if (left != nullptr && right != nullptr && left != right && !may_pair(table, *left, *right, division.left)) {
            return std::pair{id_of(table, *left), id_of(table, *right)};
        }
    }
    return std::nullopt;
}

}  // namespace carboy
