#include "report/selection_text.h"

#include <algorithm>
#include <map>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "report/figure_text.h"
#include "report/page.h"

namespace carboy {

namespace {

using Align = Page::Align;

const std::vector<Page::Column> columns{{3, Align::right},
                                        {1},
                                        {22},
                                        {5, Align::right},
                                        {7, Align::right},
                                        {7, Align::right},
                                        {8, Align::right},
                                        {7, Align::right},
                                        {7, Align::right},
                                        {7, Align::right},
                                        {6, Align::right}};

std::string millimolal(Molality molality) {
    return fmt::format("{:.1f}", 1000 * molality.mol_per_kg());
}

std::string load_text(Molarity load) {
    return concentration_text({load.mol_per_L(), ConcentrationUnit::mol_per_L});
}

std::string name_with_ion(const Standing& standing, const Table& table) {
    return fmt::format("{} ({})", table.systems[standing.system].name, name_of(table, standing.counter_ion));
}

void facts_text(Page& page, const Standing& standing, const Table& table) {
    for (const std::uint16_t index : standing.facts) {
        const Fact& fact = table.facts[index];
        page.paragraph(fmt::format("{}{} [{}, {}]", fact.holds ? "" : "not so: ", fact.text,
                                   table.sources[fact.source].key, evidence_word(fact.evidence)),
                       fmt::format("      {}: ", trait_word(fact.trait)));
    }
}

void ranking(Page& page, const Selection& selection, const Table& table, const TextStyle& style, std::size_t most) {
    page.heading("RANKED");
    if (selection.ranked.empty()) {
        page.paragraph("Nothing in the table will do. Ease a demand: what stands in the way is below.");
        return;
    }
    page.row(columns, {"", "", "buffer (with)", "pK", "mM/pH", "I, mM", "pH/K", "at 1:2", "acid", "base", "moves"});
    std::size_t rank = 0;
    for (const Standing& standing : selection.ranked) {
        if (++rank > most) {
            page.paragraph(fmt::format("and {} more: --all shows them", selection.ranked.size() - most));
            break;
        }
        page.row(columns,
                 {fmt::format("{}", rank), "", name_with_ion(standing, table),
                  fmt::format("{:.2f}", standing.working_pK), millimolal(standing.buffer_value),
                  millimolal(standing.ionic_strength), fmt::format("{:+.4f}", standing.ph_per_kelvin),
                  fmt::format("{:+.3f}", standing.ph_on_dilution), fmt::format("{:.3f}", standing.after_acid.value()),
                  fmt::format("{:.3f}", standing.after_base.value()), fmt::format("{:.3f}", standing.moves)},
                 true);
        std::string reason = standing.reason;
        if (standing.over_range) {
            reason += fmt::format("; reads {:.2f} at {} and {:.2f} at {}", standing.over_range->first.value(),
                                  temperature_text(selection.job.range->first), standing.over_range->second.value(),
                                  temperature_text(selection.job.range->second));
        }
        page.paragraph(reason, "    ");
        if (style.explain) {
            facts_text(page, standing, table);
        }
    }
}

void mixtures(Page& page, const Selection& selection, const Table& table, std::size_t most) {
    page.heading("FOR THE WHOLE RANGE, AT EQUAL SHARES");
    std::size_t rank = 0;
    for (const MixedBuffer& mixed : selection.mixed) {
        if (++rank > most) {
            break;
        }
        std::vector<std::string_view> names;
        for (const std::uint16_t system : mixed.systems) {
            names.push_back(table.systems[system].name);
        }
        page.paragraph(
            fmt::format("{}: at least {} mM/pH", fmt::join(names, " + "), millimolal(mixed.least_buffer_value)),
            fmt::format("{:>3} ", rank));
        page.paragraph(mixed.reason, "    ");
    }
    page.blank();
    page.paragraph("Make one up with 'carboy recipe': each part with its share, and the pH wanted.");
}

/// Grouped by reason, so that ten phosphates and carboxylates are not ten paragraphs.
void exclusions(Page& page, const Selection& selection, const Table& table) {
    if (selection.excluded.empty()) {
        return;
    }
    page.heading("LEFT OUT");
    std::vector<std::pair<std::string, std::vector<std::string>>> groups;
    for (const Excluded& one : selection.excluded) {
        const bool far = one.code == "too_far_from_pK";
        std::string reason =
            far ? "more than one pH from every pK, with less than a third of the best buffer value" : one.reason;
        if (!one.source.empty() && one.source != "computed" && one.source != "the shelf") {
            const std::string_view citation(one.source);
            reason += fmt::format(" [{}{}]", citation.substr(0, citation.size() - (citation.ends_with('.') ? 1 : 0)),
                                  far || one.evidence == Evidence::common_practice
                                      ? std::string()
                                      : fmt::format(", {}", evidence_word(one.evidence)));
        }
        const auto known = std::find_if(groups.begin(), groups.end(), [&](const auto& g) { return g.first == reason; });
        auto& group = known == groups.end() ? groups.emplace_back(reason, std::vector<std::string>{}) : *known;
        group.second.emplace_back(table.systems[one.system].name);
    }
    for (const auto& [reason, names] : groups) {
        page.paragraph(fmt::format("{}: {}", fmt::join(names, ", "), reason), "  - ");
    }
}

std::string demands(const Selection& selection) {
    const Job& job = selection.job;
    std::vector<std::string> parts;
    if (job.range) {
        parts.push_back(
            fmt::format("used from {} to {}", temperature_text(job.range->first), temperature_text(job.range->second)));
    }
    for (const Trait trait : job.avoid) {
        parts.push_back(fmt::format("no {}", trait_word(trait)));
    }
    for (const Trait trait : job.want) {
        parts.emplace_back(trait_word(trait));
    }
    if (job.clear_from_nm) {
        parts.push_back(fmt::format("clear at {:g} nm", *job.clear_from_nm));
    }
    if (job.most_ionic_strength) {
        parts.push_back(fmt::format("ionic strength up to {:g} mol/{}", job.most_ionic_strength->value_mol,
                                    job.most_ionic_strength->per_litre ? "L" : "kg"));
    }
    if (job.hold_ph) {
        parts.push_back(fmt::format("moved by the load no more than {:g}", *job.hold_ph));
    }
    return fmt::format("{}", fmt::join(parts, ", "));
}

void how_it_was_ranked(Page& page, const Selection& selection) {
    page.heading("HOW THIS WAS RANKED");
    page.paragraph(fmt::format(
        "Each was made up at the pH with its usual counter-ion and solved again: with {} of strong acid, with {} of "
        "strong base{}, {}, and with the same volume of water (at 1:2). 'moves' is the larger shift under the load, "
        "plus those with temperature and on dilution. After them come those with a doubt, then those with something "
        "against them.",
        load_text(selection.acid), load_text(selection.base),
        selection.load_assumed ? " (none was stated: 5 % of the concentration)" : "",
        selection.job.range ? "at both ends of the temperature range" : "5 K colder and warmer (no range was stated)"));
    page.paragraph(
        fmt::format("pK: of the nearest step at this temperature and ionic strength; mM/pH: buffer value; I: "
                    "ionic strength; both per kilogram of water; activity model {}.",
                    selection.activity_model));
}

}  // namespace

std::string selection_text(const Selection& selection, const Table& table, const TextStyle& style, std::size_t most) {
    const Job& job = selection.job;
    Page page(style.colour);
    page.title(fmt::format("A buffer for pH {:g}{} at {}, {}", job.ph.value(),
                           job.ph_to ? fmt::format(" to {:g}", job.ph_to->value()) : std::string(),
                           temperature_text(job.at), concentration_text(job.concentration)),
               "");
    if (const std::string asked = demands(selection); !asked.empty()) {
        page.paragraph(asked);
    }
    if (job.ph_to) {
        mixtures(page, selection, table, most);
    } else {
        ranking(page, selection, table, style, most);
        if (!selection.ranked.empty()) {
            how_it_was_ranked(page, selection);
        }
    }
    exclusions(page, selection, table);
    return page.text();
}

}  // namespace carboy
