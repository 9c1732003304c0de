#include "report/prediction_text.h"

#include <fmt/format.h>

#include "report/explain_text.h"
#include "report/figure_text.h"
#include "report/page.h"

namespace carboy {

namespace {

const std::vector<Page::Column> result_columns{{2}, {26}, {52}};
const std::vector<Page::Column> species_columns{{2}, {22}, {20}, {16, Page::Align::right}, {10, Page::Align::right}};

void species_table(Page& page, const Prediction& prediction) {
    page.heading("SPECIES");
    page.row(species_columns, {"", "of", "species", "mol/kg", "γ"});
    std::string_view last;
    for (const PredictedSpecies& species : prediction.species) {
        page.row(species_columns, {"", species.owner == last ? "" : std::string(species.owner),
                                   std::string(species.formula), fmt::format("{:.4e}", species.molality.mol_per_kg()),
                                   fmt::format("{:.4f}", species.activity_coefficient)});
        last = species.owner;
    }
}

}  // namespace

std::string prediction_text(std::string_view mixture, const Prediction& prediction, const Table& table,
                            const TextStyle& style) {
    Page page(style.colour);
    page.title(mixture, temperature_text(prediction.temperature));
    page.blank();
    page.row(result_columns,
             {"", fmt::format("pH {:.3f} ± {:.3f}", prediction.ph.value(), prediction.uncertainty.expanded_k2),
              "expanded uncertainty, k = 2; amounts and meter not included"},
             true);
    page.row(result_columns, {"", "ionic strength", molality_text(prediction.ionic_strength)});
    page.row(result_columns, {"", "buffer value", molality_text(prediction.buffer_value) + " per pH"});
    if (prediction.hand_estimate) {
        page.row(result_columns,
                 {"", "sum on paper",
                  fmt::format("pH {:.2f}, with pK at 25 °C and no activities", prediction.hand_estimate->value())});
    }
    page.row(result_columns, {"", "activity model", std::string(prediction.activity_model)});
    if (!prediction.warnings.empty()) {
        page.heading("TAKE NOTE");
        for (const Warning& warning : prediction.warnings) {
            page.notice(warning.message, "  - ");
        }
    }
    species_table(page, prediction);
    if (style.explain) {
        explain_prediction(page, prediction, table);
    }
    return page.text();
}

}  // namespace carboy
