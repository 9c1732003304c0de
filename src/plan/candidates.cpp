#include "plan/candidates.h"

#include <algorithm>
#include <optional>

#include "plan/articles.h"

namespace carboy {

namespace {

int charge_of_ion(const Table& table, ComponentId ion) {
    if (ion.kind == ComponentKind::spectator) {
        return table.spectators[ion.index].charge;
    }
    // A system as counter-ion: an amine is a cation, an acid an anion.
    return table.systems[ion.index].species.front().charge > 0 ? 1 : -1;
}

bool ruled_out(const Request& request, ComponentId ion) {
    const auto& without = request.constraints.without;
    return std::find(without.begin(), without.end(), ion) != without.end();
}

/// The table lists the most usual spectators first.
std::optional<ComponentId> usual_ion(const Table& table, const Request& request, int charge) {
    for (const Spectator& spectator : table.spectators) {
        if (spectator.charge == charge && !ruled_out(request, id_of(table, spectator))) {
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
    // The buffer that there is most of decides.
    std::vector<const BufferItem*> buffers;
    for (const BufferItem& buffer : request.buffers) {
        buffers.push_back(&buffer);
    }
    std::stable_sort(buffers.begin(), buffers.end(), [](const BufferItem* a, const BufferItem* b) {
        return a->concentration.value > b->concentration.value;
    });
    std::vector<ComponentId> ions;
    for (const BufferItem* buffer : buffers) {
        if (buffer->counter_ion) {
            add_unique(ions, *buffer->counter_ion);
        }
    }
    if (!ions.empty()) {
        return ions;
    }
    for (const BufferItem* buffer : buffers) {
        const System& system = table.systems[buffer->system.index];
        const auto usual = std::find_if(system.counter_ions.begin(), system.counter_ions.end(),
                                        [&](ComponentId ion) { return !ruled_out(request, ion); });
        if (usual != system.counter_ions.end()) {
            add_unique(ions, *usual);
        }
    }
    // A pH on the other side asks for an ion of the other sign.
    for (const int sign : {1, -1}) {
        const bool present = std::any_of(ions.begin(), ions.end(),
                                         [&](ComponentId ion) { return charge_of_ion(table, ion) * sign > 0; });
        if (const auto ion = usual_ion(table, request, sign); !present && ion) {
            ions.push_back(*ion);
        }
    }
    return ions;
}

/// Salts for the ion totals and the ionic strength, as near to the set's own ions as can be.
void choose_salts(CounterIonSet& set, const Stockroom& stockroom, const Request& request, ComponentId titrant) {
    const Table& table = stockroom.table();
    auto cation = usual_ion(table, request, 1);
    auto anion = usual_ion(table, request, -1);
    if (titrant.kind == ComponentKind::spectator) {
        (charge_of_ion(table, titrant) > 0 ? cation : anion) = titrant;
    }
    if (!cation || !anion) {
        set.lacks_salt = !request.constraints.totals.empty() || request.ionic_strength.has_value();
        return;
    }
    const auto add = [&](ComponentId plus, ComponentId minus) {
        if (auto salt = stockroom.salt_of(plus, minus)) {
            set.salts.push_back(std::move(*salt));
        } else {
            set.lacks_salt = true;
        }
    };
    std::vector<ComponentId> held;
    for (const auto& total : request.constraints.totals) {
        const bool positive = charge_of_ion(table, total.ion) > 0;
        add(positive ? total.ion : *cation, positive ? *anion : total.ion);
        held.push_back(total.ion);
    }
    if (!request.ionic_strength) {
        return;
    }
    // A held ion cannot fill up the ionic strength as well: the next one of its sign does.
    const auto other = [&](ComponentId ion) {
        for (const Spectator& spectator : table.spectators) {
            const ComponentId id = id_of(table, spectator);
            if (spectator.charge == charge_of_ion(table, ion) && !ruled_out(request, id) &&
                std::find(held.begin(), held.end(), id) == held.end()) {
                return id;
            }
        }
        return ion;
    };
    const auto free_of_held = [&](ComponentId ion) {
        return std::find(held.begin(), held.end(), ion) == held.end() ? ion : other(ion);
    };
    add(free_of_held(*cation), free_of_held(*anion));
}

bool same_chemistry(const Table& table, const Chemistry& chemistry, std::uint16_t reagent) {
    return same_supplies(table.reagents[chemistry.articles.front()], table.reagents[reagent]);
}

/// Forms that may stand for a buffer of the label. One that is named as a salt of an ion other than the titrant's
/// brings that ion: potassium phosphate beside Tris-HCl is no phosphoric acid.
std::vector<Chemistry> forms_for(const Stockroom& stockroom, const BufferItem& buffer, ComponentId titrant) {
    const ComponentId ion = buffer.counter_ion.value_or(titrant);
    auto forms = stockroom.forms_of(buffer.system, ion);
    if (buffer.named_form && stockroom.shelf() == nullptr) {  // of hydrates and isomers, the one that the label names
        for (Chemistry& form : forms) {
            const auto named = std::find(form.articles.begin(), form.articles.end(), *buffer.named_form);
            std::rotate(form.articles.begin(), named, named == form.articles.end() ? named : named + 1);
        }
    }
    if (ion != titrant) {
        const auto without = [&](const Chemistry& form) {
            return count_of(stockroom.table().reagents[form.articles.front()], ion) == 0;
        };
        if (!std::all_of(forms.begin(), forms.end(), without)) {
            std::erase_if(forms, without);
        }
    }
    return forms;
}

}  // namespace

std::vector<std::uint16_t> Candidate::columns() const {
    std::vector<std::uint16_t> all;
    all.reserve(forms.size() + 1 + salts.size());
    for (const Chemistry* form : forms) {
        all.push_back(form->articles.front());
    }
    all.push_back(extra->articles.front());
    for (const Chemistry* salt : salts) {
        all.push_back(salt->articles.front());
    }
    return all;
}

std::vector<CounterIonSet> counter_ion_sets(const Stockroom& stockroom, const Request& request) {
    std::vector<CounterIonSet> sets;
    for (const ComponentId titrant : titrant_ions(stockroom.table(), request)) {
        CounterIonSet set;
        for (const BufferItem& buffer : request.buffers) {
            const ComponentId ion = buffer.counter_ion.value_or(titrant);
            set.choices.push_back({buffer.system, ion, buffer.counter_ion.has_value()});
            set.forms.push_back(forms_for(stockroom, buffer, titrant));
        }
        if (auto titrants = stockroom.alone(titrant)) {
            set.titrants.push_back(std::move(*titrants));
        }
        if (request.ionic_strength || !request.constraints.totals.empty()) {
            choose_salts(set, stockroom, request, titrant);
        }
        sets.push_back(std::move(set));
    }
    return sets;
}

std::vector<Candidate> candidates(const std::vector<CounterIonSet>& sets, const Request& request, const Table& table) {
    std::vector<Candidate> found;
    for (std::size_t s = 0; s < sets.size(); ++s) {
        const CounterIonSet& set = sets[s];
        if (set.lacks_salt ||
            std::any_of(set.forms.begin(), set.forms.end(), [](const auto& forms) { return forms.empty(); })) {
            continue;
        }
        std::vector<const Chemistry*> salts;
        for (const Chemistry& salt : set.salts) {
            salts.push_back(&salt);
        }
        const auto add = [&](const std::vector<const Chemistry*>& forms, const Chemistry& extra, bool titrated) {
            int strangers = 0;
            for (std::size_t b = 0; b < forms.size(); ++b) {
                const auto& named = request.buffers[b].named_form;
                const bool there =
                    !named || same_chemistry(table, *forms[b], *named) || same_chemistry(table, extra, *named);
                strangers += there ? 0 : 1;
            }
            found.push_back({forms, &extra, salts, titrated, s, strangers});
        };
        // Counts through all choices of one form per buffer, like an odometer.
        std::vector<std::size_t> choice(set.forms.size(), 0);
        for (bool more = true; more;) {
            std::vector<const Chemistry*> forms;
            for (std::size_t b = 0; b < choice.size(); ++b) {
                forms.push_back(&set.forms[b][choice[b]]);
            }
            if (request.route != Route::salts) {
                for (const Chemistry& titrant : set.titrants) {
                    add(forms, titrant, true);
                }
            }
            if (request.route != Route::titrated) {
                for (std::size_t b = 0; b < choice.size(); ++b) {
                    for (std::size_t second = choice[b] + 1; second < set.forms[b].size(); ++second) {
                        add(forms, set.forms[b][second], false);
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
