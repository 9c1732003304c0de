#include "plot/svg_text.h"

#include <algorithm>

namespace carboy {

std::string svg_escaped(std::string_view text) {
    std::string escaped;
    for (const char c : text) {
        switch (c) {
            case '&':
                escaped += "&amp;";
                break;
            case '<':
                escaped += "&lt;";
                break;
            case '>':
                escaped += "&gt;";
                break;
            case '"':
                escaped += "&quot;";
                break;
            default:
                escaped += c;
        }
    }
    return escaped;
}

std::string svg_number(std::string_view text) {
    return text.substr(0, 1) == "-" ? "−" + std::string(text.substr(1)) : std::string(text);
}

double svg_width(std::string_view text, double size) {
    constexpr double per_character = 0.56;  // of the size, mean of mixed text in a wide sans serif
    const auto characters = std::count_if(text.begin(), text.end(),
                                          [](char c) { return (static_cast<unsigned char>(c) & 0xC0U) != 0x80U; });
    return per_character * size * static_cast<double>(characters);
}

std::vector<std::string> svg_lines(std::string_view text, double width, double size) {
    std::vector<std::string> lines;
    while (!text.empty()) {
        const std::size_t end = std::min(text.find(' '), text.size());
        const std::string word(text.substr(0, end));
        text.remove_prefix(std::min(end + 1, text.size()));
        if (word.empty()) {
            continue;
        }
        if (lines.empty() || svg_width(lines.back() + " " + word, size) > width) {
            lines.push_back(word);
        } else {
            lines.back() += " " + word;
        }
    }
    return lines;
}

}  // namespace carboy
