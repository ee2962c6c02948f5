// A run interrupted on its way and resumed gives the same file as one that was left alone.
// The same with kill -9 at full size: tests/full_size.sh.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include "tests/support/temporary_folder.hpp"

using namespace bandwright;

TEST(Resume, after_an_interruption_gives_the_file_of_an_uninterrupted_run) {
    const TemporaryFolder folder;
    const std::string torture = std::string(SOURCE_ROOT) + "/tests/torture/";
    const Ran ran =
        run_in(folder, std::string(PYTHON) + " " + torture + "kill_and_resume.py " + PROGRAM + " " + torture +
                           "floating-stack.json INT 3 --from=0 --to=-20 --points=16");
    EXPECT_EQ(ran.status, 0) << ran.out << ran.err;
    EXPECT_NE(ran.out.find("survivors hold points"), std::string::npos) << ran.out;
    std::printf("%s", ran.out.c_str());
}

TEST(Resume, refuses_the_result_of_another_structure) {
    const TemporaryFolder folder;
    const std::string demo = std::string(SOURCE_ROOT) + "/demo-structures/guard-ring.json";
    const std::string run = std::string(PROGRAM) + " iv " + demo + " --biases=0,-1 -o r.h5 --quiet";
    ASSERT_EQ(run_in(folder, run).status, 0);
    EXPECT_EQ(run_in(folder, run + " --resume").status, 0);
    const Ran other = run_in(folder, run + " --resume --set '/temperature=310 K'");
    EXPECT_EQ(other.status, 2);
    EXPECT_NE(other.err.find("is the result of another structure or command"), std::string::npos)
        << other.err;
    const Ran longer =
        run_in(folder, std::string(PROGRAM) + " iv " + demo + " --biases=0,-1,-30 -o r.h5 --quiet --resume");
    EXPECT_EQ(longer.status, 2);
    EXPECT_NE(longer.err.find("another request (its mesh differs)"), std::string::npos) << longer.err;
}
