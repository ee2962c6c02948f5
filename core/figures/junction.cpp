#include "core/figures/junction.hpp"

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/figures/field.hpp"
#include "core/models/statistics.hpp"

namespace bandwright {

namespace {

constexpr double neutral_enough = 1e-3;   // |charge| / |doping| at which a region counts as neutral
constexpr double neutral_at_most = 0.05;  // |charge| / |doping| above which a place is not neutral
constexpr double few_carriers = 0.05;     // carriers / doping below which a side counts as depleted

/// What the search functions below share.
struct View {
    const DiscreteSystem& system;
    const State& state;
    const Equations& equations;
    std::vector<double> displacement;

    double x(std::size_t node) const { return system.mesh.position[node]; }
    double net_at(std::size_t cell, double position) const {
        return doping_at(system.structure, system.mesh.layer_of_cell[cell], position).net();
    }
};

// Depth in a cell at which f crosses zero, by bisection; f(from) and f(to) have opposite signs.
template <class Function>
double crossing(double from, double to, const Function& f) {
    const bool rises = f(from) < 0;
    for (int step = 0; step < 60; ++step) {
        const double middle = 0.5 * (from + to);
        if (middle <= from || middle >= to) break;
        ((f(middle) < 0) == rises ? from : to) = middle;
    }
    return 0.5 * (from + to);
}

// Cubic in a cell through end values and end slopes: the interpolation error then lies far below the
// solution's.
double hermite(double t, double h, double left, double left_slope, double right, double right_slope) {
    const double t2 = t * t, t3 = t2 * t;
    return (2 * t3 - 3 * t2 + 1) * left + (t3 - 2 * t2 + t) * h * left_slope + (3 * t2 - 2 * t3) * right +
           (t3 - t2) * h * right_slope;
}

// ln of the majority density inside a cell. Slopes: ratio * (d psi/dx - d phi/dx), with phi straight in the
// cell.
double log_density(const View& v, std::size_t cell, bool electrons, double position) {
    const double h = v.system.mesh.width(cell), t = (position - v.x(cell)) / h;
    const EndState l = v.equations.left(cell), r = v.equations.right(cell);
    const double inverse_length = 1 / v.system.thermal_voltage;
    const double slope_psi_l = -field_in_cell(v.system, cell, v.displacement[cell]) * inverse_length;
    const double slope_psi_r = -field_in_cell(v.system, cell, v.displacement[cell + 1]) * inverse_length;
    if (electrons) {
        const double slope_phi = (v.state.phi_n(cell + 1) - v.state.phi_n(cell)) / h;
        return hermite(t, h, std::log(l.n), l.ratio_n * (slope_psi_l - slope_phi), std::log(r.n),
                       r.ratio_n * (slope_psi_r - slope_phi));
    }
    const double slope_phi = (v.state.phi_p(cell + 1) - v.state.phi_p(cell)) / h;
    return hermite(t, h, std::log(l.p), l.ratio_p * (slope_phi - slope_psi_l), std::log(r.p),
                   r.ratio_p * (slope_phi - slope_psi_r));
}

// Depth where n = p nearest to the metallurgical junction, with n/p growing towards the n side.
std::optional<std::pair<std::size_t, double>> electrical_junction(const View& v,
                                                                  const Metallurgical& junction) {
    std::optional<std::pair<std::size_t, double>> best;
    for (std::size_t cell = 0; cell < v.system.cells(); ++cell) {
        const EndState l = v.equations.left(cell), r = v.equations.right(cell);
        const double left = std::log(l.n / l.p), right = std::log(r.n / r.p);
        const bool rises = left <= 0 && right > 0, falls = left > 0 && right <= 0;
        if (junction.p_above ? !rises : !falls) continue;
        const double depth = crossing(v.x(cell), v.x(cell + 1), [&](double position) {
            return log_density(v, cell, true, position) - log_density(v, cell, false, position);
        });
        if (!best || std::abs(depth - junction.depth) < std::abs(best->second - junction.depth))
            best = {cell, depth};
    }
    return best;
}

// Half-depletion point on one side of the electrical junction.
std::optional<double> edge(const View& v, std::size_t start_cell, double start, bool downwards, bool n_side) {
    const double sign = n_side ? 1 : -1;
    // Next to the metallurgical junction the doping vanishes and the share of carriers is large without
    // meaning: only a crossing from below counts.
    bool seen_below = false;
    std::optional<double> start_of_side;  // where this side's doping begins
    const auto excess = [&](std::size_t cell, double position) -> std::optional<double> {
        const double net = sign * v.net_at(cell, position);
        if (!(net > 0)) return std::nullopt;
        return log_density(v, cell, n_side, position) - std::log(0.5 * net);
    };
    std::size_t cell = start_cell;
    while (true) {
        const double h = v.system.mesh.width(cell), inside = 1e-9 * h;
        const double top = v.x(cell) + inside, bottom = v.x(cell + 1) - inside;
        double near = downwards ? top : bottom;
        const double far = downwards ? bottom : top;
        if (cell == start_cell) near = std::clamp(start, top, bottom);
        const std::optional<double> a = excess(cell, near), b = excess(cell, far);
        if (a && !start_of_side) start_of_side = near;
        if (b && !start_of_side) start_of_side = far;
        if (seen_below && a && *a >= 0) return near;  // crossed at the jump between two cells
        seen_below = seen_below || (a && *a < 0);
        if (seen_below && a && b && *a < 0 && *b >= 0)
            return crossing(std::min(near, far), std::max(near, far), [&](double position) {
                const std::optional<double> value = excess(cell, position);
                return value ? *value : -1.0;
            });
        seen_below = seen_below || (b && *b < 0);
        // A side that is nowhere half depleted (carriers spill from it into an intrinsic layer) begins at its
        // edge.
        if (downwards ? cell + 1 >= v.system.cells() : cell == 0)
            return seen_below ? std::nullopt : start_of_side;
        cell = downwards ? cell + 1 : cell - 1;
    }
}

// The largest |E| within the junction's space charge: from the start outward to the nearest minimum on each
// side.
void find_peak(const View& v, std::size_t start_node, JunctionFigures& figures) {
    const auto size = [&](std::size_t node) { return std::abs(v.displacement[node]); };
    const bool positive = v.displacement[start_node] > 0;
    std::size_t best = start_node;
    for (const bool downwards : {false, true}) {
        double least = size(start_node), most = least;
        std::size_t node = start_node;
        while (downwards ? node + 1 < v.system.nodes() : node > 0) {
            node = downwards ? node + 1 : node - 1;
            if ((v.displacement[node] > 0) != positive) break;
            if (size(node) > 1.01 * least && least < 0.9 * most)
                break;  // past a minimum: another space charge
            least = std::min(least, size(node));
            if (size(node) > most) most = least = size(node);
            if (size(node) > size(best)) best = node;
        }
    }
    double peak = v.displacement[best];
    std::size_t material_cell = best < v.system.cells() ? best : best - 1;
    // Charge at an end of a cell; at a node where it is smooth both cells share the mean, so that the summit
    // lies in exactly one of them and moves smoothly with the mesh.
    const auto charge_at = [&](std::size_t cell, bool at_right) {
        const std::size_t node = at_right ? cell + 1 : cell;
        const double own =
            at_right ? charge_right(v.system, v.equations, cell) : charge_left(v.system, v.equations, cell);
        if (node == 0 || node == v.system.cells()) return own;
        const double before = charge_right(v.system, v.equations, node - 1),
                     after = charge_left(v.system, v.equations, node);
        const double far = std::max(std::abs(charge_left(v.system, v.equations, node - 1)),
                                    std::abs(charge_right(v.system, v.equations, node)));
        if (std::abs(before - after) > 0.05 * far) return own;  // a jump of the doping
        const double a = v.system.mesh.width(node - 1), b = v.system.mesh.width(node);
        return (a * before + b * after) / (a + b);
    };
    // A smooth summit between two nodes: the cubic through both fields with the charge as slope.
    for (const std::size_t cell : {best > 0 ? best - 1 : best, best}) {
        if (cell >= v.system.cells()) continue;
        const double sign = positive ? 1 : -1;
        const double left_slope = sign * charge_at(cell, false);
        const double right_slope = sign * charge_at(cell, true);
        if (!(left_slope > 0 && right_slope < 0)) continue;
        const double h = v.system.mesh.width(cell), l = sign * v.displacement[cell],
                     r = sign * v.displacement[cell + 1];
        double from = 0, to = 1;
        for (int step = 0; step < 50; ++step) {
            const double t = 0.5 * (from + to), t2 = t * t;
            const double slope = 6 * (t - t2) * (r - l) +
                                 h * ((3 * t2 - 4 * t + 1) * left_slope + (3 * t2 - 2 * t) * right_slope);
            (slope > 0 ? from : to) = t;
        }
        const double summit = hermite(0.5 * (from + to), h, l, left_slope, r, right_slope);
        if (summit >= std::abs(peak) * (1 - 1e-12)) {  // the rise itself may be below rounding
            peak = sign * summit;
            figures.peak_depth_resolution = h;  // either end of a flat summit's cell may win
            material_cell = cell;
        }
    }
    figures.peak_field = field_in_cell(v.system, material_cell, peak);
    figures.peak_depth = v.x(best);
    // Where the field is flat, every node whose field differs by less than fields are known may be the
    // peak's.
    const double nearly = std::abs(peak) * (1 - 0.001 * v.system.structure.mesh.tolerance);
    std::size_t first = best, last = best;
    while (first > 0 && size(first - 1) >= nearly) --first;
    while (last + 1 < v.system.nodes() && size(last + 1) >= nearly) ++last;
    if (first < best || last > best)
        figures.peak_depth_resolution =
            std::max({figures.peak_depth_resolution, v.x(best) - v.x(first), v.x(last) - v.x(best)});
}

// Net doping summed from a node to another [m^-2], dose of whole cells.
double dose_between(const View& v, std::size_t from, std::size_t to) {
    double dose = 0;
    for (std::size_t cell = std::min(from, to); cell < std::max(from, to); ++cell)
        dose += 0.5 * v.system.mesh.width(cell) * (v.system.net_left[cell] + v.system.net_right[cell]);
    return to >= from ? dose : -dose;
}

// Range of nodes that belong to a junction's own p and n regions.
struct Region {
    std::size_t first, last;
};
Region region_beside(const View& v, const std::vector<Metallurgical>& junctions, std::size_t which,
                     bool below) {
    const auto node_at = [&](double depth) {
        const auto& x = v.system.mesh.position;
        return static_cast<std::size_t>(std::lower_bound(x.begin(), x.end(), depth - 1e-15) - x.begin());
    };
    const std::size_t own = std::min(node_at(junctions[which].depth), v.system.nodes() - 1);
    if (below)
        return {own,
                which + 1 < junctions.size() ? node_at(junctions[which + 1].depth) : v.system.nodes() - 1};
    return {which > 0 ? node_at(junctions[which - 1].depth) : 0, own};
}

void find_extrapolated(const View& v, const std::vector<Metallurgical>& junctions, std::size_t which,
                       JunctionFigures& figures) {
    double heaviest[2] = {0, 0};
    Region regions[2] = {region_beside(v, junctions, which, false), region_beside(v, junctions, which, true)};
    for (int side = 0; side < 2; ++side)
        for (std::size_t cell = regions[side].first; cell < regions[side].last; ++cell)
            heaviest[side] = std::max(
                {heaviest[side], std::abs(v.system.net_left[cell]), std::abs(v.system.net_right[cell])});
    const int light = heaviest[0] < heaviest[1] ? 0 : 1;
    const Region region = regions[light];
    if (region.last <= region.first) return;
    const std::size_t junction_node = light == 1 ? region.first : region.last;
    double fewest = few_carriers;
    std::optional<double> value;
    double dose = 0, doubt = 0;
    std::size_t node = junction_node;
    while (light == 1 ? node < region.last : node > region.first) {
        const std::size_t cell = light == 1 ? node : node - 1;
        const std::size_t next = light == 1 ? node + 1 : node - 1;
        dose += dose_between(v, node, next);
        const EndState s = light == 1 ? v.equations.right(cell) : v.equations.left(cell);
        const double net = std::abs(light == 1 ? v.system.net_right[cell] : v.system.net_left[cell]);
        if (value && !((s.n + s.p) < 0.5 * net)) break;  // past this junction's own depleted layer
        if (net > 0 && (s.n + s.p) / net < fewest) {
            fewest = (s.n + s.p) / net;
            value = v.displacement[next] - dose;
            doubt = fewest * std::abs(dose);
        }
        node = next;
    }
    if (!value) return;
    const std::size_t cell = light == 1 ? region.first : region.last - 1;
    // From the node beside the junction to the junction itself.
    const double depth = junctions[which].depth, from = v.x(junction_node);
    const std::size_t own = depth < from ? junction_node - 1 : std::min(junction_node, v.system.cells() - 1);
    const double middle = 0.5 * (depth + from), reach = 0.5 * (from - depth) * std::sqrt(0.6);
    *value -=
        (from - depth) / 18 *
        (5 * v.net_at(own, middle - reach) + 8 * v.net_at(own, middle) + 5 * v.net_at(own, middle + reach));
    figures.extrapolated_field = field_in_cell(v.system, cell, *value);
    figures.extrapolated_doubt = std::abs(field_in_cell(v.system, cell, doubt));
}

// Charge of a node's box [m^-2] over its doping: zero charge is exact neutrality of the discrete equations.
struct BoxNeutrality {
    double charge, doping;
    double ratio() const { return doping != 0 ? std::abs(charge / doping) : 1; }
};

BoxNeutrality box_neutrality(const View& v, std::size_t node) {
    BoxNeutrality box{0, 0};
    if (node > 0) {
        const double half = 0.5 * v.system.mesh.width(node - 1);
        box.charge += half * charge_right(v.system, v.equations, node - 1);
        box.doping += half * v.system.net_right[node - 1];
    }
    if (node < v.system.cells()) {
        const double half = 0.5 * v.system.mesh.width(node);
        box.charge += half * charge_left(v.system, v.equations, node);
        box.doping += half * v.system.net_left[node];
    }
    return box;
}

// Potential [V] that a neutral region of the doping at a place would have.
double neutral_potential_at(const View& v, std::size_t cell, double position) {
    const Structure& s = v.system.structure;
    return neutral_potential(v.system.bands[v.system.material_of_cell[cell]], s.models.statistics,
                             s.temperature, v.net_at(cell, position));
}

// Neutral potential [V] of the nearest neutral region outward from an edge: at the first place where the
// charge falls below a thousandth of the doping or, in a steep profile that is nowhere so neutral, where its
// share is least. The place moves smoothly with the solution; the first zero of the charge would not, because
// in a graded region zeros come and go.
std::optional<double> neutral_psi_beyond(const View& v, double edge_depth, Region region, bool below) {
    std::optional<std::size_t> best;
    double least = neutral_at_most, before_ratio = 0;
    std::optional<std::size_t> before;
    for (std::size_t step = 0; step <= region.last - region.first; ++step) {
        const std::size_t node = below ? region.first + step : region.last - step;
        if (below ? v.x(node) < edge_depth : v.x(node) > edge_depth) continue;
        if (node == 0 || node + 1 == v.system.nodes() || node == region.first || node == region.last)
            continue;
        const double ratio = box_neutrality(v, node).ratio();
        const std::size_t cell = below ? node - 1 : node;  // on the junction's side of the node
        if (ratio <= neutral_enough) {
            double place = below ? std::max(edge_depth, v.x(node - 1)) : std::min(edge_depth, v.x(node + 1));
            if (before) {
                const double share = std::log(before_ratio / neutral_enough) /
                                     std::log(before_ratio / std::max(ratio, 1e-300));
                place = v.x(*before) + share * (v.x(node) - v.x(*before));
            }
            return neutral_potential_at(v, cell, place);
        }
        if (ratio < least) {
            least = ratio;
            best = node;
        } else if (best && ratio > 10 * least && ratio > 0.01) {
            break;  // the next space charge begins
        }
        before = node;
        before_ratio = ratio;
    }
    if (!best) return std::nullopt;
    const std::size_t node = *best;
    // Least beside a contact means least at the contact, which is neutral by its own equation.
    if (node == 1) return v.state.psi(0) * v.system.thermal_voltage;
    if (node + 2 == v.system.nodes()) return v.state.psi(node + 1) * v.system.thermal_voltage;
    // The least share between nodes: the parabola through three logarithms, so that the place does not jump
    // with nodes.
    const double x0 = v.x(node - 1) - v.x(node), x2 = v.x(node + 1) - v.x(node);
    const double y1 = std::log(box_neutrality(v, node).ratio());
    const double y0 = std::log(box_neutrality(v, node - 1).ratio()) - y1,
                 y2 = std::log(box_neutrality(v, node + 1).ratio()) - y1;
    const double curvature = (y2 / x2 - y0 / x0) / (x2 - x0), slope = y0 / x0 - curvature * x0;
    const double offset = std::clamp(curvature > 0 ? -slope / (2 * curvature) : 0, 0.5 * x0, 0.5 * x2);
    return neutral_potential_at(v, offset < 0 ? node - 1 : node, v.x(node) + offset);
}

}  // namespace

JunctionFigures junction_figures(const DiscreteSystem& system, const State& state, const Equations& equations,
                                 const std::vector<Metallurgical>& junctions, std::size_t which) {
    const View v{system, state, equations, displacement_at_nodes(system, state, equations)};
    const Metallurgical& junction = junctions.at(which);
    JunctionFigures figures;
    const auto& x = system.mesh.position;
    const std::size_t at = std::min(
        static_cast<std::size_t>(std::lower_bound(x.begin(), x.end(), junction.depth - 1e-15) - x.begin()),
        system.nodes() - 1);
    find_peak(v, at, figures);
    find_extrapolated(v, junctions, which, figures);
    const auto electrical = electrical_junction(v, junction);
    if (!electrical) {
        figures.state = "electrons and holes are nowhere equal at this junction";
        return figures;
    }
    figures.top_edge = edge(v, electrical->first, electrical->second, false, !junction.p_above);
    figures.bottom_edge = edge(v, electrical->first, electrical->second, true, junction.p_above);
    if (!figures.top_edge || !figures.bottom_edge) figures.state = "reached through";
    if (figures.top_edge && figures.bottom_edge) {
        const auto above =
            neutral_psi_beyond(v, *figures.top_edge, region_beside(v, junctions, which, false), false);
        const auto below =
            neutral_psi_beyond(v, *figures.bottom_edge, region_beside(v, junctions, which, true), true);
        if (above && below) figures.barrier = junction.p_above ? *below - *above : *above - *below;
    }
    return figures;
}

std::size_t most_biased_junction(const DiscreteSystem& system, const std::vector<Metallurgical>& junctions,
                                 const State& equilibrium, const State& biased) {
    std::size_t best = 0;
    double most = -1;
    const auto& x = system.mesh.position;
    const auto node_at = [&](double depth) {
        return std::min(static_cast<std::size_t>(std::lower_bound(x.begin(), x.end(), depth) - x.begin()),
                        system.nodes() - 1);
    };
    for (std::size_t k = 0; k < junctions.size(); ++k) {
        const std::size_t top = k == 0 ? 0 : node_at(0.5 * (junctions[k - 1].depth + junctions[k].depth));
        const std::size_t bottom = k + 1 == junctions.size()
                                       ? system.nodes() - 1
                                       : node_at(0.5 * (junctions[k].depth + junctions[k + 1].depth));
        const double before = equilibrium.psi(bottom) - equilibrium.psi(top),
                     after = biased.psi(bottom) - biased.psi(top);
        // At zero bias all changes vanish and the largest barrier counts.
        const double change = biased.contact_voltage == 0 ? std::abs(after) : std::abs(after - before);
        if (change > most) {
            most = change;
            best = k;
        }
    }
    return best;
}

}  // namespace bandwright
