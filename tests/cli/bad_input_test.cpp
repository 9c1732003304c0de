#include <nlohmann/json.hpp>

#include "catch_shim.h"
#include "support/run_program.h"

using carboy::test::run_carboy;
using carboy::test::TemporaryFolder;

namespace {

struct Case {
    std::vector<std::string> arguments;
    int status;
    const char* words;  ///< that the message must hold
    std::string input = {};
};

const std::string good = "50 mM Tris-HCl, pH 8";

/// One space for each run of white space: a terminal wraps where it likes.
std::string unwrapped(const std::string& text) {
    std::string flat;
    for (const char c : text) {
        if (c != ' ' && c != '\n') {
            flat += c;
        } else if (!flat.empty() && flat.back() != ' ') {
            flat += ' ';
        }
    }
    return flat;
}

void check(const std::vector<Case>& cases) {
    for (const Case& c : cases) {
        std::string line = "carboy";
        for (const auto& argument : c.arguments) {
            line += " '" + argument + "'";
        }
        const auto run = run_carboy(c.arguments, c.input);
        INFO(line << "\n" << run.err);
        CHECK(run.status == c.status);
        CHECK(unwrapped(run.err).find(c.words) != std::string::npos);
        CHECK(run.out.empty());  // no partial output
        CHECK(run.err.find("json.exception") == std::string::npos);
    }
}

}  // namespace

TEST_CASE("bad input: options and commands", "[cli][bad-input]") {
    check({{{}, 2, "subcommand is required"},
           {{"recipes"}, 2, "did you mean recipe"},
           {{"recipe"}, 2, "label is missing"},
           {{"recipe", good}, 2, "--volume is missing"},
           {{"recipe", "--volume", "1L"}, 2, "label is missing"},
           {{"recipe", good, "--volum", "1L"}, 2, "did you mean --volume"},
           {{"recipe", good, "--volume"}, 2, "--volume"},
           {{"recipe", good, "--volume", "1L", "extra"}, 2, "extra"},
           {{"recipe", good, "--volume", "1"}, 2, "has no unit"},
           {{"recipe", good, "--volume", "1 kg"}, 2, "a volume is expected"},
           {{"recipe", good, "--volume", "0 L"}, 2, "more than zero"},
           {{"recipe", good, "--volume", "-1 L"}, 2, "negative"},
           {{"recipe", good, "--volume", "1e999 L"}, 2, "too large"},
           {{"recipe", good, "--volume", "1L", "--at", "25"}, 2, "has no unit"},
           {{"recipe", good, "--volume", "1L", "--at", "hot"}, 2, "not a number"},
           {{"recipe", good, "--volume", "1L", "--at", "101 C"}, 2, "outside 0 to 100"},
           {{"recipe", good, "--volume", "1L", "--prepare-at", "-5 C"}, 2, "outside 0 to 100"},
           {{"recipe", good + " at 4 C", "--volume", "1L", "--at", "5 C"}, 2, "--at says 5"},
           {{"recipe", good, "--volume", "1L", "--format", "xml"}, 2, "--format"},
           {{"recipe", good, "--volume", "1L", "--activity", "pitzer"}, 2, "--activity"},
           {{"recipe", good, "--volume", "1L", "--route", "magic"}, 2, "--route"},
           {{"recipe", good, "--volume", "1L", "--color", "pink"}, 2, "--color"},
           {{"recipe", good, "--request", "x.json"}, 2, "--request"},
           {{"predict"}, 2, "mixture"},
           {{"predict", "25 mM Tris", "--volume", "1L"}, 2, "--volume"},
           {{"predict", "25 mM Tris", "--at", "300 K", "--at", "20 C"}, 2, "--at"},
           {{"constants"}, 2, "subcommand is required"},
           {{"constants", "shew"}, 2, "did you mean show"},
           {{"constants", "list", "buffers"}, 2, "buffers"},
           {{"constants", "show"}, 2, "name"},
           {{"constants", "show", "unobtainium"}, 2, "nothing called 'unobtainium'"},
           {{"constants", "show", "HEPE"}, 2, "HEPES"}});
}

TEST_CASE("bad input: labels and mixtures at the shell", "[cli][bad-input]") {
    const std::vector<std::pair<std::string, const char*>> labels{
        {"", "label is missing"},
        {"50 mM Trsi-HCl, pH 7.5", "did you mean Tris-HCl"},
        {"50 mM Tris-HCl", "no pH"},
        {"50 mM Tris-HCl, pH 7,5", "comma in a number"},
        {"50 mM Tris-HCl, pH 7.5 at 4", "has no unit"},
        {"50 mm Tris-HCl, pH 7.5", "did you mean mM"},
        {"50 mM Tris-HCl, pH 7.5, pH 8", "second pH"},
        {"10x phosphate-buffered saline, pH 7.4", "named formula"},
        {"50 mM Tris-HCl,, pH 8", "beside this separator"},
        {"\xff\xfe", "UTF-8"},
        {"50 mM Tris-HCl\npH 8", "control character"},
        {std::string(70000, 'x'), "bytes"}};
    for (const auto& [label, words] : labels) {
        check({{{"recipe", label, "--volume", "1L"}, 2, words}});
    }
    check(
        {{{"recipe", "50 mM sodium acetate, pH 2", "--volume", "1L"}, 1, "too acid"},
         {{"recipe", "50 mM Tris-HCl, pH 12", "--volume", "1L"}, 1, "too basic"},
         {{"recipe", "0.1 M sodium phosphate, pH 7.2, ionic strength 10 mM", "--volume", "1L"}, 1, "cannot be reached"},
         {{"recipe", "50 mM hypochlorite, pH 7.5", "--volume", "1L"}, 1, "no reagent"},
         {{"recipe", "49 M sodium acetate, pH 5", "--volume", "1L"}, 2, "no room for water"},
         {{"predict", "6 g Tris"}, 2, "final volume is missing"},
         {{"predict", "6 g Triss, to 1 L"}, 2, "did you mean Tris"},
         {{"predict", "25 mM phosphate"}, 2, "which form"},
         {{"predict", "600 mL of 1 M HCl, 600 mL of 1 M NaOH, to 1 L"}, 2, "more than the final"},
         {{"predict", "5 kg NaCl, 5 kg sucrose, to 1 L"}, 2, "no room for water"}});
}

TEST_CASE("bad input: files", "[cli][bad-input]") {
    const TemporaryFolder folder;
    const std::string broken = folder.write("broken.json", "{\"schema\": \"carboy-constants/1\", ");
    const std::string faulty = folder.write(
        "faulty.json",
        R"({"schema":"carboy-constants/1","reagents":[{"name":"x","formula":"NaCl","cas":"1-2-3","supplies":{"Na+":1}}]})");
    check({{{"recipe", good, "--volume", "1L", "--constants", folder.path("none.json")}, 3, "cannot be opened"},
           {{"recipe", good, "--volume", "1L", "--constants", broken}, 4, "not JSON"},
           {{"recipe", good, "--volume", "1L", "--constants", faulty}, 4, "more"},
           {{"constants", "check", folder.path("none.json")}, 3, "cannot be opened"},
           {{"recipe", good, "--volume", "1L", "-o", folder.path("no/folder/x.txt")}, 3, "cannot be made"},
           {{"recipe", "--request", folder.path("none.json")}, 3, "cannot be opened"}});
    const auto run = run_carboy({"constants", "check", faulty});
    CHECK(run.status == 4);
    CHECK(run.out.find("/reagents/0") != std::string::npos);
    CHECK(run.out.find("check digit") != std::string::npos);
    CHECK(run_carboy({"recipe", good, "--volume", "1L", "-o", "/dev/full"}).status == 3);
}

TEST_CASE("bad input: requests as JSON", "[cli][bad-input]") {
    const auto request = [](const std::string& body) { return Case{{"recipe", "--request", "-"}, 2, "", body}; };
    const std::vector<std::pair<std::string, const char*>> bodies{
        {"", "not JSON"},
        {"[]", "object is expected"},
        {"{}", "'buffers' is missing"},
        {R"({"label":"50 mM Tris-HCl, pH 8"})", "'volume' is missing"},
        {R"({"label":5,"volume":"1 L"})", "text in quotes"},
        {R"({"label":"50 mM Tris-HCl, pH 8","volume":1})", "text in quotes"},
        {R"({"label":"50 mM Tris-HCl, pH 8","volume":"1 L","colour":"red"})", "'colour' is not known"},
        {R"({"label":"50 mM Tris-HCl, pH 8","volume":"1 L","volume":"2 L"})", "stands twice"},
        {R"({"label":"50 mM Tris-HCl, pH 8","volume":"1 L","target":{"pH":7}})", "not both"},
        {R"({"label":"50 mM Trs-HCl, pH 8","volume":"1 L"})", "Tris-HCl"},
        {R"({"label":"50 mM Tris-HCl, pH 8","volume":"1 L","route":"magic"})", "no route 'magic'"},
        {R"({"buffers":[],"target":{"pH":7},"volume":"1 L"})", "'buffers' is empty"},
        {R"({"buffers":[{"system":"","concentration":"1 M"}],"target":{"pH":7},"volume":"1 L"})", "no system called"},
        {R"({"buffers":[{"system":"unobtainium","concentration":"1 M"}],"target":{"pH":7},"volume":"1 L"})",
         "no system called"},
        {R"({"buffers":[{"system":"Tris","concentration":"1 g/L"}],"target":{"pH":7},"volume":"1 L"})",
         "mol/L or mol/kg"},
        {R"({"buffers":[{"system":"Tris","concentration":"50 mM","cation":"Xx+"}],"target":{"pH":7},"volume":"1 L"})",
         "no ion called"},
        {R"({"buffers":[{"system":"Tris","concentration":"50 mM"}],"target":{"pH":"7"},"volume":"1 L"})",
         "must be a number"},
        {R"({"buffers":[{"system":"Tris","concentration":"50 mM"}],"target":{"pH":77},"volume":"1 L"})",
         "outside -2 to 16"},
        {R"({"buffers":[{"system":"Tris","concentration":"50 mM"}],"target":{},"volume":"1 L"})", "'pH' is missing"},
        {R"({"buffers":[{"system":"Tris","concentration":"50 mM"}],"additives":[{"reagent":"NaCk","concentration":"1 M"}],"target":{"pH":8},"volume":"1 L"})",
         "NaCl"},
        {std::string(100000, '['), "not JSON"}};
    for (const auto& [body, words] : bodies) {
        Case c = request(body);
        c.words = words;
        check({c});
    }
}

TEST_CASE("bad input: errors as JSON when JSON was asked for", "[cli][bad-input]") {
    const auto run = run_carboy({"recipe", "50 mM Trsi-HCl, pH 7.5", "--volume", "1L", "--format", "json"});
    CHECK(run.status == 2);
    CHECK(run.out.empty());
    const auto record = nlohmann::json::parse(run.err);
    CHECK(record.at("kind") == "error");
    CHECK(record.at("code") == "unknown_name");
    CHECK(record.at("where") == "label, column 7");
}
