#include "report/shelf_text.h"

#include <fmt/format.h>

#include "report/figure_text.h"
#include "report/page.h"

namespace carboy {

using nlohmann::ordered_json;

namespace {

std::string left_text(const Bottle& bottle) {
    if (bottle.mass_left) {
        return bottle.mass_left->g() > 0 ? mass_text(*bottle.mass_left) : "empty";
    }
    if (bottle.volume_left) {
        return bottle.volume_left->L() > 0 ? volume_text(*bottle.volume_left) : "empty";
    }
    return "not stated";
}

std::string dates_text(const Shelf& shelf, const Bottle& bottle) {
    return !bottle.expires         ? std::string()
           : shelf.expired(bottle) ? "expired " + bottle.expires->text()
                                   : "expires " + bottle.expires->text();
}

ordered_json date_or_null(const std::optional<Date>& date) {
    return date ? ordered_json(date->text()) : ordered_json(nullptr);
}

}  // namespace

std::string shelf_check_text(const ShelfReading& reading, std::string_view file, bool colour) {
    if (!reading.faults.empty()) {
        std::string text;
        for (const ConstantsFault& fault : reading.faults) {
            text += fmt::format("{}: {}\n", fault.path.empty() ? "document" : fault.path, fault.message);
            text += fault.help.empty() ? std::string() : fmt::format("  try: {}\n", fault.help);
        }
        return text +
               fmt::format("{}: {} fault{}\n", file, reading.faults.size(), reading.faults.size() == 1 ? "" : "s");
    }
    const std::vector<Page::Column> columns{{10}, {1}, {36}, {1}, {12, Page::Align::right}, {2}, {18}};
    Page page(colour);
    const Shelf& shelf = reading.shelf;
    page.title(file, fmt::format("{} bottle{}", shelf.bottles().size(), shelf.bottles().size() == 1 ? "" : "s"));
    page.blank();
    for (const Bottle& bottle : shelf.bottles()) {
        const Reagent& article = shelf.table().reagents[bottle.reagent];
        page.row(columns,
                 {bottle.id, "", std::string(article.name), "", left_text(bottle), "", dates_text(shelf, bottle)},
                 shelf.expired(bottle));
    }
    page.blank();
    return page.text() + fmt::format("{}: valid\n", file);
}

ordered_json shelf_check_json(const ShelfReading& reading, std::string_view file) {
    ordered_json faults = ordered_json::array();
    for (const ConstantsFault& fault : reading.faults) {
        faults.push_back({{"path", fault.path}, {"message", fault.message}, {"help", fault.help}});
    }
    ordered_json bottles = ordered_json::array();
    const Shelf& shelf = reading.shelf;
    for (const Bottle& bottle : shelf.bottles()) {
        if (!reading.faults.empty()) {
            break;
        }
        const Reagent& article = shelf.table().reagents[bottle.reagent];
        ordered_json entry{{"id", bottle.id}, {"article", article.name}};
        entry["assay"] = article.assay.known() ? ordered_json(article.assay.value) : ordered_json(nullptr);
        entry["concentration_mol_per_L"] =
            article.strength_mol_per_L.known() ? ordered_json(article.strength_mol_per_L.value) : ordered_json(nullptr);
        entry["left_g"] = bottle.mass_left ? ordered_json(bottle.mass_left->g()) : ordered_json(nullptr);
        entry["left_mL"] = bottle.volume_left ? ordered_json(bottle.volume_left->mL()) : ordered_json(nullptr);
        entry["opened"] = date_or_null(bottle.opened);
        entry["expires"] = date_or_null(bottle.expires);
        entry["expired"] = shelf.today ? ordered_json(shelf.expired(bottle)) : ordered_json(nullptr);
        bottles.push_back(std::move(entry));
    }
    return {{"kind", "shelf_check"},
            {"file", file},
            {"valid", reading.faults.empty()},
            {"faults", std::move(faults)},
            {"bottles", std::move(bottles)}};
}

std::string booking_text(const Booked& booked, std::string_view file, bool undone) {
    if (booked.already) {
        return fmt::format("{}: booked already, as number {}; nothing is taken again\n", file, booked.number);
    }
    std::string text;
    for (const Taking& taking : booked.takings) {
        text += fmt::format("{:<12} {:>14} {}{}\n", taking.bottle, taking.amount, undone ? "put back" : "taken",
                            taking.left.empty() ? std::string() : fmt::format(", {} left", taking.left));
    }
    return text + fmt::format("{}: booking {} {}\n", file, booked.number, undone ? "undone" : "made");
}

ordered_json booking_json(const Booked& booked, std::string_view file, bool undone) {
    ordered_json items = ordered_json::array();
    for (const Taking& taking : booked.takings) {
        items.push_back({{"bottle", taking.bottle},
                         {"amount", taking.amount},
                         {"left", taking.left.empty() ? ordered_json(nullptr) : ordered_json(taking.left)}});
    }
    return {{"kind", "booking"},         {"file", file},
            {"number", booked.number},   {"undone", undone},
            {"already", booked.already}, {"bottles", std::move(items)}};
}

}  // namespace carboy
