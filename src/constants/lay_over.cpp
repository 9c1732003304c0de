#include <fmt/format.h>

#include "carboy/constants_file.h"
#include "carboy/error.h"

#include "constants/arena.h"
#include "constants/sha256.h"
#include "constants/table_builder.h"
#include "json/strict_json.h"

namespace carboy {

namespace {

constexpr auto format_word = "carboy-constants/1";

bool head_is_sound(const DocumentNode& node) {
    if (!node.is_object_with({"schema", "sources", "elements", "hazards", "cautions", "vessels", "spectators",
                              "systems", "reagents", "traits", "note"})) {
        return false;
    }
    if (!node.has("schema")) {
        node.fault("'schema' is missing", fmt::format("begin with \"schema\": \"{}\"", format_word));
    } else if (node.at("schema").text() != format_word) {
        node.at("schema").fault("this is not a format that this program reads",
                                fmt::format("it reads \"{}\"", format_word));
    }
    return true;
}

}  // namespace

ConstantsOverlay lay_over(const Table& base, const std::vector<ConstantsDocument>& documents) {
    ConstantsOverlay overlay;
    std::vector<nlohmann::json> parsed;
    std::string fingerprint(base.sha256);
    for (const ConstantsDocument& document : documents) {
        try {
            parsed.push_back(parse_strictly(document.text, document.name));
            fingerprint += document.text;
        } catch (const Error& error) {
            overlay.faults.push_back({{}, error.message(), error.help()});
        }
    }
    TableBuilder builder(base);
    std::vector<DocumentNode> nodes;
    for (std::size_t i = 0; i < parsed.size(); ++i) {
        // With several documents, the path begins with the document's name.
        DocumentNode node(parsed[i], documents.size() > 1 ? documents[i].name : std::string(), builder.faults);
        if (head_is_sound(node)) {
            nodes.push_back(node);
        }
    }
    for (const auto section :
         {&TableBuilder::read_sources, &TableBuilder::read_elements, &TableBuilder::read_hazards,
          &TableBuilder::read_cautions, &TableBuilder::read_vessels, &TableBuilder::read_spectators,
          &TableBuilder::read_systems, &TableBuilder::read_reagents, &TableBuilder::read_traits}) {
        for (const DocumentNode& node : nodes) {
            (builder.*section)(node);
        }
    }
    const std::string version = base.version.empty() ? std::string() : fmt::format("{}+overlay", base.version);
    overlay.table = builder.finish(version, sha256_hex(fingerprint));
    overlay.changes = std::move(builder.changes);
    overlay.faults.insert(overlay.faults.end(), builder.faults.begin(), builder.faults.end());
    return overlay;
}

ConstantsOverlay lay_over(const Table& base, std::string_view json_text) {
    return lay_over(base, std::vector<ConstantsDocument>{{"document", std::string(json_text)}});
}

}  // namespace carboy
