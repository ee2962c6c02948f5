// Command: one verb of the program. Not for: what it computes (solvers, core).
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>
#include <string>
#include <vector>

namespace CLI {
class App;
}

namespace bandwright {

/// Exit statuses, fixed for scripts of other people.
enum class Exit {
    done = 0,
    wrong_input = 2,
    stopped_short = 3,
    file_trouble = 4,
    bug = 70,
    interrupted = 130
};

/// Options that every command shares.
struct CommonOptions {
    std::string file;
    std::string output;
    std::vector<std::string> overrides;
    std::string junction, max_current;
    bool json = false, quiet = false, resume = false, no_error_bars = false;
    /// The command line as it was given, for the result file.
    std::string command_line;
};

/// A verb: its name, one line of help, its own options and what it does with them.
struct Command {
    std::string name, help;
    /// Adds the command's own options and returns what runs once they are filled.
    std::function<std::function<Exit(const CommonOptions&)>(CLI::App&)> prepare;
};

/// All commands, in the order of the help text.
const std::vector<Command>& commands();

Command inspect_command();
Command ledger_command();
Command bands_command();
Command iv_command();
Command handcheck_command();

}  // namespace bandwright
