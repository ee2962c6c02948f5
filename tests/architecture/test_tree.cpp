// The tree keeps its own rules: arrows between rooms, sources behind numbers, one version. Sizes are printed,
// not judged.
//
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <cstdio>
#include <filesystem>
#include <fstream>
#include <map>
#include <regex>
#include <set>
#include <sstream>

#include "core/base/version.hpp"

namespace {

namespace fs = std::filesystem;
const fs::path root = SOURCE_ROOT;

std::string read(const fs::path& path) {
    std::ostringstream text;
    text << std::ifstream(path).rdbuf();
    return text.str();
}

std::vector<fs::path> sources(const std::string& folder) {
    std::vector<fs::path> list;
    for (const auto& entry : fs::recursive_directory_iterator(root / folder))
        if (entry.path().extension() == ".hpp" || entry.path().extension() == ".cpp")
            list.push_back(entry.path());
    return list;
}

// What a folder may not include, by beginnings of the name in the include line.
const std::map<std::string, std::vector<std::string>> forbidden{
    {"core", {"solvers/", "io/", "apps/", "nlohmann/", "hdf5", "kinsol/", "sundials/", "nvector/", "CLI/"}},
    {"solvers", {"io/", "apps/", "nlohmann/", "hdf5", "CLI/"}},
    {"io", {"solvers/", "apps/", "kinsol/", "sundials/", "nvector/", "CLI/"}},
    {"apps", {"nlohmann/", "hdf5", "kinsol/", "sundials/", "nvector/"}},
    {"core/base",
     {"core/models/", "core/process/", "core/device/", "core/mesh/", "core/discretization/",
      "core/figures/"}},
    {"core/process", {"core/models/", "core/device/", "core/mesh/", "core/discretization/", "core/figures/"}},
    {"core/mesh", {"core/discretization/", "core/figures/"}},
    {"core/discretization", {"core/figures/"}},
};
// Libraries that one file alone may include.
const std::map<std::string, std::string> single{{"kinsol/", "solvers/kinsol_session.cpp"},
                                                {"hdf5", "io/results/hdf5_file.cpp"}};

}  // namespace

TEST(Arrows, point_one_way) {
    const std::regex include("#include [<\"]([^>\"]+)[>\"]");
    for (const auto& [folder, names] : forbidden)
        for (const fs::path& path : sources(folder)) {
            std::ifstream file(path);
            std::string line;
            for (int number = 1; std::getline(file, line); ++number) {
                std::smatch match;
                if (!std::regex_search(line, match, include)) continue;
                const std::string name = match[1];
                for (const std::string& beginning : names)
                    EXPECT_FALSE(name.starts_with(beginning))
                        << fs::relative(path, root).string() << ":" << number << " includes " << name;
                for (const auto& [library, owner] : single) {
                    if (!name.starts_with(library)) continue;
                    EXPECT_EQ(fs::relative(path, root).string(), owner) << name;
                }
            }
        }
}

TEST(Sources, every_key_that_code_and_materials_name_is_in_the_list) {
    std::set<std::string> known;
    const std::string list = read(root / "core/references.md");
    const std::regex entry("\\*\\*([A-Za-z0-9]+)\\*\\*:");
    for (std::sregex_iterator it(list.begin(), list.end(), entry), end; it != end; ++it)
        known.insert((*it)[1]);
    EXPECT_GT(known.size(), 20u);
    const std::regex cited("\\[([A-Z][A-Za-z]+[0-9]{4})\\]");
    int seen = 0;
    for (const std::string folder : {"core", "solvers", "io"})
        for (const fs::path& path : sources(folder)) {
            const std::string text = read(path);
            for (std::sregex_iterator it(text.begin(), text.end(), cited), end; it != end; ++it, ++seen)
                EXPECT_TRUE(known.contains((*it)[1])) << path << " cites " << (*it)[1];
        }
    EXPECT_GT(seen, 15);
    const std::regex source("\"source\":\\s*\"([A-Za-z0-9]+)");
    for (const auto& file : fs::directory_iterator(root / "io/materials")) {
        if (file.path().extension() != ".json") continue;
        const std::string text = read(file.path());
        for (std::sregex_iterator it(text.begin(), text.end(), source), end; it != end; ++it) {
            const std::string key = (*it)[1];
            // A value without a published source says so in words ("common practice, no source"; "estimate").
            if (!std::isupper(static_cast<unsigned char>(key[0])) ||
                key.find_first_of("0123456789") == std::string::npos)
                continue;
            EXPECT_TRUE(known.contains(key)) << file.path() << " cites " << key;
        }
    }
}

TEST(Version, is_the_same_everywhere) {
    EXPECT_NE(read(root / "CMakeLists.txt").find(std::string("VERSION ") + bandwright::version + " "),
              std::string::npos);
}

TEST(Headers, say_what_they_are_for_and_not_for) {
    for (const std::string folder : {"core", "solvers", "io", "apps"})
        for (const fs::path& path : sources(folder)) {
            if (path.extension() != ".hpp") continue;
            const std::string text = read(path);
            EXPECT_TRUE(text.starts_with("// ")) << path;
            EXPECT_NE(text.find("SPDX-License-Identifier: MIT"), std::string::npos) << path;
            EXPECT_NE(text.find("Not for"), std::string::npos) << path;
        }
}

TEST(Sizes, are_printed) {
    for (const std::string folder : {"core", "solvers", "io", "apps"})
        for (const fs::path& path : sources(folder)) {
            const std::string text = read(path);
            const auto lines = std::count(text.begin(), text.end(), '\n');
            if (lines > 400)
                std::printf("  %ld lines: %s\n", static_cast<long>(lines), fs::relative(path, root).c_str());
        }
    SUCCEED();
}

TEST(Headers, name_tests_that_exist) {
    std::set<std::string> there;
    for (const auto& entry : fs::recursive_directory_iterator(root / "tests"))
        there.insert(entry.path().filename().string());
    const std::regex cited(R"(test_[a-z_]+\.cpp)");
    for (const char* folder : {"core", "solvers", "io", "apps"})
        for (const fs::path& path : sources(folder)) {
            const std::string text = read(path);
            for (std::sregex_iterator at(text.begin(), text.end(), cited), end; at != end; ++at)
                EXPECT_TRUE(there.contains(at->str())) << path << " names " << at->str();
        }
}
