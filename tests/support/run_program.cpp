#include "support/run_program.h"

#include <array>
#include <cerrno>
#include <csignal>
#include <cstdlib>
#include <fcntl.h>
#include <filesystem>
#include <fstream>
#include <iostream>
#include <poll.h>
#include <stdexcept>
#include <sys/wait.h>
#include <unistd.h>

namespace carboy::test {

namespace {

struct Pipe {
    Pipe() {
        if (pipe2(ends.data(), O_CLOEXEC) != 0) {
            throw std::runtime_error("pipe");
        }
    }
    std::array<int, 2> ends{};
};

/// Feeds and drains all three pipes at once, so that no buffer can block the child.
void exchange(int in, int out, int err, const std::string& input, Run& run) {
    std::size_t written = 0;
    std::array<pollfd, 3> watched{{{in, POLLOUT, 0}, {out, POLLIN, 0}, {err, POLLIN, 0}}};
    const auto drop = [](pollfd& entry) {
        close(entry.fd);
        entry.fd = -1;
    };
    if (input.empty()) {
        drop(watched[0]);
    }
    while (watched[1].fd >= 0 || watched[2].fd >= 0) {
        poll(watched.data(), watched.size(), -1);
        if (watched[0].fd >= 0 && watched[0].revents != 0) {
            const ssize_t n = write(watched[0].fd, input.data() + written, input.size() - written);
            written += n > 0 ? static_cast<std::size_t>(n) : 0;
            if ((n < 0 && errno != EINTR) || written == input.size()) {
                drop(watched[0]);
            }
        }
        for (std::size_t i : {std::size_t{1}, std::size_t{2}}) {
            if (watched[i].fd < 0 || watched[i].revents == 0) {
                continue;
            }
            std::array<char, 65536> chunk{};
            const ssize_t n = read(watched[i].fd, chunk.data(), chunk.size());
            if (n > 0) {
                (i == 1 ? run.out : run.err).append(chunk.data(), static_cast<std::size_t>(n));
            } else if (n == 0 || errno != EINTR) {
                drop(watched[i]);
            }
        }
    }
    if (watched[0].fd >= 0) {
        drop(watched[0]);
    }
}

}  // namespace

Run run_program(const std::string& program, const std::vector<std::string>& arguments, const std::string& input) {
    std::signal(SIGPIPE, SIG_IGN);
    Pipe in;
    Pipe out;
    Pipe err;
    const pid_t child = fork();
    if (child == 0) {
        dup2(in.ends[0], STDIN_FILENO);
        dup2(out.ends[1], STDOUT_FILENO);
        dup2(err.ends[1], STDERR_FILENO);
        std::signal(SIGPIPE, SIG_DFL);
        std::vector<char*> argv{const_cast<char*>(program.c_str())};
        for (const std::string& argument : arguments) {
            argv.push_back(const_cast<char*>(argument.c_str()));
        }
        argv.push_back(nullptr);
        execvp(argv[0], argv.data());
        _exit(127);
    }
    close(in.ends[0]);
    close(out.ends[1]);
    close(err.ends[1]);
    Run run;
    exchange(in.ends[1], out.ends[0], err.ends[0], input, run);
    int status = 0;
    waitpid(child, &status, 0);
    run.status = WIFEXITED(status) ? WEXITSTATUS(status) : 128 + WTERMSIG(status);
    return run;
}

Run run_carboy(const std::vector<std::string>& arguments, const std::string& input) {
    return run_program(CARBOY_PROGRAM, arguments, input);
}

bool missing(int status, const std::string& package) {
    constexpr int not_installed = 77;
    constexpr int no_such_program = 127;
    if (status != not_installed && status != no_such_program) {
        return false;
    }
    std::cerr << "\n*** SKIPPED: " << package << " is not installed; this check did not run ***\n\n";
    return true;
}

TemporaryFolder::TemporaryFolder() {
    std::string pattern = (std::filesystem::temp_directory_path() / "carboy-test-XXXXXX").string();
    if (mkdtemp(pattern.data()) == nullptr) {
        throw std::runtime_error("mkdtemp");
    }
    path_ = pattern;
}

TemporaryFolder::~TemporaryFolder() {
    std::error_code ignored;
    std::filesystem::remove_all(path_, ignored);
}

std::string TemporaryFolder::write(const std::string& name, const std::string& content) const {
    std::ofstream(path(name), std::ios::binary) << content;
    return path(name);
}

}  // namespace carboy::test
