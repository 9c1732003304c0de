#pragma once

#include <string>

#include "catch_shim.h"
#include "support/run_program.h"

namespace carboy::test {

/// The strictest reader there is finds nothing wrong with a page or a picture.
inline void check_is_xml(const std::string& text) {
    const auto lint = run_program("xmllint", {"--noout", "-"}, text);
    INFO(lint.err);
    if (!missing(lint.status, "libxml2-utils")) {
        CHECK(lint.status == 0);
    }
}

}  // namespace carboy::test
