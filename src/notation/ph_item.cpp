#include "notation/ph_item.h"

#include <algorithm>
#include <string>

#include <fmt/format.h>

#include "notation/ingredient.h"
#include "notation/quantity_reader.h"

namespace carboy {

namespace {

constexpr Expected ph_temperature{QuantityKind::temperature, "pH 7.5 at 4 C"};

/// Moves `rest` past `(KOH)` or `with KOH`, if it begins so.
void read_titrant(const Line& line, Part& rest, const Table& table, PhItem& read) {
    constexpr std::string_view with = "with";
    const bool bracketed = text_of(line, rest).starts_with('(');
    if (!bracketed && !begins_with_word(line, rest, with)) {
        return;
    }
    const Part after = trimmed(line, {rest.begin + (bracketed ? 1 : with.size()), rest.end});
    std::size_t end = after.begin;
    while (end < after.end &&
           (bracketed ? line.text()[end] != ')' : space_length(text_of(line, {end, after.end})) == 0)) {
        ++end;
    }
    if (bracketed && end == after.end) {
        return;  // never closed: not what it seemed
    }
    const Part name = trimmed(line, {after.begin, end});
    if (read.titrant) {
        line.fail("duplicate_item", "a second titrant stands beside the pH", name.begin, name.end, "keep one");
    }
    const Spectator* ion = find_spectator(table, text_of(line, name));
    const System* system = find_system(table, text_of(line, name));
    if (ion != nullptr && ion->charge != 0) {
        read.titrant = id_of(table, *ion);
    } else if (system != nullptr) {
        read.titrant = id_of(table, *system);
    } else {
        line.fail("unknown_name", fmt::format("'{}' is no acid or base known here", text_of(line, name)), name.begin,
                  name.end,
                  "name what it is brought to pH with, as in pH 7.5 (KOH); a temperature as in pH 7.5 at 4 C");
    }
    rest = trimmed(line, {std::min(end + (bracketed ? 1 : 0), rest.end), rest.end});
}

}  // namespace

bool is_ph_item(std::string_view text) {
    const std::string lowered = lower_case(text.substr(0, 3));
    return lowered.starts_with("ph") && (lowered.size() == 2 || !(lowered[2] >= 'a' && lowered[2] <= 'z'));
}

PhItem read_ph_item(const Line& line, Part item, const Table& table) {
    PhItem read;
    Part rest = after_word(line, item, 2);
    read.ph = read_ph_number(line, rest);
    rest = trimmed(line, rest);
    read_titrant(line, rest, table, read);
    const bool at_sign = text_of(line, rest).starts_with('@');
    if (at_sign || begins_with_word(line, rest, "at")) {
        rest = trimmed(line, {rest.begin + (at_sign ? 1 : 2), rest.end});
        read.at = Temperature::celsius(read_quantity(line, rest, ph_temperature).value);
        rest = trimmed(line, rest);
        read_titrant(line, rest, table, read);
        expect_end(line, rest, "the temperature", "put a comma before the next item");
    }
    expect_end(line, rest, "the pH", "after the pH only a temperature may stand, as in pH 7.5 at 4 C");
    return read;
}

std::vector<Part> with_ph_apart(const Line& line, const std::vector<Part>& items) {
    std::vector<Part> apart;
    for (const Part item : items) {
        const auto at = find_behind_name(line, item, "ph");
        // In brackets it is left to be refused: what stands there may be meant in another way.
        const bool divides = at && line.text()[*at - 1] != '(' && !is_ph_item(text_of(line, item));
        if (divides) {
            apart.push_back(trimmed(line, {item.begin, *at}));
        }
        apart.push_back(divides ? Part{*at, item.end} : item);
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
