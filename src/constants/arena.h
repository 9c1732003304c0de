#pragma once

#include <algorithm>
#include <any>
#include <deque>
#include <memory>
#include <span>
#include <string>
#include <type_traits>
#include <vector>

#include "constants/name.h"
#include "constants/table_builder.h"

namespace carboy {

/// Where the text and arrays of an overlaid table live; nothing in it ever moves.
struct TableBuilder::Arena {
    std::deque<std::string> texts;
    std::deque<std::any> arrays;
    std::shared_ptr<const void> base_owner;

    template <class T>
    std::span<const T> keep(std::vector<T> items) {
        arrays.emplace_back(std::make_shared<std::vector<T>>(std::move(items)));
        const auto& kept = std::any_cast<const std::shared_ptr<std::vector<T>>&>(arrays.back());
        return {kept->data(), kept->size()};
    }
};

template <class T>
std::span<const T> TableBuilder::keep_array(std::vector<T> items) {
    return arena_->keep(std::move(items));
}

template <class Entry>
std::size_t TableBuilder::place(std::vector<Entry>& entries, Entry entry, std::string_view Entry::*key,
                                const char* kind) {
    // Names are folded as users type them; keys of sources, elements and hazards (H360FD, H360Fd) are taken letter by
    // letter.
    const bool is_name = std::is_same_v<Entry, Spectator> || std::is_same_v<Entry, System> ||
                         std::is_same_v<Entry, Reagent> || std::is_same_v<Entry, Vessel>;
    const auto compared = [&](std::string_view text) { return is_name ? fold_name(text) : std::string(text); };
    const std::string wanted = compared(entry.*key);
    const auto known = std::find_if(entries.begin(), entries.end(),
                                    [&](const Entry& other) { return compared(other.*key) == wanted; });
    changes.push_back({kind, std::string(entry.*key), known != entries.end()});
    if (known != entries.end()) {
        *known = std::move(entry);
        return static_cast<std::size_t>(known - entries.begin());
    }
    entries.push_back(std::move(entry));
    return entries.size() - 1;
}

}  // namespace carboy
