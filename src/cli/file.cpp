#include "cli/file.h"

#include <cerrno>
#include <cstdio>
#include <cstring>
#include <filesystem>
#include <memory>
#include <unistd.h>

#include <fmt/format.h>

#include "carboy/error.h"

namespace carboy::cli {

namespace {

struct Close {
    void operator()(std::FILE* file) const { std::fclose(file); }
};
using File = std::unique_ptr<std::FILE, Close>;

Error cannot_read(const std::string& path, std::string_view what, int reason) {
    return {ErrorKind::file, "cannot_read", fmt::format("{}: {}", what, std::strerror(reason)), path,
            "check the path and its permissions"};
}

Error cannot_write(const std::string& path, std::string_view what, int reason) {
    return {ErrorKind::file, "cannot_write", fmt::format("{}: {}", what, std::strerror(reason)), path,
            "check the folder, its permissions and the space left"};
}

void write_to(std::FILE* stream, std::string_view text, const std::string& name) {
    if (std::fwrite(text.data(), 1, text.size(), stream) != text.size() || std::fflush(stream) != 0) {
        throw cannot_write(name, "the result cannot be written", errno);
    }
}

}  // namespace

std::string read_file(const std::string& path) {
    File opened;
    std::FILE* file = stdin;
    if (path != "-") {
        opened.reset(std::fopen(path.c_str(), "rb"));
        if (!opened) {
            throw cannot_read(path, "the file cannot be opened", errno);
        }
        file = opened.get();
    }
    std::string content;
    char chunk[1 << 16];
    while (const std::size_t got = std::fread(chunk, 1, sizeof chunk, file)) {
        content.append(chunk, got);
    }
    if (std::ferror(file) != 0) {
        throw cannot_read(path, "the file cannot be read", errno);
    }
    return content;
}

void write_result(std::string_view text, const std::string& path) {
    if (path.empty() || path == "-") {
        write_to(stdout, text, "standard output");
        return;
    }
    std::error_code ignored;
    const auto status = std::filesystem::status(path, ignored);
    // A device or a pipe is written to, never replaced.
    if (std::filesystem::exists(status) && !std::filesystem::is_regular_file(status)) {
        File file(std::fopen(path.c_str(), "wb"));
        if (!file) {
            throw cannot_write(path, "it cannot be opened for writing", errno);
        }
        write_to(file.get(), text, path);
        return;
    }
    // Through a symbolic link the file it points to is replaced, not the link.
    const std::filesystem::path resolved = std::filesystem::weakly_canonical(path, ignored);
    const std::string target = ignored ? path : resolved.string();
    const std::string partial = fmt::format("{}.{}.partial", target, getpid());
    const auto give_up = [&](std::string_view what) {
        const int reason = errno;
        std::remove(partial.c_str());
        throw cannot_write(path, what, reason);
    };
    File file(std::fopen(partial.c_str(), "wbx"));
    if (!file) {
        throw cannot_write(path, "the file cannot be made", errno);
    }
    if (std::fwrite(text.data(), 1, text.size(), file.get()) != text.size() || std::fflush(file.get()) != 0 ||
        fsync(fileno(file.get())) != 0) {
        give_up("the file cannot be written");
    }
    file.reset();
    if (std::rename(partial.c_str(), target.c_str()) != 0) {
        give_up("the finished file cannot be put in its place");
    }
}

}  // namespace carboy::cli
