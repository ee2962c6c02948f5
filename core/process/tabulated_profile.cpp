#include "core/process/tabulated_profile.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>

namespace bandwright {

namespace {

constexpr std::size_t degree = TabulatedProfile::degree;
constexpr int deepest = 40;
// Between neighbouring points the profile starts with this many equal pieces.
constexpr int starting_pieces_per_gap = 4;
constexpr double floor_share = 1e-20;
// A piece that holds values above the floor holds none below this share of it.
constexpr double span_below_floor = 1e-4;

using Samples = std::array<double, degree + 1>;

/// cos(pi (k + shift) / degree).
double node(std::size_t k, double shift) {
    return std::cos(std::numbers::pi * (static_cast<double>(k) + shift) / static_cast<double>(degree));
}

/// Depth at -1 <= t <= 1; the ends come out exactly.
double depth(double low, double high, double t) {
    if (t == 1) return high;
    if (t == -1) return low;
    return 0.5 * (low + high) + 0.5 * (high - low) * t;
}

/// Coefficients of the polynomial through values at the nodes cos(pi k / degree).
Samples chebyshev(const Samples& at_nodes) {
    Samples coefficient{};
    for (std::size_t j = 0; j <= degree; ++j) {
        double sum = 0;
        for (std::size_t k = 0; k <= degree; ++k) {
            const double share = k == 0 || k == degree ? 0.5 : 1;
            sum += share * at_nodes[k] * node((j * k) % (2 * degree), 0);
        }
        coefficient[j] = sum * (j == 0 || j == degree ? 1 : 2) / static_cast<double>(degree);
    }
    return coefficient;
}

double clenshaw(const Samples& coefficient, double t) {
    double next = 0, after = 0;
    for (std::size_t j = degree; j > 0; --j) {
        const double now = coefficient[j] + 2 * t * next - after;
        after = next;
        next = now;
    }
    return coefficient[0] + t * next - after;
}

Samples sample(const std::function<double(double)>& profile, double low, double high) {
    Samples values{};
    for (std::size_t k = 0; k <= degree; ++k) values[k] = profile(depth(low, high, node(k, 0)));
    return values;
}

struct Builder {
    const std::function<double(double)>& profile;
    double tolerance;
    TabulatedProfile table;

    /// Adds the pieces from low to high, shallow ones first. values: the profile at the nodes.
    void add(double low, double high, const Samples& values, int level) {
        const auto [lowest, highest] = std::ranges::minmax(values);
        const bool last = level >= deepest;
        if (highest < table.floor) return keep({}, high);
        if (lowest < span_below_floor * table.floor) return last ? keep({}, high) : halve(low, high, level);
        TabulatedProfile::Piece piece{false, {}};
        Samples logarithms{};
        std::ranges::transform(values, logarithms.begin(), [](double v) { return std::log(v); });
        piece.coefficient = chebyshev(logarithms);
        double worst = 0;
        for (std::size_t k = 0; k < degree; ++k) {
            const double t = node(k, 0.5), exact = profile(depth(low, high, t));
            if (exact < table.floor) continue;
            worst = std::max(worst, std::abs(std::expm1(clenshaw(piece.coefficient, t) - std::log(exact))));
        }
        if (worst > tolerance && !last) return halve(low, high, level);
        table.worst = std::max(table.worst, worst);
        keep(piece, high);
    }

    void halve(double low, double high, int level) {
        const double middle = 0.5 * (low + high);
        add(low, middle, sample(profile, low, middle), level + 1);
        add(middle, high, sample(profile, middle, high), level + 1);
    }

    void keep(const TabulatedProfile::Piece& piece, double high) {
        table.piece.push_back(piece);
        table.edge.push_back(high);
    }
};

}  // namespace

TabulatedProfile tabulated(const std::function<double(double)>& profile, double thickness,
                           std::span<const double> points, double tolerance) {
    std::vector<double> given{0, thickness}, cuts{0};
    for (const double point : points)
        if (point > 0 && point < thickness) given.push_back(point);
    std::ranges::sort(given);
    for (std::size_t k = 1; k < given.size(); ++k) {
        if (given[k] == given[k - 1]) continue;
        const double start = given[k - 1], step = (given[k] - start) / starting_pieces_per_gap;
        for (int j = 1; j < starting_pieces_per_gap; ++j) cuts.push_back(start + j * step);
        cuts.push_back(given[k]);
    }
    std::vector<Samples> samples;
    double largest = 0;
    for (std::size_t k = 1; k < cuts.size(); ++k) {
        samples.push_back(sample(profile, cuts[k - 1], cuts[k]));
        largest = std::max(largest, std::ranges::max(samples.back()));
    }
    Builder builder{profile, tolerance, {}};
    builder.table.edge.push_back(0);
    builder.table.floor = std::max(floor_share * largest, std::numeric_limits<double>::min());
    for (std::size_t k = 1; k < cuts.size(); ++k) builder.add(cuts[k - 1], cuts[k], samples[k - 1], 0);
    return builder.table;
}

double value(const TabulatedProfile& table, double x) {
    if (!(x >= table.edge.front() && x <= table.edge.back())) return 0;
    const auto above = std::upper_bound(table.edge.begin() + 1, table.edge.end() - 1, x);
    const auto k = static_cast<std::size_t>(above - table.edge.begin()) - 1;
    if (table.piece[k].empty) return 0;
    const double low = table.edge[k], high = table.edge[k + 1];
    const double t = ((x - low) - (high - x)) / (high - low);
    const double N = std::exp(clenshaw(table.piece[k].coefficient, t));
    return N < table.floor ? 0 : N;
}

}  // namespace bandwright
