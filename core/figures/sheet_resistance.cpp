#include "core/figures/sheet_resistance.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/models/mobility.hpp"

namespace bandwright {

namespace {

/// Sheet conductance density [S] and net dose over a stretch of one layer.
double conductance(const Structure& structure, std::size_t layer, MobilityModel model, double x) {
    const Doping doping = doping_at(structure, layer, x);
    if (doping.net() == 0) return 0;
    const Carrier carrier = doping.net() > 0 ? Carrier::electron : Carrier::hole;
    const Material& material = structure.materials[structure.layers[layer].material];
    return constants::elementary_charge * std::abs(doping.net()) *
           mobility(carrier, model, material, doping, structure.temperature);
}

// Seven-point Gauss-Legendre rule.
template <class Function>
double gauss(double from, double to, const Function& f) {
    constexpr double x[] = {0.949107912342759, 0.741531185599394, 0.405845151377397};
    constexpr double w[] = {0.129484966168870, 0.279705391489277, 0.381830050505119};
    const double middle = 0.5 * (from + to), half = 0.5 * (to - from);
    double sum = 0.417959183673469 * f(middle);
    for (int k = 0; k < 3; ++k) sum += w[k] * (f(middle - half * x[k]) + f(middle + half * x[k]));
    return half * sum;
}

template <class Function>
double adaptive(double from, double to, double whole, double scale, const Function& f, int depth) {
    const double middle = 0.5 * (from + to), left = gauss(from, middle, f), right = gauss(middle, to, f);
    if (depth == 0 || std::abs(left + right - whole) <= 1e-10 * std::max(scale, std::abs(left + right)))
        return left + right;
    return adaptive(from, middle, left, scale, f, depth - 1) +
           adaptive(middle, to, right, scale, f, depth - 1);
}

}  // namespace

std::vector<SheetLine> sheet_resistances(const Structure& structure) {
    const std::vector<double> boundaries = layer_boundaries(structure);
    std::vector<double> ends{0.0};
    for (const Metallurgical& junction : metallurgical_junctions(structure)) ends.push_back(junction.depth);
    ends.push_back(boundaries.back());
    std::vector<SheetLine> lines;
    for (std::size_t k = 0; k + 1 < ends.size(); ++k) {
        std::vector<double> cuts{ends[k], ends[k + 1]};
        for (const double x : boundaries) cuts.push_back(x);
        for (const DopingEntry& entry : structure.doping) {
            for (const double x : breakpoints(entry.shape)) cuts.push_back(x);
            for (const Scale& scale : scales(entry.shape, boundaries.back()))
                for (const double steps : {-4.0, -2.0, -1.0, 0.0, 1.0, 2.0, 4.0})
                    cuts.push_back(scale.depth + steps * scale.length);
        }
        std::erase_if(cuts, [&](double x) { return x < ends[k] || x > ends[k + 1]; });
        std::sort(cuts.begin(), cuts.end());
        double total = 0, donors = 0;
        for (std::size_t c = 0; c + 1 < cuts.size(); ++c) {
            const double from = cuts[c], to = cuts[c + 1];
            if (!(to > from)) continue;
            const double middle = 0.5 * (from + to);
            const auto above = std::upper_bound(boundaries.begin(), boundaries.end(), middle);
            const std::size_t layer = std::min(static_cast<std::size_t>(above - boundaries.begin()) - 1,
                                               structure.layers.size() - 1);
            const MobilityModel model =
                mobility_model(structure, structure.materials[structure.layers[layer].material]);
            const auto f = [&](double x) { return conductance(structure, layer, model, x); };
            const double whole = gauss(from, to, f);
            total += adaptive(from, to, whole, total, f, 30);
            donors += doping_at(structure, layer, middle).net() * (to - from);
        }
        lines.push_back({ends[k], ends[k + 1],
                         donors > 0   ? "n"
                         : donors < 0 ? "p"
                                      : "undoped",
                         total > 0 ? 1 / total : no_value});
    }
    return lines;
}

}  // namespace bandwright
