#include <algorithm>
#include <cmath>
#include <optional>
#include <string>
#include <vector>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/notation.h"

#include "constants/name.h"
#include "notation/items.h"
#include "notation/line.h"
#include "notation/quantity_reader.h"
#include "plan/articles.h"

namespace carboy {

namespace {

/// An ingredient as far as its words go.
struct Ingredient {
    Part whole;
    Part name;
    ReadQuantity quantity;
};

std::string lower(std::string_view text) {
    std::string lowered(text);
    std::transform(lowered.begin(), lowered.end(), lowered.begin(),
                   [](char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; });
    return lowered;
}

/// `pH`, then what is not a letter: `phosphate` is none.
bool is_ph_item(std::string_view text) {
    const std::string lowered = lower(text.substr(0, 3));
    return lowered.starts_with("ph") && (lowered.size() == 2 || !(lowered[2] >= 'a' && lowered[2] <= 'z'));
}

constexpr std::string_view ionic_strength_words = "ionic strength";

class LabelReader {
public:
    LabelReader(std::string_view text, const Table& table, std::string_view where)
        : line_(text, where), table_(table) {}

    Label read() {
        for (const Part item : with_ph_apart(items_of(line_))) {
            const std::string_view text = text_of(line_, item);
            if (is_ph_item(text)) {
                read_ph_item(item);
            } else if (lower(text).starts_with(ionic_strength_words)) {
                read_ionic_strength(item);
            } else {
                read_ingredient(item);
            }
        }
        settle();
        return std::move(label_);
    }

private:
    /// `1 M Tris pH 8.0`: benches leave out the comma before the pH.
    std::vector<Part> with_ph_apart(const std::vector<Part>& items) const {
        std::vector<Part> apart;
        for (const Part item : items) {
            Part rest = item;
            for (std::size_t i = item.begin + 1; i + 2 < item.end; ++i) {
                const std::string_view after = line_.text().substr(i, item.end - i);
                const bool number_follows = number_begins(after.substr(after.size() > 3 && after[2] == ' ' ? 3 : 2));
                if (line_.text()[i - 1] == ' ' && is_ph_item(after) && number_follows) {
                    apart.push_back(trimmed(line_, {item.begin, i}));
                    rest = {i, item.end};
                    break;
                }
            }
            apart.push_back(rest);
        }
        return apart;
    }

    /// `pH 7.5 (KOH)`, `pH 7.5 with KOH`: what to bring it to pH with, for buffers that name no counter-ion.
    Part read_titrant(Part rest) {
        const std::string words = lower(text_of(line_, rest));
        const bool bracketed = words.starts_with('(');
        if (!bracketed && !words.starts_with("with ")) {
            return rest;
        }
        const std::size_t begin = rest.begin + (bracketed ? 1 : 5);
        std::size_t end = bracketed ? line_.text().find(')', begin) : line_.text().find(' ', begin);
        end = std::min(end, rest.end);
        const Part name = trimmed(line_, {begin, end});
        const Spectator* ion = find_spectator(table_, text_of(line_, name));
        const System* system = find_system(table_, text_of(line_, name));
        if ((ion == nullptr || ion->charge == 0) && system == nullptr) {
            line_.fail("unknown_name", fmt::format("'{}' is no acid or base known here", text_of(line_, name)),
                       name.begin, name.end, "name what it is brought to pH with, as in pH 7.5 (KOH)");
        }
        titrant_ = ion != nullptr && ion->charge != 0 ? id_of(table_, *ion) : id_of(table_, *system);
        return trimmed(line_, {std::min(end + (bracketed ? 1 : 0), rest.end), rest.end});
    }

    void read_ph_item(Part item) {
        if (label_.ph) {
            line_.fail("duplicate_item", "a second pH", item.begin, item.end, "keep one pH");
        }
        Part rest = trimmed(line_, {item.begin + 2, item.end});
        while (!rest.empty() && (line_.text()[rest.begin] == '=' || line_.text()[rest.begin] == ':')) {
            rest = trimmed(line_, {rest.begin + 1, rest.end});
        }
        const std::size_t start = rest.begin;
        const double value = read_number(line_, rest, true);
        if (!(value >= -2 && value <= 16)) {
            line_.fail("ph_out_of_range", fmt::format("pH {:g} is outside -2 to 16", value), start, rest.begin);
        }
        label_.ph = PH(value);
        rest = read_titrant(trimmed(line_, rest));
        if (rest.empty()) {
            return;
        }
        const std::string words = lower(text_of(line_, rest));
        if (!words.starts_with("at ") && !words.starts_with("at\t") && words != "at" && !words.starts_with("@")) {
            line_.fail("trailing_text", fmt::format("'{}' does not belong to the pH", text_of(line_, rest)), rest.begin,
                       rest.end, "after the pH only a temperature may stand, as in pH 7.5 at 4 C");
        }
        rest = trimmed(line_, {rest.begin + (words.front() == '@' ? 1 : 2), rest.end});
        const ReadQuantity temperature = read_quantity(line_, rest);
        expect_kind(line_, temperature, QuantityKind::temperature, "pH 7.5 at 4 C");
        rest = read_titrant(trimmed(line_, rest));
        if (!rest.empty()) {
            line_.fail("trailing_text", fmt::format("'{}' does not belong to the temperature", text_of(line_, rest)),
                       rest.begin, rest.end, "put a comma before the next item");
        }
        label_.ph_at = Temperature::celsius(temperature.value);
    }

    void read_ionic_strength(Part item) {
        if (label_.ionic_strength) {
            line_.fail("duplicate_item", "a second ionic strength", item.begin, item.end, "keep one ionic strength");
        }
        Part rest = trimmed(line_, {item.begin + ionic_strength_words.size(), item.end});
        if (!rest.empty() && line_.text()[rest.begin] == '=') {
            rest = trimmed(line_, {rest.begin + 1, rest.end});
        }
        const ReadQuantity quantity = read_quantity(line_, rest);
        expect_kind(line_, quantity, QuantityKind::concentration, "ionic strength 0.15 M");
        if (quantity.unit != ConcentrationUnit::mol_per_L && quantity.unit != ConcentrationUnit::mol_per_kg) {
            line_.fail("unusable_unit", "an ionic strength is given in mol/L or mol/kg", quantity.whole.begin,
                       quantity.whole.end, "write it like ionic strength 0.15 M");
        }
        rest = trimmed(line_, rest);
        if (!rest.empty()) {
            line_.fail("trailing_text", fmt::format("'{}' does not belong to the ionic strength", text_of(line_, rest)),
                       rest.begin, rest.end, "the temperature belongs to the pH, as in pH 7.5 at 4 C");
        }
        label_.ionic_strength = IonicStrengthTarget{quantity.value, quantity.unit == ConcentrationUnit::mol_per_L};
    }

    void read_ingredient(Part item) {
        Ingredient ingredient;
        ingredient.whole = item;
        if (number_begins(text_of(line_, item))) {
            Part rest = item;
            // A name that begins with a locant, without any amount before it.
            ingredient.quantity = read_quantity(line_, rest);
            ingredient.name = trimmed(line_, rest);
        } else {
            Part rest = item;
            const auto quantity = read_trailing_quantity(line_, rest);
            if (!quantity) {
                const bool known = read_buffer_name(text_of(line_, item), table_) ||
                                   find_reagent(table_, text_of(line_, item)) != nullptr;
                line_.fail(known ? "missing_quantity" : "unreadable_item",
                           known ? fmt::format("'{}' has no concentration", text_of(line_, item))
                                 : fmt::format("'{}' cannot be read", text_of(line_, item)),
                           item.begin, item.end,
                           "an item is an amount and a name, as in 50 mM Tris-HCl, or a pH, as in pH 7.5 at 4 C");
            }
            ingredient.quantity = *quantity;
            ingredient.name = rest;
        }
        check_quantity(ingredient);
        if (ingredient.name.empty()) {
            line_.fail("missing_name", fmt::format("{} of what?", text_of(line_, ingredient.quantity.whole)),
                       item.begin, item.end, "write the name after the amount, as in 50 mM Tris-HCl");
        }
        const std::string name = lower(text_of(line_, ingredient.name));
        if (const auto at = name.find(" at "); at != std::string::npos) {
            line_.fail("misplaced_temperature", "a temperature stands here", ingredient.name.begin + at + 1,
                       ingredient.name.end, "the temperature belongs to the pH, as in pH 7.5 at 4 C");
        }
        resolve(ingredient);
    }

    void check_quantity(const Ingredient& ingredient) const {
        const ReadQuantity& quantity = ingredient.quantity;
        if (quantity.kind == QuantityKind::strength) {
            line_.fail("unknown_formula",
                       fmt::format("'{}' is a strength, which belongs to a named formula; this table holds none",
                                   text_of(line_, quantity.whole)),
                       quantity.whole.begin, quantity.whole.end,
                       "write out what is in it, as in 10 mM sodium phosphate, 137 mM NaCl, pH 7.4");
        }
        expect_kind(line_, quantity, QuantityKind::concentration, "50 mM");
        if (!(quantity.value > 0)) {
            line_.fail("zero_quantity", "a concentration must be more than zero", quantity.whole.begin,
                       quantity.whole.end, "leave the item out");
        }
        if (quantity.unit == ConcentrationUnit::percent_w_w || quantity.unit == ConcentrationUnit::normal) {
            line_.fail("unusable_unit",
                       fmt::format("'{}' is for titrants and stocks, not for a finished solution",
                                   text_of(line_, quantity.whole)),
                       quantity.whole.begin, quantity.whole.end, "write mM, g/L or % w/v");
        }
    }

    void add_buffer(const Ingredient& ingredient, const NamedBuffer& named) {
        const ReadQuantity& quantity = ingredient.quantity;
        if (quantity.unit != ConcentrationUnit::mol_per_L && quantity.unit != ConcentrationUnit::mol_per_kg) {
            line_.fail("unusable_unit", "a buffer's concentration is given in mol/L or mol/kg", quantity.whole.begin,
                       quantity.whole.end, "write it like 50 mM");
        }
        for (const BufferItem& item : label_.buffers) {
            if (item.system == named.system) {
                line_.fail("duplicate_item", fmt::format("{} stands twice", name_of(table_, named.system)),
                           ingredient.whole.begin, ingredient.whole.end, "give its total once");
            }
        }
        label_.buffers.push_back({named.system, {quantity.value, quantity.unit}, named.counter_ion});
    }

    /// An amount in moles under a name that says nothing of water or strength means any article of that chemistry.
    std::uint16_t article_meant(const Ingredient& ingredient, const Reagent& reagent) const {
        const auto index = static_cast<std::uint16_t>(&reagent - table_.reagents.data());
        const std::string name = lower(text_of(line_, ingredient.name));
        const bool in_moles = ingredient.quantity.unit == ConcentrationUnit::mol_per_L ||
                              ingredient.quantity.unit == ConcentrationUnit::mol_per_kg;
        const bool particular = name == reagent.cas || name.find("hydr") != std::string::npos ||
                                name.find('.') != std::string::npos || name.find("\u00B7") != std::string::npos ||
                                name.find('%') != std::string::npos;
        return in_moles && !particular ? usual_article(table_, index) : index;
    }

    void add_additive(const Ingredient& ingredient, const Reagent& reagent) {
        const std::uint16_t index = article_meant(ingredient, reagent);
        for (const AdditiveItem& item : label_.additives) {
            if (item.reagent == index) {
                line_.fail("duplicate_item", fmt::format("{} stands twice", reagent.name), ingredient.whole.begin,
                           ingredient.whole.end, "give its total once");
            }
        }
        label_.additives.push_back({index, {ingredient.quantity.value, ingredient.quantity.unit}});
        additives_.push_back(ingredient);
    }

    /// The article for a system that is added rather than buffered with.
    const Reagent* form_of(const NamedBuffer& named) const {
        const System& system = table_.systems[named.system.index];
        if (!named.counter_ion) {
            return find_reagent(table_, system.usual_form);
        }
        const Reagent* found = nullptr;
        for (const Reagent& reagent : table_.reagents) {
            const bool fits = reagent.supplies.size() == 2 &&
                              std::all_of(reagent.supplies.begin(), reagent.supplies.end(), [&](const Supply& supply) {
                                  return supply.component == named.system || supply.component == *named.counter_ion;
                              });
            if (fits && (found == nullptr || (reagent.usual && !found->usual))) {
                found = &reagent;
            }
        }
        return found;
    }

    void resolve(const Ingredient& ingredient) {
        const std::string_view name = text_of(line_, ingredient.name);
        const auto named = read_buffer_name(name, table_);
        if (named && table_.systems[named->system.index].role == Role::buffer) {
            if (first_buffer_.empty()) {
                first_buffer_ = ingredient.whole;
            }
            add_buffer(ingredient, *named);
            return;
        }
        const Reagent* reagent = find_reagent(table_, name);
        if (reagent == nullptr) {
            reagent = find_reagent_by_cas(table_, name);
        }
        if (reagent == nullptr && named) {
            reagent = form_of(*named);
            if (reagent == nullptr) {
                line_.fail("no_reagent", fmt::format("the table has no reagent for '{}'", name), ingredient.name.begin,
                           ingredient.name.end,
                           "'carboy constants list reagents' shows what there is; --constants adds to it",
                           ErrorKind::no_recipe);
            }
        }
        if (reagent == nullptr) {
            const auto near = nearest_buffer_names(name, table_);
            line_.fail("unknown_name", fmt::format("the table knows nothing called '{}'", name), ingredient.name.begin,
                       ingredient.name.end,
                       near.empty() ? std::string("'carboy constants list' shows every name")
                                    : fmt::format("did you mean {}?", fmt::join(near, ", ")));
        }
        add_additive(ingredient, *reagent);
    }

    /// What only the whole label tells: whether something holds the pH, and whether there is one.
    void settle() {
        if (!label_.ph) {
            if (!label_.buffers.empty()) {
                line_.fail("missing_ph", "the label names a buffer but no pH", first_buffer_.begin, first_buffer_.end,
                           "add one, as in: pH 7.5 at 4 C");
            }
            if (label_.ionic_strength) {
                throw Error(ErrorKind::input, "missing_ph", "an ionic strength is asked for without a pH",
                            std::string(line_.where()), "add one, as in: pH 7.5");
            }
            return;
        }
        if (label_.buffers.empty()) {
            promote_additive();
        }
        for (BufferItem& buffer : label_.buffers) {
            if (titrant_ && !buffer.counter_ion && buffer.system != *titrant_) {
                buffer.counter_ion = titrant_;
            }
        }
    }

    /// What a salt such as NaOAc says of a buffer: the one buffering system it supplies, and the strong ion beside it.
    std::optional<NamedBuffer> buffer_in(const Reagent& reagent) const {
        std::optional<NamedBuffer> found;
        std::optional<ComponentId> ion;
        for (const Supply& supply : reagent.supplies) {
            const bool is_system = supply.component.kind == ComponentKind::system;
            // Borax is four borates: a concentration of the salt is not one of the buffer.
            if (is_system &&
                (found || supply.count != 1 || table_.systems[supply.component.index].role != Role::buffer)) {
                return std::nullopt;
            }
            if (is_system) {
                found = NamedBuffer{supply.component, std::nullopt};
            } else {
                ion = supply.component;
            }
        }
        if (found) {
            found->counter_ion = ion;
        }
        return found;
    }

    std::optional<NamedBuffer> buffer_behind(std::size_t additive) const {
        auto named = read_buffer_name(text_of(line_, additives_[additive].name), table_);
        named = named ? named : buffer_in(table_.reagents[label_.additives[additive].reagent]);
        return named && can_hold(table_.systems[named->system.index]) ? named : std::nullopt;
    }

    /// Sulfate at pH 7 holds nothing: a pK must be within reach.
    bool can_hold(const System& system) const {
        constexpr double reach = 3.0;
        return std::any_of(system.steps.begin(), system.steps.end(),
                           [&](const Step& step) { return std::abs(step.pK_25C.value - label_.ph->value()) <= reach; });
    }

    /// `0.5 M EDTA, pH 8.0`: the one addition that can hold a pH becomes the buffer.
    void promote_additive() {
        std::vector<std::size_t> candidates;
        for (std::size_t i = 0; i < additives_.size(); ++i) {
            if (buffer_behind(i)) {
                candidates.push_back(i);
            }
        }
        if (candidates.size() > 1) {
            const Part item = additives_[candidates[1]].whole;
            line_.fail("no_buffer", "more than one of these could hold the pH, and none is a usual buffer", item.begin,
                       item.end, "name the buffer that is to hold it");
        }
        if (candidates.empty()) {
            throw Error(ErrorKind::input, "no_buffer", "nothing on this label holds a pH", std::string(line_.where()),
                        "add a buffer, as in 50 mM Tris-HCl, or leave the pH out");
        }
        const std::size_t index = candidates.front();
        const Ingredient ingredient = additives_[index];
        const NamedBuffer named = *buffer_behind(index);
        label_.additives.erase(label_.additives.begin() + static_cast<std::ptrdiff_t>(index));
        additives_.erase(additives_.begin() + static_cast<std::ptrdiff_t>(index));
        add_buffer(ingredient, named);
    }

    Line line_;
    const Table& table_;
    Label label_;
    std::vector<Ingredient> additives_;  ///< beside label_.additives
    Part first_buffer_;
    std::optional<ComponentId> titrant_;  ///< named beside the pH
};

}  // namespace

Label read_label(std::string_view line, const Table& table, std::string_view where) {
    return LabelReader(line, table, where).read();
}

}  // namespace carboy
