#include <algorithm>

#include <fmt/format.h>

#include "report/figure_text.h"
#include "report/page.h"
#include "report/sweep_report.h"

namespace carboy {

namespace {

const std::vector<Page::Column> columns{{16, Page::Align::right},
                                        {10, Page::Align::right},
                                        {10, Page::Align::right},
                                        {19, Page::Align::right},
                                        {19, Page::Align::right}};

void table_of(Page& page, const Sweep& sweep, const SweepCurve& curve, const ConditionWords& words) {
    page.row(columns,
             {words.unit.empty() ? words.name : words.unit, "pH", "± (k=2)", "buffer value", "ionic strength"});
    page.row(columns, {"", "", "", "mol/kg per pH", "mol/kg"});
    double low = curve.points.front().ph.value();
    double high = low;
    for (const SweepPoint& point : curve.points) {
        page.row(columns,
                 {fmt::format("{:.6g}", point.condition * words.scale), ph_text(point.ph),
                  fmt::format("{:.2f}", std::max(point.ph_expanded_k2, 0.01)),
                  plain_number(point.buffer_value.mol_per_kg()), plain_number(point.ionic_strength.mol_per_kg())});
        low = std::min(low, point.ph.value());
        high = std::max(high, point.ph.value());
    }
    const SweepPoint& first = curve.points.front();
    const SweepPoint& last = curve.points.back();
    const double span = last.condition - first.condition;
    std::string summary = fmt::format("pH {} to {}", fmt::format("{:.2f}", low), fmt::format("{:.2f}", high));
    if (sweep.condition.what == Condition::temperature && span != 0) {
        summary += fmt::format(", {:+.4f} per kelvin on the whole", (last.ph.value() - first.ph.value()) / span);
    }
    page.paragraph(summary + ".");
}

}  // namespace

ConditionWords words_of(const SweepCondition& condition, const Table& table) {
    // Millimoles below a tenth of a mole, as labels have it.
    constexpr double small = 0.5;
    const double largest = *std::max_element(condition.values.begin(), condition.values.end());
    const bool milli = largest < small;
    const std::string per = condition.per_kg_water ? "kg" : "L";
    const std::string unit = fmt::format("{}mol/{}", milli ? "m" : "", per);
    const double scale = milli ? 1000 : 1;
    switch (condition.what) {
        case Condition::temperature:
            return {"temperature", "°C", 1, "temperature_C"};
        case Condition::dilution:
            return {"times diluted", "", 1, "dilution_factor"};
        case Condition::salt:
            return {fmt::format("{} added", table.reagents[condition.salt].name), unit, scale, "salt_mol_per_" + per};
        case Condition::concentration:
            return {"total concentration", unit, scale, "total_mol_per_" + per};
    }
    return {};
}

Plot sweep_plot(const Sweep& sweep, const Table& table) {
    const ConditionWords words = words_of(sweep.condition, table);
    Plot plot;
    plot.x_title = words.unit.empty() ? words.name : fmt::format("{}, {}", words.name, words.unit);
    PlotPanel ph{"pH", {}, {}, false, 1};
    PlotPanel buffer{"buffer value, mol/kg per pH", {}, {}, true, 0.5};
    PlotPanel ions{"ionic strength, mol/kg", {}, {}, true, 0.5};
    for (const SweepCurve& curve : sweep.curves) {
        PlotSeries series{curve.name, {}, {}, {}, Stroke::line, ph.series.size()};
        for (const SweepPoint& point : curve.points) {
            series.x.push_back(point.condition * words.scale);
        }
        const auto add = [&](PlotPanel& panel, auto value) {
            panel.series.push_back(series);
            for (const SweepPoint& point : curve.points) {
                panel.series.back().y.push_back(value(point));
            }
        };
        add(ph, [](const SweepPoint& point) { return point.ph.value(); });
        add(buffer, [](const SweepPoint& point) { return point.buffer_value.mol_per_kg(); });
        add(ions, [](const SweepPoint& point) { return point.ionic_strength.mol_per_kg(); });
    }
    const bool alone = sweep.curves.size() == 1;
    plot.title = alone ? sweep.curves.front().name : fmt::format("pH against {}", words.name);
    const Temperature at = sweep.curves.front().temperature;
    const bool one_temperature = std::all_of(sweep.curves.begin(), sweep.curves.end(),
                                             [&](const SweepCurve& curve) { return curve.temperature == at; });
    if (sweep.condition.what != Condition::temperature && one_temperature) {
        plot.subtitle = "at " + temperature_text(at);
    }
    plot.panels = {std::move(ph), std::move(buffer), std::move(ions)};
    return plot;
}

std::string sweep_text(const Sweep& sweep, const Table& table, const TextStyle& style,
                       const std::optional<TerminalCanvas>& canvas) {
    const ConditionWords words = words_of(sweep.condition, table);
    std::string text;
    if (canvas) {
        Plot plot = sweep_plot(sweep, table);
        plot.panels.resize(1);  // the table has the rest
        text = terminal_plot(plot, *canvas) + "\n";
    }
    Page page(style.colour);
    for (const SweepCurve& curve : sweep.curves) {
        if (&curve != &sweep.curves.front()) {
            page.blank();
        }
        page.title(curve.name,
                   sweep.condition.what == Condition::temperature ? "" : temperature_text(curve.temperature));
        table_of(page, sweep, curve, words);
    }
    if (!sweep.warnings.empty()) {
        page.heading("TAKE NOTE");
        for (const Warning& warning : sweep.warnings) {
            page.notice(warning.message, "  - ");
        }
    }
    return text + page.text();
}

}  // namespace carboy
