#pragma once

#include <algorithm>
#include <string>
#include <string_view>

#include "carboy/error.h"

#include "catch_shim.h"

namespace carboy::test {

/// A text that must be refused, and how.
struct Refusal {
    std::string line;
    std::string code;
    std::string at;     ///< exactly the bytes under the caret; empty where there is nothing to point at
    std::string words;  ///< what the message must say: the text at fault, or what is missing
};

/// Reads the line and checks that it is refused as it should be.
template <class Read>
void check_refused(const Refusal& refusal, std::string_view where, Read read) {
    INFO("'" << refusal.line << "'");
    try {
        read(refusal.line);
        FAIL_CHECK("was read");
    } catch (const Error& error) {
        const Error::Excerpt& excerpt = error.excerpt();
        INFO(error.code() << ": " << error.message() << " | " << error.where() << " | " << error.help());
        CHECK(error.kind() == ErrorKind::input);
        CHECK(error.code() == refusal.code);
        CHECK(error.message().find(refusal.words) != std::string::npos);
        CHECK(error.where().starts_with(where));
        CHECK((excerpt.text.empty() || excerpt.text == refusal.line));
        CHECK(excerpt.begin <= excerpt.text.size());
        CHECK(excerpt.text.substr(excerpt.begin, excerpt.length) == refusal.at);
    }
}

/// The help of the error that reading the line ends in; empty when it is read.
template <class Read>
std::string help_of(const std::string& line, Read read) {
    try {
        read(line);
    } catch (const Error& error) {
        return error.help();
    }
    return {};
}

}  // namespace carboy::test
