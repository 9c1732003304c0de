// Build-time program: reads the constants documents, refuses faulty ones with every fault, and writes them as C++
// constants, so that the finished program neither looks for a file nor parses anything when it starts.
//
//     carboy_embed OUT.cpp VERSION DOCUMENT.json...

#include <cmath>
#include <cstdio>
#include <exception>
#include <fstream>
#include <map>
#include <sstream>
#include <string>
#include <vector>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/constants_file.h"

namespace {

using namespace carboy;

std::string quoted(std::string_view text) {
    std::string literal = "\"";
    for (const char c : text) {
        const auto byte = static_cast<unsigned char>(c);
        if (c == '"' || c == '\\') {
            literal += '\\';
            literal += c;
        } else if (byte < 0x20 || byte >= 0x7F) {
            literal += fmt::format("\\{:03o}", byte);  // three octal digits never run into what follows
        } else {
            literal += c;
        }
    }
    return literal + "\"sv";
}

std::string number(double value) {
    return std::isnan(value) ? "none" : fmt::format("{:.17g}", value);
}

std::string figure(const Figure& f) {
    return fmt::format("{{{}, {}, {}, Evidence{{{}}}}}", number(f.value), number(f.uncertainty), f.source,
                       static_cast<int>(f.evidence));
}

std::string component(ComponentId id) {
    return fmt::format("{{ComponentKind{{{}}}, {}}}", static_cast<int>(id.kind), id.index);
}

/// Writes arrays one after the other and hands out their names; equal arrays are written once.
class Arrays {
public:
    std::string of(const char* type, const std::vector<std::string>& items) {
        if (items.empty()) {
            return "{}";
        }
        const std::string body = fmt::format("{} {}", type, fmt::join(items, ", "));
        const auto [known, is_new] = names_.try_emplace(body, fmt::format("a{}", names_.size()));
        if (is_new) {
            text_ += fmt::format("constexpr {} {}[] = {{{}}};\n", type, known->second, fmt::join(items, ",\n    "));
        }
        return known->second;
    }

    template <class Range, class Write>
    std::string of(const char* type, const Range& range, Write write) {
        std::vector<std::string> items;
        for (const auto& item : range) {
            items.push_back(write(item));
        }
        return of(type, items);
    }

    const std::string& text() const { return text_; }

private:
    std::map<std::string, std::string> names_;
    std::string text_;
};

std::string words(Arrays& arrays, std::span<const std::string_view> list) {
    return arrays.of("std::string_view", list, quoted);
}

std::string indices(Arrays& arrays, std::span<const std::uint16_t> list) {
    return arrays.of("std::uint16_t", list, [](std::uint16_t index) { return fmt::format("{}", index); });
}

std::string step(const Step& s) {
    return fmt::format("{{{}, {}, {}, {}, {}, {{{}, {}, {}, {}, {}}}, {}, {}, {}}}", figure(s.pK_25C),
                       figure(s.enthalpy_kJ_per_mol), figure(s.heat_capacity_J_per_K_mol),
                       number(s.reference_ionic_strength_mol_per_kg), s.has_expression, number(s.expression[0]),
                       number(s.expression[1]), number(s.expression[2]), number(s.expression[3]),
                       number(s.expression[4]), number(s.expression_from_C), number(s.expression_to_C), quoted(s.note));
}

std::string system(Arrays& arrays, const System& s) {
    const std::string species = arrays.of("Species", s.species, [](const Species& one) {
        return fmt::format("{{{}, {}, {}}}", quoted(one.formula), static_cast<int>(one.charge),
                           number(one.molar_mass_g_per_mol));
    });
    return fmt::format("{{{}, {}, Role{{{}}}, {}, {}, {}, {}, {}, {}, {}}}", quoted(s.name), words(arrays, s.names),
                       static_cast<int>(s.role), species, arrays.of("Step", s.steps, step),
                       arrays.of("ComponentId", s.counter_ions, component), quoted(s.usual_form),
                       figure(s.apparent_molar_volume_cm3_per_mol), indices(arrays, s.cautions), quoted(s.note));
}

std::string spectator(Arrays& arrays, const Spectator& s) {
    return fmt::format("{{{}, {}, {}, {}, {}, {}}}", quoted(s.name), words(arrays, s.names), quoted(s.formula),
                       static_cast<int>(s.charge), number(s.molar_mass_g_per_mol),
                       figure(s.apparent_molar_volume_cm3_per_mol));
}

std::string reagent(Arrays& arrays, const Reagent& r) {
    const std::string supplies = arrays.of("Supply", r.supplies, [](const Supply& supply) {
        return fmt::format("{{{}, {}}}", component(supply.component), number(supply.count));
    });
    const std::string ghs =
        fmt::format("{{{}, {}, {}, Evidence{{{}}}}}", quoted(r.ghs.signal_word), indices(arrays, r.ghs.statements),
                    r.ghs.source, static_cast<int>(r.ghs.evidence));
    return fmt::format(
        "{{{}, {}, {}, {}, Evidence{{{}}}, {}, {}, {}, State{{{}}}, {}, {}, {}, {}, {}, {}, {}, {}, {}, {}, {}}}",
        quoted(r.name), words(arrays, r.names), quoted(r.formula), quoted(r.cas), static_cast<int>(r.cas_evidence),
        number(r.molar_mass_g_per_mol), supplies, number(r.strong_charge), static_cast<int>(r.state), r.usual,
        r.rarely_stocked, figure(r.assay), number(r.assay_minimum), figure(r.strength_mol_per_L),
        figure(r.mass_percent), figure(r.density_g_per_mL), figure(r.solubility_g_per_L), ghs,
        indices(arrays, r.cautions), quoted(r.note));
}

std::string vessel(Arrays& arrays, const Vessel& v) {
    return fmt::format("{{{}, {}, VesselKind{{{}}}, {}, {}, {}, {}}}", quoted(v.name), words(arrays, v.names),
                       static_cast<int>(v.kind), v.at_hand, figure(v.capacity_mL), figure(v.tolerance_mL),
                       figure(v.reads_to_mL));
}

std::string source_code(const Table& table, std::string_view version) {
    Arrays arrays;
    const auto noted = [](const auto& item, std::string_view first, std::string_view second) {
        return fmt::format("{{{}, {}, {}, Evidence{{{}}}}}", quoted(first), quoted(second), item.source,
                           static_cast<int>(item.evidence));
    };
    const std::string sources = arrays.of("Source", table.sources, [](const Source& s) {
        return fmt::format("{{{}, {}, {}}}", quoted(s.key), quoted(s.citation), quoted(s.note));
    });
    const std::string elements = arrays.of("Element", table.elements, [](const Element& e) {
        return fmt::format("{{{}, {}}}", quoted(e.symbol), figure(e.standard_atomic_weight));
    });
    const std::string hazards =
        arrays.of("HazardStatement", table.hazards, [&](const HazardStatement& h) { return noted(h, h.code, h.text); });
    const std::string cautions =
        arrays.of("Caution", table.cautions, [&](const Caution& c) { return noted(c, c.key, c.text); });
    const std::string vessels = arrays.of("Vessel", table.vessels, [&](const Vessel& v) { return vessel(arrays, v); });
    const std::string spectators =
        arrays.of("Spectator", table.spectators, [&](const Spectator& s) { return spectator(arrays, s); });
    const std::string systems = arrays.of("System", table.systems, [&](const System& s) { return system(arrays, s); });
    const std::string reagents =
        arrays.of("Reagent", table.reagents, [&](const Reagent& r) { return reagent(arrays, r); });
    const std::string facts = arrays.of("Fact", table.facts, [](const Fact& f) {
        return fmt::format("{{Trait{{{}}}, {}, {}, {}, {}, {}, Evidence{{{}}}}}", static_cast<int>(f.trait), f.system,
                           f.holds, number(f.wavelength_nm), quoted(f.text), f.source, static_cast<int>(f.evidence));
    });
    const std::string names = arrays.of("NameEntry", table.names, [](const NameEntry& n) {
        return fmt::format("{{{}, EntryKind{{{}}}, {}}}", quoted(n.key), static_cast<int>(n.kind), n.index);
    });
    return fmt::format(
        "// Made from data/constants by carboy_embed; do not edit.\n"
        "#include <limits>\n\n#include \"carboy/constants.h\"\n\n"
        "namespace carboy {{\nnamespace {{\nusing namespace std::literals;\n"
        "constexpr double none = std::numeric_limits<double>::quiet_NaN();\n{}}}  // namespace\n\n"
        "const Table& bundled_table() {{\n"
        "    static constinit const Table table{{{}, {}, {}, {}, {}, {}, {}, {}, {}, {}, {}, {}, nullptr}};\n"
        "    return table;\n}}\n\n}}  // namespace carboy\n",
        arrays.text(), quoted(version), quoted(table.sha256), sources, elements, hazards, cautions, vessels, spectators,
        systems, reagents, facts, names);
}

int embed(int argc, char** argv) {
    if (argc < 4) {
        fmt::print(stderr, "usage: carboy_embed OUT.cpp VERSION DOCUMENT.json...\n");
        return 2;
    }
    std::vector<ConstantsDocument> documents;
    for (int i = 3; i < argc; ++i) {
        std::ifstream file(argv[i], std::ios::binary);
        std::ostringstream content;
        content << file.rdbuf();
        if (!file) {
            fmt::print(stderr, "carboy_embed: {} cannot be read\n", argv[i]);
            return 3;
        }
        const std::string path = argv[i];
        documents.push_back({path.substr(path.find_last_of('/') + 1), content.str()});
    }
    const ConstantsOverlay overlay = lay_over(Table{}, documents);
    for (const ConstantsFault& fault : overlay.faults) {
        fmt::print(stderr, "data/constants: {}: {}{}{}\n", fault.path, fault.message, fault.help.empty() ? "" : "; ",
                   fault.help);
    }
    for (const ConstantsChange& change : overlay.changes) {
        if (change.replaced) {
            fmt::print(stderr, "data/constants: {} '{}' stands twice\n", change.kind, change.name);
            return 1;
        }
    }
    if (!overlay.faults.empty()) {
        return 1;
    }
    std::ofstream out(argv[1], std::ios::binary);
    out << source_code(overlay.table, argv[2]);
    out.close();
    return out ? 0 : 3;
}

}  // namespace

int main(int argc, char** argv) try { return embed(argc, argv); } catch (const std::exception& error) {
    std::fputs(error.what(), stderr);
    return 70;
}
