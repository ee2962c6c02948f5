// Running an analysis for a command: reading, signals, checkpoints, writing, exit status. Shared by bands and
// iv. Not for: the options of one command (commands/).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>

#include "apps/command.hpp"
#include "core/base/results.hpp"
#include "core/device/structure.hpp"
#include "io/input/read_structure.hpp"
#include "solvers/analyses/bias_points.hpp"

namespace bandwright {

/// Results filled with what the input alone tells: names, bytes, ledger, warnings, measured points.
Results results_of_input(const std::string& command, const CommonOptions& options, const ReadResult& input);

/// Junction, current limit and biases of a request from the common options.
BiasRequest request_from(const CommonOptions& options, std::vector<double> biases);

/// How a command solves and what it adds; all but `solve` may be empty.
struct Job {
    std::function<BiasOutcome(const BiasRequest&, const Hooks&)> solve;
    /// Adds what the command found besides to the results, before they are written.
    std::function<void(Results&)> add;
    /// Prints the table for people in place of the usual one.
    std::function<void(const Results&)> print;
    /// Whether points of an interrupted run can be taken over as they are.
    bool can_resume = false;
};

/// Solves, keeps the result file up to date every 8 s, stops on SIGINT and SIGTERM, prints table or JSON.
Exit solve_and_report(const std::string& command, const CommonOptions& options, const ReadResult& input,
                      const BiasRequest& request, const Job& job);
/// The same with run_bias_points.
Exit solve_and_report(const std::string& command, const CommonOptions& options, const ReadResult& input,
                      const BiasRequest& request);

/// Cautions that belong to a structure: high voltage, wide gap.
std::vector<std::string> cautions(const Structure& structure, double largest_bias);

}  // namespace bandwright
