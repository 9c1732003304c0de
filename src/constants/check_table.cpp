#include <algorithm>
#include <map>

#include <fmt/format.h>

#include "constants/arena.h"
#include "constants/name.h"
#include "constants/table_builder.h"

// What can only be checked when everything is there: references onwards, the balance of each reagent, names that clash.

namespace carboy {

void TableBuilder::resolve_counter_ions() {
    for (const auto& [index, names] : counter_ion_names_) {
        std::vector<ComponentId> ions;
        for (const std::string& name : names) {
            if (const auto id = component(name)) {
                ions.push_back(*id);
            } else {
                faults.push_back({path_of("system", systems_[index].name) + "/counter_ions",
                                  fmt::format("there is no ion or system '{}'", name),
                                  {}});
            }
        }
        systems_[index].counter_ions = keep_array(std::move(ions));
    }
}

void TableBuilder::check_usual_forms() {
    for (std::size_t i = 0; i < systems_.size(); ++i) {
        const System& system = systems_[i];
        if (system.usual_form.empty()) {
            continue;
        }
        const std::string folded = fold_name(system.usual_form);
        const auto reagent = std::find_if(reagents_.begin(), reagents_.end(),
                                          [&](const Reagent& r) { return fold_name(r.name) == folded; });
        const ComponentId id{ComponentKind::system, static_cast<std::uint16_t>(i)};
        if (reagent == reagents_.end() || std::none_of(reagent->supplies.begin(), reagent->supplies.end(),
                                                       [&](const Supply& supply) { return supply.component == id; })) {
            faults.push_back({path_of("system", system.name) + "/usual_form",
                              fmt::format("there is no reagent '{}' that supplies {}", system.usual_form, system.name),
                              {}});
        }
    }
}

/// Electroneutrality says how many protons a reagent brings beyond the bare bases; its formula must then be those
/// bases, the spectators and the protons, give or take water.
void TableBuilder::check_reagent(Reagent& reagent) {
    Formula rest;
    try {
        rest = read_formula(reagent.formula);
    } catch (const FormulaError&) {
        return;  // noted where it was read
    }
    double strong_charge = 0;
    double protons = 0;
    for (const Supply& supply : reagent.supplies) {
        std::string_view formula;
        if (supply.component.kind == ComponentKind::spectator) {
            const Spectator& spectator = spectators_[supply.component.index];
            strong_charge += supply.count * spectator.charge;
            protons -= supply.count * spectator.charge;
            formula = spectator.formula;
        } else {
            const Species& base = systems_[supply.component.index].species.back();
            protons -= supply.count * base.charge;
            formula = base.formula;
        }
        try {
            add(rest, read_formula(formula), -supply.count);
        } catch (const FormulaError&) {
            return;
        }
    }
    reagent.strong_charge = strong_charge;
    rest.atoms["H"] -= protons;
    if (!only_water(rest)) {
        std::string surplus;
        for (const auto& [symbol, count] : rest.atoms) {
            if (count > 1e-9 || count < -1e-9) {
                surplus += fmt::format("{}{} {:+g}", surplus.empty() ? "" : ", ", symbol, count);
            }
        }
        faults.push_back({path_of("reagent", reagent.name) + "/supplies",
                          fmt::format("{} is not what it supplies, with {:g} H+ for electroneutrality: {} left over",
                                      reagent.formula, protons, surplus),
                          "check the formula and the counts; water need not balance"});
    }
}

void TableBuilder::check_reagents() {
    for (Reagent& reagent : reagents_) {
        check_reagent(reagent);
    }
}

void TableBuilder::index_names() {
    std::map<std::pair<EntryKind, std::string>, std::size_t> owners;
    const auto enter = [&](EntryKind kind, const char* word, std::size_t index, std::string_view name) {
        std::string folded = fold_name(name);
        const auto [owner, is_new] = owners.try_emplace({kind, folded}, index);
        if (is_new) {
            names_.push_back({keep(std::move(folded)), kind, static_cast<std::uint16_t>(index)});
        } else if (owner->second != index) {
            const auto name_at = [&](std::size_t i) {
                return kind == EntryKind::system      ? systems_[i].name
                       : kind == EntryKind::spectator ? spectators_[i].name
                       : kind == EntryKind::reagent   ? reagents_[i].name
                       : kind == EntryKind::formula   ? formulas_[i].name
                                                      : vessels_[i].name;
            };
            faults.push_back({path_of(word, name_at(index)),
                              fmt::format("'{}' is also a name of {} '{}'", name, word, name_at(owner->second)),
                              "a name may belong to one entry of a kind"});
        }
    };
    const auto enter_all = [&](EntryKind kind, const char* word, const auto& entries) {
        for (std::size_t i = 0; i < entries.size(); ++i) {
            enter(kind, word, i, entries[i].name);
            for (const std::string_view name : entries[i].names) {
                enter(kind, word, i, name);
            }
        }
    };
    enter_all(EntryKind::system, "system", systems_);
    enter_all(EntryKind::spectator, "spectator", spectators_);
    enter_all(EntryKind::reagent, "reagent", reagents_);
    enter_all(EntryKind::formula, "formula", formulas_);
    enter_all(EntryKind::vessel, "vessel", vessels_);
    std::sort(names_.begin(), names_.end(),
              [](const NameEntry& a, const NameEntry& b) { return a.key != b.key ? a.key < b.key : a.kind < b.kind; });
}

}  // namespace carboy
