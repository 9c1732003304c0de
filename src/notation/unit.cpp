#include "notation/unit.h"

#include <algorithm>
#include <array>
#include <vector>

#include <fmt/format.h>

#include "carboy/notation.h"

#include "notation/line.h"

namespace carboy {

namespace {

constexpr Unit concentration(std::string_view spelling, double factor, double divisor, ConcentrationUnit unit) {
    return {spelling, QuantityKind::concentration, factor, divisor, unit};
}
constexpr Unit other(std::string_view spelling, QuantityKind kind, double factor, double divisor) {
    return {spelling, kind, factor, divisor, ConcentrationUnit::mol_per_L};
}

constexpr auto molar = ConcentrationUnit::mol_per_L;
constexpr auto molal = ConcentrationUnit::mol_per_kg;
constexpr auto grams = ConcentrationUnit::g_per_L;

// What benches write for % w/v of a solid; whoever reads it must see that it is one.
constexpr std::string_view bare_percent = "%";

// In the spelling that `canonical` gives. The usual ones come first, since suggestions keep this order.
constexpr std::array units{
    concentration("M", 1, 1, molar),
    concentration("mM", 1, 1e3, molar),
    concentration("uM", 1, 1e6, molar),
    concentration("nM", 1, 1e9, molar),
    concentration("mol/L", 1, 1, molar),
    concentration("mmol/L", 1, 1e3, molar),
    concentration("umol/L", 1, 1e6, molar),
    concentration("nmol/L", 1, 1e9, molar),
    concentration("mol/kg", 1, 1, molal),
    concentration("mmol/kg", 1, 1e3, molal),
    concentration("umol/kg", 1, 1e6, molal),
    concentration("nmol/kg", 1, 1e9, molal),
    concentration("g/L", 1, 1, grams),
    concentration("mg/L", 1, 1e3, grams),
    concentration("ug/L", 1, 1e6, grams),
    concentration("g/mL", 1e3, 1, grams),
    concentration("mg/mL", 1, 1, grams),
    concentration("ug/mL", 1, 1e3, grams),
    concentration("% w/v", 10, 1, grams),
    concentration(bare_percent, 10, 1, grams),
    concentration("% v/v", 1, 1, ConcentrationUnit::percent_v_v),
    concentration("% w/w", 1, 1, ConcentrationUnit::percent_w_w),
    concentration("N", 1, 1, ConcentrationUnit::normal),
    other("L", QuantityKind::volume, 1, 1),
    other("mL", QuantityKind::volume, 1, 1e3),
    other("uL", QuantityKind::volume, 1, 1e6),
    other("dL", QuantityKind::volume, 1, 10),
    other("g", QuantityKind::mass, 1, 1),
    other("mg", QuantityKind::mass, 1, 1e3),
    other("ug", QuantityKind::mass, 1, 1e6),
    other("kg", QuantityKind::mass, 1e3, 1),
    other("C", QuantityKind::temperature, 1, 1),
    other("Cel", QuantityKind::temperature, 1, 1),
    other("K", QuantityKind::temperature, 1, 1),
    other("x", QuantityKind::strength, 1, 1),
};

struct Spelling {
    std::string_view typed;
    std::string_view plain;
};

// Two micro signs (U+00B5, U+03BC), degree sign (and the ordinal that looks like it), degree Celsius, times.
constexpr std::array characters{Spelling{"\u00B5", "u"},  Spelling{"\u03BC", "u"}, Spelling{"\u00B0C", "C"},
                                Spelling{"\u00BAC", "C"}, Spelling{"\u2103", "C"}, Spelling{"\u00D7", "x"},
                                Spelling{"degC", "C"}};

// Words for units that no distance of spelling would lead to, in lower case.
constexpr std::array words{Spelling{"litre", "L"},
                           Spelling{"litres", "L"},
                           Spelling{"liter", "L"},
                           Spelling{"liters", "L"},
                           Spelling{"molar", "M"},
                           Spelling{"molal", "mol/kg"},
                           Spelling{"deg", "C"},
                           Spelling{"celsius", "C"},
                           Spelling{"kelvin", "K"},
                           Spelling{"gram", "g"},
                           Spelling{"grams", "g"},
                           Spelling{"f", "C or K"},
                           Spelling{"\u00B0f", "C or K"},
                           Spelling{"normal", "N"},
                           Spelling{"mol", "mol/L or mol/kg"},
                           Spelling{"mmol", "mmol/L or mmol/kg"}};

/// `%w/v`, `% (w/v)` and `% W/V` as `% w/v`.
std::string canonical_percent(std::string_view token) {
    std::string spelled = "%";
    for (const char c : lower_case(token.substr(1))) {
        if (c == 'w' || c == 'v' || c == '/') {
            spelled += spelled.size() == 1 ? " " : "";
            spelled += c;
        }
    }
    return spelled;
}

std::string canonical(std::string_view typed) {
    if (typed.starts_with('%')) {
        return canonical_percent(typed);
    }
    std::string close;  // `25 ° C`
    while (!typed.empty()) {
        const std::size_t space = space_length(typed);
        close += space > 0 ? std::string_view() : typed.substr(0, 1);
        typed.remove_prefix(std::max<std::size_t>(space, 1));
    }
    std::string_view token = close;
    std::string spelled;
    while (!token.empty()) {
        const auto* found = std::find_if(characters.begin(), characters.end(),
                                         [&](const Spelling& s) { return token.starts_with(s.typed); });
        spelled += found == characters.end() ? token.substr(0, 1) : found->plain;
        token.remove_prefix(found == characters.end() ? 1 : found->typed.size());
    }
    if (spelled == "X") {
        return "x";
    }
    if (spelled.ends_with('l') && spelled != "Cel") {
        spelled.back() = 'L';
    }
    return spelled;
}

/// Bytes of a degree, `°` or `deg`, that stands apart from its C: `25 ° C`; 0 when there is none.
std::size_t length_of_degree_apart(std::string_view text) {
    for (const std::string_view degree : {"\u00B0", "\u00BA", "deg"}) {
        std::size_t next = degree.size();
        while (text.starts_with(degree) && next < text.size() && space_length(text.substr(next)) > 0) {
            next += space_length(text.substr(next));
        }
        const std::string_view rest = text.substr(std::min(next, text.size()));
        if (next > degree.size() && rest.starts_with('C') &&
            (rest.size() == 1 || rest[1] == ',' || rest[1] == ')' || rest[1] == ';' ||
             space_length(rest.substr(1)) > 0)) {
            return next + 1;
        }
    }
    return 0;
}

}  // namespace

std::string_view kind_phrase(QuantityKind kind) {
    constexpr std::array phrases{std::string_view("a concentration"), std::string_view("a volume"),
                                 std::string_view("a mass"), std::string_view("a temperature"),
                                 std::string_view("a strength of a named formula")};
    return phrases[static_cast<std::size_t>(kind)];
}

const Unit* find_unit(std::string_view token) {
    const std::string spelled = canonical(token);
    const auto* found =
        std::find_if(units.begin(), units.end(), [&](const Unit& unit) { return unit.spelling == spelled; });
    return found == units.end() ? nullptr : found;
}

std::size_t unit_length(std::string_view text) {
    if (const std::size_t degree = length_of_degree_apart(text)) {
        return degree;
    }
    if (text.starts_with('%')) {
        std::size_t next = 1;
        while (const std::size_t space = space_length(text.substr(next))) {
            next += space;
        }
        const std::string rest = lower_case(text.substr(next, 5));
        for (const std::string_view basis : {"w/v", "v/v", "w/w", "(w/v)", "(v/v)", "(w/w)"}) {
            if (rest.starts_with(basis)) {
                return next + basis.size();
            }
        }
        return 1;
    }
    std::size_t length = 0;
    bool bracket_open = false;  // of the token's own: a closing one of the line's ends it, as in `(4C)`
    while (length < text.size() && text[length] != ',' && text[length] != ';' &&
           (bracket_open || text[length] != ')') && space_length(text.substr(length)) == 0) {
        bracket_open = bracket_open || text[length] == '(';
        ++length;
    }
    return length;
}

std::string unit_help(std::string_view token, std::optional<QuantityKind> expected, std::string_view example) {
    const std::string lowered = lower_case(token);
    const auto* word = std::find_if(words.begin(), words.end(), [&](const Spelling& s) { return s.typed == lowered; });
    if (word != words.end()) {
        return fmt::format("write {}", word->plain);
    }
    std::vector<std::string> spellings;
    for (const Unit& unit : units) {
        if (unit.spelling != bare_percent && (!expected || unit.kind == *expected)) {
            spellings.emplace_back(unit.spelling);
        }
    }
    constexpr std::size_t enough = 5;
    const std::string typed = canonical(token);
    const auto near = nearest_words(typed, spellings, enough);
    if (near.empty()) {
        return fmt::format("write it like {}", example);
    }
    // Among units, all of them short, a wrong letter is likelier than a letter too many: `mn` was mM rather than M.
    const auto same_length = std::find_if(near.begin(), near.end(),
                                          [&](const std::string& near_one) { return near_one.size() == typed.size(); });
    return fmt::format("did you mean {}?", same_length == near.end() ? near.front() : *same_length);
}

}  // namespace carboy
