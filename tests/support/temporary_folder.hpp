// A folder that lives as long as a test, and a way to run the program in it. Not for: reading results.
// SPDX-License-Identifier: MIT
#pragma once

#include <sys/wait.h>
#include <unistd.h>

#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <string>

namespace bandwright {

/// Makes a new folder and removes it at the end.
class TemporaryFolder {
  public:
    TemporaryFolder() {
        std::string pattern = (std::filesystem::temp_directory_path() / "bandwright-test-XXXXXX").string();
        path_ = mkdtemp(pattern.data());
    }
    ~TemporaryFolder() { std::filesystem::remove_all(path_); }
    TemporaryFolder(const TemporaryFolder&) = delete;
    TemporaryFolder& operator=(const TemporaryFolder&) = delete;
    const std::filesystem::path& path() const { return path_; }

    void write(const std::string& name, const std::string& text) const {
        std::ofstream(path_ / name) << text;
    }
    std::string read(const std::string& name) const {
        std::ostringstream text;
        text << std::ifstream(path_ / name).rdbuf();
        return text.str();
    }

  private:
    std::filesystem::path path_;
};

/// What a finished program left.
struct Ran {
    int status;
    std::string out, err;
};

/// Runs a shell command in a folder.
inline Ran run_in(const TemporaryFolder& folder, const std::string& command) {
    const std::string line =
        "cd '" + folder.path().string() + "' && ( " + command + " ) >stdout.txt 2>stderr.txt </dev/null";
    const int code = std::system(line.c_str());
    return {WIFEXITED(code) ? WEXITSTATUS(code) : -1, folder.read("stdout.txt"), folder.read("stderr.txt")};
}

}  // namespace bandwright
