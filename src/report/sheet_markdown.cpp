#include "report/sheet_markdown.h"

#include <algorithm>
#include <string_view>
#include <vector>

#include <fmt/format.h>

#include "report/figure_text.h"

namespace carboy {

namespace {

/// Text that Markdown takes letter by letter: its marks escaped, HTML's as entities, one line.
std::string plain(std::string_view text) {
    constexpr std::string_view marks = "\\`*_{}[]#|~";
    std::string escaped;
    for (const char c : text) {
        if (c == '&') {
            escaped += "&amp;";
        } else if (c == '<') {
            escaped += "&lt;";
        } else if (c == '>') {
            escaped += "&gt;";
        } else if (static_cast<unsigned char>(c) < 0x20) {
            escaped += ' ';
        } else {
            escaped += marks.find(c) != std::string_view::npos ? "\\" : "";
            escaped += c;
        }
    }
    return escaped;
}

using Row = std::vector<std::string>;

/// A pipe table whose columns line up as plain text too. `right` holds the columns of figures.
std::string table_of(const Row& head, const std::vector<Row>& rows, const std::vector<std::size_t>& right) {
    std::vector<std::size_t> widths;
    for (std::size_t i = 0; i < head.size(); ++i) {
        widths.push_back(std::max<std::size_t>(display_width(head[i]), 3));
        for (const Row& row : rows) {
            widths[i] = std::max(widths[i], display_width(row[i]));
        }
    }
    const auto is_right = [&](std::size_t i) { return std::find(right.begin(), right.end(), i) != right.end(); };
    const auto line = [&](const Row& row) {
        std::string text = "|";
        for (std::size_t i = 0; i < row.size(); ++i) {
            const std::string padding(widths[i] - display_width(row[i]), ' ');
            text += is_right(i) ? fmt::format(" {}{} |", padding, row[i]) : fmt::format(" {}{} |", row[i], padding);
        }
        return text + "\n";
    };
    std::string text = line(head) + "|";
    for (std::size_t i = 0; i < head.size(); ++i) {
        text += fmt::format(" {}{} |", std::string(widths[i] - 1, '-'), is_right(i) ? ":" : "-");
    }
    text += '\n';
    for (const Row& row : rows) {
        text += line(row);
    }
    return text;
}

std::string portions(const std::vector<Sheet::Portion>& list) {
    std::vector<Row> rows;
    for (const Sheet::Portion& portion : list) {
        std::string name = plain(portion.reagent);
        if (!portion.formula.empty()) {
            name += fmt::format(" {}", plain(portion.formula));
        }
        if (!portion.detail.empty()) {
            name += fmt::format(" ({})", plain(portion.detail));
        }
        rows.push_back({name, fmt::format("**{}**", portion.target),
                        portion.range.empty() ? "by the meter" : portion.range, "", plain(portion.lot), ""});
    }
    return table_of({"Reagent", "Target", "Allowed", "Actual      ", "Lot         ", "Initials"}, rows, {1});
}

std::string readings(const Sheet& sheet) {
    std::vector<Row> rows;
    for (const Sheet::Reading& reading : sheet.readings) {
        rows.push_back({reading.act_on ? fmt::format("**{}**", plain(reading.after)) : plain(reading.after),
                        reading.volume, fmt::format("**{}**", reading.ph), "", ""});
    }
    return table_of({"When", "Volume", "pH", "Read        ", "Temperature"}, rows, {1, 2});
}

/// Named blanks, two columns of a table.
std::string blanks(const std::vector<std::pair<std::string, std::string>>& fields) {
    std::vector<Row> rows;
    for (const auto& [name, value] : fields) {
        rows.push_back({name, plain(value)});
    }
    return table_of({"Record", "                                "}, rows, {});
}

std::string cautions(const Sheet& sheet) {
    std::string text;
    for (const Sheet::Hazard& hazard : sheet.hazards) {
        text += fmt::format("- **{}** {}:", plain(hazard.reagent),
                            hazard.signal_word.empty() ? "Caution" : hazard.signal_word);
        for (const Sheet::Line& statement : hazard.statements) {
            text += fmt::format(" {} {}.", statement.term, plain(statement.text));
        }
        text += '\n';
    }
    for (const std::string& advice : sheet.advice) {
        text += fmt::format("- {}\n", plain(advice));
    }
    return text;
}

}  // namespace

std::string sheet_markdown(const Sheet& sheet) {
    std::string text = fmt::format("# {}\n\n", plain(sheet.title));
    text += fmt::format("Make **{} at {}**", sheet.volume, sheet.bench_temperature);
    if (!sheet.stop_at.empty()) {
        text += fmt::format(" · stop the titrant at **pH {}**", plain(sheet.stop_at));
    }
    text += fmt::format(" · in use **{}**\n\n", sheet.in_use);
    text += fmt::format("Recipe {}{}\n", plain(short_recipe_id(sheet.recipe_id)),
                        sheet.request_id.empty() ? "" : fmt::format(" · {}", plain(sheet.request_id)));
    if (!sheet.stocks.empty()) {
        text += "\n## Make first\n\n" + portions(sheet.stocks);
    }
    text += "\n## Weigh and measure\n\n" + portions(sheet.portions);
    text += fmt::format("\nPurified water to {} at {}. Allowed: within {} of the target.\n", sheet.volume,
                        sheet.bench_temperature, sheet.tolerance);
    text += "\n## Steps\n\n";
    for (std::size_t i = 0; i < sheet.steps.size(); ++i) {
        text += fmt::format("{}. [ ] {}\n", i + 1, plain(sheet.steps[i]));
    }
    text += fmt::format("\n## The meter, at {}\n\n{}", sheet.bench_temperature, readings(sheet));
    text += "\n## In use\n\n";
    for (const Sheet::Line& line : sheet.result) {
        text += fmt::format("- {}: **{}**\n", plain(line.term), plain(line.text));
    }
    text += "\n± is the expanded uncertainty, k = 2; amounts and meter are not in it.\n";
    if (!sheet.notes.empty()) {
        text += "\n## Take note\n\n";
        for (const std::string& note : sheet.notes) {
            text += fmt::format("- {}\n", plain(note));
        }
    }
    text += "\n## Cautions\n\n" + cautions(sheet);
    text += "\n## Record\n\n";
    text += blanks({{"Made by", ""},
                    {"Made on", sheet.made},
                    {"Checked by", ""},
                    {"Checked on", ""},
                    {"Balance", ""},
                    {"Meter", ""},
                    {"Calibrated with standards", ""},
                    {"Slope, %", ""},
                    {"Final pH", ""},
                    {"Filtered or autoclaved", ""},
                    {"Store at", ""},
                    {"Container", ""},
                    {"Use by", sheet.expires}});
    return text + fmt::format("\nRecipe id {}. {}.\n", plain(sheet.recipe_id), plain(sheet.program));
}

}  // namespace carboy
