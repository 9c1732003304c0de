#pragma once

#include <map>
#include <stdexcept>
#include <string>
#include <string_view>

namespace carboy {

/// What a chemical formula says: `Na2HPO4·7H2O`, `C8H16.5N2Na1.5O6S2`, `(NH4)2SO4`, `HPO4^2-`, `B(OH)4-`.
struct Formula {
    std::map<std::string, double, std::less<>> atoms;  ///< by element symbol; waters of hydration included
    int charge = 0;
};

/// A formula that cannot be read: what is wrong, and at which byte.
class FormulaError : public std::runtime_error {
public:
    FormulaError(const std::string& message, std::size_t position) : std::runtime_error(message), position_(position) {}
    std::size_t position() const { return position_; }

private:
    std::size_t position_;
};

/// Element symbols with whole or decimal counts, nested parentheses, hydrates after `·` or `.` with a leading number
/// that may be a fraction (`·3/2H2O`), a charge at the end as `+`, `-`, `^2+`, `^3-`. Throws FormulaError.
Formula read_formula(std::string_view text);

/// The difference a - b, element by element; charges too.
Formula difference(const Formula& a, const Formula& b);
/// Adds `count` times what `other` holds.
void add(Formula& formula, const Formula& other, double count);

/// True when what is left is some (whole, broken or negative) number of H2O.
bool only_water(const Formula& formula);

}  // namespace carboy
