#include <iostream>
#include <memory>
#include <regex>
#include <sstream>

#include "catch_shim.h"
#include "support/document.h"
#include "support/run_program.h"

// The README and every --help are run, not believed.

using carboy::test::project_file;
using carboy::test::run_carboy;
using carboy::test::run_program;
using carboy::test::TemporaryFolder;

namespace {

/// A command line of a document and the output shown below it.
struct Example {
    std::string command;
    std::string shown;
    std::size_t block = 0;  ///< the examples of a block follow one upon the other, in one folder
};

std::vector<Example> examples_of(const std::string& document) {
    std::vector<Example> examples;
    std::istringstream lines(document);
    bool inside = false;
    std::size_t blocks = 0;
    for (std::string line; std::getline(lines, line);) {
        if (line.starts_with("```")) {
            inside = line == "```console";
            blocks += inside ? 1 : 0;
        } else if (inside && line.starts_with("$ ")) {
            examples.push_back({line.substr(2), {}, blocks});
        } else if (inside && !examples.empty()) {
            examples.back().shown += line + "\n";
        }
    }
    return examples;
}

/// A folder that holds the demo's files, in which command lines run with the built program first on the path.
class Demo {
public:
    Demo() { REQUIRE(run("cp -r '" CARBOY_SOURCE_DIR "/examples/saltmarsh/.' .").status == 0); }
    carboy::test::Run run(const std::string& command) const {
        const std::string program = CARBOY_PROGRAM;
        const std::string folder = program.substr(0, program.find_last_of('/'));
        return run_program(
            "bash", {"-c", "cd '" + scratch_.path(".") + "' && export PATH='" + folder + "':$PATH && " + command});
    }

private:
    TemporaryFolder scratch_;
};

/// `...` on a line of its own stands for any number of lines.
bool matches(const std::string& shown, const std::string& printed) {
    std::string pattern;
    std::istringstream lines(shown);
    for (std::string line; std::getline(lines, line);) {
        if (line == "...") {
            pattern += "(?:.*\n)*?";
        } else {
            pattern += std::regex_replace(line, std::regex(R"([.^$|()\[\]{}*+?\\])"), R"(\$&)") + "\n";
        }
    }
    return std::regex_match(printed, std::regex(pattern));
}

std::string help_of(const std::string& command) {
    std::vector<std::string> words;
    std::istringstream stream(command + " --help");
    for (std::string word; stream >> word;) {
        words.push_back(word);
    }
    return run_carboy(words).out;
}

const std::vector<std::string> commands{
    "",           "recipe",    "predict",        "adjust",         "select",          "series",
    "fit",        "titrate",   "sweep",          "shelf",          "shelf check",     "shelf use",
    "shelf undo", "constants", "constants list", "constants show", "constants check", "constants sources"};

}  // namespace

TEST_CASE("README: every example prints what it shows", "[docs]") {
    const auto examples = examples_of(project_file("README.md"));
    CHECK(examples.size() >= 5);
    std::unique_ptr<Demo> demo;
    std::size_t block = 0;
    for (const Example& example : examples) {
        if (example.block != block) {
            demo = std::make_unique<Demo>();
            block = example.block;
        }
        const auto run = demo->run("{ " + example.command + "; } 2>&1");
        INFO("$ " << example.command << "\n" << run.out);
        CHECK(matches(example.shown, run.out));
    }
}

TEST_CASE("help: every example runs", "[docs]") {
    int ran = 0;
    for (const std::string& command : commands) {
        std::istringstream lines(help_of(command));
        const Demo demo;
        std::string pending;
        for (std::string line; std::getline(lines, line);) {
            const auto text = line.find_first_not_of(' ');
            if (pending.empty() && !line.starts_with("  carboy ")) {
                continue;
            }
            pending += line.substr(text);
            if (pending.ends_with('\\')) {
                pending.pop_back();
                continue;
            }
            const auto run = demo.run(pending);
            INFO(pending << "\n" << run.err);
            CHECK(run.status == 0);
            pending.clear();
            ++ran;
        }
    }
    CHECK(ran >= 15);
}

TEST_CASE("help: fits 80 columns, and every option stands in the README", "[docs]") {
    const std::string readme = project_file("README.md");
    const std::regex option("--[a-z][a-z-]+");
    for (const std::string& command : commands) {
        const std::string help = help_of(command);
        std::istringstream lines(help);
        for (std::string line; std::getline(lines, line);) {
            INFO(line);
            CHECK(line.size() <= 80);
        }
        for (std::sregex_iterator at(help.begin(), help.end(), option), end; at != end; ++at) {
            INFO("carboy " << command << " " << at->str());
            CHECK(readme.find(at->str()) != std::string::npos);
        }
    }
}

TEST_CASE("README: the exit statuses are those of the program", "[docs]") {
    const std::string readme = project_file("README.md");
    for (const char* row : {"| 0 |", "| 1 |", "| 2 |", "| 3 |", "| 4 |", "| 70 |"}) {
        CHECK(readme.find(row) != std::string::npos);
    }
}
