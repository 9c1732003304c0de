#include "constants/name.h"

#include <algorithm>
#include <array>
#include <utility>

namespace carboy {

namespace {

struct Folding {
    std::string_view typographic;
    std::string_view plain;
};

// UTF-8 sequences that people paste from documents.
constexpr std::array foldings{
    Folding{"\u00B7", "."},    Folding{"\u2022", "."},     Folding{"\u2219", "."}, Folding{"\u22C5", "."},
    Folding{"\u2010", ""},     Folding{"\u2011", ""},      Folding{"\u2012", ""},  Folding{"\u2013", ""},
    Folding{"\u2014", ""},     Folding{"\u2212", ""},      Folding{"\u00A0", ""},  Folding{"\u202F", ""},
    Folding{"\u2009", ""},     Folding{"\u2080", "0"},     Folding{"\u2081", "1"}, Folding{"\u2082", "2"},
    Folding{"\u2083", "3"},    Folding{"\u2084", "4"},     Folding{"\u2085", "5"}, Folding{"\u2086", "6"},
    Folding{"\u2087", "7"},    Folding{"\u2088", "8"},     Folding{"\u2089", "9"}, Folding{"\u03B1", "alpha"},
    Folding{"\u03B2", "beta"}, Folding{"\u03B3", "gamma"}, Folding{"\u2032", "'"}, Folding{"\u2019", "'"}};

}  // namespace

std::string fold_name(std::string_view text) {
    std::string folded;
    folded.reserve(text.size());
    while (!text.empty()) {
        const char c = text.front();
        if (static_cast<unsigned char>(c) >= 0x80) {
            const auto* hit = std::find_if(foldings.begin(), foldings.end(),
                                           [&](const Folding& f) { return text.starts_with(f.typographic); });
            if (hit != foldings.end()) {
                folded += hit->plain;
                text.remove_prefix(hit->typographic.size());
                continue;
            }
        }
        if (c >= 'A' && c <= 'Z') {
            folded += static_cast<char>(c - 'A' + 'a');
        } else if (c != ' ' && c != '-' && c != '_' && c != '\t') {
            folded += c;
        }
        text.remove_prefix(1);
    }
    return folded;
}

}  // namespace carboy
