#include <fmt/format.h>

#include "report/adjustment_text.h"
#include "report/figure_text.h"

namespace carboy {

std::string titrant_text(const Titrant& titrant, const Table& table) {
    const Reagent& reagent = table.reagents[titrant.reagent];
    if (!titrant.strength) {
        return std::string(reagent.name);
    }
    const double strength = titrant.strength->mol_per_L();
    const bool as_article = reagent.strength_mol_per_L.known() && strength < 1.01 * reagent.strength_mol_per_L.value &&
                            strength > 0.99 * reagent.strength_mol_per_L.value;
    return as_article ? std::string(reagent.name)
                      : fmt::format("{} {} mol/L", reagent.formula, plain_number(strength, 3));
}

Volume titrant_volume(const Titrant& titrant, Amount amount) {
    return Volume::litres(amount.mol() / titrant.strength->mol_per_L());
}

Mass titrant_mass(const Titrant& titrant, Amount amount, const Table& table) {
    const Reagent& reagent = table.reagents[titrant.reagent];
    return Mass::grams(amount.mol() * reagent.molar_mass_g_per_mol / reagent.counted_assay());
}

std::string titrant_amount_text(const Titrant& titrant, Amount amount, const Table& table) {
    return titrant.strength ? volume_text(titrant_volume(titrant, amount))
                            : mass_text(titrant_mass(titrant, amount, table));
}

std::string mistake_text(const Mistake& mistake, const Adjustment& adjustment, const Table& table) {
    const std::string_view planned = mistake.reagent ? table.reagents[*mistake.reagent].name : std::string_view();
    const std::string_view taken = mistake.taken ? table.reagents[*mistake.taken].name : std::string_view();
    const Request& request = adjustment.plan.request;
    const double factor = mistake.factor.value_or(1);
    const std::string temperature = temperature_text(mistake.temperature.value_or(request.prepare_at));
    switch (mistake.kind) {
        case MistakeKind::meter:
            return fmt::format("nothing but the meter (what it should read is sure to {:.2f})",
                               mistake.reading_expanded_k2);
        case MistakeKind::titrant_off:
            return factor < 1 ? fmt::format("only {:.0f} % of the {} went in", 100 * factor, planned)
                              : fmt::format("{:.0f} % of the {} went in: too much", 100 * factor, planned);
        case MistakeKind::titrant_forgotten:
            return fmt::format("no {} went in", planned);
        case MistakeKind::titrant_other_strength:
            return mistake.taken ? fmt::format("{} was taken for {}", taken, planned)
                                 : fmt::format("the {} was ten times too {}", planned, factor > 1 ? "strong" : "weak");
        case MistakeKind::titrant_wrong_kind:
            return fmt::format("{} went in for {}", taken, planned);
        case MistakeKind::other_hydrate:
        case MistakeKind::other_form:
            return fmt::format("{} was weighed as {}", taken, planned);
        case MistakeKind::forms_swapped:
            return fmt::format("{} and {} were exchanged", planned, taken);
        case MistakeKind::mass_tenfold:
            return fmt::format("{} of the {}", factor > 1 ? "ten times the mass" : "a tenth of the mass", planned);
        case MistakeKind::left_out:
            return fmt::format("{} was left out", planned);
        case MistakeKind::wrong_volume:
            return fmt::format("filled to {} {}", factor > 1 ? "twice" : "half", "the volume");
        case MistakeKind::set_at_bench:
            return request.strength != 1
                       ? fmt::format("set to pH {} undiluted at {}, where it should be so diluted at {}",
                                     ph_text(*request.ph), temperature, temperature_text(request.use_at))
                       : fmt::format("set to pH {} at {}, where it should be so at {}", ph_text(*request.ph),
                                     temperature, temperature_text(request.use_at));
        case MistakeKind::set_at_other_temperature:
            return fmt::format("set to pH {} while it was at {}", ph_text(*request.ph), temperature);
        case MistakeKind::read_at_other_temperature:
            return fmt::format("the batch is right, and was at {} when it was read", temperature);
        case MistakeKind::set_before_dilution:
            return "set to its pH as a tenfold stock, then diluted";
    }
    return {};
}

}  // namespace carboy
