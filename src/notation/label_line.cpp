#include <optional>
#include <string>
#include <vector>

#include <fmt/format.h>

#include "carboy/notation.h"

#include "notation/buffer_name.h"
#include "notation/ingredient.h"
#include "notation/items.h"
#include "notation/line.h"
#include "notation/ph_item.h"
#include "notation/quantity_reader.h"
#include "notation/reagent_name.h"

namespace carboy {

namespace {

constexpr std::string_view ionic_strength_words = "ionic strength";
constexpr Expected item_quantity{QuantityKind::concentration, "50 mM Tris-HCl"};
constexpr ItemForm item_form{item_quantity.example, item_quantity};
constexpr Expected ionic_strength_value{QuantityKind::concentration, "ionic strength 0.15 M"};

bool is_molar(ConcentrationUnit unit) {
    return unit == ConcentrationUnit::mol_per_L || unit == ConcentrationUnit::mol_per_kg;
}

class LabelReader {
public:
    LabelReader(std::string_view text, const Table& table, std::string_view where)
        : line_(text, where), table_(table) {}

    Label read() {
        for (const Part item : with_ph_apart(line_, items_of(line_))) {
            const std::string_view text = text_of(line_, item);
            if (is_ph_item(text)) {
                read_ph(item);
            } else if (lower_case(text.substr(0, ionic_strength_words.size())) == ionic_strength_words) {
                read_ionic_strength(item);
            } else {
                add_ingredient(item);
            }
        }
        settle();
        return std::move(label_);
    }

private:
    void read_ph(Part item) {
        if (label_.ph) {
            line_.fail("duplicate_item", "a second pH stands on the label", item.begin, item.end, "keep one pH");
        }
        const PhItem read = read_ph_item(line_, item, table_);
        label_.ph = read.ph;
        label_.ph_at = read.at;
        titrant_ = read.titrant;
        titrant_named_ = read.titrant_named;
        ph_item_ = item;
    }

    void read_ionic_strength(Part item) {
        if (label_.ionic_strength) {
            line_.fail("duplicate_item", "a second ionic strength stands on the label", item.begin, item.end,
                       "keep one ionic strength");
        }
        Part rest = after_word(line_, item, ionic_strength_words.size());
        const ReadQuantity quantity = read_quantity(line_, rest, ionic_strength_value);
        if (!is_molar(quantity.unit)) {
            line_.fail("unusable_unit", "an ionic strength is given in mol/L or mol/kg", quantity.whole.begin,
                       quantity.whole.end, "write it like ionic strength 0.15 M");
        }
        expect_end(line_, rest, "the ionic strength", "the temperature belongs to the pH, as in pH 7.5 at 4 C");
        label_.ionic_strength = IonicStrengthTarget{quantity.value, quantity.unit == ConcentrationUnit::mol_per_L};
        ionic_strength_item_ = item;
    }

    void add_ingredient(Part item) {
        const Ingredient ingredient = read_ingredient(line_, item, table_, item_form);
        check_quantity(ingredient.quantity);
        const std::string name = lower_case(text_of(line_, ingredient.name));
        if (const auto at = name.find(" at "); at != std::string::npos) {
            expect_no_missing_comma(line_, ingredient.name);
            line_.fail("misplaced_temperature", "a temperature stands behind a name", ingredient.name.begin + at + 1,
                       ingredient.name.end, "the temperature belongs to the pH, as in pH 7.5 at 4 C");
        }
        resolve(ingredient);
    }

    void check_quantity(const ReadQuantity& quantity) const {
        const std::string_view typed = text_of(line_, quantity.whole);
        if (quantity.kind == QuantityKind::strength) {
            line_.fail(
                "unknown_formula",
                fmt::format("'{}' is a strength, which belongs to a named formula; this table holds none", typed),
                quantity.whole.begin, quantity.whole.end,
                "write out what is in it, as in 10 mM sodium phosphate, 137 mM NaCl, pH 7.4");
        }
        expect_kind(line_, quantity, item_quantity);
        if (!(quantity.value > 0)) {
            line_.fail("zero_quantity", fmt::format("'{}' is nothing: a concentration must be more than zero", typed),
                       quantity.whole.begin, quantity.whole.end, "leave the item out");
        }
        if (quantity.unit == ConcentrationUnit::percent_w_w || quantity.unit == ConcentrationUnit::normal) {
            line_.fail("unusable_unit",
                       fmt::format("'{}' is for titrants and stocks, not for a finished solution", typed),
                       quantity.whole.begin, quantity.whole.end, "write mM, g/L or % w/v");
        }
    }

    /// A buffer first; then a reagent by its own name; then a system that is added rather than buffered with.
    void resolve(const Ingredient& ingredient) {
        const std::string_view name = text_of(line_, ingredient.name);
        const auto named = read_buffer_name(name, table_);
        if (named && table_.systems[named->system.index].role == Role::buffer) {
            add_buffer(ingredient, *named, form_named(table_, name, named->system));
            return;
        }
        const Reagent* reagent = reagent_named(table_, name);
        if (reagent == nullptr && named) {
            reagent = reagent_adding(table_, *named);
            if (reagent == nullptr) {
                line_.fail("no_reagent", fmt::format("the table has no reagent for '{}'", name), ingredient.name.begin,
                           ingredient.name.end,
                           "'carboy constants list reagents' shows what there is; --constants adds to it",
                           ErrorKind::no_recipe);
            }
        }
        if (reagent == nullptr) {
            fail_unknown(ingredient.name);
        }
        add_additive(ingredient, *reagent, named ? BroughtBuffer{*named} : buffer_brought_by(table_, *reagent));
    }

    [[noreturn]] void fail_unknown(Part name) const {
        if (const auto two = two_systems_named(text_of(line_, name), table_)) {
            line_.fail("two_systems",
                       fmt::format("'{}' names two systems, and how much of each is not said", text_of(line_, name)),
                       name.begin, name.end,
                       fmt::format("write an item for each, as in 50 mM {}, 50 mM {}", name_of(table_, two->first),
                                   name_of(table_, two->second)));
        }
        fail_unknown_name(line_, name, nearest_buffer_names(text_of(line_, name), table_));
    }

    void add_buffer(const Ingredient& ingredient, const NamedBuffer& named, std::optional<std::uint16_t> form) {
        const ReadQuantity& quantity = ingredient.quantity;
        if (!is_molar(quantity.unit)) {
            line_.fail("unusable_unit",
                       fmt::format("'{}': a buffer's concentration is given in mol/L or mol/kg",
                                   text_of(line_, quantity.whole)),
                       quantity.whole.begin, quantity.whole.end, "give its molarity, like 50 mM");
        }
        for (const BufferItem& item : label_.buffers) {
            if (item.system == named.system) {
                line_.fail("duplicate_item", fmt::format("{} stands twice on the label", name_of(table_, named.system)),
                           ingredient.whole.begin, ingredient.whole.end, "give its total once");
            }
        }
        if (label_.buffers.empty()) {
            first_buffer_ = ingredient.whole;
        }
        label_.buffers.push_back({named.system, {quantity.value, quantity.unit}, named.counter_ion, form});
    }

    void add_additive(const Ingredient& ingredient, const Reagent& reagent, std::optional<BroughtBuffer> as_buffer) {
        const Concentration concentration{ingredient.quantity.value, ingredient.quantity.unit};
        expect_percent_of_solid(line_, ingredient.quantity, reagent);
        if (concentration.unit != ConcentrationUnit::mol_per_kg) {
            try {
                amount_in(concentration, Volume::litres(1), reagent, table_);
            } catch (const Error& error) {
                line_.fail(error.code(), error.message(), ingredient.quantity.whole.begin,
                           ingredient.quantity.whole.end, error.help());
            }
        }
        const std::uint16_t index = article_meant(table_, reagent, text_of(line_, ingredient.name), concentration.unit);
        for (const AdditiveItem& item : label_.additives) {
            if (item.reagent == index) {
                line_.fail("duplicate_item", fmt::format("{} stands twice on the label", reagent.name),
                           ingredient.whole.begin, ingredient.whole.end, "give its total once");
            }
        }
        label_.additives.push_back({index, concentration});
        additions_.push_back({ingredient, as_buffer});
    }

    /// What only the whole label tells: whether something holds the pH, and whether there is one.
    void settle() {
        if (label_.ph && label_.buffers.empty()) {
            promote_addition();
        } else if (!label_.ph && label_.ionic_strength) {
            line_.fail("missing_ph", "an ionic strength is asked for without a pH", ionic_strength_item_.begin,
                       ionic_strength_item_.end, "add one, as in: pH 7.5");
        } else if (!label_.ph) {
            take_buffers_as_written();
        }
        if (titrant_) {
            take_titrant();
        }
    }

    /// `3 M sodium acetate` without a pH is the salt dissolved; `50 mM Tris-HCl` without one could be anything.
    void take_buffers_as_written() {
        for (const BufferItem& buffer : label_.buffers) {
            if (!buffer.named_form) {
                line_.fail("missing_ph", "the label names a buffer but no pH", first_buffer_.begin, first_buffer_.end,
                           "add one, as in: pH 7.5 at 4 C; for a salt as it dissolves, name the salt, as in 50 mM Tris "
                           "hydrochloride");
            }
        }
        for (const BufferItem& buffer : label_.buffers) {
            label_.additives.push_back({*buffer.named_form, buffer.concentration});
        }
        label_.buffers.clear();
    }

    /// Buffers that name no counter-ion take what is named beside the pH; one of them must, or have it already.
    void take_titrant() {
        bool taken = false;
        for (BufferItem& buffer : label_.buffers) {
            if (!buffer.counter_ion && buffer.system != *titrant_) {
                buffer.counter_ion = titrant_;
            }
            taken = taken || buffer.counter_ion == titrant_ || buffer.system == *titrant_;
        }
        if (!taken) {
            line_.fail("two_counter_ions",
                       fmt::format("'{}' is not the counter-ion that '{}' names", text_of(line_, titrant_named_),
                                   text_of(line_, first_buffer_)),
                       titrant_named_.begin, titrant_named_.end, "keep one of the two");
        }
    }

    /// `0.5 M EDTA, pH 8.0` and `3 M NaOAc, pH 5.2`: the one addition that can hold the pH becomes the buffer, a usual
    /// buffer before what is usually added (`3 M NaOAc, 1 mM EDTA, pH 5.2`).
    void promote_addition() {
        std::vector<std::size_t> candidates = able_to_hold(Role::buffer);
        if (candidates.empty()) {
            candidates = able_to_hold(Role::additive);
        }
        if (candidates.empty()) {
            line_.fail("no_buffer", fmt::format("no buffer on this label holds pH {:g}", label_.ph->value()),
                       ph_item_.begin, ph_item_.end, "add a buffer, as in 50 mM Tris-HCl, or leave the pH out");
        }
        if (candidates.size() > 1) {
            const Part item = additions_[candidates[1]].ingredient.whole;
            line_.fail("no_buffer",
                       fmt::format("'{}' is not the only one that could hold the pH, and none is named as the buffer",
                                   text_of(line_, item)),
                       item.begin, item.end, "name the buffer that is to hold it, as in 50 mM sodium phosphate");
        }
        const auto index = static_cast<std::ptrdiff_t>(candidates.front());
        Addition addition = additions_[candidates.front()];
        const std::uint16_t article = label_.additives[candidates.front()].reagent;
        addition.ingredient.quantity.value *= addition.as_buffer->count;
        label_.additives.erase(label_.additives.begin() + index);
        additions_.erase(additions_.begin() + index);
        add_buffer(addition.ingredient, addition.as_buffer->buffer, article);
    }

    /// Additions whose system has this role and lies near the pH, by position.
    std::vector<std::size_t> able_to_hold(Role role) const {
        std::vector<std::size_t> found;
        for (std::size_t i = 0; i < additions_.size(); ++i) {
            const auto& as_buffer = additions_[i].as_buffer;
            if (as_buffer && table_.systems[as_buffer->buffer.system.index].role == role &&
                can_hold(table_, as_buffer->buffer.system, *label_.ph)) {
                found.push_back(i);
            }
        }
        return found;
    }

    struct Addition {
        Ingredient ingredient;
        std::optional<BroughtBuffer> as_buffer;  ///< what it would be if it had to hold the pH
    };

    Line line_;
    const Table& table_;
    Label label_;
    std::vector<Addition> additions_;  ///< beside label_.additives
    Part ph_item_;
    Part ionic_strength_item_;
    Part first_buffer_;
    std::optional<ComponentId> titrant_;  ///< named beside the pH
    Part titrant_named_;
};

}  // namespace

Label read_label(std::string_view line, const Table& table, std::string_view where) {
    return LabelReader(line, table, where).read();
}

}  // namespace carboy
