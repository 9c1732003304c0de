#include "report/adjustment_text.h"

#include <cmath>

#include <fmt/format.h>

#include "report/cautions.h"
#include "report/explain_text.h"
#include "report/figure_text.h"
#include "report/page.h"

namespace carboy {

namespace {

const std::vector<Page::Column> figure_columns{{2}, {34}, {44}};
const std::vector<Page::Column> cause_columns{{2}, {42}, {1}, {7, Page::Align::right}, {1}, {6, Page::Align::right},
                                              {2}, {19}};

std::string percent_off(double off) {
    return std::abs(off) < 0.0005
               ? "as the label says"
               : fmt::format("{:.1f} % {} the label", 100 * std::abs(off), off < 0 ? "below" : "above");
}

/// Addition and stop, in one sentence.
std::string how_to_add(const Adjustment& adjustment, const Correction& correction, const Table& table) {
    const auto much = [&](Amount amount) { return titrant_amount_text(correction.titrant, amount, table); };
    const std::string stop = fmt::format("until the meter reads {} at {}", ph_text(correction.stop_reading),
                                         temperature_text(adjustment.plan.request.prepare_at));
    const std::string what = titrant_text(correction.titrant, table);
    if (correction.at_once.mol() < 0.3 * correction.amount.mol()) {
        return fmt::format("Add {} in small portions {}: about {} in all. Stop at the reading, not at the volume.",
                           what, stop, much(correction.amount));
    }
    return fmt::format(
        "Add {} of {}: {} at once, the rest in small portions, {}. Stop at the reading, not at the "
        "volume.",
        much(correction.amount), what, much(correction.at_once), stop);
}

void what_to_do(Page& page, const Adjustment& adjustment, const Table& table) {
    page.heading("WHAT TO DO");
    const Request& request = adjustment.plan.request;
    if (adjustment.verdict == Verdict::leave_it) {
        page.notice(fmt::format("Leave it. The meter reads {}, it should read {}: two good meters agree no better.",
                                ph_text(adjustment.batch.reading), ph_text(adjustment.expected)));
        return;
    }
    if (adjustment.verdict == Verdict::discard) {
        page.notice("Better make it again.");
    }
    for (const Warning& reason : adjustment.reasons) {
        page.paragraph(reason.message);
    }
    if (!adjustment.correction) {
        return;
    }
    const Correction& correction = *adjustment.correction;
    const std::string words = how_to_add(adjustment, correction, table);
    if (adjustment.verdict == Verdict::discard) {
        page.paragraph("To correct its pH all the same: " + words);
    } else {
        page.notice(words);
    }
    if (adjustment.batch.not_filled && correction.finished_volume > correction.volume_then) {
        page.paragraph(fmt::format("Then fill to {}, mix and read again: {}.", vessel_text(correction.finished_volume),
                                   ph_text(correction.finished_reading)));
    }
    if (request.use_at != request.prepare_at || request.strength != 1) {
        page.paragraph(fmt::format("Do not correct it further: {}at {} it then has pH {}.",
                                   request.strength != 1 ? fmt::format("diluted {:g} times, ", request.strength) : "",
                                   temperature_text(request.use_at), ph_text(correction.predicted.ph)));
    }
}

void now(Page& page, const Adjustment& adjustment) {
    const std::string bench = temperature_text(adjustment.plan.request.prepare_at);
    page.heading(fmt::format("NOW, IN {} AT {}", vessel_text(adjustment.present_volume), bench));
    page.row(figure_columns, {"", "the meter reads", "pH " + ph_text(adjustment.batch.reading)});
    page.row(figure_columns,
             {"", "it should read",
              fmt::format("pH {} ± {:.2f}", ph_text(adjustment.expected), adjustment.expected_expanded_k2)});
    if (adjustment.expected_before) {
        page.row(figure_columns,
                 {"", "before the titrant",
                  fmt::format("pH {}; it should have read {}", ph_text(*adjustment.batch.reading_before),
                              ph_text(*adjustment.expected_before))});
    }
    if (adjustment.off_by != OffBy::nothing && adjustment.verdict != Verdict::leave_it) {
        const double millimoles = 1e3 * adjustment.off.mol();
        page.row(figure_columns, {"", std::string(off_by_word(adjustment.off_by)),
                                  fmt::format("{} mmol: {} mmol/L", plain_number(millimoles, 3),
                                              plain_number(millimoles / adjustment.present_volume.L(), 3))});
    }
}

std::string volume_words(const Adjustment& adjustment, const Correction& correction) {
    const Volume mark = adjustment.plan.request.volume;
    const Volume over = correction.finished_volume - mark;
    constexpr double visible = 5e-4;  // a solid moves the volume by less than a vessel shows
    if (over > visible * mark) {
        return fmt::format("{}, {} over the mark", volume_text(correction.finished_volume), volume_text(over));
    }
    const Volume room = mark - correction.volume_then;
    return room > visible * mark ? fmt::format("{}, {} of it still to fill", vessel_text(mark), volume_text(room))
                                 : vessel_text(mark);
}

void afterwards(Page& page, const Adjustment& adjustment, const Table& table) {
    if (!adjustment.correction) {
        return;
    }
    const Correction& correction = *adjustment.correction;
    const Prediction& planned = adjustment.plan.predicted;
    page.heading(fmt::format("CORRECTED, AT {}", temperature_text(correction.predicted.temperature)));
    page.row(figure_columns, {"", fmt::format("pH {} ± {:.2f}", ph_text(correction.predicted.ph),
                                              correction.predicted.uncertainty.expanded_k2)});
    page.row(figure_columns, {"", "volume", volume_words(adjustment, correction)});
    page.row(figure_columns, {"", "concentration of the buffer", percent_off(correction.concentration_off)});
    page.row(figure_columns, {"", "ionic strength",
                              fmt::format("{} (planned {})", molality_text(correction.predicted.ionic_strength),
                                          molality_text(planned.ionic_strength))});
    page.row(figure_columns, {"", "buffer value",
                              fmt::format("{} (planned {})", molality_text(correction.predicted.buffer_value),
                                          molality_text(planned.buffer_value))});
    if (adjustment.plan.request.strength != 1) {
        page.row(figure_columns, {"", "these at working strength: diluted",
                                  fmt::format("{:g} times", adjustment.plan.request.strength)});
    }
    const std::string least = titrant_amount_text(correction.titrant, correction.least, table);
    const std::string most = titrant_amount_text(correction.titrant, correction.most, table);
    page.row(figure_columns, {"", "if the meter is off by 0.02",
                              least == most ? "no more, no less" : least + " to " + most + " of it"});
}

/// What would then have to be done, short.
std::string remedy(const Mistake& mistake, const Adjustment& adjustment, const Table& table) {
    if (mistake.kind == MistakeKind::read_at_other_temperature) {
        return "read it again";
    }
    if (mistake.kind == MistakeKind::meter) {
        return "calibrate it";
    }
    if (mistake.to_weigh_in) {
        return "weigh in " + mass_text(mistake.to_weigh_in->mass);
    }
    if (mistake.kind == MistakeKind::wrong_volume && *mistake.factor < 1) {
        return "fill it up";
    }
    if (!mistake.correction) {
        return "not this titrant";
    }
    const std::string add =
        "add " + titrant_amount_text(mistake.correction->titrant, mistake.correction->amount, table);
    const double off = mistake.correction->concentration_off;
    return std::abs(off) > adjustment.batch.within
               ? fmt::format("{}; buffer {:.0f} % {}", add, 100 * std::abs(off), off < 0 ? "weak" : "strong")
               : add;
}

void causes(Page& page, const Adjustment& adjustment, const Table& table) {
    if (adjustment.mistakes.empty()) {
        return;
    }
    const bool fits = adjustment.mistakes.front().consistent;
    page.heading(fits ? "WHAT MAY HAVE HAPPENED, IF THE RECIPE'S AMOUNTS WENT IN"
                      : "NO SINGLE MISTAKE FITS; THE NEAREST");
    page.row(cause_columns, {"", "", "", "reads", "", "share", "", "then"});
    for (const Mistake& mistake : adjustment.mistakes) {
        const std::string share = !fits                         ? ""
                                  : mistake.plausibility < 0.01 ? "< 1 %"
                                  : mistake.plausibility > 0.95 ? "> 95 %"
                                                                : fmt::format("{:.0f} %", 100 * mistake.plausibility);
        page.row(cause_columns, {"", mistake_text(mistake, adjustment, table), "", ph_text(mistake.reading), "", share,
                                 "", remedy(mistake, adjustment, table)});
    }
    if (fits && adjustment.mistakes.front().kind == MistakeKind::titrant_off) {
        page.paragraph(
            "Some amount of titrant explains almost any reading: if it went in as planned, the cause is "
            "another, or more than one.");
    } else if (fits && adjustment.mistakes.size() > 1 &&
               adjustment.mistakes[1].plausibility > 0.5 * adjustment.mistakes[0].plausibility) {
        page.paragraph(
            "The meter alone cannot tell the first of these apart: look at the bottles, the balance record "
            "and the titrant used.");
    }
}

void notes(Page& page, const Adjustment& adjustment, const TextStyle& style) {
    print_warnings(
        page, adjustment.warnings,
        style.bench_temperature_assumed
            ? "The temperature at the meter was not given; 25 °C is assumed (--prepare-at sets it). A buffer "
              "read warm or cold reads differently."
            : "");
}

void cautions(Page& page, const Adjustment& adjustment, const Table& table) {
    if (adjustment.correction) {
        // Only the titrant is new to the vessel; the recipe's sheet has the rest.
        print_cautions(page, cautions_of({&adjustment.correction->titrant.reagent, 1}, table), table);
    }
}

}  // namespace

std::string adjustment_text(const Adjustment& adjustment, const Table& table, const TextStyle& style) {
    Page page(style.colour);
    page.title(adjustment.plan.request.label, vessel_text(adjustment.plan.request.volume));
    what_to_do(page, adjustment, table);
    now(page, adjustment);
    afterwards(page, adjustment, table);
    causes(page, adjustment, table);
    notes(page, adjustment, style);
    cautions(page, adjustment, table);
    if (style.explain) {
        explain_recipe(page, adjustment.plan, table);
    }
    return page.text();
}

}  // namespace carboy
