#include "report/markup.h"

#include <algorithm>
#include <array>

namespace carboy {

namespace {

void escape_into(std::string& out, std::string_view text) {
    for (const char c : text) {
        switch (c) {
            case '&':
                out += "&amp;";
                break;
            case '<':
                out += "&lt;";
                break;
            case '>':
                out += "&gt;";
                break;
            case '"':
                out += "&quot;";
                break;
            case '\'':
                out += "&#39;";
                break;
            default:
                // XML allows no control characters but these three; a label line may bring any.
                out += static_cast<unsigned char>(c) >= 0x20 || c == '\n' || c == '\t' || c == '\r' ? c : ' ';
        }
    }
}

/// Elements that stand inside a line: no line break after them, since it would be read as a space.
bool is_inline(std::string_view element) {
    constexpr std::array names{"b", "i", "span", "strong", "sub", "sup", "tspan", "label", "input"};
    return std::find(names.begin(), names.end(), element) != names.end();
}

}  // namespace

void Markup::tag(std::string_view element, Attributes attributes) {
    out_ += '<';
    out_ += element;
    for (const auto& [name, value] : attributes) {
        if (!name.empty()) {
            out_ += ' ';
            out_ += name;
            out_ += "=\"";
            escape_into(out_, value);
            out_ += '"';
        }
    }
}

void Markup::open(std::string_view element, Attributes attributes) {
    tag(element, attributes);
    out_ += '>';
    open_.emplace_back(element);
}

void Markup::close() {
    const std::string element = std::move(open_.back());
    open_.pop_back();
    out_ += "</" + element + (is_inline(element) ? ">" : ">\n");
}

void Markup::text(std::string_view text) {
    escape_into(out_, text);
}

void Markup::element(std::string_view element, std::string_view content, Attributes attributes) {
    open(element, attributes);
    text(content);
    close();
}

void Markup::empty(std::string_view element, Attributes attributes) {
    tag(element, attributes);
    out_ += is_inline(element) ? "/>" : "/>\n";
}

std::string Markup::finish() {
    while (!open_.empty()) {
        close();
    }
    return std::move(out_);
}

}  // namespace carboy
