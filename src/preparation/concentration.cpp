#include "carboy/concentration.h"

#include <cmath>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy {

namespace {

Error unusable(const std::string& message, std::string help) {
    return {ErrorKind::input, "unusable_unit", message, {}, std::move(help)};
}

/// Mass fraction of the substance in the article.
double purity(const Reagent& reagent) {
    return reagent.mass_percent.known() ? reagent.mass_percent.value / 100.0 : reagent.counted_assay();
}

}  // namespace

double equivalents_per_mole(const Reagent& reagent, const Table& table) {
    // Sulfuric acid counts both protons: hydrogen sulfate is far stronger than anything the trade titrates with it.
    constexpr double strong_enough_pK = 2.1;
    double protons = -reagent.strong_charge;
    for (const Supply& supply : reagent.supplies) {
        if (supply.component.kind != ComponentKind::system) {
            continue;
        }
        if (reagent.strong_charge != 0) {
            return 0;  // a salt of a weak acid or base
        }
        const System& system = table.systems[supply.component.index];
        for (const Step& step : system.steps) {
            if (step.pK_25C.value > strong_enough_pK) {
                return 0;
            }
        }
        protons -= supply.count * system.species.back().charge;
    }
    return protons;
}

Amount amount_in(const Concentration& concentration, Volume volume, const Reagent& reagent, const Table& table) {
    const double value = concentration.value;
    switch (concentration.unit) {
        case ConcentrationUnit::mol_per_L:
            return Amount::mol(value * volume.L());
        case ConcentrationUnit::g_per_L: {
            // Of a solution the grams of the dissolved substance are meant, of a solid those on the balance.
            const double counted = reagent.state == State::solution ? 1.0 : purity(reagent);
            return Amount::mol(value * volume.L() * counted / reagent.molar_mass_g_per_mol);
        }
        case ConcentrationUnit::percent_v_v:
            if (reagent.state == State::solid || !reagent.strength_mol_per_L.known()) {
                throw unusable(fmt::format("% v/v is for liquids, and {} is none", reagent.name),
                               "write mM, g/L or % w/v");
            }
            return Amount::mol(value / 100.0 * volume.L() * reagent.strength_mol_per_L.value);
        case ConcentrationUnit::percent_w_w:
            if (!reagent.density_g_per_mL.known()) {
                throw unusable(fmt::format("% w/w needs a density, and the table has none for {}", reagent.name),
                               "give it in mol/L or g/L");
            }
            return Amount::mol(value * 10.0 * reagent.density_g_per_mL.value / reagent.molar_mass_g_per_mol *
                               volume.L());
        case ConcentrationUnit::normal: {
            const double equivalents = std::abs(equivalents_per_mole(reagent, table));
            if (equivalents == 0) {
                throw unusable(fmt::format("N is for strong acids and bases, and {} is none", reagent.name),
                               "give it in mol/L");
            }
            return Amount::mol(value * volume.L() / equivalents);
        }
        case ConcentrationUnit::mol_per_kg:
            break;
    }
    throw unusable("mol/kg is per kilogram of water, not for a volume of solution", "give it in mol/L");
}

}  // namespace carboy
