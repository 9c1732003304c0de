#include "json/strict_json.h"

#include <optional>
#include <set>
#include <string>
#include <vector>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy {

using nlohmann::json;

json parse_strictly(std::string_view text, std::string_view where) {
    std::vector<std::set<std::string>> open;
    std::optional<std::string> doubled;
    const auto watch = [&](int, json::parse_event_t event, json& value) {
        if (event == json::parse_event_t::object_start) {
            open.emplace_back();
        } else if (event == json::parse_event_t::object_end) {
            open.pop_back();
        } else if (event == json::parse_event_t::key && !open.back().insert(value.get<std::string>()).second) {
            doubled = value.get<std::string>();
        }
        return true;
    };
    json document;
    try {
        document = json::parse(text, watch);
    } catch (const json::exception& error) {
        // "[json.exception.parse_error.101] parse error at line 1, column 5: ..." without the library's own tag.
        const std::string told = error.what();
        throw Error(ErrorKind::input, "invalid_json", "this is not JSON: " + told.substr(told.find("] ") + 2),
                    std::string(where));
    }
    if (doubled) {
        throw Error(ErrorKind::input, "duplicate_key", fmt::format("the key '{}' stands twice in one object", *doubled),
                    std::string(where), "keep one of them");
    }
    return document;
}

}  // namespace carboy
