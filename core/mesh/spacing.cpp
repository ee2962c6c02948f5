#include "core/mesh/spacing.hpp"

#include <algorithm>
#include <cmath>

namespace bandwright {

void limit_growth(Spacing& spacing, double growth) {
    const std::size_t count = spacing.depth.size();
    for (std::size_t k = 1; k < count; ++k)
        spacing.width[k] = std::min(
            spacing.width[k], spacing.width[k - 1] + growth * (spacing.depth[k] - spacing.depth[k - 1]));
    for (std::size_t k = count; k-- > 1;)
        spacing.width[k - 1] = std::min(
            spacing.width[k - 1], spacing.width[k] + growth * (spacing.depth[k] - spacing.depth[k - 1]));
}

namespace {

double width_at(const Spacing& spacing, double x) {
    const auto above = std::upper_bound(spacing.depth.begin(), spacing.depth.end(), x);
    if (above == spacing.depth.begin()) return spacing.width.front();
    if (above == spacing.depth.end()) return spacing.width.back();
    const std::size_t right = static_cast<std::size_t>(above - spacing.depth.begin()), left = right - 1;
    const double length = spacing.depth[right] - spacing.depth[left];
    const double share = length > 0 ? (x - spacing.depth[left]) / length : 0;
    return spacing.width[left] + share * (spacing.width[right] - spacing.width[left]);
}

// Nodes of one stretch: equal steps of the integral of dx / width, which for linear widths has a closed form.
void fill_stretch(double from, double to, const Spacing& spacing, double factor, std::size_t multiple,
                  std::vector<double>& position) {
    std::vector<double> offset{0.0}, width{width_at(spacing, from) * factor};
    auto first = std::upper_bound(spacing.depth.begin(), spacing.depth.end(), from);
    for (auto it = first; it != spacing.depth.end() && *it < to; ++it) {
        if (*it - from <= offset.back()) continue;
        offset.push_back(*it - from);
        width.push_back(spacing.width[static_cast<std::size_t>(it - spacing.depth.begin())] * factor);
    }
    offset.push_back(to - from);
    width.push_back(width_at(spacing, to) * factor);
    std::vector<double> total{0.0};
    for (std::size_t k = 1; k < offset.size(); ++k) {
        const double ratio = width[k] / width[k - 1] - 1;
        const double mean = std::abs(ratio) < 1e-6 ? width[k - 1] * (1 + ratio / 2)
                                                   : width[k - 1] * ratio / std::log1p(ratio);
        total.push_back(total.back() + (offset[k] - offset[k - 1]) / mean);
    }
    const double wanted = total.back() / static_cast<double>(multiple);
    const std::size_t cells =
        multiple * std::max<std::size_t>(1, static_cast<std::size_t>(std::ceil(wanted - 1e-9)));
    std::size_t k = 1;
    for (std::size_t node = 0; node < cells; ++node) {
        const double goal = total.back() * static_cast<double>(node) / static_cast<double>(cells);
        while (k + 1 < total.size() && total[k] < goal) ++k;
        const double share = goal - total[k - 1], span = offset[k] - offset[k - 1];
        const double slope = (width[k] - width[k - 1]) / span;
        const double step = std::abs(slope * share) < 1e-9 ? width[k - 1] * share
                                                           : width[k - 1] * std::expm1(slope * share) / slope;
        position.push_back(from + offset[k - 1] + std::min(step, span));
    }
}

}  // namespace

Mesh mesh_from_spacing(const FixedDepths& fixed, const Spacing& spacing, double factor,
                       std::size_t multiple) {
    Mesh mesh;
    for (std::size_t k = 0; k + 1 < fixed.depth.size(); ++k) {
        mesh.fixed.push_back(mesh.position.size());
        fill_stretch(fixed.depth[k], fixed.depth[k + 1], spacing, factor, multiple, mesh.position);
        mesh.layer_of_cell.resize(mesh.position.size(), fixed.layer_of_stretch[k]);
    }
    mesh.fixed.push_back(mesh.position.size());
    mesh.position.push_back(fixed.depth.back());
    for (std::size_t cell = 0; cell < mesh.cells(); ++cell)
        require(mesh.width(cell) > 0, "mesh positions do not increase");
    return mesh;
}

}  // namespace bandwright
