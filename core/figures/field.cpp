#include "core/figures/field.hpp"

#include "core/base/constants.hpp"

namespace bandwright {

std::vector<double> displacement_at_nodes(const DiscreteSystem& system, const State& state,
                                          const Equations& equations) {
    const std::size_t nodes = system.nodes();
    std::vector<double> displacement(nodes);
    const auto middle = [&](std::size_t cell) {
        return -system.dielectric[cell] * (state.psi(cell + 1) - state.psi(cell));
    };
    // Fixed nodes, where the charge may jump, and the ends: the charge of half a cell carries the value to
    // the node.
    for (const std::size_t node : system.mesh.fixed) {
        double sum = 0;
        int sides = 0;
        if (node > 0) {
            sum += middle(node - 1) +
                   0.5 * system.mesh.width(node - 1) * charge_right(system, equations, node - 1);
            ++sides;
        }
        if (node + 1 < nodes) {
            sum += middle(node) - 0.5 * system.mesh.width(node) * charge_left(system, equations, node);
            ++sides;
        }
        displacement[node] = sum / sides;
    }
    // Everywhere else the charge is smooth and the straight line between both middles errs by the change of
    // the net charge alone; half a cell of one carrier would err by that carrier's change, which is large in
    // a graded neutral region.
    std::size_t next = 0;
    for (std::size_t node = 0; node < nodes; ++node) {
        if (next < system.mesh.fixed.size() && system.mesh.fixed[next] == node) {
            ++next;
            continue;
        }
        const double left = system.mesh.width(node - 1), right = system.mesh.width(node);
        displacement[node] = (right * middle(node - 1) + left * middle(node)) / (left + right);
    }
    return displacement;
}

double field_in_cell(const DiscreteSystem& system, std::size_t cell, double displacement) {
    return displacement * constants::elementary_charge /
           (system.of_cell(cell).relative_permittivity * constants::vacuum_permittivity);
}

}  // namespace bandwright
