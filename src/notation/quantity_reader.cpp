#include "notation/quantity_reader.h"

#include <array>
#include <charconv>
#include <cmath>
#include <string>
#include <vector>

#include <fmt/format.h>

#include "carboy/notation.h"

namespace carboy {

namespace {

struct Unit {
    std::string_view spelling;
    QuantityKind kind;
    double factor;
    ConcentrationUnit unit = ConcentrationUnit::mol_per_L;
};

constexpr auto molar = ConcentrationUnit::mol_per_L;
constexpr auto molal = ConcentrationUnit::mol_per_kg;
constexpr auto grams = ConcentrationUnit::g_per_L;

// As the trade writes them and as UCUM codes. Temperatures have their own rule for kelvin.
constexpr std::array units{Unit{"M", QuantityKind::concentration, 1, molar},
                           Unit{"mM", QuantityKind::concentration, 1e-3, molar},
                           Unit{"uM", QuantityKind::concentration, 1e-6, molar},
                           Unit{"\u00B5M", QuantityKind::concentration, 1e-6, molar},
                           Unit{"\u03BCM", QuantityKind::concentration, 1e-6, molar},
                           Unit{"nM", QuantityKind::concentration, 1e-9, molar},
                           Unit{"mol/L", QuantityKind::concentration, 1, molar},
                           Unit{"mol/l", QuantityKind::concentration, 1, molar},
                           Unit{"mmol/L", QuantityKind::concentration, 1e-3, molar},
                           Unit{"mmol/l", QuantityKind::concentration, 1e-3, molar},
                           Unit{"umol/L", QuantityKind::concentration, 1e-6, molar},
                           Unit{"\u00B5mol/L", QuantityKind::concentration, 1e-6, molar},
                           Unit{"\u03BCmol/L", QuantityKind::concentration, 1e-6, molar},
                           Unit{"nmol/L", QuantityKind::concentration, 1e-9, molar},
                           Unit{"mol/kg", QuantityKind::concentration, 1, molal},
                           Unit{"mmol/kg", QuantityKind::concentration, 1e-3, molal},
                           Unit{"umol/kg", QuantityKind::concentration, 1e-6, molal},
                           Unit{"\u00B5mol/kg", QuantityKind::concentration, 1e-6, molal},
                           Unit{"\u03BCmol/kg", QuantityKind::concentration, 1e-6, molal},
                           Unit{"g/L", QuantityKind::concentration, 1, grams},
                           Unit{"g/l", QuantityKind::concentration, 1, grams},
                           Unit{"mg/L", QuantityKind::concentration, 1e-3, grams},
                           Unit{"mg/l", QuantityKind::concentration, 1e-3, grams},
                           Unit{"mg/mL", QuantityKind::concentration, 1, grams},
                           Unit{"mg/ml", QuantityKind::concentration, 1, grams},
                           Unit{"% w/v", QuantityKind::concentration, 10, grams},
                           Unit{"% v/v", QuantityKind::concentration, 1, ConcentrationUnit::percent_v_v},
                           Unit{"% w/w", QuantityKind::concentration, 1, ConcentrationUnit::percent_w_w},
                           Unit{"N", QuantityKind::concentration, 1, ConcentrationUnit::normal},
                           Unit{"L", QuantityKind::volume, 1},
                           Unit{"l", QuantityKind::volume, 1},
                           Unit{"dL", QuantityKind::volume, 0.1},
                           Unit{"dl", QuantityKind::volume, 0.1},
                           Unit{"mL", QuantityKind::volume, 1e-3},
                           Unit{"ml", QuantityKind::volume, 1e-3},
                           Unit{"uL", QuantityKind::volume, 1e-6},
                           Unit{"ul", QuantityKind::volume, 1e-6},
                           Unit{"\u00B5L", QuantityKind::volume, 1e-6},
                           Unit{"\u00B5l", QuantityKind::volume, 1e-6},
                           Unit{"\u03BCL", QuantityKind::volume, 1e-6},
                           Unit{"kg", QuantityKind::mass, 1000},
                           Unit{"g", QuantityKind::mass, 1},
                           Unit{"mg", QuantityKind::mass, 1e-3},
                           Unit{"ug", QuantityKind::mass, 1e-6},
                           Unit{"\u00B5g", QuantityKind::mass, 1e-6},
                           Unit{"\u03BCg", QuantityKind::mass, 1e-6},
                           Unit{"C", QuantityKind::temperature, 1},
                           Unit{"\u00B0C", QuantityKind::temperature, 1},
                           Unit{"\u2103", QuantityKind::temperature, 1},
                           Unit{"Cel", QuantityKind::temperature, 1},
                           Unit{"K", QuantityKind::temperature, 1},
                           Unit{"x", QuantityKind::strength, 1},
                           Unit{"X", QuantityKind::strength, 1},
                           Unit{"\u00D7", QuantityKind::strength, 1}};

constexpr double zero_celsius_K = 273.15;

bool is_space(char c) {
    return c == ' ' || c == '\t';
}
bool is_digit(char c) {
    return c >= '0' && c <= '9';
}

/// The unit's letters: up to a space or comma, with `% w/v` kept together.
Part unit_token(const Line& line, Part part) {
    const auto text = line.text();
    Part token{part.begin, part.begin};
    if (token.end < part.end && text[token.end] == '%') {
        ++token.end;
        std::size_t next = token.end;
        while (next < part.end && is_space(text[next])) {
            ++next;
        }
        const auto rest = text.substr(next, part.end - next);
        for (const std::string_view basis : {"w/v", "v/v", "w/w", "(w/v)", "(v/v)", "(w/w)"}) {
            if (rest.starts_with(basis)) {
                token.end = next + basis.size();
                break;
            }
        }
        return token;
    }
    while (token.end < part.end && !is_space(text[token.end]) && text[token.end] != ',' && text[token.end] != ';') {
        ++token.end;
    }
    return token;
}

std::string normal_spelling(std::string_view token) {
    if (!token.starts_with('%')) {
        return std::string(token);
    }
    std::string spelled = "%";
    for (const char c : token.substr(1)) {
        if (c == 'w' || c == 'v' || c == '/') {
            spelled += spelled.size() == 1 ? " " : "";
            spelled += c;
        }
    }
    return spelled;
}

const Unit* find_unit(std::string_view token) {
    const std::string spelled = normal_spelling(token);
    for (const Unit& unit : units) {
        if (unit.spelling == spelled) {
            return &unit;
        }
    }
    return nullptr;
}

[[noreturn]] void fail_unit(const Line& line, Part number, Part token) {
    const std::string_view typed = text_of(line, token);
    if (typed == "%") {
        line.fail("unknown_unit", "'%' does not say of what", token.begin, token.end, "write % w/v, % v/v or % w/w");
    }
    std::vector<std::string> spellings;
    for (const Unit& unit : units) {
        spellings.emplace_back(unit.spelling);
    }
    const auto near = nearest_words(typed, spellings);
    line.fail("unknown_unit", fmt::format("'{}' is no unit known here", typed), token.begin, token.end,
              near.empty() ? fmt::format("write a unit after {}, such as mM, g/L, mL, mg or C", text_of(line, number))
                           : fmt::format("did you mean {}?", near.front()));
}

}  // namespace

std::string_view kind_phrase(QuantityKind kind) {
    constexpr std::array phrases{std::string_view("a concentration"), std::string_view("a volume"),
                                 std::string_view("a mass"), std::string_view("a temperature"),
                                 std::string_view("a strength of a named formula")};
    return phrases[static_cast<std::size_t>(kind)];
}

bool number_begins(std::string_view text) {
    if (!text.empty() && (text.front() == '-' || text.front() == '+')) {
        text.remove_prefix(1);
    } else if (text.starts_with("\u2212")) {
        text.remove_prefix(std::string_view("\u2212").size());
    }
    if (!text.empty() && text.front() == '.') {
        text.remove_prefix(1);
    }
    return !text.empty() && is_digit(text.front());
}

double read_number(const Line& line, Part& part, bool may_be_negative) {
    const auto text = line.text();
    const std::size_t start = part.begin;
    if (!number_begins(text_of(line, part))) {
        const Part token = part.empty() ? Part{part.begin, part.begin} : unit_token(line, part);
        line.fail(
            "not_a_number",
            part.empty() ? "a number is expected here" : fmt::format("'{}' is not a number", text_of(line, token)),
            token.begin, token.end, "write it as 7.4 or 1e-3");
    }
    bool negative = false;
    constexpr std::string_view minus_sign = "\u2212";
    if (text_of(line, part).starts_with(minus_sign)) {
        negative = true;
        part.begin += minus_sign.size();
    } else if (text[part.begin] == '-' || text[part.begin] == '+') {
        negative = text[part.begin] == '-';
        ++part.begin;
    }
    double value = 0;
    const auto [end, error] = std::from_chars(text.data() + part.begin, text.data() + part.end, value);
    part.begin = static_cast<std::size_t>(end - text.data());
    if (error == std::errc::result_out_of_range || !std::isfinite(value)) {
        line.fail("number_out_of_range",
                  fmt::format("'{}' is too large or too small a number", text.substr(start, part.begin - start)), start,
                  part.begin);
    }
    if (part.begin + 1 < text.size() && text[part.begin] == ',' && is_digit(text[part.begin + 1])) {
        std::size_t after = part.begin + 1;
        while (after < text.size() && is_digit(text[after])) {
            ++after;
        }
        // `7.4,150 mM` is two items; `0,5 M` and `1,000 mL` are one number with a comma in it.
        const std::string_view so_far = text.substr(start, part.begin - start);
        if (so_far.find('.') == std::string_view::npos && so_far.find('e') == std::string_view::npos) {
            line.fail("decimal_comma", fmt::format("'{}' has a comma in a number", text.substr(start, after - start)),
                      start, after,
                      "write a decimal point, no thousands separators, and a space after a comma between items");
        }
    }
    if (negative && value != 0 && !may_be_negative) {
        line.fail("negative_quantity", fmt::format("'{}' is negative", text.substr(start, part.begin - start)), start,
                  part.begin, "amounts are zero or more");
    }
    return negative ? -value : value;
}

ReadQuantity read_quantity(const Line& line, Part& part) {
    ReadQuantity quantity;
    const std::size_t start = part.begin;
    const double value = read_number(line, part, true);
    quantity.number = {start, part.begin};
    while (!part.empty() && is_space(line.text()[part.begin])) {
        ++part.begin;
    }
    const Part token = unit_token(line, part);
    if (token.empty()) {
        line.fail("missing_unit", fmt::format("{} has no unit", text_of(line, quantity.number)), quantity.number.begin,
                  quantity.number.end, "write one after it, such as mM, g/L, mL, mg or C");
    }
    const Unit* unit = find_unit(text_of(line, token));
    if (unit == nullptr) {
        fail_unit(line, quantity.number, token);
    }
    quantity.kind = unit->kind;
    quantity.unit = unit->unit;
    quantity.value = value * unit->factor;
    if (unit->spelling == "K") {
        quantity.value -= zero_celsius_K;
    }
    if (unit->kind != QuantityKind::temperature && value < 0) {
        line.fail("negative_quantity", fmt::format("'{}' is negative", text_of(line, quantity.number)),
                  quantity.number.begin, quantity.number.end, "amounts are zero or more");
    }
    if (unit->kind == QuantityKind::temperature && quantity.value < -zero_celsius_K) {
        line.fail("temperature_out_of_range",
                  fmt::format("'{}' is below absolute zero", text_of(line, quantity.number)), quantity.number.begin,
                  token.end);
    }
    part.begin = token.end;
    quantity.whole = {start, token.end};
    return quantity;
}

std::optional<ReadQuantity> read_trailing_quantity(const Line& line, Part& part) {
    const auto text = line.text();
    for (std::size_t at = part.end; at > part.begin + 1; --at) {
        const std::size_t begin = at - 1;
        if (!is_space(text[begin - 1]) || !number_begins(text.substr(begin, part.end - begin))) {
            continue;
        }
        Part rest{begin, part.end};
        try {
            ReadQuantity quantity = read_quantity(line, rest);
            if (rest.empty()) {
                part = trimmed(line, {part.begin, begin});
                return quantity;
            }
        } catch (const Error&) {
            continue;  // not a quantity after all: part of the name
        }
    }
    return std::nullopt;
}

void expect_kind(const Line& line, const ReadQuantity& quantity, QuantityKind expected, std::string_view example) {
    if (quantity.kind != expected) {
        line.fail("wrong_quantity",
                  fmt::format("'{}' is {}; {} is expected here", text_of(line, quantity.whole),
                              kind_phrase(quantity.kind), kind_phrase(expected)),
                  quantity.whole.begin, quantity.whole.end, fmt::format("write it like {}", example));
    }
}

}  // namespace carboy
