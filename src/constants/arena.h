#pragma once

#include <algorithm>
#include <any>
#include <deque>
#include <memory>
#include <span>
#include <string>
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
std::size_t TableBuilder::place(std::vector<Entry>& entries, Entry entry, std::string_view Entry::*key, const char* kind) {
    const std::string folded = fold_name(entry.*key);
    const auto known = std::find_if(entries.begin(), entries.end(),
                                    [&](const Entry& other) { return fold_name(other.*key) == folded; });
    changes.push_back({kind, std::string(entry.*key), known != entries.end()});
    if (known != entries.end()) {
        *known = std::move(entry);
        return static_cast<std::size_t>(known - entries.begin());
    }
    entries.push_back(std::move(entry));
    return entries.size() - 1;
}

}  // namespace carboy
