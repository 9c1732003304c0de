#include "plan/candidates.h"

#include <algorithm>
#include <optional>

namespace carboy {

namespace {

int charge_of_ion(const Table& table, ComponentId ion) {
    if (ion.kind == ComponentKind::spectator) {
        return table.spectators[ion.index].charge;
    }
    // A system as counter-ion: an amine is a cation, an acid an anion.
    return table.systems[ion.index].species.front().charge > 0 ? 1 : -1;
}

/// The table lists the most usual spectators first.
std::optional<ComponentId> usual_ion(const Table& table, int charge) {
    for (const Spectator& spectator : table.spectators) {
        if (spectator.charge == charge) {
            return id_of(table, spectator);
        }
    }
    return std::nullopt;
}

void add_unique(std::vector<ComponentId>& ions, ComponentId ion) {
    if (std::find(ions.begin(), ions.end(), ion) == ions.end()) {
        ions.push_back(ion);
    }
}

/// Ions to titrate with, most usual first. Named ones exclude all others.
std::vector<ComponentId> titrant_ions(const Table& table, const Request& request) {
    std::vector<ComponentId> ions;
    for (const BufferItem& buffer : request.buffers) {
        if (buffer.counter_ion) {
            add_unique(ions, *buffer.counter_ion);
        }
    }
    if (!ions.empty()) {
        return ions;
    }
    for (const BufferItem& buffer : request.buffers) {
        const System& system = table.systems[buffer.system.index];
        if (!system.counter_ions.empty()) {
            add_unique(ions, system.counter_ions.front());
        }
    }
    // A pH on the other side asks for an ion of the other sign.
    for (const int sign : {1, -1}) {
        const bool present = std::any_of(ions.begin(), ions.end(),
                                         [&](ComponentId ion) { return charge_of_ion(table, ion) * sign > 0; });
        if (const auto ion = usual_ion(table, sign); !present && ion) {
            ions.push_back(*ion);
        }
    }
    return ions;
}

std::vector<Chemistry> ionic_strength_salt(const Table& table, ComponentId titrant) {
    auto cation = usual_ion(table, 1);
    auto anion = usual_ion(table, -1);
    if (titrant.kind == ComponentKind::spectator) {
        (charge_of_ion(table, titrant) > 0 ? cation : anion) = titrant;
    }
    std::vector<Chemistry> salts;
    if (cation && anion) {
        if (auto salt = salt_of(table, *cation, *anion)) {
            salts.push_back(std::move(*salt));
        }
    }
    return salts;
}

}  // namespace

std::vector<CounterIonSet> counter_ion_sets(const Table& table, const Request& request) {
    std::vector<CounterIonSet> sets;
    for (const ComponentId titrant : titrant_ions(table, request)) {
        CounterIonSet set;
        for (const BufferItem& buffer : request.buffers) {
            const ComponentId ion = buffer.counter_ion.value_or(titrant);
            set.choices.push_back({buffer.system, ion, buffer.counter_ion.has_value()});
            set.forms.push_back(forms_of(table, buffer.system, ion));
        }
        if (auto titrants = alone(table, titrant)) {
            set.titrants.push_back(std::move(*titrants));
        }
        if (request.ionic_strength) {
            set.salt = ionic_strength_salt(table, titrant);
        }
        sets.push_back(std::move(set));
    }
    return sets;
}

std::vector<Candidate> candidates(const std::vector<CounterIonSet>& sets, const Request& request) {
    std::vector<Candidate> found;
    for (std::size_t s = 0; s < sets.size(); ++s) {
        const CounterIonSet& set = sets[s];
        if (std::any_of(set.forms.begin(), set.forms.end(), [](const auto& forms) { return forms.empty(); })) {
            continue;
        }
        const Chemistry* salt = set.salt.empty() ? nullptr : &set.salt.front();
        // Counts through all choices of one form per buffer, like an odometer.
        std::vector<std::size_t> choice(set.forms.size(), 0);
        for (bool more = true; more;) {
            std::vector<const Chemistry*> forms;
            for (std::size_t b = 0; b < choice.size(); ++b) {
                forms.push_back(&set.forms[b][choice[b]]);
            }
            if (request.route != Route::salts) {
                for (const Chemistry& titrant : set.titrants) {
                    found.push_back({forms, &titrant, salt, Route::titrated, s});
                }
            }
            if (request.route != Route::titrated) {
                for (std::size_t b = 0; b < choice.size(); ++b) {
                    for (std::size_t second = choice[b] + 1; second < set.forms[b].size(); ++second) {
                        found.push_back({forms, &set.forms[b][second], salt, Route::salts, s});
                    }
                }
            }
            more = false;
            for (std::size_t b = 0; b < choice.size() && !more; ++b) {
                more = ++choice[b] < set.forms[b].size();
                choice[b] = more ? choice[b] : 0;
            }
        }
    }
    return found;
}

}  // namespace carboy
