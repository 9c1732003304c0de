#pragma once

#include <compare>

namespace carboy {

/// Arithmetic shared by quantities that add up: sums, differences, scaling, comparison, ratio.
/// The number itself is reachable only through accessors that name its unit.
template <class Kind>
class Quantity {
public:
    constexpr Quantity() = default;  ///< zero
    friend constexpr Kind operator+(Kind a, Kind b) { return make(a.value_ + b.value_); }
    friend constexpr Kind operator-(Kind a, Kind b) { return make(a.value_ - b.value_); }
    friend constexpr Kind operator*(Kind a, double factor) { return make(a.value_ * factor); }
    friend constexpr Kind operator*(double factor, Kind a) { return make(a.value_ * factor); }
    friend constexpr Kind operator/(Kind a, double divisor) { return make(a.value_ / divisor); }
    /// Dimensionless ratio of two quantities of one kind.
    friend constexpr double operator/(Kind a, Kind b) { return a.value_ / b.value_; }
    friend constexpr auto operator<=>(const Quantity&, const Quantity&) = default;

    constexpr Kind& operator+=(Kind other) {
        value_ += other.value_;
        return static_cast<Kind&>(*this);
    }

protected:
    static constexpr Kind make(double value) {
        Kind kind;
        kind.value_ = value;
        return kind;
    }
    constexpr double value() const { return value_; }

private:
    double value_ = 0;
};

/// Amount of substance.
class Amount : public Quantity<Amount> {
public:
    static constexpr Amount mol(double value) { return make(value); }
    constexpr double mol() const { return value(); }
};

/// Moles per kilogram of water.
class Molality : public Quantity<Molality> {
public:
    static constexpr Molality mol_per_kg(double value) { return make(value); }
    constexpr double mol_per_kg() const { return value(); }
};

/// Moles per litre of solution.
class Molarity : public Quantity<Molarity> {
public:
    static constexpr Molarity mol_per_L(double value) { return make(value); }
    constexpr double mol_per_L() const { return value(); }
};

class Mass : public Quantity<Mass> {
public:
    static constexpr Mass grams(double value) { return make(value); }
    static constexpr Mass kilograms(double value) { return make(value * 1000.0); }
    constexpr double g() const { return value(); }
    constexpr double kg() const { return value() / 1000.0; }
};

class Volume : public Quantity<Volume> {
public:
    static constexpr Volume litres(double value) { return make(value); }
    static constexpr Volume millilitres(double value) { return make(value / 1000.0); }
    constexpr double L() const { return value(); }
    constexpr double mL() const { return value() * 1000.0; }
};

/// A point on the temperature scale; not a quantity that adds up.
class Temperature {
public:
    constexpr Temperature() = default;  ///< 25 °C, where the constants are tabulated.
    static constexpr Temperature celsius(double value) { return Temperature(value); }
    static constexpr Temperature kelvin(double value) { return Temperature(value - zero_celsius_K); }
    constexpr double celsius() const { return celsius_; }
    constexpr double kelvin() const { return celsius_ + zero_celsius_K; }
    friend constexpr auto operator<=>(const Temperature&, const Temperature&) = default;

private:
    static constexpr double zero_celsius_K = 273.15;
    explicit constexpr Temperature(double celsius) : celsius_(celsius) {}
    double celsius_ = 25.0;
};

/// pH = -log10 a(H+), molality basis, on the convention of the certified standards.
class PH {
public:
    constexpr PH() = default;
    explicit constexpr PH(double value) : value_(value) {}
    constexpr double value() const { return value_; }
    friend constexpr auto operator<=>(const PH&, const PH&) = default;

private:
    double value_ = 7.0;
};

}  // namespace carboy
