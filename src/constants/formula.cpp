#include "constants/formula.h"

#include <charconv>
#include <cmath>

namespace carboy {

namespace {

bool is_upper(char c) {
    return c >= 'A' && c <= 'Z';
}
bool is_lower(char c) {
    return c >= 'a' && c <= 'z';
}
bool is_digit(char c) {
    return c >= '0' && c <= '9';
}

class FormulaReader {
public:
    explicit FormulaReader(std::string_view text) : text_(text) {}

    Formula read() {
        Formula formula;
        bool any = false;
        do {
            const double times = leading_number();
            const Formula part = group(0);
            if (part.atoms.empty()) {
                fail("an element symbol is expected");
            }
            add(formula, part, times);
            any = true;
        } while (separator());
        formula.charge = charge();
        if (position_ != text_.size()) {
            fail("this does not belong to a formula");
        }
        if (!any) {
            fail("the formula is empty");
        }
        return formula;
    }

private:
    [[noreturn]] void fail(const std::string& message) const { throw FormulaError(message, position_); }
    bool at_end() const { return position_ >= text_.size(); }
    char here() const { return at_end() ? '\0' : text_[position_]; }

    double number() {
        double value = 0;
        const char* begin = text_.data() + position_;
        const auto [end, error] = std::from_chars(begin, text_.data() + text_.size(), value, std::chars_format::fixed);
        if (error != std::errc() || !(value > 0) || value > 1000) {
            fail("a count from 0 to 1000 is expected");
        }
        position_ += static_cast<std::size_t>(end - begin);
        return value;
    }

    /// `7` in `·7H2O`, `3/2` in `·3/2H2O`.
    double leading_number() {
        if (!is_digit(here())) {
            return 1;
        }
        double value = number();
        if (here() == '/') {
            ++position_;
            value /= number();
        }
        return value;
    }

    bool separator() {
        constexpr std::string_view middle_dot = "\u00B7";
        if (text_.substr(position_).starts_with(middle_dot)) {
            position_ += middle_dot.size();
            return true;
        }
        if (here() == '.') {
            ++position_;
            return true;
        }
        return false;
    }

    double count() {
        // A dot belongs to the count only when a digit follows and one stands before: C2.5, but not O.7H2O.
        if (!is_digit(here())) {
            return 1;
        }
        std::size_t end = position_;
        while (end < text_.size() && is_digit(text_[end])) {
            ++end;
        }
        // `Na2HPO4.7H2O`: a dot before digits and an element is a hydrate; `N1.5O` a decimal count. The hydrate wins
        // when what follows the digits is H2O.
        if (end < text_.size() && text_[end] == '.' && end + 1 < text_.size() && is_digit(text_[end + 1])) {
            std::size_t after = end + 1;
            while (after < text_.size() && is_digit(text_[after])) {
                ++after;
            }
            if (!text_.substr(after).starts_with("H2O") || text_.substr(after).size() > 3) {
                return number();
            }
        }
        double value = 0;
        std::from_chars(text_.data() + position_, text_.data() + end, value);
        position_ = end;
        return value;
    }

    Formula group(int depth) {
        if (depth > 20) {
            fail("too many parentheses");
        }
        Formula formula;
        while (!at_end()) {
            if (here() == '(') {
                ++position_;
                const Formula inner = group(depth + 1);
                if (here() != ')') {
                    fail("a closing parenthesis is expected");
                }
                ++position_;
                add(formula, inner, count());
            } else if (is_upper(here())) {
                std::string symbol(1, here());
                ++position_;
                if (is_lower(here())) {
                    symbol += here();
                    ++position_;
                }
                formula.atoms[symbol] += count();
            } else {
                break;
            }
        }
        return formula;
    }

    int charge() {
        int size = 1;
        if (here() == '^') {
            ++position_;
            if (!is_digit(here())) {
                fail("a charge such as ^2- is expected");
            }
            size = here() - '0';
            ++position_;
        } else if (at_end()) {
            return 0;
        }
        const char sign = here();
        if (sign != '+' && sign != '-') {
            fail("this does not belong to a formula");
        }
        ++position_;
        return sign == '+' ? size : -size;
    }

    std::string_view text_;
    std::size_t position_ = 0;
};

}  // namespace

Formula read_formula(std::string_view text) {
    return FormulaReader(text).read();
}

void add(Formula& formula, const Formula& other, double count) {
    for (const auto& [symbol, number] : other.atoms) {
        formula.atoms[symbol] += number * count;
    }
    formula.charge += static_cast<int>(std::lround(other.charge * count));
}

Formula difference(const Formula& a, const Formula& b) {
    Formula result = a;
    add(result, b, -1);
    return result;
}

bool only_water(const Formula& formula) {
    constexpr double tolerance = 1e-9;
    double hydrogen = 0;
    double oxygen = 0;
    for (const auto& [symbol, number] : formula.atoms) {
        if (symbol == "H") {
            hydrogen = number;
        } else if (symbol == "O") {
            oxygen = number;
        } else if (std::abs(number) > tolerance) {
            return false;
        }
    }
    return std::abs(hydrogen - 2 * oxygen) < tolerance;
}

}  // namespace carboy
