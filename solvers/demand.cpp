#include "solvers/demand.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/figures/field.hpp"
#include "core/figures/terminal.hpp"

namespace bandwright {

namespace {

// Second derivative at each cell: the larger of its two nodes'; a fixed node, where values may jump, does not
// count.
std::vector<double> second_derivative(const Mesh& mesh, const std::vector<double>& left,
                                      const std::vector<double>& right, const std::vector<double>& noise) {
    std::vector<double> at_node(mesh.nodes(), 0.0);
    std::vector<char> is_fixed(mesh.nodes(), 0);
    for (const std::size_t node : mesh.fixed) is_fixed[node] = 1;
    for (std::size_t node = 1; node + 1 < mesh.nodes(); ++node) {
        if (is_fixed[node]) continue;
        const double a = mesh.width(node - 1), b = mesh.width(node);
        const double here = 0.5 * (right[node - 1] + left[node]);
        const double before = is_fixed[node - 1] ? left[node - 1] : 0.5 * (left[node - 1] + right[node - 2]);
        const double after = is_fixed[node + 1] ? right[node] : 0.5 * (right[node] + left[node + 1]);
        const double rise = std::abs((after - here) / b - (here - before) / a);
        const double floor = (noise[node - 1] + noise[node]) * (1 / a + 1 / b);
        at_node[node] = std::max(0.0, rise - floor) * 2 / (a + b);
    }
    for (const std::size_t node : mesh.fixed) {
        if (node > 0) at_node[node] = std::max(at_node[node], at_node[node - 1]);
        if (node + 1 < mesh.nodes()) at_node[node] = std::max(at_node[node], at_node[node + 1]);
    }
    std::vector<double> in_cell(mesh.cells());
    for (std::size_t cell = 0; cell < mesh.cells(); ++cell) {
        // A fixed end belongs to the other side as well: only the inner node speaks for this cell.
        const double l = is_fixed[cell] && !is_fixed[cell + 1] ? at_node[cell + 1] : at_node[cell];
        const double r = is_fixed[cell + 1] && !is_fixed[cell] ? at_node[cell] : at_node[cell + 1];
        in_cell[cell] = std::max(l, r);
    }
    return in_cell;
}

// Curvature of psi [m^-2] in a cell, from its charge, weighted by where a carrier's path resists most.
Demand flux_demand(const DiscreteSystem& system, const State& state, const Equations& equations,
                   bool electrons, double share) {
    const std::size_t cells = system.cells();
    Demand demand(cells, 0.0);
    if (!(share > 1e-6)) return demand;
    std::vector<double> exponent(cells);
    double largest = -INFINITY;
    for (std::size_t cell = 0; cell < cells; ++cell) {
        const EndCoefficients& end = system.of_cell(cell);
        const double psi = 0.5 * (state.psi(cell) + state.psi(cell + 1));
        const double speed = electrons ? system.electron_speed[cell] : system.hole_speed[cell];
        exponent[cell] =
            electrons ? -(psi + end.affinity + end.log_Nc) : psi - end.negative_ionization - end.log_Nv;
        exponent[cell] -= std::log(speed * system.mesh.width(cell));
        largest = std::max(largest, exponent[cell]);
    }
    double total = 0;
    for (std::size_t cell = 0; cell < cells; ++cell)
        total += std::exp(exponent[cell] - largest) * system.mesh.width(cell);
    for (std::size_t cell = 0; cell < cells; ++cell) {
        const double h = system.mesh.width(cell);
        const double rho = std::max(std::abs(charge_left(system, equations, cell)),
                                    std::abs(charge_right(system, equations, cell)));
        const double curvature = rho / (system.dielectric[cell] * h);
        demand[cell] = share * std::exp(exponent[cell] - largest) / total * curvature / 12;
    }
    return demand;
}

}  // namespace

void SeenDensities::add(const Equations& equations) {
    const std::size_t cells = equations.cells();
    if (most.size() != cells) {
        most.assign(cells, 0.0);
        least.assign(cells, INFINITY);
    }
    for (std::size_t cell = 0; cell < cells; ++cell) {
        const double density = 0.5 * (equations.left(cell).n + equations.left(cell).p +
                                      equations.right(cell).n + equations.right(cell).p);
        most[cell] = std::max(most[cell], density);
        least[cell] = std::min(least[cell], density);
    }
}

std::vector<Demand> demands_of(const DiscreteSystem& system, const State& state, const Equations& equations) {
    const std::size_t cells = system.cells();
    std::vector<Demand> demands;
    std::vector<double> left(cells), right(cells), noise(cells);

    const std::vector<double> displacement = displacement_at_nodes(system, state, equations);
    double largest = 0;
    for (const double value : displacement) largest = std::max(largest, std::abs(value));
    for (std::size_t cell = 0; cell < cells; ++cell) {
        left[cell] = charge_left(system, equations, cell);
        right[cell] = charge_right(system, equations, cell);
        noise[cell] = 1e-11 * (equations.left(cell).n + equations.left(cell).p + equations.right(cell).n +
                               equations.right(cell).p);
    }
    Demand charge = second_derivative(system.mesh, left, right, noise);
    for (double& value : charge) value /= 12 * std::max(largest, 1e-300);
    demands.push_back(std::move(charge));

    const TerminalCurrent current = terminal_current(system, state, equations);
    double total = std::abs(current.flux), recombined = 0;
    for (std::size_t cell = 0; cell < cells; ++cell) {
        left[cell] = equations.rate_left(cell).value;
        right[cell] = equations.rate_right(cell).value;
        noise[cell] = 1e-10 * (std::abs(left[cell]) + std::abs(right[cell]));
        recombined += 0.5 * system.mesh.width(cell) * std::abs(left[cell] + right[cell]);
    }
    if (state.contact_voltage != 0 && recombined > 1e-6 * total) {
        Demand rate = second_derivative(system.mesh, left, right, noise);
        for (double& value : rate) value /= 12 * std::max(total, recombined);
        demands.push_back(std::move(rate));
    }
    const CurrentProfile profile = current_profile(system, equations, current);
    double most_electron = 0, most_hole = 0;
    for (std::size_t cell = 0; cell < cells; ++cell) {
        most_electron = std::max(most_electron, std::abs(profile.electron[cell]));
        most_hole = std::max(most_hole, std::abs(profile.hole[cell]));
    }
    const double scale = std::max({total, recombined, 1e-300});
    const double at_a = std::abs(equations.flux(current.electron_cell).electron),
                 at_b = std::abs(equations.flux(current.hole_cell).hole);
    demands.push_back(flux_demand(system, state, equations, true,
                                  state.contact_voltage == 0 ? 1 : std::min(1.0, at_a / scale)));
    demands.push_back(flux_demand(system, state, equations, false,
                                  state.contact_voltage == 0 ? 1 : std::min(1.0, at_b / scale)));
    return demands;
}

std::vector<double> largest_widths(const DiscreteSystem& system, const SeenDensities& seen,
                                   const std::vector<double>& junction_depths, double tolerance) {
    const std::size_t cells = system.cells();
    std::vector<double> widths(cells, INFINITY);
    for (std::size_t cell = 0; cell < cells; ++cell) {
        const double h = system.mesh.width(cell);
        const double doping = std::abs(0.5 * (system.net_left[cell] + system.net_right[cell]));
        const double debye = std::sqrt(system.dielectric[cell] * h / std::max(doping, 1e10));
        // Depleted in one state, filled in another: an edge sweeps through here.
        if (seen.least[cell] < 0.5 * doping && seen.most[cell] > 0.5 * doping) {
            // Edge of a layer of charge q N W; see the derivation in DEVELOPERS.md.
            constexpr double least_layer = 30;  // in Debye lengths
            double distance = INFINITY;
            for (const double depth : junction_depths)
                distance = std::min(distance, std::abs(system.mesh.position[cell] - depth));
            const double layer =
                std::isfinite(distance) ? std::max(least_layer, distance / debye) : least_layer;
            widths[cell] = std::min(widths[cell], debye * std::sqrt(3 * tolerance * layer));
        }
    }
    // Doping curvature in neutral regions: the error of psi in kT/q is h^2 N'' / (24 N).
    std::vector<double> zero(cells, 0.0);
    for (std::size_t cell = 0; cell < cells; ++cell) {
        const double h = system.mesh.width(cell);
        const double l = system.net_left[cell], r = system.net_right[cell];
        if (l == 0 || r == 0 || (l > 0) != (r > 0)) continue;
        // ln N changes by |slope| h across the cell; keep (slope h)^2 / 24 well below the tolerance's square
        // root.
        const double slope = 2 * std::abs(std::log(r / l)) / h;
        if (slope > 0) widths[cell] = std::min(widths[cell], std::sqrt(720 * tolerance) / slope);
    }
    return widths;
}

}  // namespace bandwright
