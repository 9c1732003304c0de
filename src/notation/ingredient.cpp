#include "notation/ingredient.h"

#include <array>
#include <string>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/notation.h"

#include "notation/items.h"
#include "notation/reagent_name.h"

namespace carboy {

namespace {

bool is_known(const Table& table, std::string_view name) {
    return read_buffer_name(name, table) || reagent_named(table, name) != nullptr;
}

[[noreturn]] void fail_without_quantity(const Line& line, Part item, const Table& table, const ItemForm& form) {
    expect_no_missing_comma(line, item);
    const std::string_view text = text_of(line, item);
    const bool known = is_known(table, text);
    line.fail(
        known ? "missing_quantity" : "unreadable_item",
        known ? fmt::format("'{}' has no amount", text) : fmt::format("'{}' cannot be read: it has no amount", text),
        item.begin, item.end, fmt::format("write amount and name, as in {}", form.example));
}

/// A name first, then how much of it.
std::optional<Ingredient> find_name_first(const Line& line, Part item, const Table& table, const ItemForm& form) {
    Ingredient ingredient{item, item, {}};
    try {
        const auto quantity = read_trailing_quantity(line, ingredient.name, form.likely);
        if (!quantity) {
            return std::nullopt;
        }
        ingredient.quantity = *quantity;
        // `hydrochloric acid 37 %`: the number belongs to the name, and none to the item.
        if (quantity->bare_percent && is_known(table, text_of(line, item))) {
            fail_without_quantity(line, item, table, form);
        }
        return ingredient;
    } catch (const Error&) {
        // `AMP-95` in full: the number belongs to the name, and none to the item.
        if (is_known(table, text_of(line, item))) {
            fail_without_quantity(line, item, table, form);
        }
        expect_no_missing_comma(line, item);
        throw;
    }
}

}  // namespace

std::optional<Ingredient> find_ingredient(const Line& line, Part item, const Table& table, const ItemForm& form) {
    if (!number_begins(text_of(line, item)) || begins_with_locant(text_of(line, item))) {
        return find_name_first(line, item, table, form);
    }
    Part rest = item;
    Ingredient ingredient;
    ingredient.whole = item;
    ingredient.quantity = read_quantity(line, rest, std::nullopt, form.likely);
    ingredient.name = trimmed(line, rest);
    if (begins_with_word(line, ingredient.name, "of")) {
        constexpr std::size_t of = 2;
        ingredient.name = trimmed(line, {ingredient.name.begin + of, ingredient.name.end});
    }
    if (ingredient.name.empty() && ingredient.quantity.kind == QuantityKind::temperature) {
        line.fail("misplaced_temperature", "a temperature stands alone", item.begin, item.end,
                  "the temperature belongs to the pH, as in pH 7.5 at 4 C");
    }
    if (ingredient.name.empty()) {
        line.fail("missing_name", fmt::format("{} of what?", text_of(line, ingredient.quantity.whole)), item.begin,
                  item.end, fmt::format("write the name after the amount, as in {}", form.example));
    }
    return ingredient;
}

Ingredient read_ingredient(const Line& line, Part item, const Table& table, const ItemForm& form) {
    if (auto ingredient = find_ingredient(line, item, table, form)) {
        return *ingredient;
    }
    fail_without_quantity(line, item, table, form);
}

std::optional<std::size_t> find_behind_name(const Line& line, Part part, std::string_view word) {
    const std::string lowered = lower_case(text_of(line, part));
    for (auto at = lowered.find(word); at != std::string::npos; at = lowered.find(word, at + 1)) {
        const std::size_t begin = part.begin + at;
        const bool apart = at > 0 && (lowered[at - 1] == '(' || trimmed(line, {part.begin, begin}).end < begin);
        Part after = trimmed(line, {begin + word.size(), part.end});
        if (text_of(line, after).starts_with('=') || text_of(line, after).starts_with(':')) {
            after = trimmed(line, {after.begin + 1, after.end});
        }
        if (apart && number_begins(text_of(line, after))) {
            return begin;
        }
    }
    return std::nullopt;
}

void expect_no_missing_comma(const Line& line, Part part) {
    struct Word {
        std::string_view text;
        std::string_view what;
    };
    constexpr std::array words{Word{"ph", "a pH"}, Word{"ionic strength", "an ionic strength"},
                               Word{"to", "a final volume"}};
    for (const auto& [text, what] : words) {
        if (const auto at = find_behind_name(line, part, text)) {
            line.fail("missing_comma", fmt::format("{} stands behind a name", what), *at, part.end,
                      "put a comma before it, to make it an item of its own");
        }
    }
}

void fail_unknown_name(const Line& line, Part name, const std::vector<std::string>& nearest) {
    expect_no_missing_comma(line, name);
    line.fail(
        "unknown_name", fmt::format("the table knows nothing called '{}'", text_of(line, name)), name.begin, name.end,
        nearest.empty() ? std::string("'carboy constants list' and 'carboy constants list reagents' show every name")
                        : fmt::format("did you mean {}?", fmt::join(nearest, ", ")));
}

}  // namespace carboy
