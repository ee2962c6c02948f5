#include "core/discretization/block_tridiagonal.hpp"

#include <algorithm>
#include <cmath>

#include "core/discretization/elimination.hpp"

namespace bandwright {

using namespace elimination;

namespace {

Block own_block(const BlockTridiagonal& matrix, std::size_t node) {
    const double p1 = matrix.potential_by_both[node], p2 = matrix.potential_by_minor[node],
                 h1 = matrix.hole_by_both[node], h2 = matrix.hole_by_minor[node];
    Block own{0, p1, p2, 0, -h1, -h2, 0, h1, h2};
    const bool holes_lead = matrix.holes_lead[node];
    const auto add = [&](const std::array<double, 2>& further) {
        for (std::size_t j = 0; j < 3; ++j) {
            own[3 + j] += j < 2 || holes_lead ? further[0] : 0;
            own[6 + j] += j < 2 || !holes_lead ? further[1] : 0;
        }
    };
    if (node == 0) add(matrix.first_own);
    if (node + 1 == matrix.blocks()) add(matrix.last_own);
    return own;
}

Cell<double> cell_from_top(const BlockTridiagonal& m, std::size_t cell) {
    return {m.dielectric[cell],
            m.electron_shift[cell],
            m.electron_left[cell],
            m.electron_sum[cell],
            m.hole_shift[cell],
            m.hole_left[cell],
            m.hole_sum[cell],
            {m.potential_flux[cell], m.electron_flux[cell], m.hole_flux[cell]},
            static_cast<double>(m.holes_lead[cell]),
            static_cast<double>(m.holes_lead[cell + 1])};
}

// Seen from below the flux of a cell counts the other way and its ends change places.
Cell<double> cell_from_bottom(const BlockTridiagonal& m, std::size_t cell) {
    return {m.dielectric[cell],
            m.electron_shift[cell],
            m.electron_left[cell] - m.electron_sum[cell],
            -m.electron_sum[cell],
            m.hole_shift[cell],
            m.hole_left[cell] - m.hole_sum[cell],
            -m.hole_sum[cell],
            {-m.potential_flux[cell], -m.electron_flux[cell], -m.hole_flux[cell]},
            static_cast<double>(m.holes_lead[cell + 1]),
            static_cast<double>(m.holes_lead[cell])};
}

Cell<LanePair> beside(const Cell<double>& a, const Cell<double>& b) {
    return {pair(a.dielectric, b.dielectric),
            pair(a.electron_shift, b.electron_shift),
            pair(a.electron_near, b.electron_near),
            pair(a.electron_sum, b.electron_sum),
            pair(a.hole_shift, b.hole_shift),
            pair(a.hole_near, b.hole_near),
            pair(a.hole_sum, b.hole_sum),
            {pair(a.flux[0], b.flux[0]), pair(a.flux[1], b.flux[1]), pair(a.flux[2], b.flux[2])},
            pair(a.near_holes_lead, b.near_holes_lead),
            pair(a.far_holes_lead, b.far_holes_lead)};
}

template <std::size_t sides>
using Steps = std::array<std::span<double>, sides>;

template <std::size_t sides>
std::array<Triple<double>, sides> source_of(const BlockTridiagonal& m, std::size_t node,
                                            const std::array<double, 3>& pull) {
    std::array<Triple<double>, sides> source{};
    for (std::size_t r = 0; r < 3; ++r) {
        source[0][r] = m.source[3 * node + r];
        if (sides > 1 && node == 0) source[sides - 1][r] = -pull[r];
    }
    return source;
}

template <std::size_t sides>
void keep(const Steps<sides>& x, std::size_t node, const std::array<Triple<double>, sides>& y) {
    for (std::size_t s = 0; s < sides; ++s)
        for (std::size_t r = 0; r < 3; ++r) x[s][3 * node + r] = y[s][r];
}

// Nodes 1 .. pairs-1 from the top and last-1 .. last-pairs+1 from the bottom, in step.
template <std::size_t sides>
void pass_in_pairs(const BlockTridiagonal& m, std::size_t pairs, std::vector<double>& storage,
                   std::array<Carried<double, sides>, 2>& end, const Steps<sides>& x) {
    const std::size_t last = m.blocks() - 1;
    Carried<LanePair, sides> carried;
    for (std::size_t e = 0; e < 9; ++e)
        carried.admittance[e] = pair(end[0].admittance[e], end[1].admittance[e]);
    for (std::size_t j = 0; j < 3; ++j)
        carried.total_admittance[j] = pair(end[0].total_admittance[j], end[1].total_admittance[j]);
    for (std::size_t s = 0; s < sides; ++s) {
        for (std::size_t r = 0; r < 3; ++r) carried.flux[s][r] = pair(end[0].flux[s][r], end[1].flux[s][r]);
        carried.total_flux[s] = pair(end[0].total_flux[s], end[1].total_flux[s]);
    }
    for (std::size_t k = 1; k < pairs; ++k) {
        const std::size_t a = k, b = last - k;
        Node<LanePair, sides> node{pair(m.potential_by_both[a], m.potential_by_both[b]),
                                   pair(m.potential_by_minor[a], m.potential_by_minor[b]),
                                   pair(m.hole_by_both[a], m.hole_by_both[b]),
                                   pair(m.hole_by_minor[a], m.hole_by_minor[b]),
                                   {}};
        for (std::size_t r = 0; r < 3; ++r)
            node.source[0][r] = pair(m.source[3 * a + r], m.source[3 * b + r]);
        const Entries<LanePair> coupling =
            pass(beside(cell_from_top(m, a), cell_from_bottom(m, b - 1)), node, carried);
        for (std::size_t e = 0; e < 9; ++e) store(&storage[18 * k + 2 * e], coupling[e]);
        for (std::size_t s = 0; s < sides; ++s)
            for (std::size_t r = 0; r < 3; ++r) {
                x[s][3 * a + r] = node.source[s][r][0];
                x[s][3 * b + r] = node.source[s][r][1];
            }
    }
    for (std::size_t lane = 0; lane < 2; ++lane) {
        for (std::size_t e = 0; e < 9; ++e) end[lane].admittance[e] = carried.admittance[e][lane];
        for (std::size_t j = 0; j < 3; ++j) end[lane].total_admittance[j] = carried.total_admittance[j][lane];
        for (std::size_t s = 0; s < sides; ++s) {
            for (std::size_t r = 0; r < 3; ++r) end[lane].flux[s][r] = carried.flux[s][r][lane];
            end[lane].total_flux[s] = carried.total_flux[s][lane];
        }
    }
}

// The middle node, where both sides meet.
template <std::size_t sides>
void join(const BlockTridiagonal& m, std::size_t node, const std::array<Carried<double, sides>, 2>& end,
          const Steps<sides>& x) {
    Block b = own_block(m, node);
    for (std::size_t e = 0; e < 9; ++e) b[e] -= end[0].admittance[e] + end[1].admittance[e];
    const bool is_last = node + 1 == m.blocks();
    Triple<double> total;
    for (std::size_t j = 0; j < 3; ++j) total[j] = -(end[0].total_admittance[j] + end[1].total_admittance[j]);
    const bool used = !is_last && use_total(b, total) > 0.5;
    auto c = source_of<sides>(m, node, {});
    for (std::size_t s = 0; s < sides; ++s) {
        const double of_total = end[0].total_flux[s] + end[1].total_flux[s] - (c[s][1] + c[s][2]);
        for (std::size_t r = 0; r < 3; ++r) {
            const bool is_set = is_last && m.last_is_set[r];
            if (is_set) set_row(b, r, m.holes_lead[node]);
            c[s][r] = (is_set ? 0 : end[0].flux[s][r] + end[1].flux[s][r]) - c[s][r];
        }
        if (used) c[s][2] = of_total;
    }
    const Block i = inverse(b);
    for (std::size_t s = 0; s < sides; ++s) c[s] = product(i, c[s]);
    keep(x, node, c);
}

template <std::size_t sides>
bool solve_all(const BlockTridiagonal& m, std::vector<double>& storage, const Steps<sides>& x,
               const std::array<double, 3>& pull) {
    const std::size_t nodes = m.blocks(), last = nodes - 1;
    const std::size_t pairs = last / 2;       // nodes below the middle
    const std::size_t middle = last - pairs;  // as many above it, or one more
    std::array<Carried<double, sides>, 2> end{};
    const auto keep_coupling = [&](std::size_t step, std::size_t lane, const Block& coupling) {
        for (std::size_t e = 0; e < 9; ++e) storage[18 * step + 2 * e + lane] = coupling[e];
    };
    auto source = source_of<sides>(m, 0, pull);
    keep_coupling(0, 0, begin(cell_from_top(m, 0), own_block(m, 0), m.first_is_set, end[0], source));
    keep(x, 0, source);
    if (pairs > 0) {
        source = source_of<sides>(m, last, pull);
        keep_coupling(
            0, 1, begin(cell_from_bottom(m, last - 1), own_block(m, last), m.last_is_set, end[1], source));
        keep(x, last, source);
    }
    if (pairs > 1) pass_in_pairs(m, pairs, storage, end, x);
    if (middle > pairs && middle > 1) {  // the one more above the middle
        const std::size_t a = middle - 1;
        Node<double, sides> node{m.potential_by_both[a], m.potential_by_minor[a], m.hole_by_both[a],
                                 m.hole_by_minor[a], source_of<sides>(m, a, pull)};
        keep_coupling(a, 0, pass(cell_from_top(m, a), node, end[0]));
        keep(x, a, node.source);
    }
    join(m, middle, end, x);
    const auto back = [&](std::size_t node, std::size_t next, std::size_t step, std::size_t lane) {
        for (std::size_t s = 0; s < sides; ++s)
            for (std::size_t r = 0; r < 3; ++r) {
                const double* row = &storage[18 * step + 6 * r + lane];
                x[s][3 * node + r] +=
                    row[0] * x[s][3 * next] + row[2] * x[s][3 * next + 1] + row[4] * x[s][3 * next + 2];
            }
    };
    if (middle > pairs) back(middle - 1, middle, middle - 1, 0);
    for (std::size_t k = pairs; k-- > 0;) {
        back(k, k + 1, k, 0);
        back(last - k, last - k - 1, k, 1);
    }
    // From levels to gaps; a singular block leaves a number that is not finite.
    for (std::size_t s = 0; s < sides; ++s)
        for (std::size_t node = 0; node < nodes; ++node) {
            double *major = &x[s][3 * node + 1], *minor = &x[s][3 * node + 2];
            *minor += *major;
            if (m.holes_lead[node]) std::swap(*major, *minor);
        }
    double check = 0;
    for (std::size_t s = 0; s < sides; ++s)
        for (std::size_t e = 0; e < 3 * nodes; ++e) check += 0 * x[s][e];
    return check == 0;
}

}  // namespace

void BlockTridiagonal::resize(std::size_t nodes) {
    for (std::vector<double>* values :
         {&dielectric, &electron_shift, &electron_left, &electron_sum, &hole_shift, &hole_left, &hole_sum,
          &potential_flux, &electron_flux, &hole_flux})
        values->assign(nodes - 1, 0.0);
    for (std::vector<double>* values :
         {&potential_by_both, &potential_by_minor, &hole_by_both, &hole_by_minor})
        values->assign(nodes, 0.0);
    source.assign(3 * nodes, 0.0);
    holes_lead.assign(nodes, 0);
    coupling_.assign(18 * (nodes / 2 + 1), 0.0);
    first_own = last_own = {};
    first_is_set = last_is_set = {};
}

bool BlockTridiagonal::solve(std::span<double> step) { return solve_all<1>(*this, coupling_, {step}, {}); }

bool BlockTridiagonal::solve(std::span<double> step, std::span<double> answer,
                             const std::array<double, 3>& pull) {
    return solve_all<2>(*this, coupling_, {step, answer}, pull);
}

double BlockTridiagonal::balance(std::size_t node, std::size_t row) const {
    const std::vector<double>& flux = row == 0 ? potential_flux : row == 1 ? electron_flux : hole_flux;
    const bool is_set = (node == 0 && first_is_set[row]) || (node + 1 == blocks() && last_is_set[row]);
    if (is_set) return source[3 * node + row];
    return (node + 1 < blocks() ? flux[node] : 0) - (node > 0 ? flux[node - 1] : 0) + source[3 * node + row];
}

namespace {

// Blocks by (psi, phi_n, phi_p): a cell's ends, from its derivatives by shift and at fixed psi.
Block by_potentials(double psi, double electron_shift, double electron, double hole_shift, double hole) {
    return {psi, 0, 0, electron_shift - electron, electron, 0, hole_shift - hole, 0, hole};
}

Block at_left(const BlockTridiagonal& m, std::size_t cell) {
    return by_potentials(-m.dielectric[cell], -m.electron_shift[cell], m.electron_left[cell],
                         -m.hole_shift[cell], m.hole_left[cell]);
}

Block at_right(const BlockTridiagonal& m, std::size_t cell) {
    return by_potentials(m.dielectric[cell], m.electron_shift[cell],
                         m.electron_sum[cell] - m.electron_left[cell], m.hole_shift[cell],
                         m.hole_sum[cell] - m.hole_left[cell]);
}

}  // namespace

Block BlockTridiagonal::lower_block(std::size_t node) const {
    Block block{};
    if (node == 0) return block;
    block = at_left(*this, node - 1);
    for (std::size_t r = 0; r < 3; ++r)
        for (std::size_t j = 0; j < 3; ++j)
            block[3 * r + j] = node + 1 == blocks() && last_is_set[r] ? 0 : -block[3 * r + j];
    return block;
}

Block BlockTridiagonal::upper_block(std::size_t node) const {
    Block block{};
    if (node + 1 == blocks()) return block;
    block = at_right(*this, node);
    for (std::size_t r = 0; r < 3; ++r)
        if (node == 0 && first_is_set[r])
            for (std::size_t j = 0; j < 3; ++j) block[3 * r + j] = 0;
    return block;
}

Block BlockTridiagonal::diagonal_block(std::size_t node) const {
    const Block levels = own_block(*this, node);
    Block block;
    for (std::size_t r = 0; r < 3; ++r) {
        const double both = levels[3 * r + 1], minor = levels[3 * r + 2], major = both - minor;
        block[3 * r] = levels[3 * r] - both;
        block[3 * r + 1] = holes_lead[node] ? minor : major;
        block[3 * r + 2] = holes_lead[node] ? major : minor;
    }
    if (node + 1 < blocks()) {
        const Block near = at_left(*this, node);
        for (std::size_t e = 0; e < 9; ++e) block[e] += near[e];
    }
    if (node > 0) {
        const Block far = at_right(*this, node - 1);
        for (std::size_t e = 0; e < 9; ++e) block[e] -= far[e];
    }
    for (std::size_t r = 0; r < 3; ++r)
        if ((node == 0 && first_is_set[r]) || (node + 1 == blocks() && last_is_set[r]))
            for (std::size_t j = 0; j < 3; ++j) block[3 * r + j] = r == j ? 1 : 0;
    return block;
}

}  // namespace bandwright
