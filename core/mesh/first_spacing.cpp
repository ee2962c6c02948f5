#include "core/mesh/first_spacing.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"

namespace bandwright {

namespace {

constexpr double growth = 0.3;         // first mesh only; found enough to start Newton on
constexpr double debye_share = 0.5;    // width at a jump or junction, in Debye lengths
constexpr double profile_share = 0.5;  // change of asinh(N / 2 nie) allowed in a cell of the first mesh
constexpr std::size_t samples_per_stretch = 240;
constexpr double least_width = 2e-11;  // [m]; an eighth of the lattice constant: nothing physical is smaller

double debye_length(double permittivity, double thermal_voltage, double density) {
    return std::sqrt(permittivity * constants::vacuum_permittivity * thermal_voltage /
                     (constants::elementary_charge * density));
}

}  // namespace

FixedDepths fixed_depths(const Structure& structure) {
    const std::vector<double> boundaries = layer_boundaries(structure);
    const double bottom = boundaries.back();
    std::vector<double> depth = boundaries;
    for (const DopingEntry& entry : structure.doping)
        for (const double x : breakpoints(entry.shape))
            if (x > 0 && x < bottom) depth.push_back(x);
    const std::size_t hard = depth.size();
    for (const Metallurgical& junction : metallurgical_junctions(structure))
        if (junction.depth > 0 && junction.depth < bottom) depth.push_back(junction.depth);
    // A junction that coincides with a jump to rounding is that jump, not a cell of its own.
    for (std::size_t k = hard; k < depth.size(); ++k)
        for (std::size_t other = 0; other < hard; ++other)
            if (std::abs(depth[k] - depth[other]) < 1e-9 * bottom * 1e-3 + least_width)
                depth[k] = depth[other];
    std::sort(depth.begin(), depth.end());
    FixedDepths fixed;
    for (const double x : depth) {
        // Two jumps closer than the smallest width are one, unless both are layer boundaries.
        if (!fixed.depth.empty() && x - fixed.depth.back() < least_width) {
            const bool is_boundary = std::find(boundaries.begin(), boundaries.end(), x) != boundaries.end();
            const bool last_is_boundary =
                std::find(boundaries.begin(), boundaries.end(), fixed.depth.back()) != boundaries.end();
            if (!is_boundary || x == fixed.depth.back()) continue;
            if (!last_is_boundary) {
                fixed.depth.back() = x;
                continue;
            }
        }
        fixed.depth.push_back(x);
    }
    for (std::size_t k = 0; k + 1 < fixed.depth.size(); ++k) {
        const double middle = 0.5 * (fixed.depth[k] + fixed.depth[k + 1]);
        const auto above = std::upper_bound(boundaries.begin(), boundaries.end(), middle);
        fixed.layer_of_stretch.push_back(static_cast<std::size_t>(above - boundaries.begin()) - 1);
    }
    return fixed;
}

Spacing first_spacing(const Structure& structure, const FixedDepths& fixed, double largest_bias) {
    const std::vector<Metallurgical> junctions = metallurgical_junctions(structure);
    const double thermal = constants::thermal_voltage(structure.temperature);
    std::vector<double> around;
    for (const DopingEntry& entry : structure.doping)
        for (const Scale& scale : scales(entry.shape, fixed.depth.back()))
            for (double steps = -8; steps <= 8; steps += 0.25)
                around.push_back(scale.depth + steps * scale.length);
    std::sort(around.begin(), around.end());
    Spacing spacing;
    for (std::size_t k = 0; k + 1 < fixed.depth.size(); ++k) {
        const double from = fixed.depth[k], to = fixed.depth[k + 1], length = to - from;
        const std::size_t layer = fixed.layer_of_stretch[k];
        const Bands bands =
            bands_at(structure.materials[structure.layers[layer].material], structure.temperature);
        const double nie = std::exp(std::max(0.5 * bands.log_intrinsic_squared, -600.0));
        std::vector<double> x;
        for (std::size_t s = 0; s <= samples_per_stretch; ++s)
            x.push_back(from + length * static_cast<double>(s) / samples_per_stretch);
        for (const double point : around)
            if (point > from && point < to) x.push_back(point);
        // Close to both ends the profile may change within a small part of the stretch.
        for (double share = 0.5 / samples_per_stretch; share > 1e-7; share /= 3) {
            x.push_back(from + share * length);
            x.push_back(to - share * length);
        }
        std::sort(x.begin(), x.end());
        x.erase(std::unique(x.begin(), x.end()), x.end());
        std::vector<double> level(x.size()), net(x.size());
        for (std::size_t s = 0; s < x.size(); ++s) {
            // Just inside the stretch, so that a jump at its end does not count.
            const double inside = std::clamp(x[s], from + 1e-9 * length, to - 1e-9 * length);
            net[s] = doping_at(structure, layer, inside).net();
            level[s] = std::asinh(net[s] / (2 * nie + 1));
        }
        double peak = 0;
        for (const double value : net) peak = std::max(peak, std::abs(value));
        for (std::size_t s = 0; s < x.size(); ++s) {
            double width = length / 8;
            if (s > 0) {
                const double change = std::abs(level[s] - level[s - 1]);
                if (change > 0)
                    width = std::min(width, std::max((x[s] - x[s - 1]) * profile_share / change, 0.0));
            }
            if (s + 1 < x.size()) {
                const double change = std::abs(level[s + 1] - level[s]);
                if (change > 0) width = std::min(width, (x[s + 1] - x[s]) * profile_share / change);
            }
            // Nothing changes faster than the Debye length of the largest density near by.
            const double floor =
                0.5 * debye_length(bands.relative_permittivity, thermal, std::max(peak, 1e16));
            width = std::max(width, std::min(floor, length / 8));
            if (s == 0 || s + 1 == x.size()) {
                const double density = std::max(std::abs(net[s]), 1e18);
                width = std::min(width,
                                 debye_share * debye_length(bands.relative_permittivity, thermal, density));
            }
            if (largest_bias > 0 && net[s] != 0) {
                const double permittivity = bands.relative_permittivity * constants::vacuum_permittivity;
                const double reach = 1.3 * std::sqrt(2 * permittivity * (largest_bias + 1) /
                                                     (constants::elementary_charge * std::abs(net[s])));
                for (const Metallurgical& junction : junctions)
                    if (std::abs(x[s] - junction.depth) < reach)
                        width = std::min(
                            width, debye_length(bands.relative_permittivity, thermal, std::abs(net[s])));
            }
            spacing.depth.push_back(x[s]);
            spacing.width.push_back(std::max(width, least_width));
        }
    }
    limit_growth(spacing, growth);
    return spacing;
}

}  // namespace bandwright
