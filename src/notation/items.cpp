#include "notation/items.h"

namespace carboy {

namespace {

bool is_digit(char c) {
    return c >= '0' && c <= '9';
}
bool is_letter(char c) {
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

/// Locants in a name: `1,3-`, `N,N-`, `N,N'-`, `1,4-`: digit or N, comma, digit or N, then a hyphen or another comma or
/// prime.
bool joins_locants(std::string_view text, std::size_t comma) {
    if (comma == 0 || comma + 2 >= text.size()) {
        return false;
    }
    const char before = text[comma - 1];
    const char after = text[comma + 1];
    const bool digits = is_digit(before) && is_digit(after);
    const bool nitrogens = (before == 'N' || before == '\'') && after == 'N';
    std::size_t next = comma + 2;
    while (digits && next < text.size() && is_digit(text[next])) {
        ++next;
    }
    if (next >= text.size() || !(digits || nitrogens)) {
        return false;
    }
    if (text[next] == '\'' || (nitrogens && text[next] == ',')) {
        return true;
    }
    return text[next] == '-' && next + 1 < text.size() &&
           (is_letter(text[next + 1]) || text[next + 1] == '(' || text[next + 1] == '[');
}

}  // namespace

std::vector<Part> items_of(const Line& line) {
    const auto text = line.text();
    std::vector<Part> items;
    std::size_t begin = 0;
    for (std::size_t i = 0; i <= text.size(); ++i) {
        if (i < text.size() && (text[i] != ',' || joins_locants(text, i))) {
            continue;
        }
        const Part item = trimmed(line, {begin, i});
        if (item.empty()) {
            line.fail("empty_item", "nothing stands between the commas here", i == text.size() && i > 0 ? i - 1 : i,
                      i + 1, "take the extra comma out");
        }
        items.push_back(item);
        begin = i + 1;
    }
    return items;
}

}  // namespace carboy
