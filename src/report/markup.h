#pragma once

#include <initializer_list>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace carboy {

/// Writes HTML and SVG: every text and attribute value is escaped, every element that is opened is closed. Elements
/// without content are written `<br/>`, which both languages read.
class Markup {
public:
    /// An attribute with an empty name is left out, so that one can be given under a condition.
    using Attributes = std::initializer_list<std::pair<std::string_view, std::string_view>>;

    /// Something that is no element: a doctype, a style sheet. Written as it is.
    void raw(std::string_view text) { out_ += text; }
    void open(std::string_view element, Attributes attributes = {});
    /// Closes the element opened last.
    void close();
    void text(std::string_view text);
    /// An element with nothing but text in it.
    void element(std::string_view element, std::string_view content, Attributes attributes = {});
    /// An element without content.
    void empty(std::string_view element, Attributes attributes = {});

    /// All that was written; closes what is still open.
    std::string finish();

private:
    void tag(std::string_view element, Attributes attributes);

    std::string out_;
    std::vector<std::string> open_;
};

}  // namespace carboy
