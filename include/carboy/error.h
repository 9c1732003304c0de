#pragma once

#include <stdexcept>
#include <string>
#include <utility>

namespace carboy {

/// What kind of thing went wrong; the edge of the program (command line, batch) turns it into an exit status.
enum class ErrorKind {
    input,      ///< what was typed or sent cannot be understood (exit status 2)
    no_recipe,  ///< understood, but chemistry allows no answer (exit status 1)
    file,       ///< a file could not be read or written (exit status 3)
    data,       ///< the constants or shelf file is invalid (exit status 4)
    defect      ///< the program itself is wrong (exit status 70)
};

/// The one error of the project: a stable code for programs, and for people what happened, where, and what to do.
class Error : public std::runtime_error {
public:
    Error(ErrorKind kind, std::string code, const std::string& message, std::string where = {}, std::string help = {})
        : std::runtime_error(message),
          kind_(kind),
          code_(std::move(code)),
          where_(std::move(where)),
          help_(std::move(help)) {}

    ErrorKind kind() const { return kind_; }
    /// Stable snake_case identifier, e.g. `unreachable_target`.
    const std::string& code() const { return code_; }
    std::string message() const { return what(); }
    /// Place in the user's own words, e.g. `label, column 7`; empty when the fault has no place.
    const std::string& where() const { return where_; }
    /// What to do about it; may be empty.
    const std::string& help() const { return help_; }

    /// The line that was being read and the part of it at fault, for the caret of the text report.
    struct Excerpt {
        std::string text;        ///< the whole line as typed
        std::size_t begin = 0;   ///< first byte at fault
        std::size_t length = 0;  ///< bytes at fault, at least 1 when text is not empty
    };
    const Excerpt& excerpt() const { return excerpt_; }
    Error& with_excerpt(Excerpt excerpt) {
        excerpt_ = std::move(excerpt);
        return *this;
    }

    /// The caller's own id of the request that failed; empty when it gave none.
    const std::string& id() const { return id_; }
    Error& with_id(std::string id) {
        id_ = std::move(id);
        return *this;
    }

private:
    ErrorKind kind_;
    std::string code_;
    std::string where_;
    std::string help_;
    Excerpt excerpt_;
    std::string id_;
};

}  // namespace carboy
