// The figures of one point and their errors from nested meshes. Not for: tables of many points (analyses).
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <vector>

#include "core/base/results.hpp"
#include "core/figures/junction.hpp"

namespace bandwright {

/// Which number stands where in PointFigures.
enum class PointFigure {
    current_density,
    junction_voltage,
    peak_field,
    peak_field_depth,
    extrapolated_field,
    depletion_top_edge,
    depletion_bottom_edge,
    depletion_width,
    built_in_potential,
    contact_potential,
    zero_bias_capacitance
};
inline constexpr std::size_t point_figure_count = 11;

/// Name, unit and meaning of a point figure.
struct PointFigureInfo {
    const char* name;
    Unit unit;
    const char* meaning;
};
const PointFigureInfo& info(PointFigure figure);

/// Figures of one state in memory units; no_value where one does not exist.
struct PointFigures {
    std::array<double, point_figure_count> values{};
    /// Rounding and iteration floor of each.
    std::array<double, point_figure_count> floors{};
    std::string state;
    double operator[](PointFigure figure) const { return values[static_cast<std::size_t>(figure)]; }
};

/// Reads all figures but the zero-bias capacitance (BiasWalk::capacitance) off a state; `which` junction of `junctions` (none when empty). iteration_error:
/// NewtonReport's.
PointFigures point_figures(const DiscreteSystem& system, const State& state, const Equations& equations,
                           const std::vector<Metallurgical>& junctions, std::size_t which,
                           double iteration_error = 0);

/// Estimated absolute errors of the finest of two or three nested meshes (finest first), [no_value where the
/// figure has no value]. With a second-order scheme the error of the finest is a third of its difference from
/// the next; the third mesh guards against two that agree by chance. Two figures that hang on a searched
/// place count as first order. A safety factor of 2 stands on the estimate, so that a printed error covers;
/// tests judge coverage and median over 100 structures.
std::array<double, point_figure_count> nested_errors(const std::vector<PointFigures>& finest_first);

/// Estimated errors relative to the values (depths relative to the depletion width) of a fine mesh beside its
/// coarsened one; 0 for figures that are missing, at their floor, or have no relative error.
std::array<double, point_figure_count> relative_errors(const PointFigures& fine, const PointFigures& coarse);

}  // namespace bandwright
