#include <algorithm>
#include <string>
#include <vector>

#include "carboy/notation.h"

#include "constants/name.h"

namespace carboy {

namespace {

/// Damerau-Levenshtein distance (optimal string alignment), cut off beyond `limit`.
std::size_t distance(std::string_view a, std::string_view b, std::size_t limit) {
    if (a.size() > b.size() + limit || b.size() > a.size() + limit) {
        return limit + 1;
    }
    std::vector<std::size_t> before(b.size() + 1);
    std::vector<std::size_t> previous(b.size() + 1);
    std::vector<std::size_t> current(b.size() + 1);
    for (std::size_t j = 0; j <= b.size(); ++j) {
        previous[j] = j;
    }
    for (std::size_t i = 1; i <= a.size(); ++i) {
        current[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) {
            const std::size_t cost = a[i - 1] == b[j - 1] ? 0 : 1;
            current[j] = std::min({previous[j] + 1, current[j - 1] + 1, previous[j - 1] + cost});
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1]) {
                current[j] = std::min(current[j], before[j - 2] + 1);
            }
        }
        std::swap(before, previous);
        std::swap(previous, current);
    }
    return previous[b.size()];
}

/// A third of the word may be wrong; what begins with all that was typed is near too.
std::size_t nearness(std::string_view typed, std::string_view known) {
    if (typed == known) {
        return 0;
    }
    const std::size_t limit = std::max<std::size_t>(1, typed.size() / 3);
    if (typed.size() >= 3 && known.starts_with(typed)) {
        return 1;
    }
    const std::size_t apart = distance(typed, known, limit);
    return apart > limit ? std::string::npos : apart;
}

struct Near {
    std::size_t apart;
    std::string name;
};

std::vector<std::string> best_of(std::vector<Near> found, std::size_t at_most) {
    std::stable_sort(found.begin(), found.end(), [](const Near& a, const Near& b) {
        return a.apart != b.apart ? a.apart < b.apart : a.name.size() < b.name.size();
    });
    std::vector<std::string> names;
    for (Near& near : found) {
        if (names.size() < at_most && std::find(names.begin(), names.end(), near.name) == names.end()) {
            names.push_back(std::move(near.name));
        }
    }
    return names;
}

/// The spelling of an entry that folds to this key, so that a suggestion reads as the trade writes it.
std::string spelling(const Table& table, const NameEntry& entry) {
    const auto pick = [&](std::string_view name, std::span<const std::string_view> names) {
        if (fold_name(name) == entry.key) {
            return std::string(name);
        }
        for (const std::string_view other : names) {
            if (fold_name(other) == entry.key) {
                return std::string(other);
            }
        }
        return std::string(name);
    };
    switch (entry.kind) {
        case EntryKind::system:
            return pick(table.systems[entry.index].name, table.systems[entry.index].names);
        case EntryKind::spectator:
            return pick(table.spectators[entry.index].name, table.spectators[entry.index].names);
        case EntryKind::reagent:
            return pick(table.reagents[entry.index].name, table.reagents[entry.index].names);
        case EntryKind::formula:
            return pick(table.formulas[entry.index].name, table.formulas[entry.index].names);
        case EntryKind::vessel:
            return pick(table.vessels[entry.index].name, table.vessels[entry.index].names);
    }
    return {};
}

/// Entries of a kind near to one side of a name; what was typed right stays as it was typed.
std::vector<Near> near_side(const Table& table, EntryKind kind, std::string_view side) {
    const std::string typed = fold_name(side);
    std::vector<Near> found;
    for (const NameEntry& entry : table.names) {
        const std::size_t apart = entry.kind == kind && !typed.empty() ? nearness(typed, entry.key) : std::string::npos;
        if (apart == 0) {
            return {{0, std::string(side)}};
        }
        if (apart != std::string::npos) {
            found.push_back({apart, spelling(table, entry)});
        }
    }
    return found;
}

/// `Trs-HCl`, `soduim phosphate`: where one side of a name is right, the other may be misspelt.
void add_with_ion(std::vector<Near>& found, std::string_view text, const Table& table) {
    for (std::size_t i = 1; i + 1 < text.size(); ++i) {
        if (text[i] != ' ' && text[i] != '-') {
            continue;
        }
        const std::string_view left = text.substr(0, i);
        const std::string_view right = text.substr(i + 1);
        for (const bool ion_last : {true, false}) {
            const auto ions = near_side(table, EntryKind::spectator, ion_last ? right : left);
            const auto systems = ions.empty() ? ions : near_side(table, EntryKind::system, ion_last ? left : right);
            for (const Near& ion : ions) {
                for (const Near& system : systems) {
                    if (ion.apart == 0 || system.apart == 0) {
                        found.push_back({ion.apart + system.apart, ion_last ? system.name + text[i] + ion.name
                                                                            : ion.name + text[i] + system.name});
                    }
                }
            }
        }
    }
}

}  // namespace

std::vector<std::string> nearest_names(std::string_view text, const Table& table, std::size_t at_most) {
    const std::string typed = fold_name(text);
    std::vector<Near> found;
    for (const NameEntry& entry : table.names) {
        // Ions are part of a name, never an ingredient; formulas have a search of their own.
        if (entry.kind != EntryKind::system && entry.kind != EntryKind::reagent) {
            continue;
        }
        const std::size_t apart = nearness(typed, entry.key);
        if (apart != std::string::npos) {
            found.push_back({apart, spelling(table, entry)});
        }
    }
    return best_of(std::move(found), at_most);
}

std::vector<std::string> nearest_buffer_names(std::string_view text, const Table& table, std::size_t at_most) {
    std::vector<Near> found;
    add_with_ion(found, text, table);
    std::vector<std::string> names = best_of(std::move(found), at_most);
    for (std::string& name : nearest_names(text, table, at_most)) {
        if (names.size() < at_most && std::find(names.begin(), names.end(), name) == names.end()) {
            names.push_back(std::move(name));
        }
    }
    return names;
}

std::vector<std::string> nearest_formulas(std::string_view text, const Table& table, std::size_t at_most) {
    std::vector<std::string> names;
    for (const NamedFormula& formula : table.formulas) {
        names.emplace_back(formula.name);
        names.insert(names.end(), formula.names.begin(), formula.names.end());
    }
    return nearest_words(text, names, at_most);
}

std::vector<std::string> nearest_words(std::string_view text, const std::vector<std::string>& words,
                                       std::size_t at_most) {
    const std::string typed = fold_name(text);
    std::vector<Near> found;
    for (const std::string& word : words) {
        const std::size_t apart = nearness(typed, fold_name(word));
        if (apart != std::string::npos) {
            found.push_back({apart, word});
        }
    }
    return best_of(std::move(found), at_most);
}

}  // namespace carboy
