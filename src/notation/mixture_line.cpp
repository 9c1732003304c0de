#include <algorithm>
#include <cmath>
#include <optional>
#include <string>
#include <vector>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/notation.h"
#include "carboy/preparation.h"

#include "notation/ingredient.h"
#include "notation/items.h"
#include "notation/line.h"
#include "notation/quantity_reader.h"
#include "notation/reagent_name.h"

namespace carboy {

namespace {

constexpr ItemForm item_form{"25 mmol/kg KH2PO4 or 50 mL of 0.1 M NaOH", std::nullopt};
constexpr Expected strength_of_solution{QuantityKind::concentration, "50 mL of 0.1 M NaOH"};
constexpr ItemForm solution_form{strength_of_solution.example, strength_of_solution};
constexpr Expected final_volume{QuantityKind::volume, "to 1 L"};

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
        return std::move(preparation_);
    }

private:
    /// `to V` must come last; with it every amount is fixed.
    void find_final_volume(std::vector<Part>& items) {
        constexpr std::string_view to = "to";
        const auto found =
            std::find_if(items.begin(), items.end(), [&](Part item) { return begins_with_word(line_, item, to); });
        if (found == items.end()) {
            return;
        }
        const Part item = *found;
        if (found + 1 != items.end()) {
            line_.fail("misplaced_final_volume",
                       fmt::format("'{}' is not the last item, and the final volume must be", text_of(line_, item)),
                       item.begin, item.end, "move it to the end of the line");
        }
        Part rest = trimmed(line_, {item.begin + to.size(), item.end});
        const ReadQuantity volume = read_quantity(line_, rest, final_volume);
        expect_end(line_, rest, "the final volume", "write it like to 1 L");
        if (!(volume.value > 0)) {
            line_.fail("zero_quantity", "the final volume must be more than zero", volume.whole.begin, volume.whole.end,
                       "write it like to 1 L");
        }
        items.pop_back();
        if (items.empty()) {
            line_.fail("empty_mixture", "a final volume stands alone: nothing is put together", item.begin, item.end,
                       "write what goes in before it, as in 6.057 g Tris, to 1 L");
        }
        final_ = Volume::litres(volume.value);
        preparation_.filled_to = final_;
    }

    void read_item(Part item) {
        const Ingredient ingredient = read_ingredient(line_, item, table_, item_form);
        const ReadQuantity& quantity = ingredient.quantity;
        switch (quantity.kind) {
            case QuantityKind::concentration:
                add_concentration(quantity, ingredient.name);
                break;
            case QuantityKind::mass:
                add_mass(quantity, ingredient.name);
                break;
            case QuantityKind::volume:
                add_volume(quantity, ingredient.name);
                break;
            case QuantityKind::temperature:
            case QuantityKind::strength:
                line_.fail("wrong_quantity",
                           fmt::format("'{}' is {}; an amount is expected here", text_of(line_, quantity.whole),
                                       kind_phrase(quantity.kind)),
                           quantity.whole.begin, quantity.whole.end,
                           fmt::format("write it like {}", item_form.example));
        }
    }

    /// By its own name, or as the one salt that `Tris-HCl` can be.
    const Reagent* known_reagent(std::string_view name) const {
        if (const Reagent* reagent = reagent_named(table_, name)) {
            return reagent;
        }
        const auto named = read_buffer_name(name, table_);
        const auto salts = named ? salts_named(table_, *named) : std::vector<const Reagent*>{};
        return salts.size() == 1 ? salts.front() : nullptr;
    }

    const Reagent& reagent_at(Part name) const {
        const std::string_view text = text_of(line_, name);
        if (const Reagent* reagent = known_reagent(text)) {
            return *reagent;
        }
        expect_no_missing_comma(line_, name);
        // `phosphate` and `sodium phosphate` are buffers, not articles.
        if (const auto named = read_buffer_name(text, table_)) {
            line_.fail("unknown_name", fmt::format("'{}' is no reagent but a system, in any of its forms", text),
                       name.begin, name.end,
                       fmt::format("say which form went in: {}", fmt::join(forms_of_system(*named), ", ")));
        }
        if (const std::string lowered = lower_case(text); lowered == "water" || lowered == "h2o") {
            line_.fail("unknown_name", "'water' is no reagent here", name.begin, name.end,
                       "leave it out: what to 1 L leaves room for is water");
        }
        fail_unknown_name(line_, name, nearest_names(text, table_));
    }

    /// Usual articles that bring the system, those with the counter-ion named before others.
    std::vector<std::string_view> forms_of_system(const NamedBuffer& named) const {
        constexpr std::size_t enough = 3;
        const auto brings = [](const Reagent& reagent, ComponentId component) {
            return std::any_of(reagent.supplies.begin(), reagent.supplies.end(),
                               [&](const Supply& supply) { return supply.component == component; });
        };
        std::vector<std::string_view> forms;
        for (const bool with_ion : {true, false}) {
            for (const Reagent& reagent : table_.reagents) {
                const bool has_ion = named.counter_ion && brings(reagent, *named.counter_ion);
                if (forms.size() < enough && reagent.usual && brings(reagent, named.system) && has_ion == with_ion) {
                    forms.push_back(reagent.name);
                }
            }
        }
        return forms;
    }

    Portion& add(const Reagent& reagent) {
        const auto index = static_cast<std::uint16_t>(&reagent - table_.reagents.data());
        preparation_.portions.push_back({index, std::nullopt, std::nullopt});
        return preparation_.portions.back();
    }

    void add_concentration(const ReadQuantity& quantity, Part name) {
        const Reagent& reagent = reagent_at(name);
        expect_percent_of_solid(line_, quantity, reagent);
        if (quantity.unit == ConcentrationUnit::mol_per_kg) {
            add(reagent).molality = Molality::mol_per_kg(quantity.value);
            return;
        }
        if (quantity.unit == ConcentrationUnit::percent_w_w) {
            line_.fail("unusable_unit",
                       fmt::format("'{}' needs the density of the finished solution, which is not known beforehand",
                                   text_of(line_, quantity.whole)),
                       quantity.whole.begin, quantity.whole.end, "write % w/v or g/L");
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
        add(reagent).amount = Amount::mol(quantity.value * mol_per_gram(reagent, quantity));
    }

    double mol_per_gram(const Reagent& reagent, const ReadQuantity& quantity) const {
        if (reagent.mass_percent.known()) {
            return reagent.mass_percent.value / 100.0 / reagent.molar_mass_g_per_mol;
        }
        if (reagent.state != State::solution) {
            return reagent.counted_assay() / reagent.molar_mass_g_per_mol;
        }
        if (!reagent.strength_mol_per_L.known() || !reagent.density_g_per_mL.known()) {
            line_.fail("unusable_unit",
                       fmt::format("{} is measured by volume, its density is not known here", reagent.name),
                       quantity.whole.begin, quantity.whole.end, "give its volume in mL");
        }
        constexpr double mL_per_L = 1000;
        return reagent.strength_mol_per_L.value / (reagent.density_g_per_mL.value * mL_per_L);
    }

    /// A volume of a liquid article, or of a solution whose strength stands in the line.
    void add_volume(const ReadQuantity& quantity, Part name) {
        need_final_volume(quantity);
        const Volume volume = Volume::litres(quantity.value);
        pour(quantity, volume);
        // A strength may be part of an article's own name: `HCl 37 %`.
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
        const auto solution = find_ingredient(line_, name, table_, solution_form);
        if (!solution) {
            reagent_at(name);  // says what is wrong with the name
            return;
        }
        const ReadQuantity& strength = solution->quantity;
        expect_kind(line_, strength, strength_of_solution);
        const Reagent& reagent = reagent_at(solution->name);
        expect_percent_of_solid(line_, strength, reagent);
        const bool by_mass = strength.unit == ConcentrationUnit::percent_w_w;
        const Reagent& dissolved = by_mass ? article_of_strength(strength, reagent) : reagent;
        add(dissolved).amount = amount_of(strength, volume, dissolved);
    }

    void pour(const ReadQuantity& quantity, Volume volume) {
        constexpr double rounding = 1.0001;
        poured_ += volume;
        if (poured_ > rounding * *final_) {
            line_.fail("overfull",
                       fmt::format("{:g} mL were poured together up to here, more than the final {:g} mL", poured_.mL(),
                                   final_->mL()),
                       quantity.whole.begin, quantity.whole.end, "check the volumes and the final one");
        }
    }

    /// The article of the same substance with this mass percent: its density turns the percent into mol/L. Between
    /// strengths the table knows no density, and that of the concentrated acid is a tenth wrong for a dilute one.
    const Reagent& article_of_strength(const ReadQuantity& strength, const Reagent& reagent) const {
        constexpr double rounding_percent = 0.5;  // `37 %` is printed on bottles of 36.5 to 38 %
        const auto apart = [&](const Reagent& article) {
            const double percent =
                article.mass_percent.known() ? article.mass_percent.value : 100 * article.assay.value;
            return std::abs(percent - strength.value);
        };
        const Reagent* best = nullptr;
        for (const Reagent& article : table_.reagents) {
            const bool liquid =
                article.density_g_per_mL.known() && (article.mass_percent.known() || article.assay.known());
            if (article.formula == reagent.formula && liquid && (best == nullptr || apart(article) < apart(*best))) {
                best = &article;
            }
        }
        if (best == nullptr || apart(*best) > rounding_percent) {
            line_.fail("unknown_density",
                       fmt::format("the table knows no density of {} at {:g} % w/w", reagent.name, strength.value),
                       strength.whole.begin, strength.whole.end, "give its strength in mol/L or % w/v");
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
