// The as-implanted depth profile for a unit dose: Gaussian, joined half-Gaussians or Pearson IV.
// Not for: where range and straggle come from (range_table.hpp) or what an anneal does (diffusion.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <variant>
#include <vector>

namespace bandwright {

/// Moments of a profile: mean depth and standard deviation [m], skewness, kurtosis (3 for a Gaussian).
struct Moments {
    double range = 0, straggle = 0, skewness = 0;
    std::optional<double> kurtosis;
};

/// f = exp(-(x - range)^2 / (2 straggle^2)) / (sqrt(2 pi) straggle); lengths in m.
struct GaussianShape {
    double range = 0, straggle = 0;
};

/// f = 2 exp(-(x - mode)^2 / (2 s^2)) / (sqrt(2 pi) (above + below)), s = above at x < mode, below deeper;
/// lengths in m. Source: [GibbonsMylroie1973].
struct JoinedHalfGaussians {
    double mode = 0, above = 0, below = 0;
};

/// ln f = log_scale + power ln cos(t) + tilt t, tan(t) = (x - centre) / width: the Pearson IV density in the
/// angle t. centre and width in m, log_scale the logarithm of a density [1/m]; range and straggle [m] are
/// those of the moments. Source: [Hofker1975], [RysselRuge1978]; in this form derived.
struct PearsonFour {
    double range = 0, straggle = 0;
    double centre = 0, width = 0, power = 0, tilt = 0, log_scale = 0;
};

using ImplantShape = std::variant<GaussianShape, JoinedHalfGaussians, PearsonFour>;

/// The Gaussian of a range and a straggle; skewness and kurtosis are not looked at.
GaussianShape gaussian_shape(const Moments& moments);

/// Joined half-Gaussians with a range, straggle and skewness, the ratio of the halves found by bisection.
/// A skewness beyond +-0.99 cannot be represented: it is cut to that and a remark says so.
JoinedHalfGaussians joined_half_gaussians(const Moments& moments, std::vector<std::string>& remarks);

/// The lowest kurtosis of type IV at a skewness, whose square is below 32. Source: [Selberherr1984].
double lowest_pearson_kurtosis(double skewness);

/// Pearson IV with all four moments; a missing kurtosis counts as too low. A kurtosis at or below 1.01 times
/// the lowest of type IV is raised to that, a skewness beyond +-0.99 sqrt(32) cut to it; remarks say so.
PearsonFour pearson_four(const Moments& moments, std::vector<std::string>& remarks);

/// Pearson IV with a kurtosis, else joined half-Gaussians with a skewness, else the Gaussian.
ImplantShape shape_from(const Moments& moments, std::vector<std::string>& remarks);

/// Density at a depth [1/m]; its integral over all x is 1.
double density(const ImplantShape& shape, double x);

/// Integral of the density from -infinity to x.
double share_above(const ImplantShape& shape, double x);

/// Integral of the density from x to infinity, exact also where it is small.
double share_below(const ImplantShape& shape, double x);

}  // namespace bandwright
