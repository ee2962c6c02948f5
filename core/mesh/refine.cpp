#include "core/mesh/refine.hpp"

#include <algorithm>
#include <cmath>

namespace bandwright {

Spacing widths_for(const Mesh& mesh, const std::vector<Demand>& demands,
                   const std::vector<double>& largest_width, double tolerance, double least) {
    const std::size_t cells = mesh.cells();
    std::vector<double> width(cells, INFINITY);
    for (const Demand& demand : demands) {
        double integral = 0;
        for (std::size_t cell = 0; cell < cells; ++cell)
            integral += std::cbrt(demand[cell]) * mesh.width(cell);
        if (!(integral > 0)) continue;
        const double share = std::pow(tolerance / integral, 1.5);
        for (std::size_t cell = 0; cell < cells; ++cell)
            if (demand[cell] > 0) width[cell] = std::min(width[cell], std::cbrt(share / demand[cell]));
    }
    Spacing spacing;
    std::size_t stretch = 0;
    for (std::size_t cell = 0; cell < cells; ++cell) {
        while (stretch + 2 < mesh.fixed.size() && mesh.fixed[stretch + 1] <= cell) ++stretch;
        const double length = mesh.position[mesh.fixed[stretch + 1]] - mesh.position[mesh.fixed[stretch]];
        const double h = mesh.width(cell);
        double w = std::min({width[cell], largest_width[cell], length / 8});
        w = std::clamp(w, h / 6, h * 3);
        w = std::max(w, std::min(least, length / 8));
        spacing.depth.push_back(mesh.position[cell] + 0.5 * h);
        spacing.width.push_back(w);
    }
    return spacing;
}

std::vector<double> interpolated(const Mesh& from, const std::vector<double>& values, const Mesh& to,
                                 std::size_t stride) {
    std::vector<double> result(to.nodes() * stride);
    std::size_t cell = 0;
    for (std::size_t node = 0; node < to.nodes(); ++node) {
        const double x = to.position[node];
        while (cell + 1 < from.cells() && from.position[cell + 1] < x) ++cell;
        const double share = std::clamp((x - from.position[cell]) / from.width(cell), 0.0, 1.0);
        for (std::size_t k = 0; k < stride; ++k) {
            const double left = values[cell * stride + k], right = values[(cell + 1) * stride + k];
            result[node * stride + k] = share == 1 ? right : left + share * (right - left);
        }
    }
    return result;
}

std::vector<double> injected(const Mesh& fine, const std::vector<double>& values, std::size_t stride) {
    std::vector<double> result;
    for (std::size_t k = 0; k + 1 < fine.fixed.size(); ++k)
        for (std::size_t node = fine.fixed[k]; node < fine.fixed[k + 1]; node += 2)
            for (std::size_t part = 0; part < stride; ++part) result.push_back(values[node * stride + part]);
    for (std::size_t part = 0; part < stride; ++part)
        result.push_back(values[(fine.nodes() - 1) * stride + part]);
    return result;
}

}  // namespace bandwright
