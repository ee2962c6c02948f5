// The points that an earlier, interrupted run left in its result file, for going on from them.
// Not for: showing results (a result file is read by general tools).
// SPDX-License-Identifier: MIT
#pragma once

#include <filesystem>
#include <map>
#include <string>
#include <vector>

#include "core/base/results.hpp"

namespace bandwright {

/// What a result file holds, in its own units.
struct EarlierRun {
    std::string structure_used, command;
    std::vector<double> biases, depth_um;
    /// Values over bias, and over bias and depth, by name.
    std::map<std::string, std::vector<double>> over_bias, over_bias_and_depth;
};

/// Reads the file. Errors: FileError when it cannot be read or is no result file.
EarlierRun read_earlier_run(const std::filesystem::path& path);

/// Adds the earlier run's points to a table and profiles that hold others, in the order of `requested`.
/// Errors: InputError when both do not belong together (another mesh or other columns).
void merge_earlier_run(const EarlierRun& earlier, const std::vector<double>& requested, Table& points,
                       Profiles& profiles);

}  // namespace bandwright
