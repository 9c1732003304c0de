#include <cctype>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "carboy/error.h"
#include "carboy/measurements.h"
#include "carboy/notation.h"

#include "notation/line.h"

namespace carboy {

namespace {

constexpr auto choices = "one of 'pK2 phosphate', 'amount acetic acid', titrant-strength, carbonate, offset, slope";

Error unreadable(const std::string& message, std::string help = choices) {
    return {ErrorKind::input, "unknown_parameter", message, "--free", std::move(help)};
}

std::string suggestion(std::string_view name, const Table& table) {
    const auto near = nearest_names(name, table);
    return near.empty() ? std::string("'carboy constants list' shows what the table knows")
                        : fmt::format("did you mean {}?", fmt::join(near, ", "));
}

/// `pK2 phosphate`: the digit may be left out when there is one step.
FreeParameter read_pK(std::string_view text, const Table& table) {
    std::string_view rest = text.substr(2);
    if (!rest.empty() && (rest.front() == 'a' || rest.front() == 'A')) {
        rest.remove_prefix(1);
    }
    std::size_t step = 0;
    while (!rest.empty() && std::isdigit(static_cast<unsigned char>(rest.front())) != 0) {
        step = step * 10 + static_cast<std::size_t>(rest.front() - '0');
        rest.remove_prefix(1);
    }
    const std::string_view name = trimmed(rest);
    const System* system = find_system(table, name);
    if (system == nullptr) {
        const Reagent* reagent = find_reagent(table, name);
        if (reagent != nullptr) {
            for (const Supply& supply : reagent->supplies) {
                if (supply.component.kind == ComponentKind::system && system == nullptr) {
                    system = &table.systems[supply.component.index];
                }
            }
        }
    }
    if (system == nullptr) {
        throw unreadable(name.empty() ? std::string("a pK of what?") : fmt::format("there is no system '{}'", name),
                         name.empty() ? std::string("write it as 'pK1 acetate'") : suggestion(name, table));
    }
    const std::size_t steps = system->steps.size();
    if (step > steps || (step == 0 && steps > 1)) {
        throw unreadable(step == 0 ? fmt::format("{} has {} pK: which?", system->name, steps)
                                   : fmt::format("{} has {} pK, not {}", system->name, steps, step),
                         fmt::format("write it as 'pK{} {}'", steps, system->name));
    }
    return {Unknown::pK, id_of(table, *system).index, step == 0 ? 0 : step - 1, 0};
}

}  // namespace

FreeParameter read_free_parameter(std::string_view text, const Table& table) {
    const std::string_view word = trimmed(text);
    if (word == "titrant-strength") {
        return {Unknown::titrant_strength, 0, 0, 0};
    }
    if (word == "carbonate") {
        return {Unknown::carbonate, 0, 0, 0};
    }
    if (word == "offset") {
        return {Unknown::offset, 0, 0, 0};
    }
    if (word == "slope") {
        return {Unknown::slope, 0, 0, 0};
    }
    if (word.starts_with("pK") || word.starts_with("pk")) {
        return read_pK(word, table);
    }
    constexpr std::string_view amount = "amount ";
    if (word.starts_with(amount)) {
        std::string_view name = trimmed(word.substr(amount.size()));
        name = name.starts_with("of ") ? trimmed(name.substr(3)) : name;
        const Reagent* reagent = find_reagent(table, name);
        if (reagent == nullptr) {
            throw unreadable(fmt::format("there is no reagent '{}'", name), suggestion(name, table));
        }
        return {Unknown::amount, 0, 0, static_cast<std::uint16_t>(reagent - table.reagents.data())};
    }
    const auto near = nearest_words(word, {"titrant-strength", "carbonate", "offset", "slope"});
    throw unreadable(fmt::format("'{}' is nothing that can be found", word),
                     near.empty() ? std::string(choices) : fmt::format("did you mean {}?", near.front()));
}

}  // namespace carboy
