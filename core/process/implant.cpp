#include "core/process/implant.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>

#include "core/base/text.hpp"
#include "core/process/quadrature.hpp"

namespace bandwright {

namespace {

using std::numbers::pi;

constexpr double steepest_joined = 0.99;
// The halves of the joined shape differ by at most this power of e.
constexpr double widest_log_ratio = 6;
constexpr double kurtosis_margin = 1.01;
const double steepest_pearson = 0.99 * std::sqrt(32.0);

double normal_density(double z) { return std::exp(-0.5 * z * z) / std::sqrt(2 * pi); }
/// Integral of the normal density from -infinity to z.
double normal_share(double z) { return 0.5 * std::erfc(-z / std::numbers::sqrt2); }

/// Variance and skewness of joined half-Gaussians.
struct Spread {
    double variance, skewness;
};
Spread joined_spread(double above, double below) {
    const double difference = below - above, product = above * below;
    const double squares = above * above + below * below;
    const double variance = squares - product - 2 / pi * difference * difference;
    const double third = std::sqrt(2 / pi) * difference * ((4 / pi - 1) * squares + (3 - 8 / pi) * product);
    return {variance, third / std::pow(variance, 1.5)};
}

/// Integral of cos(t)^m exp(tilt t - peak) between two angles.
double angle_integral(double m, double tilt, double peak, double low, double high) {
    // The integrand is largest at the angle of tangent tilt/m and narrows as m grows.
    const double top = std::atan(tilt / m), narrow = 1 / std::sqrt(m);
    const std::array<double, 5> points{top, top - narrow, top + narrow, top - 4 * narrow, top + 4 * narrow};
    return integral(
        [=](double t) {
            const double c = std::cos(t);
            return c > 0 ? std::exp(m * std::log(c) + tilt * t - peak) : 0.0;
        },
        low, high, points);
}

double angle_peak(double m, double tilt) {
    const double top = std::atan(tilt / m);
    return m * std::log(std::cos(top)) + tilt * top;
}

/// The part of a Pearson IV density between two angles.
double pearson_share(const PearsonFour& s, double low, double high) {
    const double m = s.power - 2, peak = angle_peak(m, s.tilt);
    return std::exp(s.log_scale + peak) * s.width * angle_integral(m, s.tilt, peak, low, high);
}

struct Density {
    double x;
    double operator()(const GaussianShape& s) const {
        return normal_density((x - s.range) / s.straggle) / s.straggle;
    }
    double operator()(const JoinedHalfGaussians& s) const {
        const double side = x < s.mode ? s.above : s.below;
        return 2 * normal_density((x - s.mode) / side) / (s.above + s.below);
    }
    double operator()(const PearsonFour& s) const {
        const double tangent = (x - s.centre) / s.width;
        // ln cos(t) without the cancellation of the cosine near a right angle.
        const double log_cosine =
            std::abs(tangent) < 1e8 ? -0.5 * std::log1p(tangent * tangent) : -std::log(std::abs(tangent));
        return std::exp(s.log_scale + s.power * log_cosine + s.tilt * std::atan(tangent));
    }
};

/// Share on the shallow side (deep = false) or on the deep side of x.
struct Share {
    double x;
    bool deep;
    double operator()(const GaussianShape& s) const {
        const double z = (x - s.range) / s.straggle;
        return normal_share(deep ? -z : z);
    }
    double operator()(const JoinedHalfGaussians& s) const {
        const double z = x - s.mode, whole = s.above + s.below;
        if (deep)
            return z > 0 ? 2 * s.below / whole * normal_share(-z / s.below)
                         : 1 - 2 * s.above / whole * normal_share(z / s.above);
        return z < 0 ? 2 * s.above / whole * normal_share(z / s.above)
                     : 1 - 2 * s.below / whole * normal_share(-z / s.below);
    }
    double operator()(const PearsonFour& s) const {
        const double t = std::atan((x - s.centre) / s.width);
        const double top = std::atan(s.tilt / s.power);
        // The smaller side is integrated, so that a tail keeps its digits.
        const double smaller = t < top ? pearson_share(s, -pi / 2, t) : pearson_share(s, t, pi / 2);
        return (t < top) == deep ? 1 - smaller : smaller;
    }
};

}  // namespace

GaussianShape gaussian_shape(const Moments& moments) { return {moments.range, moments.straggle}; }

JoinedHalfGaussians joined_half_gaussians(const Moments& moments, std::vector<std::string>& remarks) {
    double skewness = moments.skewness;
    if (std::abs(skewness) > steepest_joined) {
        skewness = std::copysign(steepest_joined, skewness);
        remarks.push_back("joined half-Gaussians cannot have a skewness of " + number_text(moments.skewness) +
                          ": " + number_text(skewness) + " used");
    }
    // The skewness rises with the ratio below/above.
    double low = -widest_log_ratio, high = widest_log_ratio;
    for (int step = 0; step < 100; ++step) {
        const double middle = 0.5 * (low + high);
        (joined_spread(1, std::exp(middle)).skewness < skewness ? low : high) = middle;
    }
    const double ratio = skewness == 0 ? 1 : std::exp(0.5 * (low + high));
    const double above = moments.straggle / std::sqrt(joined_spread(1, ratio).variance);
    const double below = above * ratio;
    return {moments.range - std::sqrt(2 / pi) * (below - above), above, below};
}

double lowest_pearson_kurtosis(double skewness) {
    const double g = skewness * skewness;
    return (39 * g + 48 + 6 * std::pow(g + 4, 1.5)) / (32 - g);
}

PearsonFour pearson_four(const Moments& moments, std::vector<std::string>& remarks) {
    double skewness = moments.skewness;
    if (std::abs(skewness) > steepest_pearson) {
        skewness = std::copysign(steepest_pearson, skewness);
        remarks.push_back("a Pearson IV profile cannot have a skewness of " + number_text(moments.skewness) +
                          ": " + number_text(skewness) + " used");
    }
    const double lowest = kurtosis_margin * lowest_pearson_kurtosis(skewness);
    double kurtosis = moments.kurtosis.value_or(0);
    if (!(kurtosis > lowest)) {
        remarks.push_back("a Pearson IV profile of skewness " + number_text(skewness) +
                          " needs a kurtosis above " + number_text(lowest / kurtosis_margin) + ": " +
                          number_text(lowest) + " used");
        kurtosis = lowest;
    }
    // df/dy = (y - a) f / (b0 + b1 y + b2 y^2) with y in straggles.
    const double g = skewness * skewness, A = 10 * kurtosis - 12 * g - 18;
    const double a = -skewness * (kurtosis + 3) / A;
    const double b0 = -(4 * kurtosis - 3 * g) / A, b1 = a, b2 = -(2 * kurtosis - 3 * g - 6) / A;
    const double D = std::sqrt(4 * b0 * b2 - b1 * b1);
    PearsonFour shape;
    shape.range = moments.range;
    shape.straggle = moments.straggle;
    shape.centre = moments.range - moments.straggle * b1 / (2 * b2);
    shape.width = moments.straggle * D / (2 * std::abs(b2));
    shape.power = -1 / b2;
    shape.tilt = (b1 / b2 + 2 * a) / D;
    const double m = shape.power - 2, peak = angle_peak(m, shape.tilt);
    shape.log_scale = -peak - std::log(shape.width * angle_integral(m, shape.tilt, peak, -pi / 2, pi / 2));
    return shape;
}

ImplantShape shape_from(const Moments& moments, std::vector<std::string>& remarks) {
    if (moments.kurtosis) return pearson_four(moments, remarks);
    if (moments.skewness != 0) return joined_half_gaussians(moments, remarks);
    return gaussian_shape(moments);
}

double density(const ImplantShape& shape, double x) { return std::visit(Density{x}, shape); }

double share_above(const ImplantShape& shape, double x) { return std::visit(Share{x, false}, shape); }

double share_below(const ImplantShape& shape, double x) { return std::visit(Share{x, true}, shape); }

}  // namespace bandwright
