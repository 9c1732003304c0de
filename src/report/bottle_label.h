#pragma once

#include <optional>
#include <string>
#include <vector>

#include "carboy/constants.h"
#include "carboy/date.h"
#include "carboy/plan.h"

namespace carboy {

/// Dates that the user gave for the bottle.
struct BottleDates {
    std::optional<Date> made;  ///< none: a blank to write on
    std::optional<Date> expires;
};

/// What stands on a bottle. The finished solution is not classified by this program: the label shows the hazards of the
/// classified ingredients as supplied, with the word `contains`, and says so.
struct BottleLabel {
    struct Pictogram {
        std::string code;
        std::string name;
    };
    struct Ingredient {
        std::string reagent;
        std::vector<std::string> codes;       ///< `H314`
        std::vector<std::string> statements;  ///< the same with its text
    };
    std::string name;  ///< the label line
    std::string ph;    ///< `pH 7.50 ± 0.04 at 4 °C`
    std::string volume;
    std::string made;  ///< empty: a blank
    std::string expires;
    std::string recipe_id;
    std::string signal_word;  ///< the gravest of the ingredients'; empty without one
    std::vector<Pictogram> pictograms;
    std::vector<Ingredient> contains;
};
BottleLabel bottle_label_of(const Plan& plan, const Table& table, const BottleDates& dates);

/// What the QR code says: the recipe id, a line feed, the label line.
std::string qr_text(const BottleLabel& label);

/// The label as SVG of the stock's true size. What does not fit in full is shortened, hazards to their codes, then to
/// their number; name, pH, dates and signal word always stand.
std::string bottle_label_svg(const BottleLabel& label, const LabelStock& stock);
/// The same on an HTML page whose paper is the label, for printing from a browser.
std::string bottle_label_html(const BottleLabel& label, const LabelStock& stock);

}  // namespace carboy
