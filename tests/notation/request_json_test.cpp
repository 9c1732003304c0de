#include "carboy/request_json.h"

#include "carboy/error.h"
#include "carboy/notation.h"

#include "catch_shim.h"

using namespace carboy;

namespace {

/// Reads a request that must be refused and returns its error.
Error error_of(const char* text) {
    try {
        read_request(text, bundled_table());
    } catch (const Error& error) {
        return error;
    }
    FAIL("was read: " << text);
    return {ErrorKind::defect, "not_reached", "not reached"};
}

}  // namespace

TEST_CASE("request: an error keeps the id of its request and names the place by keys", "[notation][request]") {
    const Error label = error_of(R"({"id":"B-7","label":"50 mM Trsi, pH 8","volume":"1 L"})");
    CHECK(label.id() == "B-7");
    CHECK(label.where() == "request, label, column 7");
    const Error part =
        error_of(R"({"buffers":[{"system":"HEPES","concentration":"50 mm"}],"volume":"1 L","id":"B-8"})");
    CHECK(part.id() == "B-8");
    CHECK(part.where() == "request, buffers[0], concentration, column 4");
    const Error unknown = error_of(R"({"id":"B-9","label":"50 mM Tris, pH 8","volum":"1 L"})");
    CHECK(unknown.id() == "B-9");
    CHECK(unknown.where() == "request");
    CHECK(error_of(R"({"label":"50 mM Tris, pH 8","volume":"1"})").id().empty());
    CHECK(error_of(R"({"id":7,"label":"50 mM Tris, pH 8","volume":"1 L"})").id().empty());
}

TEST_CASE("request: a system may be named by the article to make it from", "[notation][request]") {
    const auto buffer_of = [](const char* buffer) {
        return read_request(std::string(R"({"buffers":[)") + buffer + R"(],"target":{"pH":7},"volume":"1 L"})",
                            bundled_table())
            .buffers.at(0);
    };
    const auto form_of = [](const BufferItem& item) {
        return item.named_form ? bundled_table().reagents[*item.named_form].formula : std::string_view();
    };
    CHECK(form_of(buffer_of(R"({"system":"Na2HPO4","concentration":"50 mmol/L"})")) == "Na2HPO4");
    CHECK(form_of(buffer_of(R"({"system":"sodium acetate","concentration":"50 mmol/L"})")) == "C2H3NaO2·3H2O");
    CHECK(form_of(buffer_of(R"({"system":"phosphate","concentration":"50 mmol/L","cation":"Na+"})")).empty());
    // The salt stands only as long as the counter-ion beside it is its own.
    CHECK(form_of(buffer_of(R"({"system":"Na2HPO4","concentration":"50 mmol/L","cation":"Na+"})")) == "Na2HPO4");
    CHECK(form_of(buffer_of(R"({"system":"Na2HPO4","concentration":"50 mmol/L","cation":"K+"})")).empty());
    const BufferItem borax = buffer_of(R"({"system":"borax","concentration":"25 mmol/L"})");
    CHECK(name_of(bundled_table(), borax.system) == "borate");
    CHECK(borax.concentration.value == Approx(0.1));
}
