#include "core/process/quadrature.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>
#include <numbers>
#include <vector>

namespace bandwright {

namespace {

constexpr int order = 16;
constexpr int deepest = 40;
// A difference below this share of the integral that no longer shrinks is rounding.
constexpr double rounding_share = 1e-10;
// Near the smallest double, values lose digits and so their smoothness: such a difference is none.
constexpr double nothing = 1e-300;

// Points closer than this share of the interval count as one.
constexpr double merging_share = 1e-12;
// Neighbouring pieces start out with widths in a ratio of about this at most.
constexpr double growth = 4;

struct Rule {
    std::array<double, order> node{}, weight{};
};

/// Nodes and weights on [-1, 1].
Rule gauss_legendre() {
    Rule rule;
    for (int k = 0; k < order; ++k) {
        double x = std::cos(std::numbers::pi * (k + 0.75) / (order + 0.5)), slope = 1;
        for (int step = 0; step < 20; ++step) {
            double p = 1, before = 0;
            for (int n = 1; n <= order; ++n) {
                const double next = ((2 * n - 1) * x * p - (n - 1) * before) / n;
                before = p;
                p = next;
            }
            slope = order * (x * p - before) / (x * x - 1);
            x -= p / slope;
        }
        rule.node[static_cast<std::size_t>(k)] = x;
        rule.weight[static_cast<std::size_t>(k)] = 2 / ((1 - x * x) * slope * slope);
    }
    return rule;
}

/// Cuts with more between them, so that a piece is at most growth times as wide as the one before it: what is
/// narrow near close points is not stepped over beyond them.
std::vector<double> graded(const std::vector<double>& cuts) {
    std::vector<double> result{cuts[0], cuts[1]};
    for (std::size_t k = 2; k < cuts.size(); ++k) {
        double width = result.back() - result[result.size() - 2];
        while (cuts[k] - result.back() > (1 + growth) * width) {
            width *= growth;
            result.push_back(result.back() + width);
        }
        result.push_back(cuts[k]);
    }
    return result;
}

/// Sums of f and of |f| over a piece.
struct Sums {
    double plain = 0, absolute = 0;
};

Sums panel(const std::function<double(double)>& f, double low, double high) {
    static const Rule rule = gauss_legendre();
    const double middle = 0.5 * (low + high), half = 0.5 * (high - low);
    Sums sums;
    for (std::size_t k = 0; k < order; ++k) {
        const double term = rule.weight[k] * f(middle + half * rule.node[k]) * half;
        sums.plain += term;
        sums.absolute += std::abs(term);
    }
    return sums;
}

/// An integral in the making.
struct Integral {
    const std::function<double(double)>& f;
    double tolerance;
    /// Largest estimate so far of the integral of |f|.
    double size = 0;

    /// The integral over a piece whose sums are known; before: the difference that made its parent be halved.
    double over(double low, double high, Sums whole, double before, int depth) {
        const double middle = 0.5 * (low + high);
        const Sums left = panel(f, low, middle), right = panel(f, middle, high);
        size = std::max(size, left.absolute + right.absolute);
        const double both = left.plain + right.plain, difference = std::abs(both - whole.plain);
        const bool rounding = difference > 0.5 * before && difference <= rounding_share * size;
        if (depth >= deepest || difference <= std::max(tolerance * size, nothing) || rounding) return both;
        return over(low, middle, left, difference, depth + 1) +
               over(middle, high, right, difference, depth + 1);
    }
};

}  // namespace

double integral(const std::function<double(double)>& f, double low, double high,
                std::span<const double> points, double tolerance) {
    if (!(high > low)) return 0;
    std::vector<double> cuts{low, high};
    for (const double point : points)
        if (point > low && point < high) cuts.push_back(point);
    std::ranges::sort(cuts);
    const double closest = merging_share * (high - low);
    cuts.erase(std::unique(cuts.begin(), cuts.end(), [=](double a, double b) { return b - a <= closest; }),
               cuts.end());
    cuts.back() = high;
    // Pieces grow from either side; a mirrored list lets one function serve both.
    const auto mirror = [&cuts] {
        std::ranges::reverse(cuts);
        for (double& cut : cuts) cut = -cut;
    };
    cuts = graded(cuts);
    mirror();
    cuts = graded(cuts);
    mirror();
    Integral pieces{f, tolerance};
    std::vector<Sums> sums;
    for (std::size_t k = 0; k + 1 < cuts.size(); ++k) {
        sums.push_back(panel(f, cuts[k], cuts[k + 1]));
        pieces.size += sums.back().absolute;
    }
    double total = 0;
    for (std::size_t k = 0; k + 1 < cuts.size(); ++k)
        total += pieces.over(cuts[k], cuts[k + 1], sums[k], std::numeric_limits<double>::infinity(), 0);
    return total;
}

}  // namespace bandwright
