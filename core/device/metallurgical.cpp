#include <algorithm>
#include <cmath>

#include "core/device/structure.hpp"

namespace bandwright {

namespace {

constexpr int even_samples = 400;  // per layer, besides those around each profile's own scale

/// A place where the net doping was looked at.
struct Sample {
    double x, net;
    std::size_t layer;
};

std::vector<double> sample_depths(const Structure& structure, double from, double to, double total) {
    const double length = to - from, inside = 1e-9 * length;
    std::vector<double> depths;
    for (int k = 0; k <= even_samples; ++k)
        depths.push_back(from + inside + (length - 2 * inside) * k / even_samples);
    for (double share = 1e-3; share > 1e-8; share /= 2) {
        depths.push_back(from + share * length);
        depths.push_back(to - share * length);
    }
    for (const DopingEntry& entry : structure.doping) {
        for (const double x : breakpoints(entry.shape))
            for (const double side : {-inside, inside}) depths.push_back(x + side);
        for (const Scale& scale : scales(entry.shape, total))
            for (int k = -40; k <= 40; ++k) depths.push_back(scale.depth + 0.25 * k * scale.length);
    }
    std::erase_if(depths, [&](double x) { return !(x > from && x < to); });
    std::sort(depths.begin(), depths.end());
    depths.erase(std::unique(depths.begin(), depths.end()), depths.end());
    return depths;
}

// Gradient at a zero by a central difference a thousandth of the way to where the doping is 10 % of its
// surroundings.
std::optional<double> gradient_at(const Structure& structure, std::size_t layer, double x, double reach) {
    const auto net = [&](double position) { return doping_at(structure, layer, position).net(); };
    const double step = 1e-4 * reach;
    const double coarse = (net(x + step) - net(x - step)) / (2 * step);
    const double fine = (net(x + step / 2) - net(x - step / 2)) / step;
    // A jump makes the difference quotient double when the step is halved.
    if (std::abs(fine - coarse) > 0.2 * std::abs(fine)) return std::nullopt;
    return (4 * fine - coarse) / 3;
}

}  // namespace

std::vector<Metallurgical> metallurgical_junctions(const Structure& structure) {
    const std::vector<double> boundaries = layer_boundaries(structure);
    std::vector<Metallurgical> junctions;
    std::optional<Sample> before;  // last sample with a net doping
    bool gap = false;              // an undoped stretch lies between `before` and here
    for (std::size_t layer = 0; layer < structure.layers.size(); ++layer) {
        for (const double x :
             sample_depths(structure, boundaries[layer], boundaries[layer + 1], boundaries.back())) {
            const double net = doping_at(structure, layer, x).net();
            if (net == 0) {
                gap = before.has_value();
                continue;
            }
            const Sample here{x, net, layer};
            if (before && (before->net < 0) != (net < 0)) {
                Metallurgical junction;
                junction.p_above = before->net < 0;
                const bool across = before->layer != layer;
                const bool before_is_p = before->net < 0;
                // Where the doping stops having the sign it had, and where it begins to have the other.
                const auto boundary = [&](const auto& is_past) {
                    double from = before->x, to = x;
                    for (int step = 0; step < 200; ++step) {
                        const double middle = 0.5 * (from + to);
                        if (middle <= from || middle >= to) break;
                        (is_past(doping_at(structure, layer, middle).net()) ? to : from) = middle;
                    }
                    return 0.5 * (from + to);
                };
                if (across) {
                    junction.depth = gap ? 0.5 * (before->x + x) : boundaries[layer];
                } else {
                    const double end = boundary(
                                     [&](double net) { return net == 0 || (net < 0) != before_is_p; }),
                                 start = boundary(
                                     [&](double net) { return net != 0 && (net < 0) != before_is_p; });
                    junction.depth = 0.5 * (end + start);
                    gap = start - end > 1e-9 * boundaries.back();  // not where a sample hits the zero itself
                    // A jump is where the profile says it is, to the last digit.
                    for (const DopingEntry& entry : structure.doping)
                        for (const double point : breakpoints(entry.shape))
                            if (std::abs(point - junction.depth) <= 1e-12 * boundaries.back())
                                junction.depth = point;
                    const double reach =
                        std::min(junction.depth - boundaries[layer], boundaries[layer + 1] - junction.depth);
                    if (!gap)
                        junction.gradient =
                            gradient_at(structure, layer, junction.depth, std::min(reach, x - before->x));
                }
                junctions.push_back(junction);
            }
            before = here;
            gap = false;
        }
    }
    return junctions;
}

}  // namespace bandwright
