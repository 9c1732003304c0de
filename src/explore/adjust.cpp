#include <algorithm>
#include <array>
#include <cmath>

#include <fmt/format.h>

#include "carboy/adjustment.h"
#include "carboy/equilibrium.h"
#include "carboy/error.h"
#include "carboy/uncertainty.h"

#include "explore/correction.h"
#include "explore/suspicion.h"

namespace carboy {

namespace {

void check(const Table& table, const OffBatch& batch, const Titrant& at_hand) {
    if (!batch.request.ph) {
        throw Error(ErrorKind::input, "no_target", "the label has no pH to come to", "label",
                    "add one, as in: pH 7.5 at 25 C");
    }
    if (batch.not_filled && !(*batch.not_filled < batch.request.volume)) {
        throw Error(ErrorKind::input, "present_volume",
                    fmt::format("{:g} mL are in it, and the mark is at {:g} mL", batch.not_filled->mL(),
                                batch.request.volume.mL()),
                    "--not-filled", "leave it out for a batch that is filled to its mark");
    }
    const Reagent& reagent = table.reagents[at_hand.reagent];
    const bool acid_or_base = reagent.strong_charge != 0 ||
                              std::any_of(reagent.supplies.begin(), reagent.supplies.end(), [](const Supply& supply) {
                                  return supply.component.kind == ComponentKind::system;
                              });
    if (!acid_or_base) {
        throw Error(ErrorKind::input, "bad_titrant",
                    fmt::format("{} is neither acid nor base: it does not bring a pH anywhere", reagent.name), "--with",
                    "give one, such as '1 M HCl' or '1 M NaOH'");
    }
}

/// Expected reading with its uncertainty, now and at the bench.
void expect(const Bench& bench, const VesselContent& vessel, Adjustment& adjustment) {
    EquilibriumSolver solver(bench.table, compose(bench.table, vessel.present).mixture,
                             adjustment.plan.request.prepare_at, bench.model);
    solver.solve();
    adjustment.expected = solver.ph();
    if (adjustment.batch.reading_before) {
        adjustment.expected_before = ph_of(bench, before_titrant(bench.table, adjustment.plan, vessel.present),
                                           adjustment.plan.request.prepare_at);
    }
    adjustment.expected_expanded_k2 = ph_uncertainty(solver, bench.table, bench.model).expanded_k2;
}

void find_what_is_off(const Bench& bench, const VesselContent& vessel, Adjustment& adjustment) {
    const Amount acid = acid_in_excess(bench, adjustment.plan, vessel, adjustment.batch.reading);
    adjustment.as_read = with_excess(bench.table, adjustment.plan, vessel.present, acid);
    const auto titrant = titrant_of(bench.table, adjustment.plan);
    const int charge = titrant ? titrant->charge : 0;
    adjustment.off = Amount::mol(std::abs(acid.mol()));
    if (acid.mol() > 0) {
        adjustment.off_by = charge > 0 ? OffBy::base_missing : OffBy::acid_in_excess;
    } else if (acid.mol() < 0) {
        adjustment.off_by = charge < 0 ? OffBy::acid_missing : OffBy::base_in_excess;
    }
}

/// With the titrant at hand, or with the other kind where that one is wrong.
void correct(const Bench& bench, const VesselContent& as_read, Adjustment& adjustment) {
    const Attempt first = attempt(bench, adjustment.plan, as_read, adjustment.at_hand);
    if (first.correction) {
        adjustment.correction = first.correction;
        adjustment.verdict = Verdict::add_titrant;
        return;
    }
    const Reagent& at_hand = bench.table.reagents[adjustment.at_hand.reagent];
    const double now =
        ph_of(bench, as_read.finished(bench.table, adjustment.at_hand, Amount{}), adjustment.plan.request.use_at)
            .value();
    const bool needs_acid = now > adjustment.plan.request.ph->value();
    const Titrant other = strong_titrant(bench.table, adjustment.plan, needs_acid ? -1 : 1);
    adjustment.correction = attempt(bench, adjustment.plan, as_read, other).correction;
    adjustment.verdict = adjustment.correction ? Verdict::other_titrant : Verdict::discard;
    if (first.wrong_side) {
        adjustment.reasons.push_back(
            {"wrong_side",
             fmt::format("The batch is too {}: {} would lead it further away. It takes {}.",
                         needs_acid ? "basic" : "acid", at_hand.name, needs_acid ? "an acid" : "a base")});
    } else {
        adjustment.reasons.push_back(
            {"out_of_reach", fmt::format("{} cannot bring it to pH {:.2f}, not even as much of it as there is batch.",
                                         at_hand.name, adjustment.plan.request.ph->value())});
    }
}

void weigh_suspicion(const Bench& bench, const VesselContent& vessel, Adjustment& adjustment) {
    for (Suspect& suspect : suspects(bench, adjustment.plan, vessel, adjustment.batch)) {
        const Titrant& titrant = adjustment.correction ? adjustment.correction->titrant : adjustment.at_hand;
        suspect.mistake.correction = attempt(bench, adjustment.plan, suspect.vessel, titrant).correction;
        adjustment.mistakes.push_back(std::move(suspect.mistake));
    }
    if (impossible_for_titrant(bench, adjustment.plan, vessel, adjustment.batch.reading)) {
        adjustment.warnings.push_back({"impossible_reading",
                                       "No amount of the recipe's titrant, none of it or twenty times as much, gives "
                                       "this reading: something else "
                                       "went wrong. Find out what before correcting the pH."});
    } else if (adjustment.mistakes.empty() || !adjustment.mistakes.front().consistent) {
        adjustment.warnings.push_back(
            {"no_single_mistake",
             "None of the single mistakes tried explains this reading: perhaps two came together, or the meter needs "
             "calibration."});
    }
}

/// What the likeliest mistake says about the advice: a wrong reagent is not mended by its pH.
std::optional<Warning> objection(const Table& table, const Mistake& mistake) {
    std::string alone;
    if (mistake.correction && std::abs(mistake.correction->concentration_off) > 0.005) {
        alone = fmt::format(" With its pH alone put right the buffer would be {:.0f} % {} than its label.",
                            100 * std::abs(mistake.correction->concentration_off),
                            mistake.correction->concentration_off < 0 ? "weaker" : "stronger");
    }
    if (mistake.to_weigh_in) {
        return Warning{"reagent_short",
                       fmt::format("The likeliest cause is a reagent short or missing. If so, weigh in {:.4g} g of {}: "
                                   "the pH comes right with it.",
                                   mistake.to_weigh_in->mass.g(), table.reagents[mistake.to_weigh_in->reagent].name) +
                           alone};
    }
    switch (mistake.kind) {
        case MistakeKind::other_hydrate:
        case MistakeKind::other_form:
        case MistakeKind::forms_swapped:
        case MistakeKind::mass_tenfold:
        case MistakeKind::titrant_wrong_kind:
            return Warning{"wrong_reagent",
                           "The likeliest cause is a wrong reagent or mass: with its pH put right it "
                           "would still not be the batch of the label." +
                               alone};
        case MistakeKind::read_at_other_temperature:
            return Warning{"read_again",
                           "The likeliest cause is that nothing is wrong but the temperature at the "
                           "meter: bring the batch to the bench temperature and read it again first."};
        case MistakeKind::meter:
            return Warning{"calibrate_first",
                           "The reading is within what the prediction itself is sure of: calibrate "
                           "the meter with two standards and read again first."};
        case MistakeKind::wrong_volume:
            return Warning{"wrong_volume",
                           "The likeliest cause is a wrong volume: measure it before anything else." + alone};
        default:
            return std::nullopt;
    }
}

/// Why the batch is better made again, if it is.
void judge(const Table& table, Adjustment& adjustment) {
    // Common practice, no source: a salt content a tenth higher is no longer the buffer of the label.
    constexpr double most_salt = 0.10;
    constexpr double little_salt_mol_per_kg = 0.005;
    constexpr double much_more_plausible = 0.5;
    std::vector<Warning> against;
    if (adjustment.correction) {
        const Correction& correction = *adjustment.correction;
        if (std::abs(correction.concentration_off) > adjustment.batch.within) {
            against.push_back(
                {"concentration_off",
                 fmt::format("Corrected, the buffer would be {:.1f} % {} than its label; {:g} % is the "
                             "limit (--within sets it).",
                             100 * std::abs(correction.concentration_off),
                             correction.concentration_off < 0 ? "weaker" : "stronger", 100 * adjustment.batch.within)});
        }
        const double planned = adjustment.plan.predicted.ionic_strength.mol_per_kg();
        const double risen = correction.predicted.ionic_strength.mol_per_kg() - planned;
        if (risen > most_salt * planned && risen > little_salt_mol_per_kg) {
            against.push_back(
                {"salt_risen", fmt::format("Corrected, it would hold more salt than planned: ionic strength {:.3f} "
                                           "in place of {:.3f} mol/kg.",
                                           planned + risen, planned)});
        }
    }
    if (!adjustment.mistakes.empty()) {
        const Mistake& first = adjustment.mistakes.front();
        if (const auto said = objection(table, first);
            said && first.consistent && first.plausibility > much_more_plausible) {
            (said->code == "wrong_reagent" ? against : adjustment.reasons).push_back(*said);
        }
    }
    if (!against.empty()) {
        adjustment.verdict = Verdict::discard;
    }
    adjustment.reasons.insert(adjustment.reasons.end(), against.begin(), against.end());
}

}  // namespace

std::string_view mistake_word(MistakeKind kind) {
    constexpr std::array<std::string_view, 15> words{"meter",
                                                     "titrant_off",
                                                     "titrant_forgotten",
                                                     "titrant_other_strength",
                                                     "titrant_wrong_kind",
                                                     "other_hydrate",
                                                     "other_form",
                                                     "forms_swapped",
                                                     "mass_tenfold",
                                                     "left_out",
                                                     "wrong_volume",
                                                     "set_at_bench",
                                                     "set_at_other_temperature",
                                                     "read_at_other_temperature",
                                                     "set_before_dilution"};
    return words[static_cast<std::size_t>(kind)];
}

std::string_view verdict_word(Verdict verdict) {
    constexpr std::array<std::string_view, 4> words{"leave_it", "add_titrant", "other_titrant", "discard"};
    return words[static_cast<std::size_t>(verdict)];
}

std::string_view off_by_word(OffBy off) {
    constexpr std::array<std::string_view, 5> words{"nothing", "acid missing", "acid in excess", "base missing",
                                                    "base in excess"};
    return words[static_cast<std::size_t>(off)];
}

Adjustment adjust(const Table& table, const OffBatch& batch, const Titrant& at_hand, const ActivityModel& model) {
    check(table, batch, at_hand);
    const Bench bench{table, model};
    Adjustment adjustment;
    adjustment.batch = batch;
    adjustment.at_hand = at_hand;
    adjustment.plan = plan_recipe(table, batch.request, model);
    adjustment.present_volume = batch.not_filled.value_or(batch.request.volume);
    const VesselContent vessel = planned_vessel(table, adjustment.plan, batch.not_filled);
    expect(bench, vessel, adjustment);
    find_what_is_off(bench, vessel, adjustment);

    // What is typed has two decimals; a difference of exactly 0.02 counts as agreement.
    constexpr double rounding = 1e-6;
    if (std::abs(batch.reading.value() - adjustment.expected.value()) <= meter_ph + rounding) {
        return adjustment;
    }
    VesselContent as_read = vessel;
    as_read.present = adjustment.as_read;
    correct(bench, as_read, adjustment);
    weigh_suspicion(bench, vessel, adjustment);
    judge(table, adjustment);
    return adjustment;
}

}  // namespace carboy
