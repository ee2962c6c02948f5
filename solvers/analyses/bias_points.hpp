// The analysis behind `bands` and `iv`: the solved structure at a list of biases, with error bars from nested
// meshes. Not for: how a bias is reached (solvers/sweep.hpp) or how results are written (io).
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>
#include <optional>
#include <string>
#include <vector>

#include "core/base/results.hpp"
#include "core/device/structure.hpp"
#include "core/mesh/mesh.hpp"

namespace bandwright {

/// What is asked.
struct BiasRequest {
    /// Terminal voltages V_top - V_bottom [V], in the order in which they are reported.
    std::vector<double> biases;
    /// |current density| at which a sweep ends [A/m^2].
    double max_current = 1e10;
    /// Depth [m] of the junction that per-junction figures speak of; none: the one that drops most of the
    /// bias.
    std::optional<double> junction_depth;
    /// Without error bars one mesh is solved, with them three nested ones.
    bool error_bars = true;
    /// Biases that need no solving (size biases, or empty: none); they are left out of the outcome's points.
    std::vector<bool> skip;
    /// Mesh to solve on in place of an adapted one.
    std::optional<Mesh> mesh;
};

/// Why an analysis ended.
enum class EndReason { complete, current_limit, stopped_short, interrupted };

/// Deterministic counters of a run.
struct RunCounts {
    /// All Newton iterations: mesh building, rejected steps and nested meshes included.
    long newton_iterations = 0;
    long rejected_steps = 0;
    std::size_t nodes = 0;
};

/// What came out. Points hold every requested bias that was reached, in the order of the request.
struct BiasOutcome {
    std::vector<Figure> figures;
    std::vector<JunctionLine> junctions;
    std::vector<SheetLine> sheet_resistances;
    Table points;
    Profiles profiles;
    std::vector<std::string> warnings;
    EndReason end = EndReason::complete;
    /// One sentence: where and why it stopped, empty when complete.
    std::string message;
    RunCounts counts;
    /// The finest mesh, and the junction that per-junction figures speak of (index into junctions).
    Mesh mesh;
    std::size_t junction = 0;
};

/// What an analysis tells while it runs; every member may be empty.
struct Hooks {
    /// Share of the work done, 0 to 1, and what is being done.
    std::function<void(double, const std::string&)> progress;
    /// True when the run shall end now (the outcome then has EndReason::interrupted).
    std::function<bool()> should_stop;
    /// True when the caller wants an intermediate outcome now; asked after every finished point.
    std::function<bool()> wants_checkpoint;
    /// Receives an intermediate outcome with the points finished so far.
    std::function<void(const BiasOutcome&)> checkpoint;
};

/// Solves a structure at the requested biases. Point columns: bias [V], current_density, current (with an
/// area), junction_voltage, peak_field, peak_field_depth, extrapolated_field, depletion_top_edge,
/// depletion_bottom_edge, depletion_width. Figures: built_in_potential, contact_potential,
/// zero_bias_capacitance. Errors: none for a
/// solver that stops (see BiasOutcome::end); ContractError for a structure with complaints.
BiasOutcome run_bias_points(const Structure& structure, const BiasRequest& request, const Hooks& hooks = {});

}  // namespace bandwright
