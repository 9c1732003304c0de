#pragma once

#include <deque>
#include <map>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "carboy/constants.h"
#include "carboy/constants_file.h"

#include "constants/document_node.h"
#include "constants/formula.h"

namespace carboy {

/// Builds a table from a base and documents. Text and nested arrays of new entries live in an arena that the finished
/// table owns. Sections are read in an order in which each refers only to earlier ones; what refers onwards is resolved
/// at the end.
class TableBuilder {
public:
    explicit TableBuilder(const Table& base);

    void read_sources(const DocumentNode& document);
    void read_elements(const DocumentNode& document);
    void read_hazards(const DocumentNode& document);
    void read_cautions(const DocumentNode& document);
    void read_pictograms(const DocumentNode& document);
    void read_label_stock(const DocumentNode& document);
    void read_vessels(const DocumentNode& document);
    void read_spectators(const DocumentNode& document);
    void read_systems(const DocumentNode& document);
    void read_reagents(const DocumentNode& document);
    void read_observations(const DocumentNode& document);
    void read_traits(const DocumentNode& document);
    void read_formulas(const DocumentNode& document);

    /// Resolves what is left and checks the whole; faults of untouched entries carry the entry's name as path.
    Table finish(std::string version, std::string sha256);

    std::vector<ConstantsChange> changes;
    std::vector<ConstantsFault> faults;

private:
    struct Arena;

    std::string_view keep(std::string text);
    std::span<const std::string_view> keep_all(const std::vector<std::string>& texts);
    template <class T>
    std::span<const T> keep_array(std::vector<T> items);

    /// Puts an entry in the place of the one with the same folded name, else at the end; notes the change.
    template <class Entry>
    std::size_t place(std::vector<Entry>& entries, Entry entry, std::string_view Entry::*key, const char* kind);

    struct Provenance {
        std::uint16_t source = 0;
        Evidence evidence = Evidence::from_memory;
    };
    std::optional<std::uint16_t> source_index(const DocumentNode& at, const std::string& key);
    Provenance read_provenance(const DocumentNode& node, Provenance inherited);
    Figure read_figure(const DocumentNode& parent, const char* key, double lowest, double highest,
                       Provenance inherited);
    std::span<const std::uint16_t> read_cautions_of(const DocumentNode& entry);
    Presence read_presence(const DocumentNode& node);
    void read_product(const DocumentNode& node, Observation& observation);
    std::optional<ProductFactor> product_factor(const DocumentNode& at, const std::string& name) const;
    void read_when(const DocumentNode& node, Observation& observation);
    Step read_step(const DocumentNode& node);
    static void read_expression(const DocumentNode& node, Step& step);
    Ghs read_ghs(const DocumentNode& entry);
    void place_fact(const Fact& fact);
    void read_strength(const DocumentNode& entry, Reagent& reagent);
    std::optional<FormulaItem> read_formula_item(const DocumentNode& node);
    static std::optional<Formula> formula_at(const DocumentNode& node, const std::string& text);
    double molar_mass(const DocumentNode& node, const Formula& formula);

    void resolve_counter_ions();
    void check_usual_forms();
    void check_reagents();
    void check_reagent(Reagent& reagent);
    void index_names();
    std::optional<ComponentId> component(std::string_view name) const;
    std::string path_of(const char* kind, std::string_view name) const;

    std::shared_ptr<Arena> arena_;
    Table base_;
    std::vector<Source> sources_;
    std::vector<Element> elements_;
    std::vector<HazardStatement> hazards_;
    std::vector<Caution> cautions_;
    std::vector<PictogramRule> pictograms_;
    std::vector<LabelStock> label_stock_;
    std::vector<Vessel> vessels_;
    std::vector<Spectator> spectators_;
    std::vector<System> systems_;
    std::vector<Reagent> reagents_;
    std::vector<Observation> observations_;
    std::vector<Fact> facts_;
    std::vector<NamedFormula> formulas_;
    std::vector<NameEntry> names_;
    std::map<std::size_t, std::vector<std::string>> counter_ion_names_;  ///< by system, still to be resolved
    std::map<std::string, std::string> paths_;                           ///< kind and name -> JSON path, of new entries
};

constexpr Figure unknown_figure() {
    return {std::numeric_limits<double>::quiet_NaN(), std::numeric_limits<double>::quiet_NaN(), 0,
            Evidence::from_memory};
}

}  // namespace carboy
