#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "carboy/plan.h"
#include "carboy/titrant.h"

namespace carboy {

/// A batch whose meter does not show what it should.
struct OffBatch {
    Request request;                   ///< label, mark, and the bench temperature where the meter was read
    PH reading;                        ///< what the meter shows there
    std::optional<Volume> not_filled;  ///< present volume, when the batch is not yet filled to the mark
    std::optional<PH> reading_before;  ///< at the bench, everything but the titrant dissolved in the sheet's volume
    double within = 0.05;              ///< how far concentrations may end up from the label, relative
};

/// What so much titrant makes of a batch.
struct Correction {
    Titrant titrant;
    Amount amount;
    Amount least;                  ///< if the meter read 0.02 too far from the target
    Amount most;                   ///< if it read 0.02 too near
    Amount at_once;                ///< what may go in before the meter is watched: nine tenths of `least`
    Volume volume;                 ///< what the titrant adds to the batch; measured, or the room a solid takes up
    PH stop_reading;               ///< what the meter then shows at the bench, in `volume_then`
    Volume volume_then;            ///< after the titrant, before any filling
    PH finished_reading;           ///< at the bench, filled
    Volume finished_volume;        ///< the mark, or more when the titrant leads over it
    double concentration_off = 0;  ///< of the buffer that ends up furthest from its label, relative
    Prediction predicted;          ///< the finished batch at the temperature of use
};

enum class MistakeKind : std::uint8_t {
    meter,        ///< nothing is wrong but the meter or the constants
    titrant_off,  ///< too little or too much of the titrant
    titrant_forgotten,
    titrant_other_strength,  ///< the same titrant, another bottle of it
    titrant_wrong_kind,      ///< acid for base or base for acid
    other_hydrate,           ///< right mass of another hydrate
    other_form,              ///< right mass of another salt form, or of the free acid or base
    forms_swapped,           ///< two forms of one buffer, masses exchanged
    mass_tenfold,            ///< a mass ten times too large or too small
    left_out,
    wrong_volume,               ///< filled to twice or half the volume
    set_at_bench,               ///< brought to the label's pH at the bench, as if it were the temperature of use
    set_at_other_temperature,   ///< brought to the label's pH while cold or warm
    read_at_other_temperature,  ///< the batch is right; it was cold or warm at the meter
    set_before_dilution         ///< brought to pH as a tenfold stock, then diluted
};
/// `titrant_off`, `other_hydrate` ...
std::string_view mistake_word(MistakeKind kind);

/// One single mistake that could be behind the reading.
struct Mistake {
    MistakeKind kind = MistakeKind::meter;
    std::optional<std::uint16_t> reagent;    ///< the article of the recipe that it concerns
    std::optional<std::uint16_t> taken;      ///< the article taken in its place
    std::optional<double> factor;            ///< amount (or volume) put in, over the planned one
    std::optional<Temperature> temperature;  ///< of a mistake about temperature
    PH reading;                              ///< what the meter should then show
    std::optional<PH> before;                ///< and before the titrant, when that reading was given
    double reading_expanded_k2 = 0;          ///< model and meter (0.02) together
    bool consistent = false;                 ///< reading met within that
    double plausibility = 0;                 ///< 0 to 1: share among everything tried
    std::optional<Correction> correction;    ///< if this is what happened; none when the titrant cannot
    std::optional<Weighing> to_weigh_in;     ///< what is then missing and can still be added
};

enum class Verdict : std::uint8_t {
    leave_it,       ///< within what two good meters agree to
    add_titrant,    ///< `correction` holds
    other_titrant,  ///< the titrant at hand moves it the wrong way; `correction` is with the other kind
    discard         ///< better made again; `reasons` say why
};
/// `leave_it`, `add_titrant`, `other_titrant`, `discard`.
std::string_view verdict_word(Verdict verdict);

/// What is off, as strong acid or base beside the plan.
enum class OffBy : std::uint8_t { nothing, acid_missing, acid_in_excess, base_missing, base_in_excess };
std::string_view off_by_word(OffBy off);

/// What to do with a batch that is off its pH.
struct Adjustment {
    OffBatch batch;
    Plan plan;
    Titrant at_hand;
    Volume present_volume;
    PH expected;                        ///< what the meter should show now, at the bench
    std::optional<PH> expected_before;  ///< before the titrant, when that reading was given
    double expected_expanded_k2 = 0;    ///< of the model alone
    OffBy off_by = OffBy::nothing;
    Amount off;           ///< strong acid or base, consistent with the reading
    Preparation as_read;  ///< the plan with that put right: reads what the meter reads
    Verdict verdict = Verdict::leave_it;
    std::vector<Warning> reasons;  ///< why it is better discarded, or why the titrant will not do
    std::optional<Correction> correction;
    std::vector<Mistake> mistakes;  ///< most plausible first; empty when the batch is left as it is
    std::vector<Warning> warnings;
};

/// Works out what is off and what brings the batch to its label at the temperature of use.
/// It takes the recipe's amounts as put in: of a batch that was titrated to the meter only the correction holds, not
/// the causes. Errors: those of `plan_recipe`; `no_target` for a label without pH, `present_volume`, `bad_titrant`
/// (input).
Adjustment adjust(const Table& table, const OffBatch& batch, const Titrant& at_hand, const ActivityModel& model);

}  // namespace carboy
