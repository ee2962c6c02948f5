// What a thermal budget makes of a starting profile between a surface and a bottom that let nothing out.
// Not for: the budget itself (anneal.hpp) or profiles that start at a surface (predeposition.hpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>
#include <limits>
#include <span>
#include <variant>
#include <vector>

#include "core/process/implant.hpp"

namespace bandwright {

inline constexpr double everywhere = std::numeric_limits<double>::infinity();

/// N = peak exp(-(x - centre)^2 / (2 straggle^2)) [m^-3] at from < x < to, zero elsewhere; lengths in m. What
/// lies beyond the surface or the bottom is folded back, so that nothing is lost: uncut, this is the usual
/// Gaussian plus its image.
struct GaussianPiece {
    double peak = 0, centre = 0, straggle = 0;
    double from = -everywhere, to = everywhere;
};

/// Constant concentration [m^-3] between two depths [m].
struct ConstantPiece {
    double concentration = 0, from = 0, to = 0;
};

/// Any concentration [m^-3] of the depth [m] between two finite depths. points: where it or a derivative
/// jumps, and around peaks that are narrow against the piece.
struct AnyPiece {
    std::function<double(double)> profile;
    double from = 0, to = 0;
    std::vector<double> points;
};

/// A part of a starting profile; parts add.
using StartingPiece = std::variant<GaussianPiece, ConstantPiece, AnyPiece>;

/// Pieces of an implanted profile: dose [m^-2] times the density of the shape, which lies shift [m] deeper
/// than the profile (the silicon that a film stands for), cut to from < x < to. Joined half-Gaussians give
/// two pieces. A Pearson IV profile needs finite cuts.
std::vector<StartingPiece> starting_pieces(const ImplantShape& shape, double dose, double shift, double from,
                                           double to);

/// Concentration at a depth [m^-3] after the budget (integral of D over time [m^2]), in silicon from 0 to
/// thickness [m, may be infinite] that dopant cannot leave.
///
/// The pieces spread as in an infinite body, and images at the surface and the bottom are added. Gaussians
/// and constants in closed form; any other piece by adaptive quadrature over the depths from which a part
/// above 1e-39 arrives, to about 1e-12 of the value. Budget zero: the folded starting profile, at a jump
/// inside the silicon the mean of both sides.
double diffused(std::span<const StartingPiece> pieces, double x, double budget, double thickness);

}  // namespace bandwright
