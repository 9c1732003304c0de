#include "notation/ph_item.h"

#include <algorithm>
#include <array>
#include <string>

#include <fmt/format.h>

#include "notation/ingredient.h"
#include "notation/quantity_reader.h"

namespace carboy {

namespace {

constexpr Expected ph_temperature{QuantityKind::temperature, "pH 7.5 at 4 C"};

[[noreturn]] void fail_room_temperature(const Line& line, Part words) {
    line.fail("not_a_number", fmt::format("'{}' is no temperature to reckon with", text_of(line, words)), words.begin,
              words.end, "give a number, as in pH 7.5 at 22 C");
}

bool is_room_temperature(std::string_view text) {
    constexpr std::array words{std::string_view("rt"), std::string_view("r.t."), std::string_view("room temp"),
                               std::string_view("ambient")};
    const std::string lowered = lower_case(text);
    return std::any_of(words.begin(), words.end(), [&](std::string_view word) {
        constexpr std::size_t abbreviation = 4;
        const std::string_view after = lowered.starts_with(word) ? std::string_view(lowered).substr(word.size()) : "x";
        return after.empty() || after.front() == ' ' || (lowered.starts_with(word) && word.size() > abbreviation);
    });
}

/// What follows the number of a pH item, part by part, in any order.
class PhConditions {
public:
    PhConditions(const Line& line, const Table& table, PhItem& read) : line_(line), table_(table), read_(read) {}

    void read(Part rest) {
        bool taken = true;
        while (taken && !rest.empty()) {
            taken = take_bracketed(rest) || take_temperature(rest) || take_titrant(rest);
            rest = trimmed(line_, rest);
        }
        if (is_room_temperature(text_of(line_, rest))) {
            fail_room_temperature(line_, rest);
        }
        expect_end(line_, rest, "the pH", "after the pH only a temperature may stand, as in pH 7.5 at 4 C");
    }

private:
    /// `(4 C)`, `(at 4 C)`, `(KOH)`.
    bool take_bracketed(Part& rest) {
        const auto close = text_of(line_, rest).find(')');
        if (!text_of(line_, rest).starts_with('(') || close == std::string_view::npos) {
            return false;
        }
        Part inside = trimmed(line_, {rest.begin + 1, rest.begin + close});
        rest.begin += close + 1;
        if (is_room_temperature(text_of(line_, inside))) {
            fail_room_temperature(line_, inside);
        }
        if (number_begins(text_of(line_, inside))) {
            read_temperature(inside);
        } else if (!take_temperature(inside)) {
            name_titrant(inside);
            return true;
        }
        expect_end(line_, inside, "the temperature", "write it like pH 7.5 at 4 C");
        return true;
    }

    /// `at 4 C`, `@ 4 C`.
    bool take_temperature(Part& rest) {
        const bool at_sign = text_of(line_, rest).starts_with('@');
        if (!at_sign && !begins_with_word(line_, rest, "at")) {
            return false;
        }
        rest = trimmed(line_, {rest.begin + (at_sign ? 1 : 2), rest.end});
        read_temperature(rest);
        return true;
    }

    void read_temperature(Part& rest) {
        if (is_room_temperature(text_of(line_, rest))) {
            fail_room_temperature(line_, rest);
        }
        const ReadQuantity quantity = read_quantity(line_, rest, ph_temperature);
        if (read_.at) {
            line_.fail("duplicate_item", "a second temperature stands beside the pH", quantity.whole.begin,
                       quantity.whole.end, "keep one");
        }
        read_.at = Temperature::celsius(quantity.value);
    }

    /// `with KOH`.
    bool take_titrant(Part& rest) {
        constexpr std::string_view with = "with";
        if (!begins_with_word(line_, rest, with)) {
            return false;
        }
        const Part after = trimmed(line_, {rest.begin + with.size(), rest.end});
        std::size_t end = after.begin;
        while (end < after.end && space_length(text_of(line_, {end, after.end})) == 0) {
            ++end;
        }
        name_titrant({after.begin, end});
        rest = {end, rest.end};
        return true;
    }

    void name_titrant(Part name) {
        if (read_.titrant) {
            line_.fail("duplicate_item", "a second titrant stands beside the pH", name.begin, name.end, "keep one");
        }
        const Spectator* ion = find_spectator(table_, text_of(line_, name));
        const System* system = find_system(table_, text_of(line_, name));
        if (ion != nullptr && ion->charge != 0) {
            read_.titrant = id_of(table_, *ion);
        } else if (system != nullptr) {
            read_.titrant = id_of(table_, *system);
        } else {
            line_.fail("unknown_name", fmt::format("'{}' is no acid or base known here", text_of(line_, name)),
                       name.begin, name.end,
                       "name what it is brought to pH with, as in pH 7.5 (KOH); a temperature as in pH 7.5 at 4 C");
        }
        read_.titrant_named = name;
    }

    const Line& line_;
    const Table& table_;
    PhItem& read_;
};

}  // namespace

bool is_ph_item(std::string_view text) {
    const std::string lowered = lower_case(text.substr(0, 3));
    return lowered.starts_with("ph") && (lowered.size() == 2 || !(lowered[2] >= 'a' && lowered[2] <= 'z'));
}

PhItem read_ph_item(const Line& line, Part item, const Table& table) {
    PhItem read;
    Part rest = after_word(line, item, 2);
    read.ph = read_ph_number(line, rest);
    PhConditions(line, table, read).read(trimmed(line, rest));
    return read;
}

std::vector<Part> with_ph_apart(const Line& line, const std::vector<Part>& items) {
    std::vector<Part> apart;
    for (const Part item : items) {
        const auto at = find_behind_name(line, item, "ph");
        if (!at || is_ph_item(text_of(line, item))) {
            apart.push_back(item);
            continue;
        }
        const bool bracketed = line.text()[*at - 1] == '(';
        if (bracketed && line.text()[item.end - 1] != ')') {
            apart.push_back(item);  // left to be refused: what stands there may be meant in another way
            continue;
        }
        apart.push_back(trimmed(line, {item.begin, *at - (bracketed ? 1 : 0)}));
        apart.push_back({*at, item.end - (bracketed ? 1 : 0)});
    }
    return apart;
}

Part after_word(const Line& line, Part item, std::size_t length) {
    Part rest = trimmed(line, {item.begin + length, item.end});
    if (text_of(line, rest).starts_with('=') || text_of(line, rest).starts_with(':')) {
        rest = trimmed(line, {rest.begin + 1, rest.end});
    }
    return rest;
}

}  // namespace carboy
