// A costly profile turned into a table that answers fast and smoothly.
// Not for: measured points (core/device/doping.hpp) or profiles in closed form.
//
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <functional>
#include <span>
#include <vector>

namespace bandwright {

/// Piecewise Chebyshev interpolation of ln N. Piece k reaches from edge[k] to edge[k + 1] [m]; N itself does
/// not jump between pieces. Empty pieces have N = 0.
struct TabulatedProfile {
    static constexpr std::size_t degree = 16;
    struct Piece {
        bool empty = true;
        std::array<double, degree + 1> coefficient{};
    };
    std::vector<double> edge;
    std::vector<Piece> piece;
    /// N [m^-3] below which the table says zero: 1e-20 of the largest value met.
    double floor = 0;
    /// Largest relative difference met between the table and the profile where N is above floor, at points
    /// between those that made the table.
    double worst = 0;
};

/// The table of a profile [m^-3] from 0 to thickness [m, finite], pieces halved until the relative difference
/// is below the tolerance or a piece is a 2^-40th of its start.
///
/// points: where the profile jumps or has a kink, and around narrow peaks. The profile must not be negative.
/// Cost: some thousand calls of the profile.
TabulatedProfile tabulated(const std::function<double(double)>& profile, double thickness,
                           std::span<const double> points = {}, double tolerance = 1e-11);

/// N at a depth [m^-3]; zero outside the table.
double value(const TabulatedProfile& table, double x);

}  // namespace bandwright
