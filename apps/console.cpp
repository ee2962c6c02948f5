#include "apps/console.hpp"

#include <fmt/format.h>
#include <sys/ioctl.h>
#include <unistd.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <sstream>

namespace bandwright {

void complain(const std::string& text) {
    std::istringstream lines(text);
    for (std::string line; std::getline(lines, line);) fmt::print(stderr, "bandwright: {}\n", line);
}

void warn(const std::string& text) { fmt::print(stderr, "bandwright: note: {}\n", text); }

ProgressBar::ProgressBar(bool quiet) {
    const char* term = std::getenv("TERM");
    active_ = !quiet && isatty(STDERR_FILENO) && term && std::string(term) != "dumb";
}

ProgressBar::~ProgressBar() { clear(); }

void ProgressBar::show(double share, const std::string& text) {
    if (!active_) return;
    winsize size{};
    int columns = ioctl(STDERR_FILENO, TIOCGWINSZ, &size) == 0 && size.ws_col > 20 ? size.ws_col : 80;
    const int width = std::max(10, std::min(40, columns - 30));
    const int filled = static_cast<int>(std::clamp(share, 0.0, 1.0) * width);
    std::string line =
        fmt::format("{:3.0f} % {}{} {}", 100 * share, std::string(static_cast<std::size_t>(filled), '#'),
                    std::string(static_cast<std::size_t>(width - filled), '.'), text);
    line.resize(static_cast<std::size_t>(std::min<int>(columns - 1, static_cast<int>(line.size()))));
    if (line == last_) return;
    last_ = line;
    fmt::print(stderr, "\r\033[K{}", line);
    std::fflush(stderr);
}

void ProgressBar::clear() {
    if (active_ && !last_.empty()) {
        fmt::print(stderr, "\r\033[K");
        std::fflush(stderr);
    }
    last_.clear();
}

std::string value_with_error(double value, double error, int digits) {
    if (std::isnan(value)) return "-";
    if (!(error > 0)) return fmt::format("{:.{}g}", value, digits);
    // Digits down to the second one of the error, but no more than a person compares.
    const double ratio = std::abs(value) / error;
    const int meaningful = ratio > 1 ? static_cast<int>(std::floor(std::log10(ratio))) + 3 : 2;
    return fmt::format("{:.{}g} \u00b1 {:.1e}", value, std::clamp(meaningful, 2, digits), error);
}

namespace {

// Columns that a text takes on a terminal: bytes that do not continue a UTF-8 character.
std::size_t width_of(const std::string& text) {
    return static_cast<std::size_t>(std::count_if(
        text.begin(), text.end(), [](char c) { return (static_cast<unsigned char>(c) & 0xC0) != 0x80; }));
}

std::string padded(const std::string& text, std::size_t width, bool left) {
    const std::string blanks(width - std::min(width, width_of(text)), ' ');
    return left ? text + blanks : blanks + text;
}

}  // namespace

std::string TextTable::text() const {
    std::vector<std::size_t> widths(headings.size(), 0);
    const auto measure = [&](const std::vector<std::string>& row) {
        for (std::size_t k = 0; k < row.size() && k < widths.size(); ++k)
            widths[k] = std::max(widths[k], width_of(row[k]));
    };
    measure(headings);
    measure(units);
    for (const auto& row : rows) measure(row);
    std::string out;
    const auto add = [&](const std::vector<std::string>& row) {
        std::string line = " ";
        for (std::size_t k = 0; k < row.size(); ++k) {
            line += ' ';
            line += padded(row[k], widths[k], k < left.size() && left[k]);
            line += ' ';
        }
        out += line.substr(0, line.find_last_not_of(' ') + 1) + "\n";
    };
    add(headings);
    if (!units.empty()) add(units);
    for (const auto& row : rows) add(row);
    return out;
}

}  // namespace bandwright
