// SPDX-License-Identifier: MIT
#include "core/figures/depletion_approximation.hpp"

#include <algorithm>
#include <array>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/base/error.hpp"

namespace bandwright {

namespace {

using constants::elementary_charge;

/// Charge [m^-2] and its first moment about the junction [m^-1], both as magnitudes.
struct Moments {
    double charge = 0, dipole = 0;
};

/// Nodes and weights of five-point Gauss-Legendre quadrature on [-1, 1]. Source: [AbramowitzStegun1964]
/// table 25.4.
constexpr std::array<double, 5> gauss_node{-0.906179845938664, -0.5384693101056831, 0.0, 0.5384693101056831,
                                           0.906179845938664};
constexpr std::array<double, 5> gauss_weight{0.2369268850561891, 0.4786286704993665, 0.5688888888888889,
                                             0.4786286704993665, 0.2369268850561891};

/// One side of the junction, seen as a function of the distance from it.
struct Side {
    std::vector<double> distance;
    std::vector<Moments> until;
};

struct SideProfile {
    const JunctionProfile& profile;
    double direction;
    double sign;

    double density(double distance) const {
        return sign * profile.net(profile.junction + direction * distance);
    }

    Moments between(double from, double to) const {
        Moments sum;
        const double half = (to - from) / 2, middle = (to + from) / 2;
        for (std::size_t k = 0; k < gauss_node.size(); ++k) {
            const double distance = middle + half * gauss_node[k];
            const double part = half * gauss_weight[k] * density(distance);
            sum.charge += part;
            sum.dipole += part * distance;
        }
        return sum;
    }
};

/// Panels whose widths grow by 1 % from a millionth of the side, so that steep profiles near the junction are
/// resolved; with 5 Gauss points a panel of 1 % of its distance is exact to rounding for any profile smooth
/// on that scale.
std::vector<double> panels(double length, const JunctionProfile& profile, double direction) {
    constexpr double first = 1e-6, growth = 1.01, widest = 2e-3;
    std::vector<double> edges{0};
    for (double width = first; edges.back() < length; width = std::min(width * growth, widest))
        edges.push_back(std::min(length, edges.back() + width * length));
    for (double depth : profile.breakpoints) {
        const double distance = direction * (depth - profile.junction);
        if (distance > 0 && distance < length) edges.push_back(distance);
    }
    std::sort(edges.begin(), edges.end());
    edges.erase(std::unique(edges.begin(), edges.end()), edges.end());
    return edges;
}

/// Cumulative moments outward, as far as the net doping keeps the sign of this side.
Side tabulated(const SideProfile& side, double length) {
    Side table;
    table.distance.push_back(0);
    table.until.emplace_back();
    const std::vector<double> edges = panels(length, side.profile, side.direction);
    for (std::size_t k = 0; k + 1 < edges.size(); ++k) {
        if (side.density((edges[k] + edges[k + 1]) / 2) < 0) break;
        const Moments part = side.between(edges[k], edges[k + 1]);
        table.distance.push_back(edges[k + 1]);
        table.until.push_back(
            {table.until.back().charge + part.charge, table.until.back().dipole + part.dipole});
    }
    return table;
}

/// Distance and dipole at which a side holds a charge. The charge lies within the table.
struct Reach {
    double distance = 0, dipole = 0;
};

Reach reach(const SideProfile& side, const Side& table, double charge) {
    const auto after =
        std::upper_bound(table.until.begin(), table.until.end(), charge,
                         [](double value, const Moments& moments) { return value < moments.charge; });
    const std::size_t panel =
        std::min<std::size_t>(static_cast<std::size_t>(after - table.until.begin()), table.until.size() - 1) -
        1;
    double low = table.distance[panel], high = table.distance[panel + 1];
    const double start = low;
    const double wanted = charge - table.until[panel].charge;
    for (int step = 0; step < 60 && high - low > 1e-15 * high; ++step) {
        const double middle = (low + high) / 2;
        (side.between(start, middle).charge < wanted ? low : high) = middle;
    }
    const double distance = (low + high) / 2;
    return {distance, table.until[panel].dipole + side.between(start, distance).dipole};
}

}  // namespace

double abrupt_built_in_potential(double acceptors, double donors, double intrinsic_density,
                                 double thermal_voltage) {
    return thermal_voltage * (std::log(acceptors / intrinsic_density) + std::log(donors / intrinsic_density));
}

DepletionEstimate abrupt_depletion(double acceptors, double donors, double permittivity,
                                   double total_potential) {
    require(acceptors > 0 && donors > 0 && permittivity > 0 && total_potential > 0,
            "a depleted layer needs positive dopings, permittivity and potential");
    const double width =
        std::sqrt(2 * permittivity * total_potential * (1 / acceptors + 1 / donors) / elementary_charge);
    return {.p_extent = width * donors / (acceptors + donors),
            .n_extent = width * acceptors / (acceptors + donors),
            .peak_field = 2 * total_potential / width,
            .capacitance = permittivity / width};
}

double linear_built_in_potential(double gradient, double permittivity, double intrinsic_density,
                                 double thermal_voltage) {
    // The map contracts by 2 U_T / (3 V_bi) a step, below 0.1 for any real junction.
    double potential = 20 * thermal_voltage;
    for (int step = 0; step < 200; ++step) {
        const double width = linear_depletion(gradient, permittivity, potential).width();
        const double next = 2 * thermal_voltage * std::log(gradient * width / (2 * intrinsic_density));
        require(next > 0, "the gradient is too small for a depleted layer");
        if (std::abs(next - potential) <= 1e-14 * next) return next;
        potential = next;
    }
    throw ContractError("the built-in potential of a linear junction does not settle");
}

DepletionEstimate linear_depletion(double gradient, double permittivity, double total_potential) {
    require(gradient > 0 && permittivity > 0 && total_potential > 0,
            "a depleted layer needs positive gradient, permittivity and potential");
    const double width = std::cbrt(12 * permittivity * total_potential / (elementary_charge * gradient));
    return {.p_extent = width / 2,
            .n_extent = width / 2,
            .peak_field = elementary_charge * gradient * width * width / (8 * permittivity),
            .capacitance = permittivity / width};
}

std::optional<DepletionEstimate> profile_depletion(const JunctionProfile& profile, double permittivity,
                                                   double total_potential) {
    require(permittivity > 0 && total_potential > 0,
            "a depleted layer needs positive permittivity and potential");
    require(profile.top < profile.junction && profile.junction < profile.bottom,
            "the junction lies inside the profile");
    const double up = profile.junction - profile.top, down = profile.bottom - profile.junction;
    const double above = profile.net(profile.junction - 1e-6 * up),
                 below = profile.net(profile.junction + 1e-6 * down);
    require(above * below < 0, "the net doping has opposite signs on the two sides of a junction");

    const SideProfile upper{profile, -1, above > 0 ? 1.0 : -1.0}, lower{profile, 1, below > 0 ? 1.0 : -1.0};
    const Side upper_table = tabulated(upper, up), lower_table = tabulated(lower, down);
    const auto potential_at = [&](double charge) {
        return elementary_charge / permittivity *
               (reach(upper, upper_table, charge).dipole + reach(lower, lower_table, charge).dipole);
    };
    double high = std::min(upper_table.until.back().charge, lower_table.until.back().charge);
    if (potential_at(high) < total_potential) return std::nullopt;
    double low = 0;
    for (int step = 0; step < 200 && high - low > 1e-15 * high; ++step) {
        const double middle = (low + high) / 2;
        (potential_at(middle) < total_potential ? low : high) = middle;
    }
    const double charge = (low + high) / 2;
    const double upper_edge = reach(upper, upper_table, charge).distance;
    const double lower_edge = reach(lower, lower_table, charge).distance;
    const bool p_above = above < 0;
    return DepletionEstimate{.p_extent = p_above ? upper_edge : lower_edge,
                             .n_extent = p_above ? lower_edge : upper_edge,
                             .peak_field = elementary_charge * charge / permittivity,
                             .capacitance = permittivity / (upper_edge + lower_edge)};
}

}  // namespace bandwright
