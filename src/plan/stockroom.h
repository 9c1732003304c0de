#pragma once

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "carboy/constants.h"
#include "carboy/quantity.h"
#include "carboy/request.h"
#include "carboy/shelf.h"

namespace carboy {

/// Reagents that are the same chemistry (hydrates, strengths, bottles): equal supplies. The planner decides between
/// chemistries first and between their articles afterwards.
struct Chemistry {
    std::vector<std::uint16_t> articles;  ///< the one to prefer first
};

/// So much of one article.
struct Share {
    std::uint16_t reagent = 0;
    Amount amount;
};

/// The reagents that a recipe may be made from: those of the table, or what the shelf holds, without what is to be
/// avoided.
class Stockroom {
public:
    Stockroom(const Table& table, const Constraints& constraints, const Shelf* shelf);

    const Table& table() const { return table_; }
    const Shelf* shelf() const { return shelf_; }
    /// The bottle that an article is; nullptr for one of the constants table.
    const Bottle* bottle(std::uint16_t reagent) const { return shelf_ != nullptr ? shelf_->bottle(reagent) : nullptr; }
    /// True when it is one of these articles of the table, or a bottle of one.
    bool is_one_of(std::uint16_t reagent, std::span<const std::uint16_t> articles) const;
    bool is_expired(std::uint16_t reagent) const {
        const Bottle* from = bottle(reagent);
        return from != nullptr && shelf_->expired(*from);
    }
    bool allows(std::uint16_t reagent) const { return forbidden_.empty() || !forbidden_[reagent]; }

    /// Chemistries that bring `system`, with nothing beside it but, possibly, `counter_ion`.
    std::vector<Chemistry> forms_of(ComponentId system, std::optional<ComponentId> counter_ion) const;
    /// Chemistry that brings `component` alone: the strong acid or base of a spectator, the free acid or base of a
    /// system.
    std::optional<Chemistry> alone(ComponentId component) const;
    /// Neutral salt of two spectators, one to one.
    std::optional<Chemistry> salt_of(ComponentId cation, ComponentId anion) const;
    /// Everything allowed with the supplies of `reagent`; none when nothing is.
    std::optional<Chemistry> same_as(std::uint16_t reagent) const;

    /// What may stand for an additive that the label names as a system (EDTA): another article or bottle that brings it
    /// beside strong ions only, when the shelf has not enough of the usual one. The additive itself when it has.
    Share stand_in(const Share& additive, Volume total) const;

    enum class Wanted : std::uint8_t {
        any,       ///< the first that holds enough
        solution,  ///< something to measure by volume
        titrant    ///< a solution whose volume suits the vessel
    };
    /// Articles for an amount, into `total`: one where one holds enough, else several bottles. Empty when there is not
    /// enough, or nothing of the kind wanted. `taken` is what this recipe takes from each bottle already.
    std::vector<Share> shares(const Chemistry& chemistry, Amount amount, Wanted wanted, Volume total,
                              const std::vector<Share>& taken) const;

private:
    template <class Accepts>
    std::vector<Chemistry> chemistries_where(Accepts accepts) const;
    void add_article(std::vector<Chemistry>& chemistries, std::uint16_t index) const;
    bool preferred(std::uint16_t a, std::uint16_t b) const;
    std::optional<Amount> left(std::uint16_t reagent, const std::vector<Share>& taken) const;

    Table table_;
    const Shelf* shelf_;
    std::vector<std::uint16_t> used_first_;  ///< articles that the caller asked for
    std::vector<bool> forbidden_;            ///< by reagent; empty: nothing is
};

}  // namespace carboy
