#include "report/text_width.h"

#include <algorithm>
#include <array>

namespace carboy {

namespace {

/// Advance widths of Helvetica from space to tilde, thousandths of the size. Adobe Font Metrics, from memory; only line
/// breaks depend on them.
constexpr std::array<int, 95> widths{278,  278, 355, 556, 556, 889, 667, 191, 333, 333, 389, 584, 278, 333, 278, 278,
                                     556,  556, 556, 556, 556, 556, 556, 556, 556, 556, 278, 278, 584, 584, 584, 556,
                                     1015, 667, 667, 722, 722, 667, 611, 778, 722, 278, 500, 667, 556, 833, 722, 778,
                                     667,  778, 722, 667, 611, 722, 667, 944, 667, 667, 611, 278, 278, 278, 469, 556,
                                     333,  556, 556, 500, 556, 556, 278, 556, 556, 222, 222, 500, 222, 833, 556, 556,
                                     556,  556, 333, 500, 278, 556, 500, 722, 500, 500, 500, 334, 260, 334, 584};
constexpr double other_width = 0.6;
constexpr double bold_factor = 1.07;

/// True for a word that no line should end with: a number before its unit, `pH` and `at` before their number.
bool leans_on_next(std::string_view word) {
    return word == "pH" || word == "at" || word == "%" || word == "±" ||
           word.find_first_not_of("0123456789.") == std::string_view::npos;
}

}  // namespace

double text_width(std::string_view text, bool bold) {
    double width = 0;
    for (const char c : text) {
        const auto byte = static_cast<unsigned char>(c);
        if (byte >= 0x20 && byte < 0x7F) {
            width += widths[byte - 0x20U] / 1000.0;
        } else if ((byte & 0xC0U) != 0x80U) {
            width += other_width;
        }
    }
    return width * (bold ? bold_factor : 1);
}

std::vector<std::string> broken_to(std::string_view text, double width, bool bold) {
    std::vector<std::string> lines;
    std::string word;
    while (!text.empty()) {
        const std::size_t end = std::min(text.find(' '), text.size());
        word += text.substr(0, end);
        const bool leans = !word.empty() && leans_on_next(text.substr(0, end)) && end < text.size();
        text.remove_prefix(std::min(end + 1, text.size()));
        if (leans) {
            word += ' ';
        }
        if (word.empty() || leans) {
            continue;
        }
        if (lines.empty() || text_width(lines.back() + " " + word, bold) > width) {
            lines.push_back(word);
        } else {
            lines.back() += " " + word;
        }
        word.clear();
    }
    return lines;
}

}  // namespace carboy
