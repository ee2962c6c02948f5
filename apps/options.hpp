// The command line: common options, parsing, suggestions for what is misspelt. CLI11 is included in the .cpp
// files alone. Not for: what a command does (commands/).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "apps/command.hpp"
#include "core/base/unit.hpp"

namespace bandwright {

/// Parses the command line and runs the command. Errors: InputError for a command line that says nothing that
/// can be done; whatever the command throws.
Exit run_command_line(int argc, char** argv);

/// Value of an option in memory units; a bare number is in the option's natural unit.
/// Errors: InputError that names the option.
double option_value(const std::string& option, const std::string& text, Unit unit);

/// Comma-separated values.
std::vector<double> option_values(const std::string& option, const std::string& text, Unit unit);

}  // namespace bandwright
