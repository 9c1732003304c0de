#include <algorithm>
#include <array>

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "constants/arena.h"
#include "constants/table_builder.h"

namespace carboy {

void TableBuilder::read_vessels(const DocumentNode& document) {
    constexpr std::array kinds{"flask", "pipette", "scale"};
    constexpr double largest_mL = 1e6;
    if (!document.has("vessels")) {
        return;
    }
    for (const DocumentNode& node : document.at("vessels").elements()) {
        if (!node.is_object_with({"name", "names", "kind", "at_hand", "capacity_mL", "tolerance_mL", "reads_to_mL",
                                  "source", "evidence", "note"})) {
            continue;
        }
        Vessel vessel{};
        vessel.name = keep(node.required_text("name"));
        vessel.names = keep_all(node.optional_texts("names"));
        const std::string kind = node.required_text("kind");
        const auto* const known = std::find(kinds.begin(), kinds.end(), kind);
        if (known == kinds.end()) {
            node.fault(fmt::format("'{}' is no kind of vessel", kind),
                       fmt::format("one of: {}", fmt::join(kinds, ", ")));
            continue;
        }
        vessel.kind = static_cast<VesselKind>(known - kinds.begin());
        vessel.at_hand = node.has("at_hand") && node.at("at_hand").boolean();
        const Provenance provenance = read_provenance(node, {});
        vessel.capacity_mL = read_figure(node, "capacity_mL", 1e-3, largest_mL, provenance);
        vessel.tolerance_mL = read_figure(node, "tolerance_mL", 1e-6, largest_mL, provenance);
        vessel.reads_to_mL = read_figure(node, "reads_to_mL", 1e-6, largest_mL, provenance);
        if (!vessel.capacity_mL.known() || !vessel.tolerance_mL.known()) {
            node.fault("'capacity_mL' and 'tolerance_mL' are needed", "give each as {\"value\": 100}");
            continue;
        }
        if (!vessel.reads_to_mL.known()) {
            if (vessel.kind == VesselKind::scale) {
                node.fault("a vessel with a scale needs 'reads_to_mL'", "give it as {\"value\": 0.1}");
                continue;
            }
            vessel.reads_to_mL = vessel.capacity_mL;
        }
        paths_[fmt::format("vessel {}", vessel.name)] = node.path();
        place(vessels_, vessel, &Vessel::name, "vessel");
    }
}

}  // namespace carboy
