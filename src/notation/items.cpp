#include "notation/items.h"

#include <algorithm>
#include <array>
#include <string_view>

namespace carboy {

namespace {

constexpr std::array hyphens{std::string_view("-"), std::string_view("\u2010"), std::string_view("\u2011"),
                             std::string_view("\u2013"), std::string_view("\u2212")};
constexpr std::array primes{std::string_view("'"), std::string_view("\u2032"), std::string_view("\u2019"),
                            std::string_view("\u2033")};

bool is_digit(char c) {
    return c >= '0' && c <= '9';
}

/// Bytes of one of the spellings at the front of the text, 0 when none is there.
template <std::size_t count>
std::size_t length_of_any(const std::array<std::string_view, count>& spellings, std::string_view text) {
    const auto* found = std::find_if(spellings.begin(), spellings.end(), [&](std::string_view s) {
        return !text.empty() && text.front() == s.front() && text.starts_with(s);
    });
    return found == spellings.end() ? 0 : found->size();
}

/// Bytes of the locant at the front: `1`, `12`, `2'`, `2''`, `2R`, `N`, `N'`; 0 when there is none.
std::size_t locant_length(std::string_view text) {
    std::size_t length = 0;
    while (length < text.size() && is_digit(text[length])) {
        ++length;
    }
    if (length > 0 && length < text.size() && (text[length] == 'R' || text[length] == 'S')) {
        ++length;
    } else if (length == 0 && (text.starts_with('N') || text.starts_with('O') || text.starts_with('S'))) {
        length = 1;
    }
    while (length > 0) {
        const std::size_t prime = length_of_any(primes, text.substr(length));
        if (prime == 0) {
            break;
        }
        length += prime;
    }
    return length;
}

/// Bytes of the locants at the front, with the commas between them; 0 unless a hyphen or closing bracket follows.
/// `commas` counts the commas among them.
std::size_t locants_length(std::string_view text, std::size_t& commas) {
    std::size_t length = 0;
    commas = 0;
    for (;;) {
        const std::size_t locant = locant_length(text.substr(length));
        if (locant == 0) {
            return 0;
        }
        length += locant;
        if (length >= text.size() || text[length] != ',') {
            break;
        }
        ++length;
        ++commas;
    }
    const std::string_view after = text.substr(length);
    const std::size_t hyphen = length_of_any(hyphens, after);
    const bool word_follows =
        hyphen > 0 && after.size() > hyphen && after[hyphen] != ',' && space_length(after.substr(hyphen)) == 0;
    return word_follows || after.starts_with(')') ? length : 0;
}

/// Bytes of the separator between items at `at`, 0 when there is none.
std::size_t separator_length(std::string_view text, std::size_t at, bool after_space) {
    if (text[at] == ',' || text[at] == ';') {
        return 1;
    }
    for (const std::string_view word : {"+", "and"}) {
        const std::string_view rest = text.substr(at);
        if (after_space && lower_case(rest.substr(0, word.size())) == word && rest.size() > word.size() &&
            space_length(rest.substr(word.size())) > 0) {
            return word.size();
        }
    }
    return 0;
}

}  // namespace

std::vector<Part> items_of(const Line& line) {
    const auto text = line.text();
    std::vector<Part> items;
    std::size_t begin = 0;
    bool word_begins = true;
    bool after_space = false;
    for (std::size_t i = 0; i <= text.size();) {
        const std::size_t divider = i < text.size() ? separator_length(text, i, after_space) : 1;
        if (divider == 0) {
            const std::string_view rest = text.substr(i);
            after_space = space_length(rest) > 0;
            std::size_t commas = 0;
            const std::size_t locants = word_begins ? locants_length(rest, commas) : 0;
            const std::size_t separator = std::max(space_length(rest), length_of_any(hyphens, rest));
            word_begins = separator > 0 || rest.front() == '(' || rest.front() == '[';
            i += commas > 0 ? locants : std::max<std::size_t>(separator, 1);
            continue;
        }
        const Part item = trimmed(line, {begin, i});
        // `..., and 1 mM EDTA`: the word after a comma is no second separator.
        const bool doubled = item.empty() && divider > 1 && !items.empty();
        if (item.empty() && !doubled) {
            line.fail("empty_item", "an item is missing beside this separator", i == text.size() && i > 0 ? i - 1 : i,
                      i + 1, "take the extra separator out");
        }
        if (!doubled) {
            items.push_back(item);
        }
        i += divider;
        begin = i;
        word_begins = true;
        after_space = false;
    }
    return items;
}

bool begins_with_locant(std::string_view text) {
    std::size_t commas = 0;
    return !text.empty() && is_digit(text.front()) && locants_length(text, commas) > 0;
}

}  // namespace carboy
