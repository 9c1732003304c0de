#include <algorithm>
#include <cmath>
#include <optional>
#include <string>
#include <vector>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/notation.h"
#include "carboy/preparation.h"

#include "notation/items.h"
#include "notation/line.h"
#include "notation/quantity_reader.h"

namespace carboy {

namespace {

bool has_word(const Line& line, Part part, std::string_view word) {
    const std::string_view text = text_of(line, part);
    if (text.size() < word.size()) {
        return false;
    }
    for (std::size_t i = 0; i < word.size(); ++i) {
        if ((text[i] | 0x20) != word[i]) {
            return false;
        }
    }
    return text.size() == word.size() || text[word.size()] == ' ' || text[word.size()] == '\t' ||
           (text[word.size()] >= '0' && text[word.size()] <= '9');
}

class MixtureReader {
public:
    MixtureReader(std::string_view text, const Table& table, Temperature filled_at, std::string_view where)
        : line_(text, where), table_(table) {
        preparation_.filled_at = filled_at;
    }

    Preparation read() {
        auto items = items_of(line_);
        find_final_volume(items);
        for (const Part item : items) {
            read_item(item);
        }
        check_volumes();
        return std::move(preparation_);
    }

private:
    /// `to V` must come last; with it every amount is fixed.
    void find_final_volume(std::vector<Part>& items) {
        for (std::size_t i = 0; i < items.size(); ++i) {
            if (!has_word(line_, items[i], "to")) {
                continue;
            }
            if (i + 1 != items.size()) {
                line_.fail("misplaced_final_volume", "the final volume must come last", items[i].begin, items[i].end,
                           "move it to the end of the line");
            }
            Part rest = trimmed(line_, {items[i].begin + 2, items[i].end});
            const ReadQuantity volume = read_quantity(line_, rest);
            expect_kind(line_, volume, QuantityKind::volume, "to 1 L");
            rest = trimmed(line_, rest);
            if (!rest.empty() || !(volume.value > 0)) {
                line_.fail("trailing_text",
                           rest.empty() ? "the final volume must be more than zero"
                                        : fmt::format("'{}' does not belong to the final volume", text_of(line_, rest)),
                           rest.empty() ? volume.whole.begin : rest.begin, items[i].end, "write it like to 1 L");
            }
            final_ = Volume::litres(volume.value);
            preparation_.filled_to = final_;
            items.pop_back();
            if (items.empty()) {
                line_.fail("empty_mixture", "nothing is put together here", volume.whole.begin, volume.whole.end,
                           "write what goes in before it, as in 6.057 g Tris, to 1 L");
            }
            return;
        }
    }

    void read_item(Part item) {
        ReadQuantity quantity;
        Part name;
        if (number_begins(text_of(line_, item))) {
            Part rest = item;
            quantity = read_quantity(line_, rest);
            name = trimmed(line_, rest);
        } else {
            name = item;
            const auto trailing = read_trailing_quantity(line_, name);
            if (!trailing) {
                line_.fail("missing_quantity", fmt::format("'{}' has no amount", text_of(line_, item)), item.begin,
                           item.end, "write one before it, as in 25 mmol/kg KH2PO4 or 50 mL of 0.1 M NaOH");
            }
            quantity = *trailing;
        }
        if (has_word(line_, name, "of")) {
            name = trimmed(line_, {name.begin + 2, name.end});
        }
        if (name.empty()) {
            line_.fail("missing_name", fmt::format("{} of what?", text_of(line_, quantity.whole)), item.begin, item.end,
                       "write the reagent after the amount");
        }
        switch (quantity.kind) {
            case QuantityKind::concentration:
                add_concentration(quantity, name);
                break;
            case QuantityKind::mass:
                add_mass(quantity, name);
                break;
            case QuantityKind::volume:
                add_volume(quantity, name);
                break;
            case QuantityKind::temperature:
            case QuantityKind::strength:
                line_.fail("wrong_quantity",
                           fmt::format("'{}' is {}; an amount is expected here", text_of(line_, quantity.whole),
                                       kind_phrase(quantity.kind)),
                           quantity.whole.begin, quantity.whole.end, "write mmol/kg, mM, g or mL");
        }
    }

    const Reagent* known_reagent(std::string_view name) const {
        const Reagent* reagent = find_reagent(table_, name);
        reagent = reagent != nullptr ? reagent : find_reagent_by_cas(table_, name);
        if (reagent == nullptr) {
            const auto salts = salts_named(name);
            reagent = salts.size() == 1 ? salts.front() : nullptr;
        }
        return reagent;
    }

    /// `Tris-HCl` as something that was weighed: the usual article of each salt of the system with that ion.
    std::vector<const Reagent*> salts_named(std::string_view name) const {
        std::vector<const Reagent*> salts;
        const auto named = read_buffer_name(name, table_);
        if (named && named->counter_ion) {
            for (const Reagent& reagent : table_.reagents) {
                const bool fits =
                    reagent.supplies.size() == 2 && reagent.usual &&
                    std::all_of(reagent.supplies.begin(), reagent.supplies.end(), [&](const Supply& supply) {
                        return supply.component == named->system || supply.component == *named->counter_ion;
                    });
                if (fits) {
                    salts.push_back(&reagent);
                }
            }
        }
        return salts;
    }

    const Reagent& reagent_at(Part name) const {
        const std::string_view text = text_of(line_, name);
        if (const Reagent* reagent = known_reagent(text)) {
            return *reagent;
        }
        std::string help;
        if (const System* system = find_system(table_, text)) {
            std::vector<std::string_view> forms;
            const ComponentId id = id_of(table_, *system);
            for (const Reagent& reagent : table_.reagents) {
                if (reagent.usual && forms.size() < 3 && !reagent.supplies.empty() &&
                    reagent.supplies.front().component == id) {
                    forms.push_back(reagent.name);
                }
            }
            help = fmt::format("say which form went in: {}", fmt::join(forms, ", "));
        } else if (const auto salts = salts_named(text); !salts.empty()) {
            std::vector<std::string_view> names;
            for (const Reagent* salt : salts) {
                names.push_back(salt->name);
            }
            help = fmt::format("say which form went in: {}", fmt::join(names, ", "));
        } else if (const auto near = nearest_names(text, table_); !near.empty()) {
            help = fmt::format("did you mean {}?", fmt::join(near, ", "));
        } else {
            help = "'carboy constants list reagents' shows every reagent";
        }
        line_.fail("unknown_name", fmt::format("the table has no reagent called '{}'", text), name.begin, name.end,
                   help);
    }

    Portion& add(const Reagent& reagent) {
        preparation_.portions.push_back(
            {static_cast<std::uint16_t>(&reagent - table_.reagents.data()), std::nullopt, std::nullopt});
        return preparation_.portions.back();
    }

    void add_concentration(const ReadQuantity& quantity, Part name) {
        const Reagent& reagent = reagent_at(name);
        if (quantity.unit == ConcentrationUnit::mol_per_kg) {
            add(reagent).molality = Molality::mol_per_kg(quantity.value);
            return;
        }
        if (!final_) {
            // Concentrations of a finished solution hold for any volume of it.
            preparation_.filled_to = Volume::litres(1);
        }
        add(reagent).amount = amount_of(quantity, *preparation_.filled_to, reagent);
    }

    void add_mass(const ReadQuantity& quantity, Part name) {
        const Reagent& reagent = reagent_at(name);
        need_final_volume(quantity);
        const double purity = reagent.mass_percent.known() ? reagent.mass_percent.value / 100.0
                              : reagent.assay.known()      ? reagent.assay.value
                                                           : 1.0;
        if (reagent.state == State::solution && !reagent.mass_percent.known()) {
            line_.fail("unusable_unit",
                       fmt::format("{} is measured by volume, its density is not known here", reagent.name),
                       quantity.whole.begin, quantity.whole.end, "give its volume in mL");
        }
        add(reagent).amount = Amount::mol(quantity.value * purity / reagent.molar_mass_g_per_mol);
    }

    /// A volume of a liquid article, or of a solution whose strength stands in the line.
    void add_volume(const ReadQuantity& quantity, Part name) {
        need_final_volume(quantity);
        const Volume volume = Volume::litres(quantity.value);
        poured_ += volume;
        if (const Reagent* reagent = known_reagent(text_of(line_, name))) {
            if (!reagent->strength_mol_per_L.known()) {
                line_.fail(
                    "missing_strength",
                    fmt::format("{} is a solid: a volume of it needs the strength of the solution", reagent->name),
                    quantity.whole.begin, name.end,
                    fmt::format("write it like 50 mL of 0.1 M {}", text_of(line_, name)));
            }
            add(*reagent).amount = Amount::mol(reagent->strength_mol_per_L.value * volume.L());
            return;
        }
        Part rest = name;
        ReadQuantity strength;
        if (number_begins(text_of(line_, rest))) {
            strength = read_quantity(line_, rest);
            rest = trimmed(line_, rest);
        } else {
            const auto trailing = read_trailing_quantity(line_, rest);
            if (!trailing) {
                reagent_at(name);  // says what is wrong with the name
            }
            strength = *trailing;
        }
        expect_kind(line_, strength, QuantityKind::concentration, "50 mL of 0.1 M NaOH");
        if (has_word(line_, rest, "of")) {
            rest = trimmed(line_, {rest.begin + 2, rest.end});
        }
        if (rest.empty()) {
            line_.fail("missing_name", fmt::format("{} of what?", text_of(line_, strength.whole)), quantity.whole.begin,
                       name.end, "write the reagent after the strength");
        }
        const Reagent& reagent = reagent_at(rest);
        add(reagent).amount = strength.unit == ConcentrationUnit::percent_w_w
                                  ? amount_of(strength, volume, of_strength(strength, reagent))
                                  : amount_of(strength, volume, reagent);
    }

    /// The article of the same chemistry whose mass percent is nearest: its density turns the percent into mol/L.
    const Reagent& of_strength(const ReadQuantity& strength, const Reagent& reagent) const {
        constexpr double near_enough = 2.0;
        const Reagent* best = nullptr;
        const auto apart = [&](const Reagent& article) {
            const double percent =
                article.mass_percent.known() ? article.mass_percent.value : 100 * article.assay.value;
            return std::abs(percent - strength.value);
        };
        for (const Reagent& article : table_.reagents) {
            const bool liquid =
                article.density_g_per_mL.known() && (article.mass_percent.known() || article.assay.known());
            if (article.formula == reagent.formula && liquid && (best == nullptr || apart(article) < apart(*best))) {
                best = &article;
            }
        }
        if (best == nullptr || apart(*best) > near_enough) {
            line_.fail("unknown_density",
                       fmt::format("the table knows no density of {} near {:g} % w/w", reagent.name, strength.value),
                       strength.whole.begin, strength.whole.end, "give its strength in mol/L");
        }
        return *best;
    }

    Amount amount_of(const ReadQuantity& quantity, Volume volume, const Reagent& reagent) const {
        try {
            return amount_in({quantity.value, quantity.unit}, volume, reagent, table_);
        } catch (const Error& error) {
            line_.fail(error.code(), error.message(), quantity.whole.begin, quantity.whole.end, error.help());
        }
    }

    void need_final_volume(const ReadQuantity& quantity) const {
        if (!final_) {
            line_.fail(
                "missing_final_volume",
                fmt::format("'{}' is an amount, and the final volume is missing", text_of(line_, quantity.whole)),
                quantity.whole.begin, quantity.whole.end, "end the line with it, as in: to 1 L");
        }
    }

    void check_volumes() const {
        constexpr double rounding = 1.0001;
        if (final_ && poured_ > rounding * *final_) {
            line_.fail(
                "overfull",
                fmt::format("{:g} mL were poured together, more than the final {:g} mL", poured_.mL(), final_->mL()), 0,
                line_.text().size(), "check the volumes");
        }
    }

    Line line_;
    const Table& table_;
    Preparation preparation_;
    std::optional<Volume> final_;
    Volume poured_;
};

}  // namespace

Preparation read_mixture(std::string_view line, const Table& table, Temperature filled_at, std::string_view where) {
    return MixtureReader(line, table, filled_at, where).read();
}

}  // namespace carboy
