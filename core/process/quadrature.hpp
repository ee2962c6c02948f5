// Adaptive integration of a smooth function over a finite interval.
// Not for: functions with an infinite end (substitute first) or sums over a mesh.
//
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>
#include <span>

namespace bandwright {

/// Integral of f from low to high. The interval is cut at those points that lie inside it, and between them
/// so that pieces widen gradually; each piece is halved until its 16-point Gauss-Legendre sum agrees with
/// that of its two halves to the tolerance times the largest estimate of the integral of |f|, or no longer
/// shrinks below 1e-10 of it (rounding), or the piece is a 2^-40th of its start.
///
/// points: where f or a derivative jumps, or where it is peaked; any order. Zero when high <= low.
/// Source: Gauss-Legendre rule [AbramowitzStegun1964], 25.4.29, its nodes found by Newton's method.
double integral(const std::function<double(double)>& f, double low, double high,
                std::span<const double> points = {}, double tolerance = 1e-13);

}  // namespace bandwright
