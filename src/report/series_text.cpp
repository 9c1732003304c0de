#include "report/series_text.h"

#include <cmath>

#include <fmt/format.h>

#include "report/figure_text.h"
#include "report/json.h"
#include "report/page.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

/// A, B, C ...: how the table calls its stocks.
std::string letter(std::size_t index) {
    return std::string(1, static_cast<char>('A' + index));
}

std::string graduated(Volume volume, Volume graduation) {
    const int decimals = std::max(0, static_cast<int>(std::ceil(-std::log10(graduation.mL()) - 1e-9)));
    return fmt::format("{:.{}f}", volume.mL(), decimals);
}

std::string ionic_strength_words(const Series& series) {
    return fmt::format("{:.4g} {}", series.ionic_strength.value_mol,
                       series.ionic_strength.per_litre ? "mol/L" : "mol/kg");
}

std::string_view unit_key(const Series& series) {
    return series.ionic_strength.per_litre ? "ionic_strength_mol_per_L" : "ionic_strength_mol_per_kg";
}

}  // namespace

std::string series_text(const Series& series, const Table& table, const TextStyle& style) {
    Page page(style.colour);
    page.title(series.request.label, vessel_text(series.request.volume) + " each");
    page.heading("STOCKS");
    const std::vector<Page::Column> stock_columns{{2}, {2}, {36}, {12, Page::Align::right}, {2}, {26}};
    for (std::size_t s = 0; s < series.stocks.size(); ++s) {
        const Stock& stock = series.stocks[s];
        page.row(stock_columns,
                 {"", letter(s), std::string(table.reagents[stock.reagent].name),
                  stock.mass.g() > 0 ? mass_text(stock.mass) : volume_text(stock.liquid), "",
                  fmt::format("to {}, {}", vessel_text(stock.volume), strength_text(stock.strength))},
                 true);
    }
    page.heading(fmt::format("MIX, AND FILL WITH WATER TO {} AT {}", vessel_text(series.request.volume),
                             temperature_text(series.request.prepare_at)));
    const bool two_temperatures = series.request.use_at != series.request.prepare_at;
    std::vector<Page::Column> columns{{2}, {8, Page::Align::right}};
    std::vector<std::string> heads{"", "pH"};
    for (std::size_t s = 0; s < series.stocks.size(); ++s) {
        columns.push_back({10, Page::Align::right});
        heads.push_back(letter(s) + ", mL");
    }
    if (two_temperatures) {
        columns.push_back({10, Page::Align::right});
        heads.emplace_back("at bench");
    }
    columns.push_back({9, Page::Align::right});
    heads.emplace_back("± (k=2)");
    columns.push_back({14, Page::Align::right});
    heads.emplace_back("buffer value");
    page.row(columns, heads);
    for (const SeriesRow& row : series.rows) {
        std::vector<std::string> cells{"", ph_text(row.target)};
        for (const Volume& volume : row.volumes) {
            cells.push_back(graduated(volume, series.graduation));
        }
        if (two_temperatures) {
            cells.push_back(ph_text(row.at_bench));
        }
        cells.push_back(fmt::format("{:.2f}", std::max(row.uncertainty_k2, 0.01)));
        cells.push_back(plain_number(row.buffer_value.mol_per_kg(), 3));
        page.row(columns, cells, true);
    }
    page.blank();
    double worst = 0;
    for (const SeriesRow& row : series.rows) {
        worst = std::max(worst, std::abs(row.ph.value() - row.target.value()));
    }
    page.paragraph(fmt::format(
        "pH at {}; ionic strength {} in every row{}; buffer value in mol/kg per pH. Every row was "
        "computed again from its rounded volumes: they miss the pH by {:.4f} at most.",
        temperature_text(series.request.use_at), ionic_strength_words(series),
        series.ionic_strength_chosen ? " (the least that all rows can have; the label names none)" : "", worst));
    if (two_temperatures) {
        page.paragraph(fmt::format("\"at bench\" is what the meter shows at {}; the volumes need no meter.",
                                   temperature_text(series.request.prepare_at)));
    }
    page.paragraph(
        "Read the label and the safety data sheet of every reagent; local rules and trained supervision come "
        "before this sheet. Not for clinical or parenteral use.");
    return page.text();
}

ordered_json series_json(const Series& series, const Table& table) {
    ordered_json stocks = ordered_json::array();
    for (std::size_t s = 0; s < series.stocks.size(); ++s) {
        const Stock& stock = series.stocks[s];
        const Reagent& reagent = table.reagents[stock.reagent];
        ordered_json entry{{"stock", letter(s)},
                           {"reagent", reagent.name},
                           {"formula", reagent.formula},
                           {"cas", reagent.cas.empty() ? ordered_json(nullptr) : ordered_json(reagent.cas)},
                           {"concentration_mol_per_L", stock.strength.mol_per_L()}};
        if (stock.mass.g() > 0) {
            entry["mass_g"] = stock.mass.g();
        } else {
            entry["volume_mL"] = stock.liquid.mL();
        }
        entry["fill_to_mL"] = stock.volume.mL();
        stocks.push_back(std::move(entry));
    }
    ordered_json rows = ordered_json::array();
    for (const SeriesRow& row : series.rows) {
        ordered_json volumes = ordered_json::object();
        for (std::size_t s = 0; s < row.volumes.size(); ++s) {
            volumes[letter(s)] = std::round(row.volumes[s].mL() * 1e6) / 1e6;  // the printed digits
        }
        rows.push_back({{"target_pH", row.target.value()},
                        {"volumes_mL", std::move(volumes)},
                        {"predicted_pH", row.ph.value()},
                        {"pH_expanded_k2", row.uncertainty_k2},
                        {"bench_pH", row.at_bench.value()},
                        {"ionic_strength_mol_per_kg", row.ionic_strength.mol_per_kg()},
                        {"buffer_value_mol_per_kg", row.buffer_value.mol_per_kg()},
                        {"osmolality_ideal_osmol_per_kg", row.osmolality.mol_per_kg()}});
    }
    return {{"kind", "series"},
            {"label", series.request.label},
            {"volume_L", series.request.volume.L()},
            {"temperature_C", series.request.use_at.celsius()},
            {"prepare_at_C", series.request.prepare_at.celsius()},
            {unit_key(series), series.ionic_strength.value_mol},
            {"ionic_strength_chosen", series.ionic_strength_chosen},
            {"graduation_mL", series.graduation.mL()},
            {"stocks", std::move(stocks)},
            {"rows", std::move(rows)},
            {"program", program_json(table)}};
}

std::string series_csv(const Series& series) {
    std::string text = "target_pH";
    for (std::size_t s = 0; s < series.stocks.size(); ++s) {
        text += fmt::format(",{}_mL", letter(s));
    }
    text += ",fill_to_mL,predicted_pH,pH_expanded_k2,bench_pH,ionic_strength_mol_per_kg,buffer_value_mol_per_kg\r\n";
    for (const SeriesRow& row : series.rows) {
        text += fmt::format("{}", row.target.value());
        for (const Volume& volume : row.volumes) {
            text += fmt::format(",{}", graduated(volume, series.graduation));
        }
        text += fmt::format(",{},{:.4f},{:.4f},{:.4f},{:.6g},{:.6g}\r\n", series.request.volume.mL(), row.ph.value(),
                            row.uncertainty_k2, row.at_bench.value(), row.ionic_strength.mol_per_kg(),
                            row.buffer_value.mol_per_kg());
    }
    return text;
}

}  // namespace carboy
