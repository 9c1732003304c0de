#pragma once

#include <cstdint>
#include <memory>
#include <optional>
#include <span>
#include <string_view>
#include <vector>

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

    /// Mass fraction that weighing counts with; 1 where the table states none.
    constexpr double counted_assay() const { return assay.known() ? assay.value : 1.0; }
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

/// Closed range of a figure; NaN leaves an end open.
struct Range {
    double from;
    double to;

    constexpr bool holds(double value) const { return !(value < from) && !(value > to); }
    constexpr bool open() const { return from != from && to != to; }
};

/// One bit that stands for a component: a quick way to see that none of a set is in a mixture. Components share bits,
/// so a common bit proves nothing.
constexpr std::uint64_t mark_of(ComponentId id) {
    const unsigned bit = (id.kind == ComponentKind::spectator ? 0U : 29U) + id.index;
    return std::uint64_t{1} << (bit % 64U);
}

/// A condition on the composition: together, these components make up so much or more.
struct Presence {
    std::span<const ComponentId> any_of;
    double least_mol_per_kg;
    std::uint64_t marks;  ///< of `any_of`
};

/// A species of an ionic product, with its power.
struct ProductFactor {
    enum class Of : std::uint8_t { component, hydrogen_ion, hydroxide };
    Of of = Of::component;
    ComponentId component;
    std::uint8_t species = 0;  ///< index into System::species; 0 for a spectator
    std::uint8_t power = 1;
};

/// When a solution is looked at.
enum class Moment : std::uint8_t { dissolved = 1, titrated = 2, filled = 4, in_use = 8 };

/// What a good colleague says when he sees such a solution, and when he says it. Conditions that are left out hold.
struct Observation {
    std::string_view code;
    std::string_view text;  ///< with places to fill in, such as {pH}; see `observation_places`
    std::uint8_t weight;    ///< 0 to 100: the heaviest is said first
    std::uint16_t source;
    Evidence evidence;
    double pH_standard_uncertainty;                ///< added to that of the prediction; 0 where the pH is not in doubt
    std::span<const std::string_view> instead_of;  ///< codes that need not be said beside this one

    // When.
    bool of_recipe;        ///< concerns the making-up: never said of a mixture alone
    std::uint8_t moments;  ///< set of Moment; the pH counts at any of them
    std::span<const Presence> with;
    std::span<const std::uint16_t> reagents;    ///< one of them is used; none: any
    std::span<const std::uint16_t> statements;  ///< one of these hazard statements stands on that reagent
    std::span<const ProductFactor> product;     ///< of activities
    double log10_product_above;
    Range pH;
    Range temperature_C;
    Range ionic_strength_mol_per_kg;
    Range buffer_value_mol_per_kg;  ///< without water's own
    Range pK_distance;              ///< of the nearest pK
    Range share_of_best_buffering;  ///< buffer value against the best that the concentration asked for could give
    Range solubility_share;         ///< concentration of a reagent against its solubility in water
    Range temperature_rise_K;       ///< by the titrant
    Range titrant_share;            ///< of the final volume
};

/// The places that a text may have.
constexpr std::string_view observation_places[] = {
    "pH",      "temperature", "ionic_strength", "buffer_value", "percent", "subject",
    "partner", "reagent",     "g_per_L",        "solubility",   "rise"};

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

/// What an item of a formula is there for. Without a pH all of them are put together as written.
enum class FormulaPart : std::uint8_t {
    added,   ///< goes in as written, whatever the pH
    buffer,  ///< holds the pH: with a pH, its system in the form that the pH asks for
    titrant  ///< sets the pH of the formula as written: with a pH it is left out, and its amount follows from the pH
};

enum class ConcentrationUnit : std::uint8_t;  // concentration.h

/// One reagent of a formula, with its concentration at strength 1.
struct FormulaItem {
    std::uint16_t reagent;  ///< index into Table::reagents
    FormulaPart part;
    double concentration;    ///< in mol/L, g/L or % v/v
    ConcentrationUnit unit;  ///< mol_per_L, g_per_L or percent_v_v
    /// Of a buffer: what it is brought to pH with.
    bool has_counter_ion;
    ComponentId counter_ion;
};

/// A mixture that the trade knows by name, such as phosphate-buffered saline, at its working strength.
struct NamedFormula {
    std::string_view name;
    std::span<const std::string_view> names;
    std::span<const FormulaItem> items;
    Figure ph;  ///< at working strength and 25 °C, taken when the label gives none; unknown: as written
    std::uint16_t source;
    Evidence evidence;
    std::string_view note;
};

/// When an article carries a GHS pictogram. Codes are compared letter by letter.
struct PictogramRule {
    std::string_view key;
    std::string_view code;                         ///< `GHS05`
    std::string_view name;                         ///< `corrosion`
    std::span<const std::string_view> statements;  ///< codes of hazard statements, any of which calls for it
    /// Pictograms and statements of the same article beside which the rule falls away (`GHS06`, `H334`).
    std::span<const std::string_view> unless;
    std::uint16_t source;
    Evidence evidence;
};

/// A label to print on.
struct LabelStock {
    std::string_view name;  ///< `70x36`
    double width_mm;
    double height_mm;
    std::uint16_t source;
    Evidence evidence;
};

struct Element {
    std::string_view symbol;
    Figure standard_atomic_weight;
};

enum class EntryKind : std::uint8_t { system, spectator, reagent, formula, vessel };

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
    std::span<const PictogramRule> pictograms;
    std::span<const LabelStock> label_stock;  ///< the usual one first
    std::span<const Vessel> vessels;
    std::span<const Spectator> spectators;
    std::span<const System> systems;
    std::span<const Reagent> reagents;
    std::span<const Fact> facts;
    std::span<const NamedFormula> formulas;
    std::span<const NameEntry> names;
    std::span<const Observation> observations;
    std::shared_ptr<const void> owner;
};

/// The table that is part of the program.
const Table& bundled_table();

/// Finds a formula by any of its names: `PBS`, `phosphate-buffered saline`; nullptr when there is none.
const NamedFormula* find_named_formula(const Table& table, std::string_view name);

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

/// The pictograms that an article as supplied carries, each code once, in the order of the codes.
std::vector<const PictogramRule*> pictograms_of(const Reagent& reagent, const Table& table);

ComponentId id_of(const Table& table, const System& system);
ComponentId id_of(const Table& table, const Spectator& spectator);
std::string_view name_of(const Table& table, ComponentId id);
/// The ion or solute of that name, else the system; none when the table knows neither.
std::optional<ComponentId> find_component(const Table& table, std::string_view name);

}  // namespace carboy
