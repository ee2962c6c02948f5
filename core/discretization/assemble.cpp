#include "core/discretization/assemble.hpp"

#include <algorithm>
#include <array>
#include <cmath>

#include "core/base/vector_math.hpp"
#include "core/discretization/cell_flux.hpp"
#include "core/discretization/cell_source.hpp"
#include "core/discretization/contact_rows.hpp"
#include "core/models/fermi_integral.hpp"

namespace bandwright {

namespace {

// exp of +-600 leaves room for the products of a residual; beyond it a density has no influence on anything
// else.
constexpr double largest_exponent = 600;
constexpr std::size_t chunk = 128;  // ends worked on at a time; a chunk's numbers stay in the first cache

using Lane = std::array<double, chunk + 1>;

/// Potentials of the nodes of a chunk, array by array.
struct ChunkPotentials {
    Lane psi, phi_n, phi_p;
};

void gather(const State& state, std::size_t node, std::size_t count, ChunkPotentials& out) {
    const double* u = &state.unknowns[3 * node];
    for (std::size_t i = 0; i < count; ++i) {
        out.psi[i] = u[3 * i];
        out.phi_n[i] = u[3 * i + 1];
        out.phi_p[i] = u[3 * i + 2];
    }
}

// Densities at `count` nodes in one material; for Fermi-Dirac statistics with their degeneracy.
void densities(const DiscreteSystem& system, const EndCoefficients& end, const ChunkPotentials& at,
               std::size_t count, std::size_t first_end, Equations& equations) {
    double* n = &equations.n[first_end];
    double* p = &equations.p[first_end];
    const double lowest_n = -largest_exponent - end.log_Nc, lowest_p = -largest_exponent - end.log_Nv;
    const double highest_n = largest_exponent - end.log_Nc, highest_p = largest_exponent - end.log_Nv;
    Lane eta_n, eta_p;
    for (std::size_t i = 0; i < count; ++i) {
        const double en = at.psi[i] - at.phi_n[i] + end.affinity,
                     ep = at.phi_p[i] - at.psi[i] + end.negative_ionization;
        eta_n[i] = en < lowest_n ? lowest_n : (en > highest_n ? highest_n : en);
        eta_p[i] = ep < lowest_p ? lowest_p : (ep > highest_p ? highest_p : ep);
    }
    exp_of(eta_n.data(), n, count);
    exp_of(eta_p.data(), p, count);
    const double Nc = std::exp(end.log_Nc), Nv = std::exp(end.log_Nv);
    if (system.fermi_dirac) {
        for (std::size_t i = 0; i < count; ++i) {
            const std::size_t e = first_end + i;
            const Occupation on = occupation(eta_n[i], n[i]), op = occupation(eta_p[i], p[i]);
            n[i] = on.integral;
            p[i] = op.integral;
            equations.ratio_n[e] = on.ratio;
            equations.ratio_p[e] = op.ratio;
            equations.log_gamma_n[e] = on.log_gamma;
            equations.log_gamma_p[e] = op.log_gamma;
        }
    }
    for (std::size_t i = 0; i < count; ++i) {
        n[i] *= Nc;
        p[i] *= Nv;
    }
}

void rates(const DiscreteSystem& system, const EndCoefficients& end, const ChunkPotentials& at,
           std::size_t count, std::size_t first_end, Equations& equations) {
    Lane split, change;
    for (std::size_t i = 0; i < count; ++i) {
        split[i] = at.phi_p[i] - at.phi_n[i];
        change[i] = -std::abs(split[i]);
    }
    expm1_of_negative(change.data(), change.data(), count);
    const double *n = &equations.n[first_end], *p = &equations.p[first_end];
    double *value = &equations.rate[first_end], *by_psi = &equations.rate_by_psi[first_end],
           *by_phi_n = &equations.rate_by_phi_n[first_end], *by_phi_p = &equations.rate_by_phi_p[first_end];
    const EndCoefficients coefficients = end;
    if (system.fermi_dirac) {
        const double *ratio_n = &equations.ratio_n[first_end], *ratio_p = &equations.ratio_p[first_end];
        Lane gamma_n, gamma_p;
        exp_of(&equations.log_gamma_n[first_end], gamma_n.data(), count);
        exp_of(&equations.log_gamma_p[first_end], gamma_p.data(), count);
        for (std::size_t i = 0; i < count; ++i) {
            const SourceRate r = half_rate(coefficients, {n[i], p[i], split[i], change[i], gamma_n[i],
                                                          gamma_p[i], ratio_n[i], ratio_p[i]});
            value[i] = r.value;
            by_psi[i] = r.by_psi;
            by_phi_n[i] = r.by_phi_n;
            by_phi_p[i] = r.by_phi_p;
        }
        return;
    }
    for (std::size_t i = 0; i < count; ++i) {
        const SourceRate r = half_rate(coefficients, {n[i], p[i], split[i], change[i]});
        value[i] = r.value;
        by_psi[i] = r.by_psi;
        by_phi_n[i] = r.by_phi_n;
        by_phi_p[i] = r.by_phi_p;
    }
}

// Fluxes of `count` cells in one material and their derivatives; `at` holds the nodes of the first cell on.
void fluxes(const DiscreteSystem& system, const ChunkPotentials& at, std::size_t first_cell,
            std::size_t count, Equations& equations) {
    const std::size_t first_end = equations.left_end[first_cell];
    BlockTridiagonal& m = equations.newton;
    Lane change_n, change_p, fall_n, fall_p;
    BernoulliLanes<chunk + 1> b_n, b_p;
    for (std::size_t i = 0; i < count; ++i) {
        change_n[i] = at.phi_n[i + 1] - at.phi_n[i];
        change_p[i] = at.phi_p[i + 1] - at.phi_p[i];
        fall_n[i] = -std::abs(change_n[i]);
        fall_p[i] = -std::abs(change_p[i]);
        const double change = at.psi[i + 1] - at.psi[i];
        b_n.argument[i] = b_p.argument[i] = change;
        m.dielectric[first_cell + i] = system.dielectric[first_cell + i];
        m.potential_flux[first_cell + i] = m.dielectric[first_cell + i] * change;
    }
    expm1_of_negative(fall_n.data(), fall_n.data(), count);
    expm1_of_negative(fall_p.data(), fall_p.data(), count);
    const double *n = &equations.n[first_end], *p = &equations.p[first_end];
    double *shift_n = &m.electron_shift[first_cell], *near_n = &m.electron_left[first_cell],
           *sum_n = &m.electron_sum[first_cell], *shift_p = &m.hole_shift[first_cell],
           *near_p = &m.hole_left[first_cell], *sum_p = &m.hole_sum[first_cell],
           *out_n = &m.electron_flux[first_cell], *out_p = &m.hole_flux[first_cell];
    const double *speed_n = &system.electron_speed[first_cell], *speed_p = &system.hole_speed[first_cell];
    if (!system.fermi_dirac) {
        // One Bernoulli function serves both carriers: their driving terms are the change of psi.
        bernoulli_of(b_n, count);
        for (std::size_t i = 0; i < count; ++i) {
            const CellFlux f = electron_flux(speed_n[i], b_n.at(i), change_n[i], fall_n[i], n[i], n[i + 1]);
            const double b = background_density * speed_n[i];
            out_n[i] = f.value - b * change_n[i];
            shift_n[i] = f.by_u + f.by_a - b;
            near_n[i] = -f.by_a - f.by_log_left + b;
            sum_n[i] = -(f.by_log_left + f.by_log_right);
        }
        for (std::size_t i = 0; i < count; ++i) {
            const CellFlux f = hole_flux(speed_p[i], b_n.at(i), change_p[i], fall_p[i], p[i], p[i + 1]);
            const double b = background_density * speed_p[i];
            out_p[i] = f.value - b * change_p[i];
            shift_p[i] = f.by_u + f.by_a - b;
            near_p[i] = -f.by_a + f.by_log_left + b;
            sum_p[i] = f.by_log_left + f.by_log_right;
        }
        return;
    }
    const double *g_n = &equations.log_gamma_n[first_end], *g_p = &equations.log_gamma_p[first_end],
                 *r_n = &equations.ratio_n[first_end], *r_p = &equations.ratio_p[first_end];
    for (std::size_t i = 0; i < count; ++i) {
        // In one material the band terms drop out; graded materials add theirs here.
        b_n.argument[i] += g_n[i + 1] - g_n[i];
        b_p.argument[i] -= g_p[i + 1] - g_p[i];
    }
    bernoulli_of(b_n, count);
    bernoulli_of(b_p, count);
    for (std::size_t i = 0; i < count; ++i) {
        // ln n = ... + psi - phi_n with slope ratio; u = change of ln n + phi_n.
        const CellFlux f = electron_flux(speed_n[i], b_n.at(i), change_n[i], fall_n[i], n[i], n[i + 1]);
        const double b = background_density * speed_n[i];
        out_n[i] = f.value - b * change_n[i];
        shift_n[i] = f.by_u + f.by_a - b;
        near_n[i] = -f.by_u * (1 - r_n[i]) - f.by_a - f.by_log_left * r_n[i] + b;
        sum_n[i] = f.by_u * (r_n[i] - r_n[i + 1]) - (f.by_log_left * r_n[i] + f.by_log_right * r_n[i + 1]);
    }
    for (std::size_t i = 0; i < count; ++i) {
        // ln p = ... + phi_p - psi with slope ratio; u = change of phi_p - ln p.
        const CellFlux f = hole_flux(speed_p[i], b_p.at(i), change_p[i], fall_p[i], p[i], p[i + 1]);
        const double b = background_density * speed_p[i];
        out_p[i] = f.value - b * change_p[i];
        shift_p[i] = f.by_u + f.by_a - b;
        near_p[i] = -f.by_u * (1 - r_p[i]) - f.by_a + f.by_log_left * r_p[i] + b;
        sum_p[i] = f.by_u * (r_p[i] - r_p[i + 1]) + (f.by_log_left * r_p[i] + f.by_log_right * r_p[i + 1]);
    }
}

void resize(const DiscreteSystem& system, Equations& equations) {
    const std::size_t nodes = system.nodes(), ends = nodes + system.runs.size() - 2;
    if (equations.newton.blocks() == nodes && equations.runs == system.runs &&
        equations.ratio_n.empty() != system.fermi_dirac)
        return;
    equations.newton.resize(nodes);
    equations.runs = system.runs;
    equations.left_end.clear();
    for (std::size_t run = 0; run + 1 < system.runs.size(); ++run)
        for (std::size_t cell = system.runs[run]; cell < system.runs[run + 1]; ++cell)
            equations.left_end.push_back(cell + run);
    for (std::vector<double>* values : {&equations.n, &equations.p, &equations.rate, &equations.rate_by_psi,
                                        &equations.rate_by_phi_n, &equations.rate_by_phi_p})
        values->assign(ends, 0);
    for (std::vector<double>* values :
         {&equations.ratio_n, &equations.ratio_p, &equations.log_gamma_n, &equations.log_gamma_p})
        values->assign(system.fermi_dirac ? ends : 0, 0);
}

// Sources and own terms of the nodes; false when one is not finite.
bool sum_up(const DiscreteSystem& system, const State& state, Equations& equations) {
    const std::size_t nodes = system.nodes();
    BlockTridiagonal& m = equations.newton;
    const bool degenerate = system.fermi_dirac;
    for (std::vector<double>* values :
         {&m.potential_by_both, &m.potential_by_minor, &m.hole_by_both, &m.hole_by_minor, &m.source})
        std::fill(values->begin(), values->end(), 0.0);
    const auto half = [&](std::size_t node, std::size_t e, double h, double net) {
        const double n = equations.n[e], p = equations.p[e], rate = h * equations.rate[e];
        m.source[3 * node] += h * (p - n + net);
        m.source[3 * node + 1] -= rate;
        m.source[3 * node + 2] += rate;
        const double dn = h * (degenerate ? n * equations.ratio_n[e] : n),
                     dp = h * (degenerate ? p * equations.ratio_p[e] : p);
        const bool holes_lead = m.holes_lead[node];
        m.potential_by_both[node] += dn + dp;
        m.potential_by_minor[node] += holes_lead ? dn : dp;
        m.hole_by_both[node] -= h * equations.rate_by_psi[e];  // both potentials together against psi
        m.hole_by_minor[node] += h * (holes_lead ? equations.rate_by_phi_n[e] : equations.rate_by_phi_p[e]);
    };
    for (std::size_t cell = 0; cell < system.cells(); ++cell) {
        const std::size_t e = equations.left_end[cell];
        m.holes_lead[cell] = equations.p[e] > equations.n[e];
        if (cell + 1 == system.cells()) m.holes_lead[cell + 1] = equations.p[e + 1] > equations.n[e + 1];
    }
    for (std::size_t cell = 0; cell < system.cells(); ++cell) {
        const double h = 0.5 * system.mesh.width(cell);
        half(cell, equations.left_end[cell], h, system.net_left[cell]);
        half(cell + 1, equations.left_end[cell] + 1, h, system.net_right[cell]);
    }
    apply_contact(system.top, state, 0, true, equations);
    apply_contact(system.bottom, state, nodes - 1, false, equations);
    double check = 0;  // stays zero while everything is finite
    for (const double value : m.source) check += 0 * value;
    for (const std::vector<double>* values : {&m.electron_flux, &m.hole_flux})
        for (const double value : *values) check += 0 * value;
    return check == 0;
}

}  // namespace

bool assemble(const DiscreteSystem& system, const State& state, Equations& equations) {
    resize(system, equations);
    ChunkPotentials at;
    for (std::size_t run = 0; run + 1 < system.runs.size(); ++run) {
        const EndCoefficients& end = system.of_cell(system.runs[run]);
        for (std::size_t cell = system.runs[run]; cell < system.runs[run + 1]; cell += chunk) {
            const std::size_t count = std::min(chunk, system.runs[run + 1] - cell);
            gather(state, cell, count + 1, at);
            // The first end of a later chunk is the last of the one before; it is worked out once more.
            densities(system, end, at, count + 1, cell + run, equations);
            rates(system, end, at, count + 1, cell + run, equations);
            fluxes(system, at, cell, count, equations);
        }
    }
    return sum_up(system, state, equations);
}

std::vector<double> rounding_of_balance(const DiscreteSystem& system, const State& state,
                                        const Equations& equations) {
    constexpr double unit = 2.3e-16;
    const std::size_t nodes = system.nodes();
    const BlockTridiagonal& m = equations.newton;
    std::vector<double> rounding(3 * nodes, 0.0);
    const auto size = [&](std::size_t node, std::size_t k) {
        return std::max(1.0, std::abs(state.unknowns[3 * node + k]));
    };
    for (std::size_t cell = 0; cell < system.cells(); ++cell) {
        const std::size_t l = cell, r = cell + 1;
        const double psi = size(l, 0) + size(r, 0), phi_n = size(l, 1) + size(r, 1),
                     phi_p = size(l, 2) + size(r, 2);
        const double electron =
            std::abs(m.electron_flux[cell]) +
            (2 * std::abs(m.electron_left[cell]) + std::abs(m.electron_sum[cell])) * (phi_n + psi) +
            std::abs(m.electron_shift[cell]) * (phi_n + psi);
        const double hole = std::abs(m.hole_flux[cell]) +
                            (2 * std::abs(m.hole_left[cell]) + std::abs(m.hole_sum[cell])) * (phi_p + psi) +
                            std::abs(m.hole_shift[cell]) * (phi_p + psi);
        const double h = 0.5 * system.mesh.width(cell);
        const auto add = [&](std::size_t node, const EndState& s, const HalfRate& rate, double net) {
            rounding[3 * node] +=
                system.dielectric[cell] * psi + h * ((s.n + s.p) * size(node, 0) + std::abs(net));
            const double of_rate =
                h * (std::abs(rate.value) +
                     (std::abs(rate.by_phi_n) + std::abs(rate.by_phi_p)) * (phi_n + phi_p + psi));
            rounding[3 * node + 1] += electron + of_rate;
            rounding[3 * node + 2] += hole + of_rate;
        };
        add(l, equations.left(cell), equations.rate_left(cell), system.net_left[cell]);
        add(r, equations.right(cell), equations.rate_right(cell), system.net_right[cell]);
    }
    for (double& value : rounding) value *= unit;
    return rounding;
}

}  // namespace bandwright
