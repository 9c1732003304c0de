#include "carboy/constraint_words.h"

#include <cmath>

#include <fmt/format.h>

#include "carboy/error.h"
#include "carboy/notation.h"

#include "notation/line.h"
#include "notation/reagent_name.h"

namespace carboy {

namespace {

Error unknown(std::string_view kind, std::string_view name, std::string_view where, const std::string& help) {
    return {ErrorKind::input, "unknown_name", fmt::format("the table has no {} called '{}'", kind, name),
            std::string(where), help};
}

std::string did_you_mean(const std::vector<std::string>& near, const char* otherwise) {
    return near.empty() ? otherwise : fmt::format("did you mean {}?", near.front());
}

}  // namespace

ComponentId read_ion(std::string_view name, const Table& table, std::string_view where) {
    if (const auto ion = find_component(table, name)) {
        return *ion;
    }
    throw unknown("ion", name, where, did_you_mean(nearest_names(name, table, 1), "write it as Na+, Cl- or acetate"));
}

std::uint16_t read_reagent(std::string_view name, const Table& table, std::string_view where) {
    const Reagent* reagent = reagent_named(table, name);
    if (reagent == nullptr) {
        throw unknown(
            "reagent", name, where,
            did_you_mean(nearest_names(name, table, 1), "'carboy constants list reagents' shows every reagent"));
    }
    return static_cast<std::uint16_t>(reagent - table.reagents.data());
}

Constraints::Total read_ion_total(std::string_view text, const Table& table, std::string_view where) {
    const auto equals = text.find('=');
    if (equals == std::string_view::npos) {
        throw Error(ErrorKind::input, "unreadable", fmt::format("'{}' does not say how much of which ion", text),
                    std::string(where), "write it as 'Na+ = 150 mM'");
    }
    Constraints::Total total{read_ion(trimmed(text.substr(0, equals)), table, where),
                             read_concentration(trimmed(text.substr(equals + 1)), where)};
    if (total.ion.kind != ComponentKind::spectator || table.spectators[total.ion.index].charge == 0) {
        throw Error(
            ErrorKind::input, "unusable_ion",
            fmt::format("{} cannot be held: only strong ions such as Na+, K+ and Cl- can", name_of(table, total.ion)),
            std::string(where), "ask for a buffer's concentration on the label");
    }
    if (total.concentration.unit != ConcentrationUnit::mol_per_L &&
        total.concentration.unit != ConcentrationUnit::mol_per_kg) {
        throw Error(ErrorKind::input, "unusable_unit", "an ion's total is given in mol/L or mol/kg", std::string(where),
                    "write it as 'Na+ = 150 mM'");
    }
    return total;
}

void allow_only(Constraints& constraints, ComponentId ion, const Table& table) {
    if (ion.kind != ComponentKind::spectator) {
        return;
    }
    for (const Spectator& other : table.spectators) {
        if (other.charge == table.spectators[ion.index].charge && id_of(table, other) != ion) {
            constraints.without.push_back(id_of(table, other));
        }
    }
}

Balance read_balance(std::string_view readability, std::optional<std::string_view> minimum, std::string_view where) {
    constexpr double least_readabilities = 100;
    const Mass reads_to = read_mass(readability, where);
    return {reads_to, minimum ? read_mass(*minimum, where) : least_readabilities * reads_to};
}

std::uint16_t read_vessel(std::string_view name, const Table& table, std::string_view where) {
    if (const Vessel* vessel = find_vessel(table, name)) {
        if (vessel->kind != VesselKind::scale) {
            throw Error(ErrorKind::input, "unusable_vessel",
                        fmt::format("{} has one mark and measures no other volume", vessel->name), std::string(where),
                        "name a burette, a measuring cylinder, or a graduated or piston pipette");
        }
        return static_cast<std::uint16_t>(vessel - table.vessels.data());
    }
    std::vector<std::string> names;
    for (const Vessel& vessel : table.vessels) {
        if (vessel.kind == VesselKind::scale) {
            names.emplace_back(vessel.name);
        }
    }
    throw unknown(
        "vessel", name, where,
        did_you_mean(nearest_words(name, names, 1), "for instance 'burette 50 mL' or 'measuring cylinder 100 mL'"));
}

}  // namespace carboy
