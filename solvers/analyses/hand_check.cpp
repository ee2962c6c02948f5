#include "solvers/analyses/hand_check.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "core/base/constants.hpp"
#include "core/figures/depletion_approximation.hpp"

namespace bandwright {

namespace {

/// The junction and what surrounds it.
struct Site {
    const Structure& structure;
    Metallurgical junction;
    /// Ends of the p and n regions beside it [m].
    double top = 0, bottom = 0;
    std::vector<double> boundaries, breaks;
    double permittivity = 0, intrinsic = 0, thermal = 0;

    std::size_t layer_at(double x) const {
        const auto above = std::upper_bound(boundaries.begin(), boundaries.end(), x);
        return std::min(static_cast<std::size_t>(std::max<std::ptrdiff_t>(above - boundaries.begin() - 1, 0)),
                        structure.layers.size() - 1);
    }
    double net(double x) const { return doping_at(structure, layer_at(x), x).net(); }
};

Site site_of(const Structure& structure, const std::vector<Metallurgical>& junctions, std::size_t which) {
    Site site{structure, junctions[which], 0, 0, layer_boundaries(structure), {}, 0, 0, 0};
    site.top = which > 0 ? junctions[which - 1].depth : 0;
    site.bottom = which + 1 < junctions.size() ? junctions[which + 1].depth : site.boundaries.back();
    site.breaks = site.boundaries;
    for (const DopingEntry& entry : structure.doping)
        for (const double x : breakpoints(entry.shape)) site.breaks.push_back(x);
    const Material& material =
        structure.materials[structure.layers[site.layer_at(site.junction.depth)].material];
    const Bands bands = bands_at(material, structure.temperature);
    site.permittivity = bands.relative_permittivity * constants::vacuum_permittivity;
    site.intrinsic = std::exp(0.5 * bands.log_intrinsic_squared);
    site.thermal = constants::thermal_voltage(structure.temperature);
    return site;
}

// Fills edges, width, field and capacitance from an estimate; extents towards p and n.
void take(const Site& site, const DepletionEstimate& e, HandEstimate& out) {
    const double up = site.junction.p_above ? e.p_extent : e.n_extent,
                 down = site.junction.p_above ? e.n_extent : e.p_extent;
    out.top_edge = site.junction.depth - up;
    out.bottom_edge = site.junction.depth + down;
    out.width = e.width();
    out.field = e.peak_field;
    out.capacitance = e.capacitance;
}

// Total potential: the built-in one plus reverse bias. forward: applied voltage counted positive forward.
std::optional<double> total(double built_in, double forward) {
    return built_in - forward > 0 ? std::optional(built_in - forward) : std::nullopt;
}

void estimate_abrupt(const Site& site, double top_edge, double bottom_edge, double forward,
                     HandPoint& point) {
    if (std::isnan(top_edge) || std::isnan(bottom_edge)) return;
    // The light side is the one that the depletion layer reaches farther into. Just inside its edge: at an
    // edge on a step the lighter doping is meant.
    const double inside = 1e-9 * (bottom_edge - top_edge);
    const bool light_below = bottom_edge - site.junction.depth > site.junction.depth - top_edge;
    point.light = std::abs(site.net(light_below ? bottom_edge - inside : top_edge + inside));
    double heavy = 0;
    const double from = light_below ? site.top : site.junction.depth,
                 to = light_below ? site.junction.depth : site.bottom;
    constexpr int samples = 4000;
    for (int k = 0; k <= samples; ++k) {
        const double share = std::clamp(static_cast<double>(k) / samples, 1e-9, 1 - 1e-9);
        heavy = std::max(heavy, std::abs(site.net(from + share * (to - from))));
    }
    point.heavy = heavy;
    if (!(point.light > 0) || !(heavy > 0)) return;
    const bool light_is_n = light_below == site.junction.p_above;
    const double donors = light_is_n ? point.light : heavy, acceptors = light_is_n ? heavy : point.light;
    HandEstimate& out = point.abrupt;
    out.built_in_potential = abrupt_built_in_potential(acceptors, donors, site.intrinsic, site.thermal);
    if (const auto potential = total(out.built_in_potential, forward))
        take(site, abrupt_depletion(acceptors, donors, site.permittivity, *potential), out);
}

void estimate_linear(const Site& site, double forward, HandPoint& point) {
    if (!site.junction.gradient) return;
    const double gradient = std::abs(*site.junction.gradient);
    try {
        point.linear.built_in_potential =
            linear_built_in_potential(gradient, site.permittivity, site.intrinsic, site.thermal);
    } catch (const ContractError&) {
        return;  // too shallow a gradient for a depleted layer
    }
    if (const auto potential = total(point.linear.built_in_potential, forward))
        take(site, linear_depletion(gradient, site.permittivity, *potential), point.linear);
}

// Depletion approximation on the true profile; its built-in potential is that between the neutral densities
// at its own edges at 0 V, found by repetition.
void estimate_profile(const Site& site, double forward, HandPoint& point) {
    JunctionProfile profile{[&](double x) { return site.net(x); }, site.junction.depth, site.top, site.bottom,
                            site.breaks};
    double built_in = std::isnan(point.abrupt.built_in_potential) ? 0.7 : point.abrupt.built_in_potential;
    for (int step = 0; step < 60; ++step) {
        const auto estimate = profile_depletion(profile, site.permittivity, built_in);
        if (!estimate) return;
        HandEstimate edges;
        take(site, *estimate, edges);
        const double above = std::abs(site.net(edges.top_edge)),
                     below = std::abs(site.net(edges.bottom_edge));
        if (!(above > 0) || !(below > 0)) return;
        const double next = abrupt_built_in_potential(above, below, site.intrinsic, site.thermal);
        if (!(next > 0)) return;
        const bool settled = std::abs(next - built_in) < 1e-13 * std::abs(next);
        built_in = next;
        if (settled) break;
    }
    point.profile.built_in_potential = built_in;
    const auto potential = total(built_in, forward);
    if (!potential) return;
    if (const auto estimate = profile_depletion(profile, site.permittivity, *potential))
        take(site, *estimate, point.profile);
}

// Mean of the relative errors of width and field against the solved ones; no_value where both are missing.
double distance(const HandEstimate& hand, double width, double field) {
    double sum = 0;
    int count = 0;
    for (const auto& [value, truth] : {std::pair{hand.width, width}, std::pair{hand.field, field}})
        if (!std::isnan(value) && !std::isnan(truth) && truth > 0) {
            sum += std::abs(value / truth - 1);
            ++count;
        }
    return count > 0 ? sum / count : no_value;
}

std::string verdict_of(const HandPoint& point, double width, double field) {
    const double abrupt = distance(point.abrupt, width, field), linear = distance(point.linear, width, field),
                 profile = distance(point.profile, width, field);
    const std::string at = fmt::format("at {:.4g} V: ", point.bias);
    if (std::isnan(width))
        return at +
               "the layer is depleted through; no hand formula for a junction of two neutral sides applies";
    if (std::isnan(abrupt) && std::isnan(linear)) return at + "no hand formula applies";
    const bool trust_linear = std::isnan(abrupt) || (!std::isnan(linear) && linear < abrupt);
    const auto percent = [](double share) { return fmt::format("{:.2g} %", 100 * share); };
    constexpr double far_off = 0.5;
    const double best = trust_linear ? linear : abrupt;
    const char* name = trust_linear ? "linearly graded" : "abrupt";
    std::string text =
        at + (best > far_off
                  ? fmt::format(
                        "trust neither hand formula; even the equivalent {} junction is {} off in width and "
                        "field on average",
                        name, percent(best))
                  : fmt::format(
                        "the equivalent {} junction is the one to use, {} off in width and field on average",
                        name, percent(best)));
    const double other = trust_linear ? abrupt : linear;
    if (!std::isnan(other))
        text += fmt::format(" ({}: {})", trust_linear ? "abrupt" : "linearly graded", percent(other));
    if (!std::isnan(profile))
        text += fmt::format(
            "; the true profile without carriers is {} off, which is what the depletion "
            "approximation itself costs",
            percent(profile));
    return text;
}

std::string spill_over_of(double bias, double peak, double extrapolated) {
    constexpr double noticed = 1.02;
    if (!(peak > noticed * extrapolated)) return "";
    return fmt::format(
        "at {:.4g} V: the largest field, {:.4g} V/cm, is {:.3g} times the one that a hand estimate "
        "means ({:.4g} V/cm): carriers of the heavy side spill over the junction within a few "
        "nanometres, or the heavy side is graded",
        bias, shown(peak, Unit::field), peak / extrapolated, shown(extrapolated, Unit::field));
}

}  // namespace

HandCheck run_hand_check(const Structure& structure, const BiasRequest& request, const Hooks& hooks) {
    BiasRequest with_zero = request;
    if (std::find(with_zero.biases.begin(), with_zero.biases.end(), 0.0) == with_zero.biases.end())
        with_zero.biases.insert(with_zero.biases.begin(), 0.0);
    HandCheck check;
    check.outcome = run_bias_points(structure, with_zero, hooks);
    const std::vector<Metallurgical> junctions = metallurgical_junctions(structure);
    if (junctions.empty()) return check;
    const Site site = site_of(structure, junctions, check.outcome.junction);
    const Table& table = check.outcome.points;
    for (std::size_t row = 0; row < table.rows(); ++row) {
        const auto value = [&](const char* name) {
            const Column* column = table.find(name);
            return column ? column->values[row] : no_value;
        };
        HandPoint point;
        point.bias = value("bias");
        const double forward = value("junction_voltage") * (site.junction.p_above ? 1 : -1);
        estimate_abrupt(site, value("depletion_top_edge"), value("depletion_bottom_edge"), forward, point);
        estimate_linear(site, forward, point);
        estimate_profile(site, forward, point);
        point.verdict = verdict_of(point, value("depletion_width"), value("extrapolated_field"));
        point.spill_over = spill_over_of(point.bias, value("peak_field"), value("extrapolated_field"));
        check.points.push_back(point);
    }
    return check;
}

}  // namespace bandwright
