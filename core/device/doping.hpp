// Doping profiles: the shapes a user can describe and their value at a depth.
// Not for: what a process makes of them (processing.hpp) or which dopant is a donor in which host
// (structure.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "core/process/anneal.hpp"
#include "core/process/implant.hpp"
#include "core/process/tabulated_profile.hpp"

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

/// A film on the surface that an implant goes through; thickness [m].
struct Film {
    std::string material;
    double thickness = 0;
};

/// An implant as described, and what process() found for it. Energies in eV, doses in m^-2, lengths in m.
struct ImplantDoping {
    static constexpr std::string_view name = "implant";
    std::optional<double> energy;
    double dose = 0;
    /// Of the beam from the normal [degree]; depths are multiplied by its cosine.
    double tilt = 0;
    /// Largest active concentration [m^-3]; none: all is active.
    std::optional<double> activation;
    /// The user's own moments, before every table.
    std::optional<double> range, straggle, skewness, kurtosis;
    std::vector<Film> films;
    std::vector<AnnealStep> anneal;

    /// As implanted, for a unit dose, in silicon without films; and the silicon that the films stand for.
    ImplantShape shape = GaussianShape{};
    double film_shift = 0;
    /// What came to rest below the films [m^-2].
    double retained_dose = 0;
    /// The profile after all anneals; none: as implanted.
    std::optional<TabulatedProfile> table;
};

/// Any other profile after the structure's anneals.
struct DiffusedDoping {
    static constexpr std::string_view name = "diffused";
    /// The kind it was described as.
    std::string kind;
    TabulatedProfile table;
};

using DopingShape = std::variant<UniformDoping, StepDoping, GaussianDoping, ErfcDoping, ExponentialDoping,
                                 LinearDoping, MeasuredDoping, ImplantDoping, DiffusedDoping>;

/// The kind that a user wrote: that of the alternative, or what a diffused profile was before.
std::string kind_of(const DopingShape& shape);

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
