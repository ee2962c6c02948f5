// One step of the elimination of BlockTridiagonal: what a node and a cell do to what is carried inward.
// Templated on the scalar, so that two nodes go through it at once. Not for: the order of the steps
// (block_tridiagonal.cpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <array>
#include <cmath>
#include <cstddef>

#include "core/discretization/block_tridiagonal.hpp"
#include "core/discretization/lane_pair.hpp"

namespace bandwright::elimination {

template <class S>
using Entries = std::array<S, 9>;
template <class S>
using Triple = std::array<S, 3>;

template <class S>
Triple<S> product(const Entries<S>& a, const Triple<S>& x) {
    Triple<S> y;
    for (std::size_t i = 0; i < 3; ++i) y[i] = a[3 * i] * x[0] + a[3 * i + 1] * x[1] + a[3 * i + 2] * x[2];
    return y;
}

template <class S>
Entries<S> product(const Entries<S>& a, const Entries<S>& b) {
    Entries<S> c;
    for (std::size_t i = 0; i < 3; ++i)
        for (std::size_t j = 0; j < 3; ++j)
            c[3 * i + j] = a[3 * i] * b[j] + a[3 * i + 1] * b[3 + j] + a[3 * i + 2] * b[6 + j];
    return c;
}

// Inverse by cofactors, rows scaled by their largest entry; not finite where singular. A cofactor is a
// difference of two products: an entry many decades below the others keeps its digits, which exchanges of
// rows would drown.
template <class S>
Entries<S> inverse(const Entries<S>& matrix) {
    Entries<S> a;
    Triple<S> scale;
    for (std::size_t i = 0; i < 3; ++i) {
        const S largest = larger(larger(magnitude(matrix[3 * i]), magnitude(matrix[3 * i + 1])),
                                 magnitude(matrix[3 * i + 2]));
        scale[i] = 1.0 / largest;
        for (std::size_t j = 0; j < 3; ++j) a[3 * i + j] = matrix[3 * i + j] * scale[i];
    }
    const Entries<S> cofactors{
        a[4] * a[8] - a[5] * a[7], a[2] * a[7] - a[1] * a[8], a[1] * a[5] - a[2] * a[4],
        a[5] * a[6] - a[3] * a[8], a[0] * a[8] - a[2] * a[6], a[2] * a[3] - a[0] * a[5],
        a[3] * a[7] - a[4] * a[6], a[1] * a[6] - a[0] * a[7], a[0] * a[4] - a[1] * a[3]};
    const S factor = 1.0 / (a[0] * cofactors[0] + a[1] * cofactors[3] + a[2] * cofactors[6]);
    const Triple<S> column{factor * scale[0], factor * scale[1], factor * scale[2]};
    Entries<S> result;
    for (std::size_t i = 0; i < 3; ++i)
        for (std::size_t j = 0; j < 3; ++j) result[3 * i + j] = cofactors[3 * i + j] * column[j];
    return result;
}

// Row of the levels that stands for one unknown: psi is the first, a major carrier's potential the sum of the
// first two, a minor one's of all three.
inline void set_row(Block& block, std::size_t row, bool holes_lead) {
    const bool is_minor = row == (holes_lead ? 1 : 2);
    for (std::size_t j = 0; j < 3; ++j)
        block[3 * row + j] = j == 0 || (row > 0 && (j == 1 || is_minor)) ? 1 : 0;
}

/// One cell as a node sees it that lies on its outer side. Near and far carry the third column of each end.
template <class S>
struct Cell {
    S dielectric, electron_shift, electron_near, electron_sum, hole_shift, hole_near, hole_sum;
    Triple<S> flux;
    S near_holes_lead, far_holes_lead;  // 0 or 1

    S electron_minor() const { return near_holes_lead * electron_near; }
    S hole_minor() const { return hole_near - near_holes_lead * hole_near; }
    Entries<S> near() const {
        return {-dielectric,      S{},         S{},       -electron_shift, electron_near,
                electron_minor(), -hole_shift, hole_near, hole_minor()};
    }
    Triple<S> far(std::size_t j) const {
        if (j == 0) return {dielectric, electron_shift, hole_shift};
        const S n = electron_sum - electron_near, p = hole_sum - hole_near;
        if (j == 1) return {S{}, n, p};
        return {S{}, far_holes_lead * n, p - far_holes_lead * p};
    }
    // near + far when the same potentials move at both ends.
    Triple<S> sum(std::size_t j) const {
        if (j == 0) return {};
        if (j == 1) return {S{}, electron_sum, hole_sum};
        return {S{}, far_holes_lead * electron_sum, hole_sum - far_holes_lead * hole_sum};
    }
    Triple<S> near_times(const Triple<S>& x) const {
        return {-(dielectric * x[0]), electron_near * x[1] + electron_minor() * x[2] - electron_shift * x[0],
                hole_near * x[1] + hole_minor() * x[2] - hole_shift * x[0]};
    }
    Triple<S> near_size(const Triple<S>& size) const {
        return {dielectric * size[0],
                magnitude(electron_near) * size[1] + magnitude(electron_minor()) * size[2] +
                    magnitude(electron_shift) * size[0],
                magnitude(hole_near) * size[1] + magnitude(hole_minor()) * size[2] +
                    magnitude(hole_shift) * size[0]};
    }
};

template <class S>
Triple<S> sizes(const Triple<S>& x) {
    return {magnitude(x[0]), magnitude(x[1]), magnitude(x[2])};
}

// Sizes of the terms of a product with a vector of given sizes: its rounding error is a few units of these.
template <class S>
Triple<S> size_of_product(const Entries<S>& a, const Triple<S>& x) {
    Triple<S> y;
    for (std::size_t i = 0; i < 3; ++i)
        y[i] = magnitude(a[3 * i]) * x[0] + magnitude(a[3 * i + 1]) * x[1] + magnitude(a[3 * i + 2]) * x[2];
    return y;
}

template <class S>
Triple<S> column(const Entries<S>& a, std::size_t j) {
    return {a[j], a[3 + j], a[6 + j]};
}

/// What elimination carries inward: three rows, and beside them the sum of the second and the third (the
/// total current), kept apart because recombination cancels in it.
template <class S, std::size_t sides>
struct Carried {
    Entries<S> admittance;
    Triple<S> total_admittance;
    std::array<Triple<S>, sides> flux;
    std::array<S, sides> total_flux;
};

/// What a node brings with it: own terms by its second and third level, and sources.
template <class S, std::size_t sides>
struct Node {
    S potential_by_both, potential_by_minor, hole_by_both, hole_by_minor;
    std::array<Triple<S>, sides> source;
};

template <class S>
S dot(const Triple<S>& a, const Triple<S>& b) {
    return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

template <class S>
S largest(const S& a, const S& b, const S& c) {
    return larger(larger(magnitude(a), magnitude(b)), magnitude(c));
}

// Puts the row of the total in the hole row's place where recombination rules: there the electron and the
// hole row say the same but for their sign. Returns 1 where it did, 0 elsewhere.
template <class S>
S use_total(Entries<S>& b, const Triple<S>& total) {
    constexpr double much_smaller = 0.1;
    const S of_carriers = larger(largest(b[3], b[4], b[5]), largest(b[6], b[7], b[8]));
    const S of_total = largest(total[0], total[1], total[2]);
    const S used = chosen(of_total, much_smaller * of_carriers, S{} + 1.0, S{});
    for (std::size_t j = 0; j < 3; ++j) b[6 + j] = chosen(used, S{} + 0.5, b[6 + j], total[j]);
    return used;
}

// Takes a node and the cell on its inner side: `carried` becomes that of the next node, `source` becomes y.
// Returns C. The second of two sides has no present flux.
template <class S, std::size_t sides>
Entries<S> pass(const Cell<S>& cell, Node<S, sides>& node, Carried<S, sides>& carried) {
    Entries<S> m = carried.admittance;
    const Triple<S> total = carried.total_admittance;
    m[1] -= node.potential_by_both;
    m[2] -= node.potential_by_minor;
    m[4] += node.hole_by_both;
    m[5] += node.hole_by_minor;
    m[7] -= node.hole_by_both;
    m[8] -= node.hole_by_minor;
    const Entries<S> near = cell.near();
    Entries<S> b;
    for (std::size_t e = 0; e < 9; ++e) b[e] = near[e] - m[e];
    const Triple<S> near_total{near[3] + near[6], near[4] + near[7], near[5] + near[8]};
    const S used =
        use_total(b, Triple<S>{near_total[0] - total[0], near_total[1] - total[1], near_total[2] - total[2]});
    const S half = S{} + 0.5;
    const Entries<S> i = inverse(b);
    // Where the carriers change roles from this node to the next, "the minor one alone" there is "the major
    // one alone" here: (0, 1, -1) in place of (0, 0, 1).
    const S changes = magnitude(cell.near_holes_lead - cell.far_holes_lead);
    Entries<S> coupling;
    for (std::size_t j = 0; j < 3; ++j) {
        Triple<S> same{};
        same[j] += 1.0;
        if (j == 2) {
            same[1] = changes;
            same[2] = 1.0 - 2.0 * changes;
        }
        const Triple<S> sum = cell.sum(j);
        Triple<S> far = cell.far(j), excess, excess_size;
        const S sum_total = sum[1] + sum[2];
        const auto find_excess = [&](std::size_t r, const S* row, const S& of_cell) {
            if (j < 2) {
                excess[r] = row[j] - of_cell;
                excess_size[r] = magnitude(excess[r]);
            } else {
                const S of_major = same[1] * row[1], of_minor = same[2] * row[2];
                excess[r] = of_major + of_minor - of_cell;
                excess_size[r] = magnitude(of_major) + magnitude(excess[r]);
            }
        };
        for (std::size_t r = 0; r < 3; ++r) find_excess(r, &m[3 * r], sum[r]);
        const S excess_of_holes = excess[2], size_of_holes = excess_size[2];
        find_excess(2, total.data(), sum_total);
        excess[2] = chosen(used, half, excess_of_holes, excess[2]);
        excess_size[2] = chosen(used, half, size_of_holes, excess_size[2]);
        far[2] = chosen(used, half, far[2], far[1] + far[2]);
        const Triple<S> slip = product(i, excess), slip_size = size_of_product(i, excess_size);
        const Triple<S> whole = product(i, far), whole_size = size_of_product(i, sizes(far));
        Triple<S> c, c_size;
        for (std::size_t r = 0; r < 3; ++r) {
            const S own_size = slip_size[r] + magnitude(same[r]);
            c[r] = chosen(own_size, whole_size[r], slip[r] + same[r], -whole[r]);
            c_size[r] = chosen(own_size, whole_size[r], own_size, whole_size[r]);
            coupling[3 * r + j] = c[r];
        }
        const Triple<S> outside = product(m, c), outside_size = size_of_product(m, c_size);
        const Triple<S> inside = cell.near_times(slip), inside_size = cell.near_size(slip_size);
        for (std::size_t r = 0; r < 3; ++r)
            carried.admittance[3 * r + j] =
                chosen(outside_size[r], inside_size[r] + magnitude(sum[r]), outside[r], inside[r] + sum[r]);
        carried.total_admittance[j] =
            chosen(dot(sizes(total), c_size),
                   inside_size[1] + inside_size[2] + magnitude(sum[1]) + magnitude(sum[2]), dot(total, c),
                   inside[1] + inside[2] + sum_total);
    }
    for (std::size_t s = 0; s < sides; ++s) {
        const Triple<S> flux = s == 0 ? cell.flux : Triple<S>{};
        Triple<S> c, drive, drive_size;
        for (std::size_t r = 0; r < 3; ++r) {
            c[r] = carried.flux[s][r] - node.source[s][r];
            drive[r] = c[r] - flux[r];
            drive_size[r] = magnitude(c[r]) + magnitude(flux[r]);
        }
        const S c_total = carried.total_flux[s] - (node.source[s][1] + node.source[s][2]);
        drive[2] = chosen(used, half, drive[2], c_total - (flux[1] + flux[2]));
        drive_size[2] =
            chosen(used, half, drive_size[2], magnitude(c_total) + magnitude(flux[1]) + magnitude(flux[2]));
        const Triple<S> y = product(i, drive), y_size = size_of_product(i, drive_size);
        const Triple<S> outside = product(m, y), outside_size = size_of_product(m, y_size);
        const Triple<S> inside = cell.near_times(y), inside_size = cell.near_size(y_size);
        for (std::size_t r = 0; r < 3; ++r)
            carried.flux[s][r] =
                chosen(outside_size[r] + magnitude(c[r]), inside_size[r] + magnitude(flux[r]),
                       c[r] + outside[r], flux[r] + inside[r]);
        carried.total_flux[s] =
            chosen(dot(sizes(total), y_size) + magnitude(c_total),
                   inside_size[1] + inside_size[2] + magnitude(flux[1]) + magnitude(flux[2]),
                   c_total + dot(total, y), flux[1] + flux[2] + inside[1] + inside[2]);
        node.source[s] = y;
    }
    return coupling;
}

// The outermost node: nothing is carried, some rows set their unknown.
template <std::size_t sides>
Block begin(const Cell<double>& cell, const Block& own, const std::array<bool, 3>& is_set,
            Carried<double, sides>& carried, std::array<Triple<double>, sides>& source) {
    Block b = cell.near(), far;
    for (std::size_t j = 0; j < 3; ++j)
        for (std::size_t r = 0; r < 3; ++r) far[3 * r + j] = cell.far(j)[r];
    for (std::size_t e = 0; e < 9; ++e) b[e] += own[e];
    Block seen = far;
    for (std::size_t r = 0; r < 3; ++r)
        if (is_set[r]) {
            set_row(b, r, cell.near_holes_lead > 0.5);
            for (std::size_t j = 0; j < 3; ++j) seen[3 * r + j] = 0;
        }
    const Block i = inverse(b);
    Block coupling = product(i, seen);
    for (double& entry : coupling) entry = -entry;
    // A row that is not set has the two forms of pass(), with M = -own.
    carried.admittance = product(cell.near(), coupling);
    for (std::size_t j = 0; j < 3; ++j) {
        const Triple<double> c = column(coupling, j), inside_size = cell.near_size(sizes(c)),
                             outside = product(own, c), outside_size = size_of_product(own, sizes(c));
        for (std::size_t r = 0; r < 3; ++r) {
            double& entry = carried.admittance[3 * r + j];
            entry = !is_set[r] && outside_size[r] < inside_size[r] + std::abs(far[3 * r + j])
                        ? -outside[r]
                        : entry + far[3 * r + j];
        }
    }
    for (std::size_t s = 0; s < sides; ++s) {
        Triple<double> drive, flux;
        for (std::size_t r = 0; r < 3; ++r) {
            flux[r] = s == 0 ? cell.flux[r] : 0;
            drive[r] = -source[s][r] - (is_set[r] ? 0 : flux[r]);
        }
        const Triple<double> y = product(i, drive), inside = cell.near_times(y),
                             inside_size = cell.near_size(sizes(y)), outside = product(own, y),
                             outside_size = size_of_product(own, sizes(y));
        for (std::size_t r = 0; r < 3; ++r)
            carried.flux[s][r] =
                !is_set[r] && outside_size[r] + std::abs(source[s][r]) < inside_size[r] + std::abs(flux[r])
                    ? -source[s][r] - outside[r]
                    : flux[r] + inside[r];
        carried.total_flux[s] = carried.flux[s][1] + carried.flux[s][2];
        source[s] = y;
    }
    for (std::size_t j = 0; j < 3; ++j)
        carried.total_admittance[j] = carried.admittance[3 + j] + carried.admittance[6 + j];
    return coupling;
}

}  // namespace bandwright::elimination
