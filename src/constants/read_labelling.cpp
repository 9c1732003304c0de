#include "constants/arena.h"
#include "constants/table_builder.h"

namespace carboy {

void TableBuilder::read_pictograms(const DocumentNode& document) {
    if (!document.has("pictograms")) {
        return;
    }
    for (const auto& [key, node] : document.at("pictograms").members()) {
        if (!node.is_object_with({"code", "name", "statements", "unless", "source", "evidence", "note"})) {
            continue;
        }
        const Provenance provenance = read_provenance(node, {});
        PictogramRule rule{keep(key),
                           keep(node.required_text("code")),
                           keep(node.required_text("name")),
                           keep_all(node.optional_texts("statements")),
                           keep_all(node.optional_texts("unless")),
                           provenance.source,
                           provenance.evidence};
        if (rule.statements.empty()) {
            node.fault("'statements' is missing", "list the hazard statements that call for it");
            continue;
        }
        place(pictograms_, rule, &PictogramRule::key, "pictogram");
    }
}

void TableBuilder::read_label_stock(const DocumentNode& document) {
    constexpr double least_mm = 25;  // below this no QR code that a telephone reads fits
    constexpr double most_mm = 420;
    if (!document.has("label_stock")) {
        return;
    }
    for (const DocumentNode& node : document.at("label_stock").elements()) {
        if (!node.is_object_with({"name", "width_mm", "height_mm", "source", "evidence", "note"})) {
            continue;
        }
        if (!node.has("width_mm") || !node.has("height_mm")) {
            node.fault("'width_mm' and 'height_mm' are needed");
            continue;
        }
        const Provenance provenance = read_provenance(node, {});
        place(label_stock_,
              LabelStock{keep(node.required_text("name")), node.at("width_mm").number(least_mm, most_mm),
                         node.at("height_mm").number(least_mm, most_mm), provenance.source, provenance.evidence},
              &LabelStock::name, "label stock");
    }
}

}  // namespace carboy
