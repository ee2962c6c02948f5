#include "core/figures/sheet_resistance.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/models/mobility.hpp"
#include "core/process/quadrature.hpp"

namespace bandwright {

namespace {

/// A structure with what all regions share.
struct Stack {
    const Structure& structure;
    std::vector<double> boundaries, cuts;

    std::size_t layer_at(double x) const {
        const auto above = std::upper_bound(boundaries.begin(), boundaries.end(), x);
        const auto layer = above - boundaries.begin() - 1;
        return std::min(static_cast<std::size_t>(std::max<std::ptrdiff_t>(layer, 0)),
                        structure.layers.size() - 1);
    }
    const Material& material_at(double x) const {
        return structure.materials[structure.layers[layer_at(x)].material];
    }
    double net(double x) const { return doping_at(structure, layer_at(x), x).net(); }
    double permittivity(double x) const {
        return material_at(x).value("relative_permittivity") * constants::vacuum_permittivity;
    }
    double conductivity(double x) const {
        const Doping doping = doping_at(structure, layer_at(x), x);
        if (doping.net() == 0) return 0;
        const Carrier carrier = doping.net() > 0 ? Carrier::electron : Carrier::hole;
        const Material& material = material_at(x);
        return constants::elementary_charge * std::abs(doping.net()) *
               mobility(carrier, mobility_model(structure, material), material, doping,
                        structure.temperature);
    }
};

// Depths at which an integrand may jump or change fast.
std::vector<double> cuts_of(const Structure& structure, const std::vector<double>& boundaries) {
    std::vector<double> cuts = boundaries;
    for (const DopingEntry& entry : structure.doping) {
        for (const double x : breakpoints(entry.shape)) cuts.push_back(x);
        for (const Scale& scale : scales(entry.shape, boundaries.back()))
            for (const double steps : {-4.0, -2.0, -1.0, 0.0, 1.0, 2.0, 4.0})
                cuts.push_back(scale.depth + steps * scale.length);
    }
    std::sort(cuts.begin(), cuts.end());
    return cuts;
}

// Largest |net doping| in a region: samples on the cuts, then golden section between the neighbours of the
// best.
void find_peak(const Stack& stack, SheetLine& line) {
    std::vector<double> x{line.from, line.to};
    for (const double cut : stack.cuts)
        if (cut > line.from && cut < line.to) x.push_back(cut);
    std::sort(x.begin(), x.end());
    x.erase(std::unique(x.begin(), x.end()), x.end());
    std::vector<double> samples;
    constexpr int inside = 8;
    for (std::size_t k = 0; k + 1 < x.size(); ++k)
        for (int part = 0; part < inside; ++part) {
            const double share = part == 0 ? 1e-9 : static_cast<double>(part) / inside;
            samples.push_back(x[k] + share * (x[k + 1] - x[k]));
        }
    samples.push_back(line.to - 1e-9 * (line.to - line.from));
    const auto size = [&](double depth) { return std::abs(stack.net(depth)); };
    std::size_t best = 0;
    for (std::size_t k = 1; k < samples.size(); ++k)
        if (size(samples[k]) > size(samples[best])) best = k;
    double from = samples[best > 0 ? best - 1 : 0], to = samples[std::min(best + 1, samples.size() - 1)];
    const double golden = 0.5 * (std::sqrt(5.0) - 1);
    for (int step = 0; step < 90; ++step) {
        const double a = to - golden * (to - from), b = from + golden * (to - from);
        (size(a) < size(b) ? from : to) = size(a) < size(b) ? a : b;
    }
    const double summit = 0.5 * (from + to);
    line.peak_depth = size(summit) > size(samples[best]) ? summit : samples[best];
    line.peak = size(line.peak_depth);
}

// q/eps times the integral of |N| times the distance from a junction, to a depth.
double potential_from(const Stack& stack, double junction, double depth) {
    const auto moment = [&](double x) {
        return std::abs(stack.net(x)) * std::abs(x - junction) / stack.permittivity(x);
    };
    return constants::elementary_charge *
           integral(moment, std::min(junction, depth), std::max(junction, depth), stack.cuts);
}

double depleting_potential(const Stack& stack, const SheetLine& line, bool junction_above,
                           bool junction_below) {
    if (!junction_above && !junction_below) return no_value;
    if (!junction_below) return potential_from(stack, line.from, line.to);
    if (!junction_above) return potential_from(stack, line.to, line.from);
    double from = line.from, to = line.to;
    for (int step = 0; step < 60; ++step) {
        const double middle = 0.5 * (from + to);
        (potential_from(stack, line.from, middle) < potential_from(stack, line.to, middle) ? from : to) =
            middle;
    }
    return potential_from(stack, line.from, 0.5 * (from + to));
}

}  // namespace

std::vector<SheetLine> sheet_resistances(const Structure& structure) {
    Stack stack{structure, layer_boundaries(structure), {}};
    stack.cuts = cuts_of(structure, stack.boundaries);
    std::vector<double> ends{0.0};
    for (const Metallurgical& junction : metallurgical_junctions(structure)) ends.push_back(junction.depth);
    ends.push_back(stack.boundaries.back());
    const double thermal = constants::thermal_voltage(structure.temperature);
    std::vector<SheetLine> lines;
    for (std::size_t k = 0; k + 1 < ends.size(); ++k) {
        SheetLine line{ends[k], ends[k + 1], "undoped", no_value};
        const auto over = [&](const auto& f) { return integral(f, line.from, line.to, stack.cuts); };
        const double net = over([&](double x) { return stack.net(x); });
        if (net != 0) {
            line.type = std::string(1, net > 0 ? 'n' : 'p');
            line.dose = std::abs(net);
            const double conductance = over([&](double x) { return stack.conductivity(x); });
            if (conductance > 0) line.value = 1 / conductance;
            find_peak(stack, line);
            line.debye_length = std::sqrt(stack.permittivity(line.peak_depth) * thermal /
                                          (constants::elementary_charge * line.peak));
            line.depleting_potential = depleting_potential(stack, line, k > 0, k + 2 < ends.size());
        }
        lines.push_back(line);
    }
    return lines;
}

}  // namespace bandwright
