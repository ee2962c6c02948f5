// Doping profiles: the shapes a user can describe and their value at a depth.
// Not for: implants and anneals (core/process) or which dopant is a donor in which host (structure.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

namespace bandwright {

/// Direction in which a one-sided profile runs from its origin.
enum class Direction { down, up };

/// Constant concentration [m^-3] wherever the entry reaches.
struct UniformDoping {
    static constexpr std::string_view name = "uniform";
    double concentration = 0;
};

/// Constant concentration [m^-3] between two depths [m].
struct StepDoping {
    static constexpr std::string_view name = "step";
    double concentration = 0, from = 0, to = 0;
};

/// N = peak exp(-(x - depth)^2 / (2 straggle^2)) [m^-3]; with dose [m^-2] in place of peak, that Gaussian
/// plus its mirror image at the top surface, scaled so that the integral over x >= 0 is the dose.
struct GaussianDoping {
    static constexpr std::string_view name = "gaussian";
    std::optional<double> peak, dose;
    double depth = 0, straggle = 0;
};

/// N = surface erfc(distance / length) [m^-3] on the side of the origin that direction names, zero on the
/// other.
struct ErfcDoping {
    static constexpr std::string_view name = "erfc";
    double surface = 0, length = 0, origin = 0;
    Direction direction = Direction::down;
};

/// N = surface exp(-distance / decay_length) [m^-3] on the side of the origin that direction names, zero on
/// the other.
struct ExponentialDoping {
    static constexpr std::string_view name = "exponential";
    double surface = 0, decay_length = 0, origin = 0;
    Direction direction = Direction::down;
};

/// Net doping gradient (x - zero_depth), positive values donors [m^-3]; gradient in m^-4 may have either
/// sign.
struct LinearDoping {
    static constexpr std::string_view name = "linear";
    double gradient = 0, zero_depth = 0;
};

/// A measured profile: depths [m, increasing] and concentrations [m^-3]. Between two points that are above
/// zero, monotone cubic interpolation of log10(concentration) without overshoot [FritschCarlson1980]; next to
/// a point at zero, a straight line; zero beyond the ends.
struct MeasuredDoping {
    static constexpr std::string_view name = "measured";
    std::string file;
    std::vector<double> depth, concentration;
    double floor = 0;
};

using DopingShape = std::variant<UniformDoping, StepDoping, GaussianDoping, ErfcDoping, ExponentialDoping,
                                 LinearDoping, MeasuredDoping>;

/// Concentration of a shape at a depth [m^-3]; LinearDoping gives the signed net doping.
/// At a jump the value is that of the deeper side. Errors: none.
double concentration(const DopingShape& shape, double x);

/// Depths at which the shape jumps or has a kink [m]; a mesh puts nodes there.
std::vector<double> breakpoints(const DopingShape& shape);

/// Depths around which the shape changes fast, with the length over which it does [m]; used to start a mesh.
struct Scale {
    double depth, length;
};
std::vector<Scale> scales(const DopingShape& shape, double total_thickness);

/// One entry of the doping list.
struct DopingEntry {
    /// Element symbol, "donor" or "acceptor"; empty for LinearDoping.
    std::string dopant;
    DopingShape shape;
    /// Index of the only layer it reaches, or none for the whole stack.
    std::optional<std::size_t> layer;
};

}  // namespace bandwright
