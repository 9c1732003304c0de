#pragma once

#include <cstdint>
#include <memory>
#include <optional>
#include <span>
#include <string_view>

#include "carboy/quantity.h"

namespace carboy {

/// How well a figure was checked against its source.
enum class Evidence : std::uint8_t { seen, near, secondary, from_memory, common_practice, computed };
/// The words used in the data files: `seen`, `near`, `secondary`, `from memory`, `common practice`, `computed`.
std::string_view evidence_word(Evidence evidence);

struct Source {
    std::string_view key;
    std::string_view citation;
    std::string_view note;
};

/// A number with its provenance. NaN in `value` means the table does not hold it; NaN in `uncertainty`, not stated.
struct Figure {
    double value;
    double uncertainty;    ///< standard uncertainty, in the unit of the value
    std::uint16_t source;  ///< index into Table::sources
    Evidence evidence;

    constexpr bool known() const { return value == value; }
};

/// One proton leaving. pK is thermodynamic (I = 0) at 25 °C, molality basis, unless `reference_ionic_strength` > 0:
/// then it is a concentration constant in a medium of that ionic strength (mol/kg).
struct Step {
    Figure pK_25C;
    Figure enthalpy_kJ_per_mol;
    Figure heat_capacity_J_per_K_mol;
    double reference_ionic_strength_mol_per_kg;
    /// pK(T) = e[0]/T + e[1] + e[2] T + e[3] ln T + e[4] T^2 in kelvin, when `has_expression`.
    bool has_expression;
    double expression[5];
    double expression_from_C;
    double expression_to_C;
    std::string_view note;
};

/// One protonation state of a system.
struct Species {
    std::string_view formula;  ///< e.g. `HPO4^2-`
    std::int8_t charge;
    double molar_mass_g_per_mol;
};

enum class Role : std::uint8_t { buffer, additive };

/// A member of a mixture that keeps its total: an acid-base system, or a species that exchanges no protons.
enum class ComponentKind : std::uint8_t { system, spectator };
struct ComponentId {
    ComponentKind kind = ComponentKind::system;
    std::uint16_t index = 0;  ///< into Table::systems or Table::spectators
    friend constexpr auto operator<=>(const ComponentId&, const ComponentId&) = default;
};

/// A multiprotic acid with all its conjugate bases; `species` runs from most to least protonated, one more than
/// `steps`.
struct System {
    std::string_view name;
    std::span<const std::string_view> names;
    Role role;
    std::span<const Species> species;
    std::span<const Step> steps;
    std::span<const ComponentId> counter_ions;  ///< usual one first
    std::string_view usual_form;  ///< reagent taken for the system's bare name as an additive; may be empty
    Figure apparent_molar_volume_cm3_per_mol;
    std::span<const std::uint16_t> cautions;
    std::string_view note;
};

/// Strong ion or neutral solute: takes part in charge and ionic strength only.
struct Spectator {
    std::string_view name;
    std::span<const std::string_view> names;
    std::string_view formula;
    std::int8_t charge;
    double molar_mass_g_per_mol;
    Figure apparent_molar_volume_cm3_per_mol;
};

struct Supply {
    ComponentId component;
    double count = 0;  ///< moles of the component per mole of reagent
};

enum class State : std::uint8_t { solid, liquid, solution };

struct Ghs {
    std::string_view signal_word;  ///< `Danger`, `Warning`, or empty when not classified
    std::span<const std::uint16_t> statements;
    std::uint16_t source;
    Evidence evidence;
};

/// An article as it stands on the shelf.
struct Reagent {
    std::string_view name;
    std::span<const std::string_view> names;
    std::string_view formula;
    std::string_view cas;
    Evidence cas_evidence;
    double molar_mass_g_per_mol;  ///< computed from `formula`
    std::span<const Supply> supplies;
    /// Charge of the spectators in one mole; what electroneutrality leaves to protons (see DEVELOPERS.md).
    double strong_charge;
    State state;
    bool usual;                 ///< the article a bench most often has among those with the same supplies
    bool rarely_stocked;        ///< few benches keep it; the planner takes it last
    Figure assay;               ///< mass fraction; `value` is the nominal one that weighing uses
    double assay_minimum;       ///< NaN when not stated
    Figure strength_mol_per_L;  ///< of solutions and liquids; computed from mass percent and density if given so
    Figure mass_percent;        ///< NaN when the strength is given in mol/L
    Figure density_g_per_mL;
    Figure solubility_g_per_L;
    Ghs ghs;
    std::span<const std::uint16_t> cautions;
    std::string_view note;
};

struct HazardStatement {
    std::string_view code;
    std::string_view text;
    std::uint16_t source;
    Evidence evidence;
};

struct Caution {
    std::string_view key;
    std::string_view text;
    std::uint16_t source;
    Evidence evidence;
};

/// What a vessel is for: filled to one mark, or read on a scale.
enum class VesselKind : std::uint8_t { flask, pipette, scale };

/// A piece of glassware or a pipette.
struct Vessel {
    std::string_view name;
    std::span<const std::string_view> names;
    VesselKind kind;
    bool at_hand;  ///< benches commonly have it: taken when a recipe needs one that fits
    Figure capacity_mL;
    Figure tolerance_mL;  ///< largest permitted error at capacity
    Figure reads_to_mL;   ///< finest that can be set; of a one-mark vessel its capacity
};

/// What a buffer does to an experiment, apart from holding its pH.
enum class Trait : std::uint8_t {
    phosphate,
    carboxylate,
    amine,           ///< primary or secondary: reacts with aldehydes, isothiocyanates and active esters
    tertiary_amine,  ///< no N-H to react
    zwitterion,
    metal_binding,
    uv_cutoff,  ///< absorbs below a wavelength
    volatile_salt,
    toxic,
    controlled,
    cell_use,  ///< customary in cell culture or on living cells
    radicals_in_light,
    diol_binding,
    gas_exchange,
    short_lived  ///< hydrolyses or oxidises on the shelf
};
/// The words used in the data files and on the command line: `phosphate`, `metal-binding`, `uv-cutoff` ...
std::string_view trait_word(Trait trait);
/// Empty when there is no such word.
std::optional<Trait> trait_of(std::string_view word);
/// All the words, in order.
std::span<const std::string_view> trait_words();

/// A trait of a system, with its provenance.
struct Fact {
    Trait trait;
    std::uint16_t system;  ///< index into Table::systems
    bool holds;            ///< false: it is known not to have it
    double wavelength_nm;  ///< of a UV cut-off, below which it absorbs; NaN for the others
    std::string_view text;
    std::uint16_t source;
    Evidence evidence;
};

struct Element {
    std::string_view symbol;
    Figure standard_atomic_weight;
};

enum class EntryKind : std::uint8_t { system, spectator, reagent };

/// One way of writing a name, folded by `fold_name`; the table keeps them sorted by key.
struct NameEntry {
    std::string_view key;
    EntryKind kind;
    std::uint16_t index;
};

/// The constants table: views only, cheap to copy; `owner` keeps the text of an overlaid table alive (empty for the
/// bundled one, which lives in the program's read-only data).
struct Table {
    std::string_view version;
    std::string_view sha256;  ///< of the documents the table was made from, hexadecimal
    std::span<const Source> sources;
    std::span<const Element> elements;
    std::span<const HazardStatement> hazards;
    std::span<const Caution> cautions;
    std::span<const Vessel> vessels;
    std::span<const Spectator> spectators;
    std::span<const System> systems;
    std::span<const Reagent> reagents;
    std::span<const Fact> facts;
    std::span<const NameEntry> names;
    std::shared_ptr<const void> owner;
};

/// The table that is part of the program.
const Table& bundled_table();

/// Finds an entry of one kind by any of its names; spelling is folded first. nullptr when there is none.
const System* find_system(const Table& table, std::string_view name);
const Spectator* find_spectator(const Table& table, std::string_view name);
const Reagent* find_reagent(const Table& table, std::string_view name);
/// First reagent with that CAS number whose entry is marked usual, else the first with it; nullptr when there is none.
const Reagent* find_reagent_by_cas(const Table& table, std::string_view cas);

/// nullptr when no vessel is called so.
const Vessel* find_vessel(const Table& table, std::string_view name);

/// What the table knows of a trait of a system; nullptr when it says nothing.
const Fact* find_fact(const Table& table, std::uint16_t system, Trait trait);

ComponentId id_of(const Table& table, const System& system);
ComponentId id_of(const Table& table, const Spectator& spectator);
std::string_view name_of(const Table& table, ComponentId id);

}  // namespace carboy
