#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "report/figure_text.h"
#include "report/page.h"
#include "report/titration_report.h"

namespace carboy {

namespace {

const std::vector<Page::Column> cost_columns{
    {2}, {22}, {10}, {14, Page::Align::right}, {14, Page::Align::right}, {18, Page::Align::right}};
const std::vector<Page::Column> equivalence_columns{{2}, {34}, {11, Page::Align::right}, {3}, {9}, {21}};
const std::vector<Page::Column> table_columns{{12, Page::Align::right}, {9, Page::Align::right},
                                              {9, Page::Align::right},  {14, Page::Align::right},
                                              {16, Page::Align::right}, {18, Page::Align::right}};

/// `0.532 mmol`, with a prefix that avoids leading zeros.
std::string amount_text(double mol, std::string_view per) {
    const double size = std::abs(mol);
    if (size >= 1) {
        return fmt::format("{} mol{}", plain_number(mol, 3), per);
    }
    return size >= 1e-3 ? fmt::format("{} mmol{}", plain_number(mol * 1e3, 3), per)
                        : fmt::format("{} µmol{}", plain_number(mol * 1e6, 3), per);
}

bool rising(const TitrationCurve& curve) {
    return curve.points.back().ph > curve.points.front().ph;
}

/// What is complete at an equivalence point.
std::string event_text(const EquivalencePoint& point, bool alkaline, const Table& table) {
    if (!point.system) {
        return alkaline ? "strong acid used up" : "strong alkali used up";
    }
    const System& system = table.systems[point.system->index];
    const Species& acid = system.species[point.step];
    const Species& base = system.species[point.step + 1];
    return alkaline ? fmt::format("{} used up, now {}", acid.formula, base.formula)
                    : fmt::format("{} used up, now {}", base.formula, acid.formula);
}

void costs(Page& page, const TitrationCurve& curve, const TitrationWords& words) {
    if (curve.shifts.empty()) {
        return;
    }
    page.heading("HOW MUCH IT TAKES");
    page.row(cost_columns, {"", "to move the pH by", "to pH", "titrant", "", "per litre"});
    for (const ShiftCost& cost : curve.shifts) {
        std::vector<std::string> cells{"", fmt::format("{:+.4g}", cost.shift), ph_text(cost.ph)};
        if (cost.added) {
            const double mol = cost.added->L() * curve.titrant_strength.mol_per_L();
            cells.insert(cells.end(), {volume_text(*cost.added), amount_text(mol, ""),
                                       amount_text(mol / curve.sample_volume.L(), "/L")});
        } else {
            cells.insert(cells.end(), {"never", "", ""});
        }
        page.row(cost_columns, cells, &cost == &curve.shifts.front());
    }
    for (const EquivalencePoint& point : curve.equivalence) {
        if (point.steepest) {
            page.blank();
            page.paragraph(fmt::format("Its capacity for {} ends at {} ({}): a tenth more brings pH {}.", words.titrant,
                                       volume_text(point.volume),
                                       amount_text(point.volume.L() * curve.titrant_strength.mol_per_L(), ""),
                                       ph_text(point.ph_past)));
            break;
        }
    }
}

void equivalence(Page& page, const TitrationCurve& curve, const Table& table) {
    if (curve.equivalence.empty()) {
        return;
    }
    page.heading("EQUIVALENCE POINTS");
    for (const EquivalencePoint& point : curve.equivalence) {
        page.row(equivalence_columns,
                 {"", event_text(point, rising(curve), table), volume_text(point.volume), "", "pH " + ph_text(point.ph),
                  point.steepest ? fmt::format("steepest at {}", volume_text(*point.steepest)) : "no jump to be seen"},
                 point.steepest.has_value());
    }
}

int decimals_of(Volume step) {
    return std::max(0, -static_cast<int>(std::floor(std::log10(step.mL()) + 1e-9)));
}

/// The multiples of the step, and the last point.
void table_of(Page& page, const TitrationCurve& curve) {
    page.heading("TABLE");
    page.row(table_columns, {"added, mL", "pH", "± (k=2)", "dpH/dV, 1/mL", "buffer value", "ionic strength"});
    page.row(table_columns, {"", "", "", "", "mol/kg per pH", "mol/kg"});
    for (std::size_t i = 0; i < curve.points.size(); ++i) {
        const TitrationPoint& point = curve.points[i];
        const double steps = point.added / curve.step;
        if (std::abs(steps - std::round(steps)) > 1e-7 && i + 1 < curve.points.size()) {
            continue;
        }
        page.row(table_columns, {fmt::format("{:.{}f}", point.added.mL(), decimals_of(curve.step)), ph_text(point.ph),
                                 fmt::format("{:.2f}", std::max(curve.ph_expanded_k2[i], 0.01)),
                                 plain_number(point.slope_per_mL, 3), plain_number(point.buffer_value.mol_per_kg(), 3),
                                 plain_number(point.ionic_strength.mol_per_kg(), 3)});
    }
}

}  // namespace

Plot titration_plot(const TitrationCurve& curve, const TitrationWords& words) {
    Plot plot;
    plot.title = words.sample;
    plot.subtitle = fmt::format("{} with {}, at {}", vessel_text(curve.sample_volume), words.titrant,
                                temperature_text(curve.temperature));
    plot.x_title = fmt::format("{} added, mL", words.titrant);
    PlotPanel ph{"pH", {{"pH", {}, {}, {}}}, {}, false, 1};
    PlotPanel buffer{"buffer value, mol/kg per pH", {{"buffer value", {}, {}, {}}}, {}, true, 0.5};
    for (const TitrationPoint& point : curve.points) {
        for (PlotPanel* panel : {&ph, &buffer}) {
            panel->series.front().x.push_back(point.added.mL());
        }
        ph.series.front().y.push_back(point.ph.value());
        buffer.series.front().y.push_back(point.buffer_value.mol_per_kg());
    }
    for (const EquivalencePoint& point : curve.equivalence) {
        if (point.steepest) {
            ph.marks.push_back({point.volume.mL(), point.ph.value(),
                                fmt::format("{}, pH {}", volume_text(point.volume), ph_text(point.ph))});
        }
    }
    plot.panels = {std::move(ph), std::move(buffer)};
    return plot;
}

std::string titration_text(const TitrationCurve& curve, const TitrationWords& words, const Table& table,
                           const TextStyle& style, const std::optional<TerminalCanvas>& canvas) {
    Page page(style.colour);
    page.title(words.sample, temperature_text(curve.temperature));
    page.paragraph(fmt::format("{} titrated with {}", vessel_text(curve.sample_volume), words.titrant), "");
    page.blank();
    page.paragraph(fmt::format(
        "It begins at pH {} ± {:.2f} and ends at pH {} ± {:.2f} after {} (expanded uncertainty, "
        "k = 2; amounts and meter not included).",
        ph_text(curve.points.front().ph), std::max(curve.ph_expanded_k2.front(), 0.01), ph_text(curve.points.back().ph),
        std::max(curve.ph_expanded_k2.back(), 0.01), volume_text(curve.points.back().added)));
    costs(page, curve, words);
    equivalence(page, curve, table);
    if (!curve.warnings.empty()) {
        page.heading("TAKE NOTE");
        for (const Warning& warning : curve.warnings) {
            page.notice(warning.message, "  - ");
        }
    }
    std::string text = page.text();
    if (canvas) {
        text += "\n" + terminal_plot(titration_plot(curve, words), *canvas);
    }
    Page table_page(style.colour);
    table_of(table_page, curve);
    return text + table_page.text();
}

}  // namespace carboy
