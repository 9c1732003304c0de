#include "report/fit_text.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "report/explain_text.h"
#include "report/figure_text.h"
#include "report/page.h"

namespace carboy {

namespace {

using Align = Page::Align;

const std::vector<Page::Column> found_columns{
    {2}, {28}, {11, Align::right}, {11, Align::right}, {20, Align::right}, {8, Align::right}};

std::string_view unit_of(ReadingKind kind) {
    return kind == ReadingKind::pH ? "pH" : kind == ReadingKind::millivolt ? "mV" : "";
}

/// Decimals that show two digits of the uncertainty.
int decimals_for(double standard_error) {
    if (!(standard_error > 0)) {
        return 4;
    }
    return std::clamp(1 - static_cast<int>(std::floor(std::log10(standard_error))), 1, 8);
}

std::string with_decimals(double value, int decimals) {
    return fmt::format("{:.{}f}", value, decimals);
}

std::string unit_note(Unknown unknown, ReadingKind kind) {
    switch (unknown) {
        case Unknown::pK:
            return ", at I = 0";
        case Unknown::titrant_strength:
        case Unknown::amount:
            return ", × stated";
        case Unknown::carbonate:
            return ", mol/mol";
        case Unknown::offset:
            return fmt::format(", {}", unit_of(kind));
        case Unknown::slope:
            return ", × ideal";
    }
    return {};
}

void found(Page& page, const Fit& fit, const Table& table) {
    page.heading("FOUND");
    page.row(found_columns, {"", "", "value", "std. error", "95 % interval", "start"});
    for (const FittedParameter& p : fit.parameters) {
        const int decimals = decimals_for(p.standard_error);
        page.row(found_columns,
                 {"", parameter_name(p.parameter, table) + unit_note(p.parameter.unknown, fit.problem.reading),
                  with_decimals(p.value, decimals), with_decimals(p.standard_error, decimals),
                  with_decimals(p.lower_95, decimals) + " to " + with_decimals(p.upper_95, decimals),
                  fmt::format("{:.4g}", p.start)},
                 true);
    }
    for (const FittedParameter& p : fit.parameters) {
        if (!p.stated) {
            continue;
        }
        const bool titrant = p.parameter.unknown == Unknown::titrant_strength;
        const double unit = titrant ? *p.stated : 1000 * *p.stated;
        const int decimals = decimals_for(p.standard_error * unit);
        const std::string found_amount =
            with_decimals(p.value * unit, decimals) + " ± " + with_decimals(p.standard_error * unit, decimals);
        page.paragraph(titrant ? fmt::format("The titrant is {} mol/L.", found_amount)
                               : fmt::format("There are {} mmol of {} in the vessel.", found_amount,
                                             table.reagents[p.parameter.reagent].name));
    }
    page.paragraph(
        fit.scaled_by_scatter
            ? fmt::format(
                  "Standard errors are those of the scatter seen; intervals by Student's t ({:.3f}) with {} "
                  "degree{} of freedom. The {} model adds an uncertainty of {:.3f} pH that no number of readings "
                  "removes.",
                  fit.t_quantile, fit.degrees_of_freedom, fit.degrees_of_freedom == 1 ? "" : "s", fit.activity_model,
                  fit.model_uncertainty)
            : fmt::format("Nothing is left over to judge scatter by: standard errors are those of the stated "
                          "uncertainties. The {} model adds an uncertainty of {:.3f} pH.",
                          fit.activity_model, fit.model_uncertainty),
        "  ");
}

void quality(Page& page, const Fit& fit) {
    if (fit.degrees_of_freedom == 0) {
        return;
    }
    page.heading("HOW WELL IT FITS");
    const std::vector<Page::Column> columns{{2}, {26}, {52}};
    const double reduced = fit.chi_square / static_cast<double>(fit.degrees_of_freedom);
    page.row(columns, {"", "chi-square",
                       fmt::format("{:.2f} with {} degree{} of freedom", fit.chi_square, fit.degrees_of_freedom,
                                   fit.degrees_of_freedom == 1 ? "" : "s")});
    page.row(columns, {"", "scatter seen",
                       fmt::format("{:.2f} times the uncertainty stated for the readings", std::sqrt(reduced))});
}

void correlations(Page& page, const Fit& fit, const Table& table) {
    if (fit.parameters.size() < 2) {
        return;
    }
    page.heading("CORRELATION");
    std::vector<Page::Column> columns{{2}, {28}};
    for (std::size_t i = 0; i < fit.parameters.size(); ++i) {
        columns.push_back({8, Align::right});
    }
    for (std::size_t i = 0; i < fit.parameters.size(); ++i) {
        std::vector<std::string> cells{"", parameter_name(fit.parameters[i].parameter, table)};
        for (std::size_t j = 0; j <= i; ++j) {
            cells.push_back(i == j ? "1" : fmt::format("{:+.3f}", fit.correlation[i][j]));
        }
        page.row(columns, cells);
    }
}

/// Where a residual lies, from -3 to +3 uncertainties; beyond them at the edge.
std::string strip(double weighted) {
    constexpr std::size_t half = 9;
    std::string cells(2 * half + 1, '.');
    cells[half] = '|';
    const double at = std::round((std::clamp(weighted, -3.0, 3.0) / 3.0 + 1) * half);
    cells[static_cast<std::size_t>(at)] = 'o';
    return cells;
}

void residuals(Page& page, const Fit& fit) {
    page.heading("RESIDUALS");
    const bool titrated = fit.problem.titrant.has_value();
    const std::vector<Page::Column> columns{{4, Align::right},
                                            {13, Align::right},
                                            {11, Align::right},
                                            {11, Align::right},
                                            {11, Align::right},
                                            {8, Align::right},
                                            {2},
                                            {19}};
    const std::string unit(unit_of(fit.problem.reading));
    page.row(columns, {"", titrated ? "added" : "", unit.empty() ? "reading" : "read " + unit, "fitted", "difference",
                       "in u", "", "-3 u   ..0..   +3 u"});
    const int decimals = fit.problem.reading == ReadingKind::millivolt ? 2 : 4;
    std::size_t number = 0;
    for (const FitResidual& r : fit.residuals) {
        page.row(columns, {fmt::format("{}", ++number), titrated ? fmt::format("{:.3f} mL", r.titrant.mL()) : "",
                           with_decimals(r.reading, decimals), with_decimals(r.fitted, decimals),
                           fmt::format("{:+.{}f}", r.reading - r.fitted, decimals), fmt::format("{:+.2f}", r.weighted),
                           "", strip(r.weighted)});
    }
}

void explanation(Page& page, const Fit& fit, const Table& table) {
    page.heading("HOW IT WAS FOUND");
    page.paragraph(fmt::format(
        "Weighted least squares by the method of Levenberg (1944) and Marquardt (1963), {} iterations; derivatives by "
        "central differences on the converged equilibrium. Activity model {}; ionic strength up to {:.3f} mol/kg.",
        fit.iterations, fit.activity_model, fit.highest_ionic_strength_mol_per_kg));
    for (const FittedParameter& p : fit.parameters) {
        if (p.parameter.unknown == Unknown::pK) {
            const Figure& figure = table.systems[p.parameter.system].steps[p.parameter.step].pK_25C;
            page.paragraph(fmt::format("{}: the table has {:g} at 25 °C ({}, {}); by this fit it is {:.4f} at 25 °C.",
                                       parameter_name(p.parameter, table), figure.value,
                                       table.sources[figure.source].citation, evidence_word(figure.evidence),
                                       p.pK_25C));
        }
    }
}

}  // namespace

std::string fit_text(const Fit& fit, const Table& table, std::string_view what, const TextStyle& style) {
    Page page(style.colour);
    page.title(
        fmt::format("{}: {} reading{}, {} unknown{}", what, fit.residuals.size(), fit.residuals.size() == 1 ? "" : "s",
                    fit.parameters.size(), fit.parameters.size() == 1 ? "" : "s"),
        temperature_text(fit.problem.at));
    found(page, fit, table);
    if (!fit.warnings.empty()) {
        page.heading("TAKE NOTE");
        for (const Warning& warning : fit.warnings) {
            page.notice(warning.message, "  - ");
        }
    }
    quality(page, fit);
    correlations(page, fit, table);
    if (fit.degrees_of_freedom > 0) {
        residuals(page, fit);
    }
    if (style.explain) {
        explanation(page, fit, table);
    }
    return page.text();
}

}  // namespace carboy
