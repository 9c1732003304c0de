#include "cli/subject.h"

#include <algorithm>

#include "carboy/notation.h"
#include "carboy/plan.h"
#include "carboy/request_json.h"
#include "carboy/sweep.h"

#include "notation/items.h"
#include "notation/ph_item.h"

namespace carboy::cli {

namespace {

bool is_label(const std::string& text) {
    const Line line(text, "label or mixture");
    const std::vector<Part> items = with_ph_apart(line, items_of(line));
    return std::any_of(items.begin(), items.end(), [&](Part item) { return is_ph_item(text_of(line, item)); });
}

Subject planned(const std::string& line, const Table& table, const SharedOptions& options,
                std::optional<Volume> volume) {
    Request request = request_from_label(line, table);
    const auto on_label = read_label(line, table).ph_at;
    const auto at = options.use_at();
    request.use_at = on_label.value_or(at.value_or(Temperature{}));
    request.volume = volume.value_or(Volume::litres(1));
    request.prepare_at = options.bench_at().value_or(Temperature{});
    const Plan plan = plan_recipe(table, request, options.activity_model());
    Subject subject{plan.preparation, at.value_or(request.use_at), {}};
    const auto of_buffer = [&](std::uint16_t reagent) {
        const auto brings = [&](const auto& item) {
            return item.reagent == reagent && (item.purpose == Purpose::buffer || item.purpose == Purpose::titrant);
        };
        return std::any_of(plan.weigh.begin(), plan.weigh.end(), brings) ||
               std::any_of(plan.measure.begin(), plan.measure.end(), brings);
    };
    for (const Portion& portion : subject.preparation.portions) {
        subject.of_buffer.push_back(of_buffer(portion.reagent));
    }
    return subject;
}

}  // namespace

Subject read_subject(const std::string& line, const Table& table, const SharedOptions& options,
                     std::optional<Volume> volume) {
    if (is_label(line)) {
        return planned(line, table, options, volume);
    }
    Subject subject{read_mixture(line, table, options.bench_at().value_or(Temperature{})),
                    options.use_at().value_or(Temperature{}),
                    {}};
    for (const Portion& portion : subject.preparation.portions) {
        subject.of_buffer.push_back(belongs_to_buffer(table, table.reagents[portion.reagent]));
    }
    return subject;
}

}  // namespace carboy::cli
