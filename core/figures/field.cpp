#include "core/figures/field.hpp"

#include "core/base/constants.hpp"

namespace bandwright {

std::vector<double> displacement_at_nodes(const DiscreteSystem& system, const State& state, const Equations& equations) {
    const std::size_t nodes = system.nodes();
    std::vector<double> displacement(nodes);
    const auto middle = [&](std::size_t cell) {
        return -system.dielectric[cell] * (state.psi(cell + 1) - state.psi(cell));
    };
    for (std::size_t node = 0; node < nodes; ++node) {
        double sum = 0;
        int sides = 0;
        if (node > 0) {
            sum += middle(node - 1) + 0.5 * system.mesh.width(node - 1) * charge_right(system, equations, node - 1);
            ++sides;
        }
        if (node + 1 < nodes) {
            sum += middle(node) - 0.5 * system.mesh.width(node) * charge_left(system, equations, node);
            ++sides;
        }
        displacement[node] = sum / sides;
    }
    return displacement;
}

double field_in_cell(const DiscreteSystem& system, std::size_t cell, double displacement) {
    return displacement * constants::elementary_charge /
           (system.of_cell(cell).relative_permittivity * constants::vacuum_permittivity);
}

}  // namespace bandwright
