#include "report/figure_text.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

namespace carboy {

namespace {

/// Decimals that show so many significant digits, at least `least` of them.
int decimals_of(double value, int significant, int least = 0) {
    if (value == 0) {
        return 0;
    }
    const int magnitude = static_cast<int>(std::floor(std::log10(std::abs(value))));
    return std::min(std::max(significant - 1 - magnitude, least), 12);
}

/// Fixed-point with so many significant digits and at least `least` decimals.
std::string fixed(double value, int significant, int least = 0) {
    return fmt::format("{:.{}f}", value, decimals_of(value, significant, least));
}

/// The unit and the decimals that a quantity is written with.
struct Form {
    double per_base_unit;
    std::string_view unit;
    int decimals;
};

Form form_of(Mass mass) {
    const double grams = mass.g();
    if (grams >= 1.0) {
        return {1, "g", decimals_of(grams, 4, grams < 100 ? 3 : 2)};
    }
    return grams >= 1e-3 ? Form{1e3, "mg", decimals_of(grams * 1e3, 4, 1)}
                         : Form{1e6, "µg", decimals_of(grams * 1e6, 4)};
}

/// As `weighed_text` writes it.
Form form_of(Mass mass, Mass readability) {
    const int decimals = std::clamp(static_cast<int>(std::ceil(-std::log10(readability.g()) - 1e-9)), 0, 9);
    return mass.g() >= 1.0 || decimals < 3 ? Form{1, "g", decimals} : Form{1e3, "mg", decimals - 3};
}

Form form_of(Volume volume) {
    const double millilitres = volume.mL();
    if (millilitres >= 1000.0) {
        return {1e-3, "L", decimals_of(volume.L(), 4)};
    }
    return millilitres >= 1.0 ? Form{1, "mL", decimals_of(millilitres, 3, millilitres < 100 ? 1 : 0)}
                              : Form{1e3, "µL", decimals_of(millilitres * 1e3, 3)};
}

std::string written(double value, const Form& form) {
    return fmt::format("{:.{}f} {}", value * form.per_base_unit, form.decimals, form.unit);
}

std::string range_written(double value, double relative, const Form& form) {
    const double target = value * form.per_base_unit;
    return fmt::format("{:.{}f} to {:.{}f} {}", target * (1 - relative), form.decimals, target * (1 + relative),
                       form.decimals, form.unit);
}

}  // namespace

std::string mass_text(Mass mass) {
    return written(mass.g(), form_of(mass));
}

std::string mass_range_text(Mass mass, double relative, std::optional<Mass> readability) {
    return range_written(mass.g(), relative, readability ? form_of(mass, *readability) : form_of(mass));
}

std::string weighed_text(Mass mass, Mass readability) {
    return written(mass.g(), form_of(mass, readability));
}

std::string volume_text(Volume volume) {
    return written(volume.mL(), form_of(volume));
}

std::string volume_range_text(Volume volume, double relative) {
    return range_written(volume.mL(), relative, form_of(volume));
}

std::string vessel_text(Volume volume) {
    if (volume.L() >= 1.0) {
        return fmt::format("{:g} L", volume.L());
    }
    return volume.mL() >= 1.0 ? fmt::format("{:g} mL", volume.mL()) : fmt::format("{:g} µL", volume.mL() * 1e3);
}

std::string ph_text(PH ph) {
    return fmt::format("{:.2f}", ph.value());
}

std::string reading_text(PH ph, double uncertainty_k2) {
    constexpr double worth_saying = 0.1;
    return uncertainty_k2 > worth_saying ? fmt::format("{:.1f} ± {:.1f}", ph.value(), uncertainty_k2) : ph_text(ph);
}

std::string temperature_text(Temperature temperature) {
    return fmt::format("{:g} °C", temperature.celsius());
}

std::string number_text(double value) {
    return fmt::format("{:.4g}", value);
}

std::string plain_number(double value, int significant) {
    const double size = std::abs(value);
    if (size != 0 && (size < 1e-4 || size >= 1e5)) {
        return fmt::format("{:.{}e}", value, significant - 1);
    }
    return fixed(value, significant);
}

std::string molality_text(Molality molality) {
    return fmt::format("{} mol/kg", plain_number(molality.mol_per_kg()));
}

std::string osmolality_text(Molality particles) {
    return fmt::format("{:.3g} osmol/kg", particles.mol_per_kg());
}

std::string strength_text(Molarity strength) {
    const double value = strength.mol_per_L();
    return value < 0.01 ? fmt::format("{:.4g} mmol/L", value * 1e3) : fmt::format("{:.4g} mol/L", value);
}

std::string concentration_text(const Concentration& concentration) {
    const double value = concentration.value;
    const auto scaled = [&](std::string_view whole, std::string_view milli, std::string_view micro) {
        if (value >= 0.1 || value == 0) {
            return fmt::format("{:.6g} {}", value, whole);
        }
        return value >= 1e-4 ? fmt::format("{:.6g} {}", value * 1e3, milli)
                             : fmt::format("{:.6g} {}", value * 1e6, micro);
    };
    switch (concentration.unit) {
        case ConcentrationUnit::mol_per_L:
            return scaled("M", "mM", "µM");
        case ConcentrationUnit::mol_per_kg:
            return scaled("mol/kg", "mmol/kg", "µmol/kg");
        case ConcentrationUnit::g_per_L:
            return scaled("g/L", "mg/L", "µg/L");
        case ConcentrationUnit::percent_w_w:
            return fmt::format("{:.6g} % w/w", value);
        case ConcentrationUnit::percent_v_v:
            return fmt::format("{:.6g} % v/v", value);
        case ConcentrationUnit::normal:
            return fmt::format("{:.6g} N", value);
    }
    return {};
}

std::size_t display_width(std::string_view text) {
    return static_cast<std::size_t>(std::count_if(
        text.begin(), text.end(), [](char c) { return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U; }));
}

}  // namespace carboy
