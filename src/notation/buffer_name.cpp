#include <algorithm>
#include <array>
#include <cstdlib>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/notation.h"

#include "constants/name.h"

namespace carboy {

namespace {

// What stands between a buffer and its counter-ion: a space, any dash, a slash, a middle dot.
constexpr std::array joints{std::string_view(" "),      std::string_view("-"),      std::string_view("\u2010"),
                            std::string_view("\u2011"), std::string_view("\u2012"), std::string_view("\u2013"),
                            std::string_view("\u2014"), std::string_view("\u2212"), std::string_view("/"),
                            std::string_view("\u00B7")};

/// A place where a name may be divided: the text before it and after it.
struct Division {
    std::string_view left;
    std::string_view right;
};

std::vector<Division> divisions(std::string_view text) {
    std::vector<Division> found;
    for (std::size_t i = 1; i < text.size(); ++i) {
        for (const std::string_view joint : joints) {
            if (text.substr(i).starts_with(joint)) {
                found.push_back({text.substr(0, i), text.substr(i + joint.size())});
            }
        }
    }
    return found;
}

bool is_cation_name(std::string_view word) {
    return fold_name(word).ends_with("ium");
}

bool is_amine(const System& system) {
    return system.species.front().charge > 0;
}

/// An ion named beside a buffer: a strong one, or a system that is used as one. Ions of higher charge are none of
/// these: magnesium acetate is a salt to weigh, not an acetate buffer brought to pH with a magnesium base.
std::optional<ComponentId> ion_named(const Table& table, std::string_view name) {
    if (const Spectator* spectator = find_spectator(table, name); spectator != nullptr) {
        return std::abs(spectator->charge) == 1 ? std::optional(id_of(table, *spectator)) : std::nullopt;
    }
    if (const System* system = find_system(table, name)) {
        return id_of(table, *system);
    }
    return std::nullopt;
}

std::optional<NamedBuffer> divided(const Table& table, std::string_view left, std::string_view right) {
    const System* left_system = find_system(table, left);
    const System* right_system = find_system(table, right);
    if (left_system != nullptr && right_system != nullptr) {
        // Two acids, or a buffer and an addition such as EDTA, are two items and not a buffer with its counter-ion.
        const bool two_acids = !is_amine(*left_system) && !is_amine(*right_system);
        const bool addition = left_system->role == Role::additive || right_system->role == Role::additive;
        if (left_system == right_system || two_acids || addition) {
            return std::nullopt;
        }
        // `ammonium acetate` is acetate made with ammonia; `Tris-acetate` is Tris made with acetic acid.
        return is_cation_name(left) ? NamedBuffer{id_of(table, *right_system), id_of(table, *left_system)}
                                    : NamedBuffer{id_of(table, *left_system), id_of(table, *right_system)};
    }
    // `ammonium chloride` is a salt to weigh, not a way to name an ammonia buffer.
    if (left_system != nullptr && !(is_amine(*left_system) && is_cation_name(left))) {
        if (const auto ion = ion_named(table, right)) {
            return NamedBuffer{id_of(table, *left_system), ion};
        }
    }
    if (right_system != nullptr) {
        if (const auto ion = ion_named(table, left)) {
            return NamedBuffer{id_of(table, *right_system), ion};
        }
    }
    return std::nullopt;
}

}  // namespace

std::optional<NamedBuffer> read_buffer_name(std::string_view text, const Table& table) {
    for (const std::string_view ending : {" buffer", " Buffer"}) {
        if (text.ends_with(ending)) {
            text.remove_suffix(ending.size());
        }
    }
    if (text.empty()) {
        return std::nullopt;
    }
    if (const System* system = find_system(table, text)) {
        return NamedBuffer{id_of(table, *system), std::nullopt};
    }
    const auto places = divisions(text);
    for (const auto& [left, right] : places) {
        if (auto named = divided(table, left, right)) {
            return named;
        }
    }
    // Written together, as in TrisHCl: the longest known buffer wins.
    if (places.empty()) {
        for (std::size_t i = text.size() - 1; i > 1; --i) {
            if (find_system(table, text.substr(0, i)) != nullptr) {
                if (auto named = divided(table, text.substr(0, i), text.substr(i))) {
                    return named;
                }
            }
        }
    }
    return std::nullopt;
}

}  // namespace carboy
