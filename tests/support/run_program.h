#pragma once

#include <string>
#include <vector>

namespace carboy::test {

/// What a run of the real program left behind.
struct Run {
    int status = -1;  ///< exit status; 128 + signal when it was killed
    std::string out;
    std::string err;
};

/// Runs the built program with these arguments, `input` on standard input, without a terminal.
Run run_carboy(const std::vector<std::string>& arguments, const std::string& input = {});
/// Runs any program of the machine the same way; status 127 when it is not there.
Run run_program(const std::string& program, const std::vector<std::string>& arguments, const std::string& input = {});

/// True when a program that a check needs is not there: it ended with 127, or with 77 for a library it wants. Then says
/// loudly that the check did not run; tests/run installs them all.
bool missing(int status, const std::string& package);

/// A folder that is gone again at the end of the scope.
class TemporaryFolder {
public:
    TemporaryFolder();
    ~TemporaryFolder();
    TemporaryFolder(const TemporaryFolder&) = delete;
    TemporaryFolder& operator=(const TemporaryFolder&) = delete;
    std::string path(const std::string& name) const { return path_ + "/" + name; }
    /// Writes a file into it and returns its path.
    std::string write(const std::string& name, const std::string& content) const;

private:
    std::string path_;
};

}  // namespace carboy::test
