#include "core/process/diffusion.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "core/process/quadrature.hpp"

namespace bandwright {

namespace {

using std::numbers::pi;

// A kernel exp(-u^2) is left out where u is above this: below 1e-39.
constexpr double widest = 9.5;
constexpr double quadrature_tolerance = 1e-12;
// Beyond this many square thicknesses a budget has made every profile flat: exp(-pi^2 4) is 7e-18.
constexpr double flattening = 4;

/// erf(high) - erf(low) without cancellation when both lie on one side of zero.
double erf_difference(double low, double high) {
    if (low > 0) return std::erfc(low) - std::erfc(high);
    if (high < 0) return std::erfc(-high) - std::erfc(-low);
    return std::erf(high) - std::erf(low);
}

/// 1 inside a piece, 0 outside, 1/2 at its ends, which is the limit of a budget that vanishes.
double presence(double x, double from, double to) {
    if (x == from || x == to) return 0.5;
    return x > from && x < to ? 1 : 0;
}

/// Concentration after a budget in an infinite body.
struct Spread {
    double x, budget;

    double operator()(const GaussianPiece& s) const {
        const double gained = 2 * budget, own = s.straggle * s.straggle, variance = own + gained;
        const double shape =
            s.peak * std::sqrt(own / variance) * std::exp(-(x - s.centre) * (x - s.centre) / (2 * variance));
        if (!(gained > 0)) return presence(x, s.from, s.to) * shape;
        if (std::isinf(s.from) && std::isinf(s.to)) return shape;
        // The dopant now at x came from depths that are Gaussian themselves.
        const double origin = (s.centre * gained + x * own) / variance;
        const double width = std::sqrt(2 * own * gained / variance);
        return 0.5 * shape * erf_difference((s.from - origin) / width, (s.to - origin) / width);
    }
    double operator()(const ConstantPiece& s) const {
        if (!(budget > 0)) return presence(x, s.from, s.to) * s.concentration;
        const double length = 2 * std::sqrt(budget);
        return 0.5 * s.concentration * erf_difference((s.from - x) / length, (s.to - x) / length);
    }
    double operator()(const AnyPiece& s) const {
        if (!(budget > 0)) {
            const double share = presence(x, s.from, s.to);
            return share > 0 ? share * s.profile(x) : 0;
        }
        // In u = (source - x) / length, in which the kernel keeps its digits.
        const double length = 2 * std::sqrt(budget);
        std::vector<double> points{-8, -6, -4, -2, 0, 2, 4, 6, 8};
        for (const double point : s.points) points.push_back((point - x) / length);
        return integral([&](double u) { return s.profile(x + u * length) * std::exp(-u * u); },
                        std::max((s.from - x) / length, -widest), std::min((s.to - x) / length, widest),
                        points, quadrature_tolerance) /
               std::sqrt(pi);
    }
};

/// Depths outside which a piece has not spread.
struct Span {
    double low, high;
};
struct SpanAfter {
    double budget;
    Span operator()(const GaussianPiece& s) const {
        const double reach = widest * std::sqrt(2 * (s.straggle * s.straggle + 2 * budget));
        const Span cut = within(s.from, s.to);
        return {std::max(s.centre - reach, cut.low), std::min(s.centre + reach, cut.high)};
    }
    Span operator()(const ConstantPiece& s) const { return within(s.from, s.to); }
    Span operator()(const AnyPiece& s) const { return within(s.from, s.to); }
    Span within(double from, double to) const {
        const double reach = widest * 2 * std::sqrt(budget);
        return {from - reach, to + reach};
    }
};

/// The spread piece at one of the depths +-x + 2 k thickness that lie in its span, summed.
double images(const StartingPiece& piece, double x, double budget, double thickness, const Span& span) {
    const auto at = [&](double depth) {
        return depth >= span.low && depth <= span.high ? std::visit(Spread{depth, budget}, piece) : 0.0;
    };
    if (std::isinf(thickness)) return at(x);
    const double period = 2 * thickness;
    double sum = 0;
    const double first = std::ceil((span.low - x) / period), last = std::floor((span.high - x) / period);
    for (double k = first; k <= last; ++k) sum += at(x + k * period);
    return sum;
}

/// A shape moved towards the surface.
ImplantShape moved(ImplantShape shape, double shift) {
    if (auto* gaussian = std::get_if<GaussianShape>(&shape)) gaussian->range -= shift;
    if (auto* joined = std::get_if<JoinedHalfGaussians>(&shape)) joined->mode -= shift;
    if (auto* pearson = std::get_if<PearsonFour>(&shape)) {
        pearson->range -= shift;
        pearson->centre -= shift;
    }
    return shape;
}

struct Pieces {
    double dose, from, to;

    std::vector<StartingPiece> operator()(const GaussianShape& s) const {
        return {GaussianPiece{dose * density(s, s.range), s.range, s.straggle, from, to}};
    }
    std::vector<StartingPiece> operator()(const JoinedHalfGaussians& s) const {
        const double peak = dose * density(s, s.mode);
        std::vector<StartingPiece> pieces;
        if (from < s.mode) pieces.push_back(GaussianPiece{peak, s.mode, s.above, from, std::min(s.mode, to)});
        if (to > s.mode) pieces.push_back(GaussianPiece{peak, s.mode, s.below, std::max(s.mode, from), to});
        return pieces;
    }
    std::vector<StartingPiece> operator()(const PearsonFour& s) const {
        AnyPiece piece{[shape = ImplantShape(s), dose = dose](double x) { return dose * density(shape, x); },
                       from,
                       to,
                       {}};
        for (const double straggles : {-6, -3, -1, 0, 1, 3, 6})
            piece.points.push_back(s.range + straggles * s.straggle);
        return {piece};
    }
};

}  // namespace

std::vector<StartingPiece> starting_pieces(const ImplantShape& shape, double dose, double shift, double from,
                                           double to) {
    return std::visit(Pieces{dose, from, to}, moved(shape, shift));
}

double diffused(std::span<const StartingPiece> pieces, double x, double budget, double thickness) {
    const double S = std::min(budget, flattening * thickness * thickness);
    double sum = 0;
    for (const StartingPiece& piece : pieces) {
        const Span span = std::visit(SpanAfter{S}, piece);
        sum += images(piece, x, S, thickness, span) + images(piece, -x, S, thickness, span);
    }
    return sum;
}

}  // namespace bandwright
