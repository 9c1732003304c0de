#include <algorithm>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "report/bottle_label.h"
#include "report/markup.h"
#include "report/qr_code.h"
#include "report/sheet.h"
#include "report/text_width.h"

namespace carboy {

namespace {

// Everything below is in millimetres.

constexpr auto fonts = "'Helvetica Neue', Arial, 'Nimbus Sans', 'Liberation Sans', sans-serif";
constexpr double line_height = 1.16;  // in units of the font size
constexpr double ascent = 0.8;        // of a line, in units of the font size
constexpr double fill = 0.94;         // lines are broken a little early: fonts differ

std::string mm(double value) {
    return fmt::format("{:.2f}", value);
}

struct Box {
    double x, y, width, height;
};

/// A text set as large as its box allows.
struct Block {
    std::vector<std::string> lines;
    double size = 0;

    double height() const { return static_cast<double>(lines.size()) * size * line_height; }
};

/// Largest size between two at which the text fits; at the smallest it may run over.
Block fitted(std::string_view text, double width, double height, double largest, double smallest, bool bold) {
    constexpr double step = 0.1;
    Block block;
    for (double size = largest;; size -= step) {
        block.size = std::max(size, smallest);
        block.lines = broken_to(text, fill * width / block.size, bold);
        const bool fits = block.height() <= height &&
                          std::all_of(block.lines.begin(), block.lines.end(), [&](const std::string& line) {
                              return text_width(line, bold) * block.size <= width;
                          });
        if (fits || block.size <= smallest) {
            return block;
        }
    }
}

void line(Markup& svg, std::string_view text, double x, double y, double size, bool bold = false,
          std::string_view anchor = {}) {
    svg.element("text", text,
                {{"x", mm(x)},
                 {"y", mm(y)},
                 {"font-size", mm(size)},
                 {bold ? "font-weight" : "", "bold"},
                 {anchor.empty() ? "" : "text-anchor", anchor}});
}

/// Writes the block from the top of the box and returns what is left of the box below it.
Box set(Markup& svg, const Block& block, Box box, bool bold) {
    for (const std::string& text : block.lines) {
        line(svg, text, box.x, box.y + ascent * block.size, block.size, bold);
        box.y += line_height * block.size;
        box.height -= line_height * block.size;
    }
    return box;
}

/// The red diamond of the GHS with the code in it; the symbols themselves are not drawn.
void pictogram(Markup& svg, const BottleLabel::Pictogram& sign, double x, double y, double side) {
    const double half = side / 2;
    const double stroke = side * 0.07;
    const double reach = half - stroke / 2;
    svg.open("g");
    svg.element("title", fmt::format("{} {}", sign.code, sign.name));
    svg.empty("path",
              {{"d", fmt::format("M{} {}L{} {}L{} {}L{} {}Z", mm(x + half), mm(y + half - reach), mm(x + half + reach),
                                 mm(y + half), mm(x + half), mm(y + half + reach), mm(x + half - reach), mm(y + half))},
               {"fill", "#fff"},
               {"stroke", "#c8102e"},
               {"stroke-width", mm(stroke)}});
    const double size = side * 0.18;
    line(svg, sign.code, x + half, y + half + 0.36 * size, size, true, "middle");
    svg.close();
}

constexpr auto unclassified = "The solution itself is not classified.";

/// The hazards in words, the fullest first.
std::vector<std::string> hazard_words(const BottleLabel& label) {
    std::string full = "Contains, hazards as supplied:";
    std::string codes = full;
    for (std::size_t i = 0; i < label.contains.size(); ++i) {
        const BottleLabel::Ingredient& item = label.contains[i];
        const char* const end = i + 1 < label.contains.size() ? ";" : ".";
        full += fmt::format(" {}: {}{}", item.reagent, fmt::join(item.statements, ", "), end);
        codes += fmt::format(" {} ({}){}", item.reagent, fmt::join(item.codes, ", "), end);
    }
    return {fmt::format("{} {}", full, unclassified),
            fmt::format("{} Texts on the recipe sheet. {}", codes, unclassified),
            fmt::format("Contains {} classified ingredients: see the recipe sheet. {}", label.contains.size(),
                        unclassified)};
}

void hazards(Markup& svg, const BottleLabel& label, Box box) {
    if (label.contains.empty()) {
        const Block block = fitted("No ingredient is classified in the table. " + std::string(unclassified), box.width,
                                   box.height, 2.2, 1.5, false);
        set(svg, block, {box.x, box.y + box.height - block.height(), box.width, box.height}, false);
        return;
    }
    // The diamonds leave at least half of the width to the words.
    const double most = 0.48 * box.width / std::max<double>(1, static_cast<double>(label.pictograms.size()));
    const double side = std::min({box.height, most, 13.0});
    for (const BottleLabel::Pictogram& sign : label.pictograms) {
        pictogram(svg, sign, box.x, box.y, side);
        box.x += side + 0.4;
        box.width -= side + 0.4;
    }
    box.x += label.pictograms.empty() ? 0 : 1;
    box.width -= label.pictograms.empty() ? 0 : 1;
    if (!label.signal_word.empty()) {
        box = set(svg, {{label.signal_word}, 3}, box, true);
    }
    Block block;
    const std::vector<std::string> all = hazard_words(label);
    for (const std::string& words : all) {
        block = fitted(words, box.width, box.height, 2.3, words == all.back() ? 1.2 : 1.6, false);
        if (block.height() <= box.height) {
            break;
        }
    }
    set(svg, block, box, false);
}

/// A date or a line to write one on.
std::string dated(std::string_view name, const std::string& date) {
    return fmt::format("{} {}", name, date.empty() ? "__________" : date);
}

void code(Markup& svg, const BottleLabel& label, double x, double y, double side) {
    const QrCode qr = qr_code(qr_text(label));
    svg.open("g", {{"transform", fmt::format("translate({} {}) scale({:.5f})", mm(x), mm(y), side / qr.modules)},
                   {"shape-rendering", "crispEdges"}});
    svg.element("title", "QR code: recipe id and label line");
    svg.empty("path", {{"d", qr.path}});
    svg.close();
}

void draw(Markup& svg, const BottleLabel& label, const LabelStock& stock) {
    const double margin = std::clamp(0.05 * stock.height_mm, 1.8, 3.5);
    const double side = std::clamp(0.47 * stock.height_mm, 15.0, 26.0);
    constexpr double quiet = 2;  // four modules of the usual symbol, on the side of the text
    const double small = 1.9;
    Box box{margin, margin, stock.width_mm - 2 * margin, stock.height_mm - 2 * margin};
    const double code_x = box.x + box.width - side;
    code(svg, label, code_x, margin, side);
    line(svg, short_recipe_id(label.recipe_id), code_x + side / 2, margin + side + quiet + small * ascent, small, false,
         "middle");
    const double beside = box.width - side - quiet;
    const Block name = fitted(label.name, beside, 0.31 * stock.height_mm, 0.15 * stock.height_mm, 2.2, true);
    box = set(svg, name, box, true);
    box.y += 0.4;
    box = set(svg, fitted(label.ph, beside, 0.13 * stock.height_mm, name.size, 2, true), box, true);
    box.y += 0.4;
    const std::string record =
        fmt::format("{} · {} · {}", label.volume, dated("Made", label.made), dated("Use by", label.expires));
    box = set(svg, fitted(record, beside, 0.14 * stock.height_mm, 2.6, 1.9, false), box, false);
    box = set(svg, fitted("Initials ______ · Lot ____________", beside, 3, 2.6, 1.9, false), box, false);
    const double top = std::max(box.y + 0.8, margin + side + quiet + small * line_height);
    svg.empty("path", {{"d", fmt::format("M{} {}H{}", mm(margin), mm(top), mm(stock.width_mm - margin))},
                       {"stroke", "#000"},
                       {"stroke-width", "0.15"}});
    hazards(svg, label, {margin, top + 0.8, stock.width_mm - 2 * margin, stock.height_mm - margin - top - 0.8});
}

void drawing(Markup& svg, const BottleLabel& label, const LabelStock& stock) {
    svg.open("svg", {{"xmlns", "http://www.w3.org/2000/svg"},
                     {"width", fmt::format("{}mm", stock.width_mm)},
                     {"height", fmt::format("{}mm", stock.height_mm)},
                     {"viewBox", fmt::format("0 0 {} {}", stock.width_mm, stock.height_mm)},
                     {"font-family", fonts}});
    svg.element("title", label.name);
    svg.empty("rect", {{"width", "100%"}, {"height", "100%"}, {"fill", "#fff"}});
    draw(svg, label, stock);
    svg.close();
}

}  // namespace

std::string bottle_label_svg(const BottleLabel& label, const LabelStock& stock) {
    Markup svg;
    svg.raw("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n");
    drawing(svg, label, stock);
    return svg.finish();
}

std::string bottle_label_html(const BottleLabel& label, const LabelStock& stock) {
    Markup page;
    page.raw("<!DOCTYPE html>\n");
    page.open("html", {{"lang", "en"}});
    page.open("head");
    page.empty("meta", {{"charset", "utf-8"}});
    page.empty("meta", {{"name", "viewport"}, {"content", "width=device-width, initial-scale=1"}});
    page.element("title", fmt::format("Label: {}", label.name));
    page.open("style");
    page.raw(
        fmt::format("\n@page {{ size: {}mm {}mm; margin: 0; }}\n"
                    "html {{ background: #d9d5cc; color-scheme: light dark; }}\n"
                    "main {{ display: grid; place-items: center; min-height: 96vh; }}\n"
                    "svg {{ max-width: 100%; height: auto; }}\n"
                    "@media (prefers-color-scheme: dark) {{ html {{ background: #171614; }} }}\n"
                    "@media print {{ html {{ background: #fff; }} body {{ margin: 0; }} main {{ display: block; }}\n"
                    "  svg {{ display: block; max-width: none; }} }}\n",
                    stock.width_mm, stock.height_mm));
    page.close();
    page.close();
    page.open("body");
    page.open("main");
    drawing(page, label, stock);
    return page.finish();
}

}  // namespace carboy
