// The result file through the eyes of others: h5py, xarray, ncdump; and our own writer's promises.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include "core/base/error.hpp"
#include "core/base/results.hpp"
#include "io/results/hdf5_file.hpp"
#include "io/results/summary.hpp"
#include "io/results/write_results.hpp"
#include "tests/support/temporary_folder.hpp"

using namespace bandwright;

namespace {

Results small_results() {
    Results results;
    results.command = "iv";
    results.title = "made by hand";
    results.structure_bytes = "{ \"any\": \"bytes\" }";
    results.structure_used = "{}";
    results.command_line = "bandwright iv x.json";
    results.status = "complete";
    results.points.columns = {{"bias", Unit::voltage, "bias", {0, -1}, {}},
                              {"peak_field", Unit::field, "largest field", {3e6, no_value}, {3e2, no_value}}};
    results.profiles.depth_um = {0, 0.5, 1};
    results.profiles.layer = {0, 0, 0};
    results.profiles.layer_names = {"only"};
    results.profiles.variables = {
        {"net_doping", Unit::density, "net doping", false, {1e22, 2e22, 3e22}},
        {"electric_field", Unit::field, "field", true, {1e2, 2e2, 3e2, 4e2, 5e2, 6e2}}};
    return results;
}

}  // namespace

TEST(ResultFile, opens_in_h5py_xarray_and_ncdump_with_the_values_of_its_summary) {
    const TemporaryFolder folder;
    const std::string demo = std::string(SOURCE_ROOT) + "/demo-structures/measured-profile.json";
    ASSERT_EQ(run_in(folder, std::string(PROGRAM) + " iv " + demo + " --biases=-5,0,0.6 -o r.h5").status, 0);
    const Ran ran = run_in(
        folder, std::string(PYTHON) + " " + SOURCE_ROOT + "/tests/support/check_result_file.py r.h5 " + demo);
    EXPECT_EQ(ran.status, 0) << ran.err;
    EXPECT_EQ(ran.out.substr(0, 16), "checked 3 points");
}

TEST(ResultFile, is_free_of_infinities_at_77_K_and_at_a_thousand_volts) {
    const TemporaryFolder folder;
    folder.write("deep.json", R"({"format":"bandwright-structure 1","temperature":"77 K",
      "layers":[{"name":"p","material":"Si","thickness":"2 um"},{"name":"n","material":"Si","thickness":"120 um"}],
      "doping":[{"kind":"uniform","dopant":"acceptor","concentration":"1e18 cm-3","layer":"p"},
                {"kind":"uniform","dopant":"donor","concentration":"1e14 cm-3","layer":"n"}],
      "mesh":{"tolerance":1e-3}})");
    const Ran solved =
        run_in(folder, std::string(PROGRAM) + " iv deep.json --biases=-18,-50,-200,-1000 -o r.h5");
    ASSERT_EQ(solved.status, 0) << solved.err;
    const Ran ran = run_in(folder, std::string(PYTHON) + " " + SOURCE_ROOT +
                                       "/tests/support/check_result_file.py r.h5 deep.json");
    EXPECT_EQ(ran.status, 0) << ran.err;
    EXPECT_EQ(ran.out.substr(0, 16), "checked 4 points");
}

TEST(ResultFile, holds_shown_units_and_a_fill_value_for_what_is_missing) {
    const TemporaryFolder folder;
    write_results(folder.path() / "a.h5", small_results());
    const Hdf5File file = Hdf5File::open(folder.path() / "a.h5");
    EXPECT_EQ(file.values("bias"), (std::vector<double>{0, -1}));
    EXPECT_DOUBLE_EQ(file.values("peak_field")[0], 3e4);
    EXPECT_TRUE(std::isnan(file.values("peak_field")[1]));
    EXPECT_EQ(file.values("net_doping"), (std::vector<double>{1e16, 2e16, 3e16}));
    EXPECT_EQ(file.lengths("electric_field"), (std::vector<std::size_t>{2, 3}));
    EXPECT_EQ(file.text("structure_file"), "{ \"any\": \"bytes\" }");
    EXPECT_EQ(file.text("summary"), summary_json(small_results()));
    EXPECT_EQ(file.attribute("status"), "complete");
    EXPECT_NE(summary_json(small_results()).find("\"peak_field\": null"), std::string::npos);
}

TEST(ResultFile, refuses_an_infinite_number_and_leaves_the_old_file) {
    const TemporaryFolder folder;
    write_results(folder.path() / "a.h5", small_results());
    Results broken = small_results();
    broken.title = "broken";
    broken.points.columns[1].values[0] = INFINITY;
    EXPECT_THROW(write_results(folder.path() / "a.h5", broken), ContractError);
    EXPECT_EQ(Hdf5File::open(folder.path() / "a.h5").attribute("title"), "made by hand");
    int files = 0;
    for ([[maybe_unused]] const auto& entry : std::filesystem::directory_iterator(folder.path())) ++files;
    EXPECT_EQ(files, 1);
}

TEST(ResultFile, names_the_file_that_cannot_be_written) {
    try {
        write_results("/nowhere/at/all.h5", small_results());
        FAIL();
    } catch (const FileError& error) {
        EXPECT_NE(std::string(error.what()).find("/nowhere/at/all.h5"), std::string::npos) << error.what();
    }
}
