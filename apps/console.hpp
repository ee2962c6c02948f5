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

/// A value with its error, rounded so that the error keeps two digits: "-5.78e-07 +- 2e-10" style is avoided in favour of
/// one power of ten: "(-5.7752 +- 0.0002)e-07". Without an error, `digits` significant digits.
std::string value_with_error(double value, double error, int digits = 5);

/// Text columns, right-aligned unless `left` names them; headings and units above.
struct TextTable {
    std::vector<std::string> headings, units;
    std::vector<bool> left;
    std::vector<std::vector<std::string>> rows;
    std::string text() const;
};

}  // namespace bandwright
