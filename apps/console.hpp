// What people see: messages, progress, tables. Not for: JSON (io/results/summary.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <vector>

namespace bandwright {

/// Prints "bandwright: text" on standard error, every line of a message on its own.
void complain(const std::string& text);

/// Prints a warning on standard error.
void warn(const std::string& text);

/// A progress bar on a terminal, silent otherwise, with --quiet, and where TERM is dumb.
class ProgressBar {
  public:
    explicit ProgressBar(bool quiet);
    ~ProgressBar();
    ProgressBar(const ProgressBar&) = delete;
    ProgressBar& operator=(const ProgressBar&) = delete;
    void show(double share, const std::string& text);
    void clear();

  private:
    bool active_;
    std::string last_;
};

/// A value with its error: digits down to the second one of the error, at most `digits`: "-5.775e-07
/// +- 2.1e-10".
std::string value_with_error(double value, double error, int digits = 7);

/// Text columns, right-aligned unless `left` names them; headings and units above.
struct TextTable {
    std::vector<std::string> headings, units;
    std::vector<bool> left;
    std::vector<std::vector<std::string>> rows;
    std::string text() const;
};

}  // namespace bandwright
