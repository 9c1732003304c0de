#pragma once

#include <string>
#include <string_view>
#include <vector>

namespace carboy {

/// A page of text for a terminal or paper: 80 columns, headings, wrapped paragraphs, aligned rows. Colour is only
/// emphasis; without it nothing is lost.
class Page {
public:
    static constexpr std::size_t width = 80;

    explicit Page(bool colour) : colour_(colour) {}

    /// First line: what this is, with something short flushed right.
    void title(std::string_view left, std::string_view right);
    /// A blank line and a word or two in capitals.
    void heading(std::string_view text);
    /// Wrapped text. `first` stands before the first line; later lines are indented to its width.
    void paragraph(std::string_view text, std::string_view first = "  ");
    /// The same, emphasised.
    void notice(std::string_view text, std::string_view first = "  ");
    void blank() { text_ += '\n'; }

    enum class Align { left, right };
    struct Column {
        std::size_t width = 0;
        Align align = Align::left;
    };
    /// Cells padded to the columns; text too long for its column wraps within it.
    void row(const std::vector<Column>& columns, const std::vector<std::string>& cells, bool emphasised = false);

    const std::string& text() const { return text_; }

private:
    void line(std::string_view text, std::string_view style);

    bool colour_;
    std::string text_;
};

}  // namespace carboy
