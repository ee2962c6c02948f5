#include "core/base/text.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <numeric>

namespace bandwright {

namespace {

std::string lower(std::string_view text) {
    std::string result(text);
    for (char& c : result) c = static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
    return result;
}

// Edit distance with swaps of neighbours counted once [DamerauLevenshtein, optimal string alignment].
std::size_t distance(const std::string& a, const std::string& b) {
    std::vector<std::vector<std::size_t>> d(a.size() + 1, std::vector<std::size_t>(b.size() + 1));
    for (std::size_t i = 0; i <= a.size(); ++i) d[i][0] = i;
    for (std::size_t j = 0; j <= b.size(); ++j) d[0][j] = j;
    for (std::size_t i = 1; i <= a.size(); ++i)
        for (std::size_t j = 1; j <= b.size(); ++j) {
            d[i][j] = std::min(
                {d[i - 1][j] + 1, d[i][j - 1] + 1, d[i - 1][j - 1] + (a[i - 1] == b[j - 1] ? 0 : 1)});
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
                d[i][j] = std::min(d[i][j], d[i - 2][j - 2] + 1);
        }
    return d[a.size()][b.size()];
}

}  // namespace

std::string nearest_name(std::string_view word, const std::vector<std::string>& known) {
    const std::string wanted = lower(word);
    std::string best;
    std::size_t best_distance = std::max<std::size_t>(2, wanted.size() / 3) + 1;
    for (const std::string& name : known) {
        const std::string candidate = lower(name);
        std::size_t d = distance(wanted, candidate);
        if (wanted.size() >= 3 && candidate.starts_with(wanted)) d = std::min<std::size_t>(d, 1);
        if (d < best_distance && d < std::max(wanted.size(), candidate.size())) {
            best_distance = d;
            best = name;
        }
    }
    return best;
}

std::string joined(const std::vector<std::string>& words, std::string_view between) {
    return fmt::format("{}", fmt::join(words, between));
}

std::string number_text(double value, int digits) { return fmt::format("{:.{}g}", value, digits); }

std::string exact_text(double value) { return fmt::format("{}", value); }

}  // namespace bandwright
