// The program as a process: exit statuses, streams, files.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <nlohmann/json.hpp>

#include "tests/support/temporary_folder.hpp"

using namespace bandwright;

namespace {

const std::string diode = R"({"format":"bandwright-structure 1","title":"Small diode",
"layers":[{"name":"p","material":"Si","thickness":"1 um"},{"name":"n","material":"Si","thickness":"3 um"}],
"doping":[{"kind":"uniform","dopant":"B","concentration":"1e18 cm-3","layer":"p"},
{"kind":"uniform","dopant":"P","concentration":"1e16 cm-3","layer":"n"}]})";
const std::string program = PROGRAM;

}  // namespace

TEST(Program, writes_a_result_file_named_after_structure_and_command) {
    const TemporaryFolder folder;
    folder.write("diode.json", diode);
    const Ran ran = run_in(folder, program + " iv diode.json --from -5 --to 0 --step 1");
    EXPECT_EQ(ran.status, 0) << ran.err;
    EXPECT_TRUE(std::filesystem::exists(folder.path() / "diode.iv.h5"));
    EXPECT_NE(ran.out.find("written to diode.iv.h5"), std::string::npos) << ran.out;
    EXPECT_EQ(ran.err, "");
    // Nothing else is left behind.
    int files = 0;
    for (const auto& entry : std::filesystem::directory_iterator(folder.path()))
        files += entry.is_regular_file();
    EXPECT_EQ(files, 4);  // structure, result, both streams
}

TEST(Program, prints_one_json_document_and_nothing_else) {
    const TemporaryFolder folder;
    folder.write("diode.json", diode);
    const Ran ran = run_in(folder, program + " iv diode.json --biases=-1,0,0.4 --json");
    EXPECT_EQ(ran.status, 0);
    const auto document = nlohmann::json::parse(ran.out);
    EXPECT_EQ(document["format"], "bandwright-summary 1");
    EXPECT_EQ(document["status"], "complete");
    ASSERT_EQ(document["points"].size(), 3u);
    EXPECT_EQ(document["points"][0]["bias"], -1.0);
    EXPECT_LT(document["points"][0]["current_density"], 0);
    EXPECT_GT(document["points"][2]["current_density"], 0);
    // |J(0 V)| below 1e-12 of J at 0.4 V, let alone 0.5 V.
    EXPECT_LT(std::abs(document["points"][1]["current_density"].get<double>()),
              1e-12 * document["points"][2]["current_density"].get<double>());
    EXPECT_EQ(document["units"]["current_density"], "A cm-2");
    EXPECT_GT(document["figures"]["built_in_potential"]["error"], 0);
}

TEST(Program, exit_statuses) {
    const TemporaryFolder folder;
    folder.write("diode.json", diode);
    folder.write("broken.json", "{");
    EXPECT_EQ(run_in(folder, program + " --version").status, 0);
    EXPECT_EQ(run_in(folder, program + " --help").status, 0);
    EXPECT_EQ(run_in(folder, program).status, 2);
    EXPECT_EQ(run_in(folder, program + " inspect broken.json").status, 2);
    EXPECT_EQ(run_in(folder, program + " inspect nowhere.json").status, 4);
    EXPECT_EQ(run_in(folder, program + " bands diode.json -o /nowhere/at/all.h5").status, 4);
    EXPECT_EQ(run_in(folder, program + " inspect diode.json > /dev/full").status, 4);
    EXPECT_EQ(run_in(folder, program + " iv diode.json --biases 5V,x").status, 2);
    EXPECT_EQ(run_in(folder, program + " iv diode.json").status, 2);
}

TEST(Program, suggests_the_option_and_the_command_that_were_meant) {
    const TemporaryFolder folder;
    EXPECT_EQ(run_in(folder, program + " ivv").err,
              "bandwright: there is no command \"ivv\"; did you mean \"iv\"? The commands are inspect, "
              "ledger, bands, iv, handcheck\n");
    EXPECT_EQ(run_in(folder, program + " iv d.json --form 3").err,
              "bandwright: iv has no option \"--form\"; did you mean \"--from\"?\n");
}

TEST(Program, ends_at_the_current_limit_with_a_warning_and_status_0) {
    const TemporaryFolder folder;
    folder.write("diode.json", diode);
    const Ran ran =
        run_in(folder, program + " iv diode.json --from 0 --to 2 --step 0.25 --max-current 10 --json");
    EXPECT_EQ(ran.status, 0);
    EXPECT_NE(ran.err.find("the limit of 10"), std::string::npos) << ran.err;
    const auto document = nlohmann::json::parse(ran.out);
    EXPECT_LT(document["points"].size(), 6u);
    EXPECT_GE(document["points"].size(), 3u);
}

TEST(Program, interrupted_saves_what_was_solved) {
    const TemporaryFolder folder;
    folder.write("diode.json", diode);
    const Ran ran = run_in(
        folder, "timeout -s INT 4 " + program +
                    " iv diode.json --from 0 --to -40 --points 100000; exit $(( $? == 124 ? 130 : $? ))");
    EXPECT_EQ(ran.status, 130);
    EXPECT_NE(ran.err.find("points are saved in diode.iv.h5"), std::string::npos) << ran.err;
    EXPECT_TRUE(std::filesystem::exists(folder.path() / "diode.iv.h5"));
}

TEST(Program, ledger_lists_every_parameter_with_source_and_status) {
    const TemporaryFolder folder;
    folder.write("diode.json", diode);
    const auto document = nlohmann::json::parse(run_in(folder, program + " ledger diode.json --json").out);
    ASSERT_GT(document["ledger"].size(), 20u);
    for (const auto& line : document["ledger"]) {
        EXPECT_FALSE(line["source"].get<std::string>().empty()) << line.dump();
        EXPECT_FALSE(line["status"].get<std::string>().empty()) << line.dump();
    }
}
