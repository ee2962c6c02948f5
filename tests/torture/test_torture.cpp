// Structures drawn without regard for reason: every requested bias is solved, or the sweep ends at the
// current limit. A point counts as solved only if a mesh of half the widths agrees within ten times the
// printed error; how many agree within the printed error itself is printed, and 95 % is the bar.
// BANDWRIGHT_TORTURE_SEEDS=FROM-TO sets the seeds (default 1-40). SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <fmt/format.h>
#include <cmath>
#include <cstdlib>
#include <ctime>

#include "core/base/error.hpp"
#include "io/input/read_structure.hpp"
#include "io/results/hdf5_file.hpp"
#include "io/results/write_results.hpp"
#include "solvers/analyses/bias_points.hpp"
#include "tests/support/halved_mesh.hpp"
#include "tests/support/temporary_folder.hpp"
#include "tests/support/torture_structure.hpp"

using namespace bandwright;

namespace {

struct Tally {
    int points = 0, limited = 0, judged = 0, within = 0;
    std::vector<std::string> failures;

    void fail(std::string text) {
        std::printf("  FAILED %s\n", text.c_str());
        std::fflush(stdout);
        failures.push_back(std::move(text));
    }
};

constexpr double most_seconds = 90;  // of processor time a structure and both its meshes

void judge(const std::string& place, const BiasOutcome& coarse, const BiasOutcome& fine, Tally& tally) {
    for (const Column& column : coarse.points.columns) {
        if (column.errors.empty()) continue;
        const Column* other = fine.points.find(column.name);
        for (std::size_t row = 0; row < coarse.points.rows(); ++row) {
            const double bias = coarse.points.columns.front().values[row];
            const auto& biases = fine.points.columns.front().values;
            const auto there = std::find(biases.begin(), biases.end(), bias);
            if (there == biases.end()) continue;  // counted by the caller
            const double value = column.values[row], error = column.errors[row],
                         limit = other->values[static_cast<std::size_t>(there - biases.begin())];
            if (std::isnan(value) || std::isnan(limit) || std::isnan(error)) continue;
            const double difference = std::abs(value - limit);
            ++tally.judged;
            // Two doubles apart is the same number.
            const double ulp = 4.5e-16 * std::abs(value);
            tally.within += difference <= error + ulp;
            if (difference > 10 * error + ulp)
                tally.fail(
                    fmt::format("{}, {:.4g} V: {} is {:.8g} +- {:.2g}, and {:.8g} on half the "
                                "widths",
                                place, bias, column.name, value, error, limit));
        }
    }
}

// No infinity; NaN only where the summary has null: in a figure of a junction or its error.
void check_file(const std::string& place, const std::filesystem::path& path, Tally& tally) {
    const Hdf5File file = Hdf5File::open(path);
    for (const std::string& name : file.names()) {
        if (file.is_text(name) || name == "layer") continue;
        const bool may_be_missing = file.lengths(name).size() == 1 && file.first_scale(name) == "bias" &&
                                    name != "current_density" && name != "junction_voltage";
        for (const double value : file.values(name))
            if (std::isinf(value) || (std::isnan(value) && !may_be_missing)) {
                tally.fail(place + ": " + name + " holds " + std::to_string(value));
                break;
            }
    }
}

}  // namespace

TEST(Torture, solves_every_bias_or_ends_at_the_current_limit) {
    unsigned from = 1, to = 40;
    if (const char* wanted = std::getenv("BANDWRIGHT_TORTURE_SEEDS")) {
        ASSERT_EQ(std::sscanf(wanted, "%u-%u", &from, &to), 2) << "FROM-TO is wanted";
    }
    Tally tally;
    for (unsigned seed = from; seed <= to; ++seed) {
        const TortureCase made = torture_case(seed);
        const std::string place = "seed " + std::to_string(seed);
        const TemporaryFolder folder;
        if (!made.measured.empty()) folder.write(made.measured_name, made.measured);
        ReadResult input;
        try {
            input = read_structure_text(made.structure, "torture.json", folder.path());
        } catch (const std::exception& trouble) {
            tally.fail(place + ": " + trouble.what());
            continue;
        }
        BiasRequest request;
        request.biases = {0, made.biases[0], made.biases[1]};
        const auto start = std::clock();
        Hooks hooks;
        hooks.should_stop = [&] {
            return static_cast<double>(std::clock() - start) / CLOCKS_PER_SEC > most_seconds;
        };
        const BiasOutcome outcome = run_bias_points(input.structure, request, hooks);
        tally.points += 3;
        const auto missing = static_cast<int>(request.biases.size() - outcome.points.rows());
        if (outcome.end == EndReason::stopped_short || outcome.end == EndReason::interrupted) {
            tally.fail(place + ": " +
                       (outcome.end == EndReason::interrupted
                            ? fmt::format("not done after {} s", most_seconds)
                            : outcome.message));
            continue;
        }
        tally.limited += missing;
        if (missing > 0)
            std::printf("  %s: %d bias(es) not reached, %s\n", place.c_str(), missing,
                        outcome.message.c_str());
        BiasRequest finer = request;
        finer.biases = outcome.points.columns.front().values;
        finer.mesh = halved(outcome.mesh);
        finer.error_bars = false;
        const BiasOutcome fine = run_bias_points(input.structure, finer, hooks);
        if (fine.points.rows() < outcome.points.rows() && fine.end != EndReason::current_limit)
            tally.fail(place + ", half the widths: " +
                       (fine.end == EndReason::interrupted ? fmt::format("not done after {} s", most_seconds)
                                                           : fine.message));
        judge(place, outcome, fine, tally);
        Results results;
        results.points = outcome.points;
        results.profiles = outcome.profiles;
        results.figures = outcome.figures;
        try {
            write_results(folder.path() / "r.h5", results);
            check_file(place, folder.path() / "r.h5", tally);
        } catch (const std::exception& trouble) {
            tally.fail(place + ": " + trouble.what());
        }
    }
    std::printf(
        "seeds %u to %u: %d points, %d early ends at the current limit (%.1f %%), %zu failures; %d figures "
        "judged on half the widths, %.2f %% within the printed error\n",
        from, to, tally.points, tally.limited, 100.0 * tally.limited / tally.points, tally.failures.size(),
        tally.judged, 100.0 * tally.within / std::max(1, tally.judged));
    for (const std::string& failure : tally.failures) ADD_FAILURE() << failure;
    EXPECT_LE(tally.limited, 0.2 * tally.points);
    EXPECT_GE(tally.within, 0.95 * tally.judged);
}
