#include "solvers/point_figures.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/figures/terminal.hpp"

namespace bandwright {

namespace {

constexpr PointFigureInfo table[point_figure_count] = {
    {"current_density", Unit::current_density, "current density into the top contact"},
    {"junction_voltage", Unit::voltage, "voltage between the contacts, after series resistance"},
    {"peak_field", Unit::field, "largest field of the junction, magnitude"},
    {"peak_field_depth", Unit::length, "depth of the largest field"},
    {"extrapolated_field", Unit::field, "lightly doped side's field carried to the junction, magnitude"},
    {"depletion_top_edge", Unit::length, "upper half-depletion point"},
    {"depletion_bottom_edge", Unit::length, "lower half-depletion point"},
    {"depletion_width", Unit::length, "distance of the half-depletion points"},
    {"built_in_potential", Unit::voltage, "potential between the neutral neighbours of the junction"},
    {"contact_potential", Unit::voltage, "potential from contact to contact, magnitude"},
    {"zero_bias_capacitance", Unit::capacitance, "change of the hole charge per voltage at equilibrium"},
};

constexpr double safety = 2;
constexpr double third_mesh_weight = 0.5;

}  // namespace

const PointFigureInfo& info(PointFigure figure) { return table[static_cast<std::size_t>(figure)]; }

PointFigures point_figures(const DiscreteSystem& system, const State& state, const Equations& equations,
                           const std::vector<Metallurgical>& junctions, std::size_t which,
                           double iteration_error) {
    PointFigures point;
    point.values.fill(no_value);
    const auto set = [&](PointFigure figure, std::optional<double> value, double floor) {
        if (!value) return;
        point.values[static_cast<std::size_t>(figure)] = *value;
        point.floors[static_cast<std::size_t>(figure)] = floor;
    };
    const double q = constants::elementary_charge, kT = system.thermal_voltage;
    const double relative = std::max(iteration_error, 1e-14);
    const TerminalCurrent current = terminal_current(system, state, equations);
    set(PointFigure::current_density, q * current.flux,
        q * current.rounding + std::abs(q * current.flux) * relative);
    set(PointFigure::junction_voltage, state.contact_voltage * kT,
        std::abs(state.contact_voltage * kT) * 1e-15);
    // Half-depletion points and fields move by a Debye length per kT/q; 1e-12 of the depth is far below any
    // mesh.
    if (!junctions.empty()) {
        const JunctionFigures junction = junction_figures(system, state, equations, junctions, which);
        const double depth = system.mesh.position.back();
        const auto magnitude = [](std::optional<double> value) {
            return value ? std::optional(std::abs(*value)) : value;
        };
        const double field = junction.peak_field ? std::abs(*junction.peak_field) : 0;
        set(PointFigure::peak_field, magnitude(junction.peak_field), field * (relative + 1e-12));
        set(PointFigure::peak_field_depth, junction.peak_depth,
            depth * 1e-15 + junction.peak_depth_resolution);
        set(PointFigure::extrapolated_field, magnitude(junction.extrapolated_field),
            field * (relative + 1e-12) + junction.extrapolated_doubt);
        set(PointFigure::depletion_top_edge, junction.top_edge, depth * 1e-15);
        set(PointFigure::depletion_bottom_edge, junction.bottom_edge, depth * 1e-15);
        if (junction.top_edge && junction.bottom_edge)
            set(PointFigure::depletion_width, *junction.bottom_edge - *junction.top_edge, depth * 2e-15);
        if (state.contact_voltage == 0)
            set(PointFigure::built_in_potential, junction.barrier, kT * (relative + 1e-13));
        point.state = junction.state;
    }
    set(PointFigure::contact_potential, std::abs(state.psi(0) - state.psi(system.nodes() - 1)) * kT,
        kT * 1e-13);
    return point;
}

std::array<double, point_figure_count> nested_errors(const std::vector<PointFigures>& finest_first) {
    std::array<double, point_figure_count> errors;
    errors.fill(no_value);
    if (finest_first.size() < 2) return errors;
    for (std::size_t k = 0; k < point_figure_count; ++k) {
        const double fine = finest_first[0].values[k], next = finest_first[1].values[k];
        if (std::isnan(fine) || std::isnan(next)) continue;
        // Figures that hang on a place found by a search lose an order where the place moves from node to
        // node.
        const auto figure = static_cast<PointFigure>(k);
        const bool first_order =
            figure == PointFigure::built_in_potential || figure == PointFigure::extrapolated_field;
        double estimate = std::abs(fine - next) / (first_order ? 1 : 3);
        if (finest_first.size() > 2 && !std::isnan(finest_first[2].values[k])) {
            const double coarser = std::abs(next - finest_first[2].values[k]) / 12;
            estimate = std::max(estimate, third_mesh_weight * coarser);
        }
        // The depth of a node is known to the mesh's own resolution, which the floor states.
        if (figure == PointFigure::peak_field_depth) {
            errors[k] = std::max(finest_first[0].floors[k], 0.5 * std::abs(fine - next));
            continue;
        }
        errors[k] = safety * estimate + finest_first[0].floors[k];
    }
    return errors;
}

std::array<double, point_figure_count> relative_errors(const PointFigures& fine, const PointFigures& coarse) {
    const auto error = nested_errors({fine, coarse});
    std::array<double, point_figure_count> relative{};
    for (std::size_t k = 0; k < point_figure_count; ++k) {
        if (std::isnan(error[k])) continue;
        const auto figure = static_cast<PointFigure>(k);
        double scale = std::abs(fine.values[k]);
        const bool is_depth = figure == PointFigure::peak_field_depth ||
                              figure == PointFigure::depletion_top_edge ||
                              figure == PointFigure::depletion_bottom_edge;
        if (is_depth)
            scale = std::isnan(fine[PointFigure::depletion_width]) ? INFINITY
                                                                   : fine[PointFigure::depletion_width];
        // The place of a flat peak is known to the root of the field's error only; its error bar says so.
        if (figure == PointFigure::junction_voltage || figure == PointFigure::peak_field_depth) continue;
        // At equilibrium the current is zero and has no relative error.
        if (figure == PointFigure::current_density && fine[PointFigure::junction_voltage] == 0) continue;
        const double excess = error[k] - fine.floors[k];
        if (excess > 2 * fine.floors[k] && scale > 0) relative[k] = excess / scale;
    }
    return relative;
}

}  // namespace bandwright
