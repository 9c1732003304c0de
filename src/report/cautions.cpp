#include "report/cautions.h"

#include <algorithm>

#include <fmt/format.h>

namespace carboy {

namespace {

void advise(std::vector<Advice>& list, std::span<const std::uint16_t> cautions, std::string_view subject) {
    for (const std::uint16_t caution : cautions) {
        auto known =
            std::find_if(list.begin(), list.end(), [&](const Advice& advice) { return advice.caution == caution; });
        if (known == list.end()) {
            list.push_back({caution, {}});
            known = list.end() - 1;
        }
        if (std::find(known->subjects.begin(), known->subjects.end(), subject) == known->subjects.end()) {
            known->subjects.push_back(subject);
        }
    }
}

}  // namespace

Cautions cautions_of(std::span<const std::uint16_t> reagents, const Table& table) {
    Cautions cautions;
    for (const std::uint16_t index : reagents) {
        const Reagent& reagent = table.reagents[index];
        if (!reagent.ghs.statements.empty()) {
            cautions.hazardous.push_back(index);
        }
        advise(cautions.advice, reagent.cautions, reagent.name);
        for (const Supply& supply : reagent.supplies) {
            if (supply.component.kind == ComponentKind::system) {
                const System& system = table.systems[supply.component.index];
                advise(cautions.advice, system.cautions, system.name);
            }
        }
    }
    for (std::size_t i = 0; i < table.cautions.size(); ++i) {
        if (table.cautions[i].key.starts_with("always-")) {
            cautions.advice.push_back({static_cast<std::uint16_t>(i), {}});
        }
    }
    return cautions;
}

Cautions cautions_of(const Plan& plan, const Table& table) {
    return cautions_of(reagents_used(plan), table);
}

void print_cautions(Page& page, const Cautions& cautions, const Table& table) {
    page.heading("CAUTIONS");
    for (const std::uint16_t index : cautions.hazardous) {
        const Reagent& reagent = table.reagents[index];
        std::string text =
            fmt::format("{}: {}.", reagent.name, reagent.ghs.signal_word.empty() ? "Caution" : reagent.ghs.signal_word);
        for (const std::uint16_t statement : reagent.ghs.statements) {
            text += fmt::format(" {} {}.", table.hazards[statement].code, table.hazards[statement].text);
        }
        page.paragraph(text);
    }
    for (const Advice& advice : cautions.advice) {
        page.paragraph(advice_text(advice, table));
    }
}

void print_warnings(Page& page, const std::vector<Warning>& warnings, std::string_view assumed) {
    if (warnings.empty() && assumed.empty()) {
        return;
    }
    page.heading("TAKE NOTE");
    for (const Warning& warning : warnings) {
        page.notice(warning.message, "  - ");
    }
    if (!assumed.empty()) {
        page.paragraph(assumed, "  - ");
    }
}

std::string advice_text(const Advice& advice, const Table& table) {
    std::string text;
    for (const std::string_view subject : advice.subjects) {
        text += text.empty() ? "" : ", ";
        text += subject;
    }
    text += text.empty() ? "" : ": ";
    return text += table.cautions[advice.caution].text;
}

}  // namespace carboy
