#include "core/discretization/assemble.hpp"

#include <algorithm>
#include <cmath>

#include "core/discretization/cell_source.hpp"
#include "core/discretization/contact_rows.hpp"
#include "core/models/fermi_integral.hpp"

namespace bandwright {

namespace {

// exp of +-600 leaves room for the products of a residual; beyond it a density has no influence on anything
// else.
constexpr double largest_exponent = 600;

EndState end_state(const EndCoefficients& end, double psi, double phi_n, double phi_p, bool fermi_dirac) {
    const double eta_n = psi - phi_n + end.affinity, eta_p = phi_p - psi + end.negative_ionization;
    EndState s{0, 0, 1, 1, 0, 0};
    if (fermi_dirac) {
        const Degeneracy dn = degeneracy(eta_n), dp = degeneracy(eta_p);
        s.log_gamma_n = dn.log_gamma;
        s.ratio_n = dn.ratio;
        s.log_gamma_p = dp.log_gamma;
        s.ratio_p = dp.ratio;
    }
    s.n = std::exp(std::clamp(end.log_Nc + eta_n + s.log_gamma_n, -largest_exponent, largest_exponent));
    s.p = std::exp(std::clamp(end.log_Nv + eta_p + s.log_gamma_p, -largest_exponent, largest_exponent));
    return s;
}

CellFluxes fluxes(const DiscreteSystem& system, const State& state, std::size_t cell, const EndState& l,
                  const EndState& r) {
    const double change_psi = state.psi(cell + 1) - state.psi(cell);
    // In one material the band terms drop out; graded materials add theirs here.
    const double u_n = change_psi + (r.log_gamma_n - l.log_gamma_n);
    const double u_p = change_psi - (r.log_gamma_p - l.log_gamma_p);
    const Bernoulli b_n = bernoulli(u_n);
    const Bernoulli b_p = u_p == u_n ? b_n : bernoulli(u_p);
    const CellFlux n =
        electron_flux(system.electron_speed[cell], b_n, state.phi_n(cell + 1) - state.phi_n(cell), l.n, r.n);
    const CellFlux p =
        hole_flux(system.hole_speed[cell], b_p, state.phi_p(cell + 1) - state.phi_p(cell), l.p, r.p);
    CellFluxes out;
    out.electron = n.value;
    out.hole = p.value;
    // ln n = ... + psi - phi_n with slope ratio; u_n = ln n + phi_n.
    out.electron_by = {-n.by_u * l.ratio_n + n.by_log_left * l.ratio_n,
                       -n.by_u * (1 - l.ratio_n) - n.by_a - n.by_log_left * l.ratio_n,
                       n.by_u * r.ratio_n + n.by_log_right * r.ratio_n,
                       n.by_u * (1 - r.ratio_n) + n.by_a - n.by_log_right * r.ratio_n};
    // ln p = ... + phi_p - psi with slope ratio; u_p = phi_p - ln p.
    out.hole_by = {-p.by_u * l.ratio_p - p.by_log_left * l.ratio_p,
                   -p.by_u * (1 - l.ratio_p) - p.by_a + p.by_log_left * l.ratio_p,
                   p.by_u * r.ratio_p - p.by_log_right * r.ratio_p,
                   p.by_u * (1 - r.ratio_p) + p.by_a + p.by_log_right * r.ratio_p};
    return out;
}

void resize(Equations& equations, std::size_t nodes) {
    if (equations.balance.size() == 3 * nodes) return;
    equations.residual.assign(3 * nodes, 0);
    equations.balance.assign(3 * nodes, 0);
    equations.left.resize(nodes - 1);
    equations.right.resize(nodes - 1);
    equations.rate_left.resize(nodes - 1);
    equations.rate_right.resize(nodes - 1);
    equations.flux.resize(nodes - 1);
}

}  // namespace

bool evaluate(const DiscreteSystem& system, const State& state, Equations& equations) {
    resize(equations, system.nodes());
    for (std::size_t cell = 0; cell < system.cells(); ++cell) {
        const EndCoefficients& end = system.of_cell(cell);
        // The left end of a cell is the right end of the one before it, unless the material changes there.
        if (cell > 0 && system.material_of_cell[cell - 1] == system.material_of_cell[cell]) {
            equations.left[cell] = equations.right[cell - 1];
            equations.rate_left[cell] = equations.rate_right[cell - 1];
        } else {
            equations.left[cell] =
                end_state(end, state.psi(cell), state.phi_n(cell), state.phi_p(cell), system.fermi_dirac);
            equations.rate_left[cell] = half_rate(end, equations.left[cell], state.phi_n(cell),
                                                  state.phi_p(cell), system.fermi_dirac);
        }
        const std::size_t next = cell + 1;
        equations.right[cell] =
            end_state(end, state.psi(next), state.phi_n(next), state.phi_p(next), system.fermi_dirac);
        equations.rate_right[cell] =
            half_rate(end, equations.right[cell], state.phi_n(next), state.phi_p(next), system.fermi_dirac);
        equations.flux[cell] = fluxes(system, state, cell, equations.left[cell], equations.right[cell]);
    }
    return true;
}

bool assemble(const DiscreteSystem& system, const State& state, Equations& equations) {
    evaluate(system, state, equations);
    const std::size_t nodes = system.nodes();
    BlockTridiagonal& matrix = equations.jacobian;
    if (matrix.blocks() != nodes) matrix.resize(nodes);
    for (std::size_t cell = 0; cell < system.cells(); ++cell) {
        const double c = system.dielectric[cell];
        const auto& n = equations.flux[cell].electron_by;
        const auto& p = equations.flux[cell].hole_by;
        matrix.left[cell] = {-c, 0, 0, n[0], n[1], 0, p[0], 0, p[1]};
        matrix.right[cell] = {c, 0, 0, n[2], n[3], 0, p[2], 0, p[3]};
    }
    bool finite = true;
    for (std::size_t node = 0; node < nodes; ++node) {
        Block& shunt = matrix.shunt[node];
        shunt.fill(0);
        double balance[3] = {0, 0, 0};
        const auto add_half = [&](double half, const EndState& s, const HalfRate& rate, double net) {
            balance[0] += half * (s.p - s.n + net);
            balance[1] -= half * rate.value;
            balance[2] += half * rate.value;
            shunt[0] -= half * (s.p * s.ratio_p + s.n * s.ratio_n);
            shunt[1] += half * s.n * s.ratio_n;
            shunt[2] += half * s.p * s.ratio_p;
            const double by[3] = {half * rate.by_psi, half * rate.by_phi_n, half * rate.by_phi_p};
            for (std::size_t k = 0; k < 3; ++k) {
                shunt[3 + k] -= by[k];
                shunt[6 + k] += by[k];
            }
        };
        if (node > 0) {
            const std::size_t cell = node - 1;
            add_half(0.5 * system.mesh.width(cell), equations.right[cell], equations.rate_right[cell],
                     system.net_right[cell]);
            balance[0] -= system.dielectric[cell] * (state.psi(node) - state.psi(node - 1));
            balance[1] -= equations.flux[cell].electron;
            balance[2] -= equations.flux[cell].hole;
        }
        if (node + 1 < nodes) {
            add_half(0.5 * system.mesh.width(node), equations.left[node], equations.rate_left[node],
                     system.net_left[node]);
            balance[0] += system.dielectric[node] * (state.psi(node + 1) - state.psi(node));
            balance[1] += equations.flux[node].electron;
            balance[2] += equations.flux[node].hole;
        }
        if (node == 0) apply_contact(system.top, state, 0, true, equations, balance);
        if (node + 1 == nodes) apply_contact(system.bottom, state, node, false, equations, balance);
        const Block diagonal = matrix.diagonal_block(node);
        for (std::size_t r = 0; r < 3; ++r) {
            equations.balance[3 * node + r] = balance[r];
            equations.residual[3 * node + r] = balance[r] / diagonal[4 * r];
            finite = finite && std::isfinite(equations.residual[3 * node + r]);
        }
    }
    return finite;
}

}  // namespace bandwright
