#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "constants/arena.h"
#include "constants/table_builder.h"

namespace carboy {

namespace {

/// Last digit of a CAS number: the others, counted from the right and weighted 1, 2, 3 ..., modulo 10.
bool cas_is_sound(std::string_view cas) {
    std::string digits;
    int hyphens = 0;
    for (const char c : cas) {
        if (c == '-') {
            ++hyphens;
        } else if (c >= '0' && c <= '9') {
            digits += c;
        } else {
            return false;
        }
    }
    if (hyphens != 2 || digits.size() < 5 || digits.size() > 10 || cas.size() < 7 || cas[cas.size() - 2] != '-' ||
        cas[cas.size() - 5] != '-') {
        return false;
    }
    int sum = 0;
    for (std::size_t i = 1; i < digits.size(); ++i) {
        sum += static_cast<int>(i) * (digits[digits.size() - 1 - i] - '0');
    }
    return sum % 10 == digits.back() - '0';
}

}  // namespace

Ghs TableBuilder::read_ghs(const DocumentNode& entry) {
    Ghs ghs{};
    if (!entry.has("ghs")) {
        entry.fault("'ghs' is missing",
                    "for an article that is not classified: {\"signal_word\": null, \"statements\": []}");
        return ghs;
    }
    const DocumentNode node = entry.at("ghs");
    if (!node.is_object_with({"signal_word", "statements", "source", "evidence"})) {
        return ghs;
    }
    for (const char* key : {"signal_word", "statements"}) {
        if (!node.has(key)) {
            node.fault(fmt::format("'{}' is missing", key));
        }
    }
    const Provenance provenance = read_provenance(node, {});
    ghs.source = provenance.source;
    ghs.evidence = provenance.evidence;
    if (node.has("signal_word") && !node.at("signal_word").is_null()) {
        const std::string word = node.at("signal_word").text();
        if (word != "Danger" && word != "Warning") {
            node.at("signal_word").fault(fmt::format("'{}' is no GHS signal word", word), "Danger, Warning or null");
        }
        ghs.signal_word = keep(word);
    }
    std::vector<std::uint16_t> statements;
    if (node.has("statements")) {
        for (const DocumentNode& statement : node.at("statements").elements()) {
            const std::string code = statement.text();
            const auto known = std::find_if(hazards_.begin(), hazards_.end(),
                                            [&](const HazardStatement& h) { return h.code == code; });
            if (known == hazards_.end()) {
                statement.fault(fmt::format("there is no hazard statement '{}'", code),
                                "add it under 'hazards' with its text");
            } else {
                statements.push_back(static_cast<std::uint16_t>(known - hazards_.begin()));
            }
        }
    }
    ghs.statements = keep_array(std::move(statements));
    return ghs;
}

/// Strength in mol/L as given, or from the mass percent and the density; also of a pure liquid by its assay and
/// density.
void TableBuilder::read_strength(const DocumentNode& entry, Reagent& reagent) {
    const Provenance provenance = read_provenance(entry, {});
    reagent.density_g_per_mL = read_figure(entry, "density_g_per_mL", 0.5, 4, provenance);
    if (entry.has("strength")) {
        const DocumentNode node = entry.at("strength");
        if (!node.is_object_with({"mol_per_L", "mass_percent", "uncertainty", "source", "evidence", "note"})) {
            return;
        }
        if (node.has("mol_per_L") == node.has("mass_percent")) {
            node.fault("a strength is 'mol_per_L' or 'mass_percent', one of them");
            return;
        }
        const Provenance own = read_provenance(node, provenance);
        Figure& figure = node.has("mol_per_L") ? reagent.strength_mol_per_L : reagent.mass_percent;
        figure.value =
            node.has("mol_per_L") ? node.at("mol_per_L").number(1e-6, 60) : node.at("mass_percent").number(1e-3, 100);
        figure.uncertainty = node.has("uncertainty") ? node.at("uncertainty").number(1e-9, 60)
                                                     : std::numeric_limits<double>::quiet_NaN();
        figure.source = own.source;
        figure.evidence = own.evidence;
    }
    const bool liquid = reagent.state == State::liquid;
    const double percent = reagent.mass_percent.known()      ? reagent.mass_percent.value
                           : liquid && reagent.assay.known() ? 100 * reagent.assay.value
                                                             : std::numeric_limits<double>::quiet_NaN();
    if (!reagent.strength_mol_per_L.known() && std::isfinite(percent) && reagent.density_g_per_mL.known()) {
        reagent.strength_mol_per_L = reagent.density_g_per_mL;
        reagent.strength_mol_per_L.uncertainty = std::numeric_limits<double>::quiet_NaN();
        reagent.strength_mol_per_L.evidence = Evidence::computed;
        reagent.strength_mol_per_L.value = percent * 10 * reagent.density_g_per_mL.value / reagent.molar_mass_g_per_mol;
    }
    if (reagent.state != State::solid && !reagent.strength_mol_per_L.known()) {
        entry.fault("a liquid or solution needs a strength, or a mass percent with its density",
                    "add \"strength\": {\"mol_per_L\": 1.0}");
    }
}

void TableBuilder::read_reagents(const DocumentNode& document) {
    if (!document.has("reagents")) {
        return;
    }
    for (const DocumentNode& node : document.at("reagents").elements()) {
        if (!node.is_object_with({"name", "names", "formula", "cas", "cas_evidence", "supplies", "state", "usual",
                                  "rarely_stocked", "assay", "strength", "density_g_per_mL", "solubility_g_per_L",
                                  "ghs", "cautions", "source", "evidence", "note"})) {
            continue;
        }
        Reagent reagent{};
        reagent.strength_mol_per_L = reagent.mass_percent = unknown_figure();
        const Provenance provenance = read_provenance(node, {});
        reagent.name = keep(node.required_text("name"));
        reagent.names = keep_all(node.optional_texts("names"));
        reagent.formula = keep(node.required_text("formula"));
        if (const auto formula = formula_at(node, std::string(reagent.formula))) {
            reagent.molar_mass_g_per_mol = molar_mass(node, *formula);
        }
        reagent.cas = keep(node.optional_text("cas"));  // a house compound may have none
        if (!reagent.cas.empty() && !cas_is_sound(reagent.cas)) {
            node.fault(fmt::format("the CAS number {} fails its check digit or form", reagent.cas),
                       "compare it with the bottle");
        }
        reagent.cas_evidence = provenance.evidence;
        if (node.has("cas_evidence")) {
            const std::string word = node.at("cas_evidence").text();
            reagent.cas_evidence = word == "seen"        ? Evidence::seen
                                   : word == "near"      ? Evidence::near
                                   : word == "secondary" ? Evidence::secondary
                                                         : Evidence::from_memory;
        }
        std::vector<Supply> supplies;
        if (!node.has("supplies")) {
            node.fault("'supplies' is missing", "say what one mole brings, as {\"phosphate\": 1, \"Na+\": 2}");
        } else {
            for (const auto& [name, count] : node.at("supplies").members()) {
                const auto id = component(name);
                if (!id) {
                    count.fault(fmt::format("there is no system, ion or solute '{}'", name));
                } else {
                    supplies.push_back({*id, count.number(1e-6, 100)});
                }
            }
        }
        std::sort(supplies.begin(), supplies.end(),
                  [](const Supply& a, const Supply& b) { return a.component < b.component; });
        reagent.supplies = keep_array(std::move(supplies));
        const std::string state = node.required_text("state");
        if (state != "solid" && state != "liquid" && state != "solution") {
            node.fault(fmt::format("'{}' is no state", state), "solid, liquid or solution");
        }
        reagent.state = state == "liquid" ? State::liquid : state == "solution" ? State::solution : State::solid;
        reagent.usual = node.has("usual") && node.at("usual").boolean();
        reagent.rarely_stocked = node.has("rarely_stocked") && node.at("rarely_stocked").boolean();
        reagent.assay = unknown_figure();
        reagent.assay_minimum = std::numeric_limits<double>::quiet_NaN();
        if (node.has("assay")) {
            const DocumentNode assay = node.at("assay");
            if (assay.is_object_with({"nominal", "minimum", "source", "evidence", "note"})) {
                const Provenance own = read_provenance(assay, provenance);
                const double nominal = assay.has("nominal") ? assay.at("nominal").number(0.01, 1.0) : 1.0;
                reagent.assay = {nominal, std::numeric_limits<double>::quiet_NaN(), own.source, own.evidence};
                if (assay.has("minimum")) {
                    reagent.assay_minimum = assay.at("minimum").number(0.0, 1.0);
                }
            }
        }
        read_strength(node, reagent);
        reagent.solubility_g_per_L = read_figure(node, "solubility_g_per_L", 0, 1e5, provenance);
        reagent.ghs = read_ghs(node);
        reagent.cautions = read_cautions_of(node);
        reagent.note = keep(node.optional_text("note"));
        paths_[fmt::format("reagent {}", reagent.name)] = node.path();
        place(reagents_, reagent, &Reagent::name, "reagent");
    }
}

}  // namespace carboy
