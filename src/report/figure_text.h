#pragma once

#include <optional>
#include <string>
#include <string_view>

#include "carboy/concentration.h"
#include "carboy/quantity.h"

// How figures are written for people: the one place that rounds. JSON carries the exact values.

namespace carboy {

/// `6.057 g`, `372.2 mg`, `1250.1 g`: at least four significant digits, a unit that avoids leading zeros.
std::string mass_text(Mass mass);
/// A mass as the balance shows it: to its readability.
std::string weighed_text(Mass mass, Mass readability);
/// `11.993 to 12.235 g`: what is within `relative` (0.01 is 1 %) of a target, in the unit and with the decimals that
/// the target itself is written with, to the readability of the balance when there is one.
std::string mass_range_text(Mass mass, double relative, std::optional<Mass> readability = std::nullopt);
/// `34.5 mL`, `250 µL`, `1.200 L`: three to four significant digits.
std::string volume_text(Volume volume);
/// `9.9 to 10.1 mL`, as `mass_range_text`.
std::string volume_range_text(Volume volume, double relative);
/// A nominal volume as a vessel is marked: `1 L`, `500 mL`.
std::string vessel_text(Volume volume);
/// `7.50`: two decimals, as a meter shows.
std::string ph_text(PH ph);
/// What the meter shows; with its uncertainty where that is more than a tenth: `7.70 ± 0.4`.
std::string reading_text(PH ph, double uncertainty_k2);
/// `4 °C`.
std::string temperature_text(Temperature temperature);
/// `0.1000 mol/kg`, four significant digits.
std::string molality_text(Molality molality);
/// `0.5 mol/L`: a stock's strength, up to four significant digits.
std::string strength_text(Molarity strength);
/// `50 mM`, `0.9 % w/v`, `0.1 mol/kg`.
std::string concentration_text(const Concentration& concentration);
/// `0.29 osmol/kg`: moles of particles, two to three significant digits.
std::string osmolality_text(Molality particles);
/// `10`, `0.5`: a number as a person would write it, up to four significant digits.
std::string number_text(double value);
/// Four significant digits without an exponent where that is readable.
std::string plain_number(double value, int significant = 4);

/// Columns that text takes on a terminal: code points, which is right for all that this program prints.
std::size_t display_width(std::string_view text);

}  // namespace carboy
