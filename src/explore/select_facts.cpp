#include "explore/select_facts.h"

#include <algorithm>
#include <array>
#include <cmath>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/equilibrium.h"

namespace carboy {

namespace {

/// What stands against a buffer even when nobody asked.
constexpr std::array drawbacks{Trait::toxic, Trait::controlled, Trait::short_lived, Trait::gas_exchange};

bool asked_for(const Job& job, Trait trait) {
    // A volatile buffer is one that gas leaves.
    const bool volatile_wanted = std::count(job.want.begin(), job.want.end(), Trait::volatile_salt) != 0;
    return std::count(job.want.begin(), job.want.end(), trait) != 0 ||
           (trait == Trait::gas_exchange && volatile_wanted);
}

Excluded by(const Table& table, const Fact& fact, const char* code) {
    return {fact.system, code, fmt::format("{}: {}", trait_word(fact.trait), fact.text),
            std::string(table.sources[fact.source].citation), fact.evidence};
}

/// The part of a sentence that a list of reasons can carry: no full stop, small first letter.
std::string clause(std::string_view sentence) {
    std::string text(sentence.substr(0, sentence.find_first_of(":.")));
    const bool abbreviation = text.size() > 1 && text[1] >= 'A' && text[1] <= 'Z';
    if (!text.empty() && text[0] >= 'A' && text[0] <= 'Z' && !abbreviation) {
        text[0] = static_cast<char>(text[0] - 'A' + 'a');
    }
    return text;
}

/// True when the table cannot say how the steps near the pH move with temperature.
bool drift_is_unknown(const Standing& standing, const Table& table, const Job& job) {
    const System& system = table.systems[standing.system];
    const Temperature away = Temperature::celsius(job.at.celsius() < 50 ? job.at.celsius() + 2 : job.at.celsius() - 2);
    for (std::size_t step = 0; step < system.steps.size(); ++step) {
        const bool counts = std::abs(thermodynamic_pK(system, step, job.at) - job.ph.value()) < 1.5;
        const bool from_expression = system.steps[step].has_expression;
        if (counts && pK_is_extrapolated(system, step, from_expression ? job.at : away)) {
            return true;
        }
    }
    return false;
}

}  // namespace

std::optional<Excluded> excluded_by_fact(const Table& table, const Job& job, std::uint16_t system) {
    for (const Trait trait : job.avoid) {
        const Fact* fact = find_fact(table, system, trait);
        if (fact != nullptr && fact->holds) {
            return by(table, *fact, "trait");
        }
    }
    for (const Trait trait : job.want) {
        const Fact* fact = find_fact(table, system, trait);
        if (fact == nullptr) {
            return Excluded{system,
                            "trait_not_known",
                            fmt::format("{}: the table does not say so of it", trait_word(trait)),
                            {},
                            Evidence::computed};
        }
        if (!fact->holds) {
            return by(table, *fact, "trait");
        }
    }
    if (job.clear_from_nm) {
        const Fact* fact = find_fact(table, system, Trait::uv_cutoff);
        if (fact != nullptr && fact->holds && fact->wavelength_nm > *job.clear_from_nm) {
            return by(table, *fact, "absorbs");
        }
    }
    return std::nullopt;
}

void add_facts(Standing& standing, const Table& table, const Job& job) {
    for (std::size_t i = 0; i < table.facts.size(); ++i) {
        if (table.facts[i].system == standing.system) {
            standing.facts.push_back(static_cast<std::uint16_t>(i));
        }
    }
    for (const Trait trait : drawbacks) {
        const Fact* fact = find_fact(table, standing.system, trait);
        if (fact != nullptr && fact->holds && !asked_for(job, trait)) {
            standing.drawbacks.push_back(fmt::format("{} ({})", trait_word(trait), clause(fact->text)));
        }
    }
    if (job.clear_from_nm && find_fact(table, standing.system, Trait::uv_cutoff) == nullptr) {
        standing.doubts.push_back(
            fmt::format("whether it is clear at {:g} nm is not in the table", *job.clear_from_nm));
    }
    if (drift_is_unknown(standing, table, job)) {
        standing.doubts.emplace_back(
            "how its pK moves with temperature is not in the table: the drift shown is no more "
            "than that of water and activities");
    }
}

void add_reason(Standing& standing, const Job& job) {
    struct Cause {
        double moves;
        const char* words;
    };
    const std::array causes{Cause{standing.moves_by_load, "the load"},
                            Cause{standing.moves_by_temperature, "temperature"},
                            Cause{standing.moves_by_dilution, "dilution"}};
    const auto* const most = std::max_element(causes.begin(), causes.end(),
                                              [](const Cause& a, const Cause& b) { return a.moves < b.moves; });
    standing.reason = fmt::format(
        "moves {:.2f} pH in all, most by {} ({:.2f}); its pK here is {:.2f}, {:.2f} from pH {:g}", standing.moves,
        most->words, most->moves, standing.working_pK, std::abs(standing.working_pK - job.ph.value()), job.ph.value());
    if (!standing.doubts.empty()) {
        standing.reason += fmt::format("; it stands after those without a doubt: {}", fmt::join(standing.doubts, "; "));
    }
    if (!standing.drawbacks.empty()) {
        standing.reason +=
            fmt::format("; it stands after those with nothing against them: {}", fmt::join(standing.drawbacks, "; "));
    }
}

}  // namespace carboy
