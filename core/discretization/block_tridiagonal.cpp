#include "core/discretization/block_tridiagonal.hpp"

#include <algorithm>
#include <cmath>

namespace bandwright {

namespace {

using Vector = std::array<double, 3>;

Block product(const Block& a, const Block& b) {
    Block c;
    for (std::size_t i = 0; i < 3; ++i)
        for (std::size_t j = 0; j < 3; ++j)
            c[3 * i + j] = a[3 * i] * b[j] + a[3 * i + 1] * b[3 + j] + a[3 * i + 2] * b[6 + j];
    return c;
}

Vector product(const Block& a, const Vector& x) {
    Vector y;
    for (std::size_t i = 0; i < 3; ++i) y[i] = a[3 * i] * x[0] + a[3 * i + 1] * x[1] + a[3 * i + 2] * x[2];
    return y;
}

// A block whose columns belong to the unknowns, in the shift basis: its first column becomes the sum of each
// row.
Block in_shift_basis(Block block) {
    for (std::size_t i = 0; i < 3; ++i) block[3 * i] += block[3 * i + 1] + block[3 * i + 2];
    return block;
}

// Inverse by cofactors, rows scaled by their largest entry; false when singular or not finite. A cofactor is
// a difference of two products: an entry many decades below the others keeps its digits, which exchanges of
// rows would drown.
bool invert(const Block& matrix, Block& inverse) {
    Block a;
    Vector scale;
    for (std::size_t i = 0; i < 3; ++i) {
        const double largest =
            std::max({std::abs(matrix[3 * i]), std::abs(matrix[3 * i + 1]), std::abs(matrix[3 * i + 2])});
        if (!(largest > 0) || !std::isfinite(largest)) return false;
        scale[i] = 1 / largest;
        for (std::size_t j = 0; j < 3; ++j) a[3 * i + j] = matrix[3 * i + j] * scale[i];
    }
    const Block cofactors{a[4] * a[8] - a[5] * a[7], a[2] * a[7] - a[1] * a[8], a[1] * a[5] - a[2] * a[4],
                          a[5] * a[6] - a[3] * a[8], a[0] * a[8] - a[2] * a[6], a[2] * a[3] - a[0] * a[5],
                          a[3] * a[7] - a[4] * a[6], a[1] * a[6] - a[0] * a[7], a[0] * a[4] - a[1] * a[3]};
    const double determinant = a[0] * cofactors[0] + a[1] * cofactors[3] + a[2] * cofactors[6];
    if (!(std::abs(determinant) > 0)) return false;
    const double factor = 1 / determinant;
    bool finite = true;
    for (std::size_t i = 0; i < 3; ++i)
        for (std::size_t j = 0; j < 3; ++j) {
            inverse[3 * i + j] = cofactors[3 * i + j] * factor * scale[j];
            finite = finite && std::isfinite(inverse[3 * i + j]);
        }
    return finite;
}

// Row of the shift basis that stands for one unknown: x_0 = z_0, x_1 = z_0 + z_1, x_2 = z_0 + z_2.
void set_row(Block& block, std::size_t row) {
    for (std::size_t j = 0; j < 3; ++j) block[3 * row + j] = j == 0 || j == row ? 1 : 0;
}

}  // namespace

void BlockTridiagonal::resize(std::size_t nodes) {
    left.assign(nodes - 1, Block{});
    right.assign(nodes - 1, Block{});
    shunt.assign(nodes, Block{});
    inverse_.assign(nodes, Block{});
    coupling_.assign(nodes, Block{});
    admittance_.assign(nodes, Block{});
    first_is_set = last_is_set = {};
}

std::size_t BlockTridiagonal::factorize() {
    const std::size_t last = blocks() - 1;
    Block from_left{};  // Y
    for (std::size_t k = 0; k <= last; ++k) {
        Block m = in_shift_basis(shunt[k]);
        for (std::size_t e = 0; e < 9; ++e) m[e] = from_left[e] - m[e];
        Block b;
        if (k < last) {
            b = in_shift_basis(left[k]);
            for (std::size_t e = 0; e < 9; ++e) b[e] -= m[e];
        } else {
            for (std::size_t e = 0; e < 9; ++e) b[e] = -m[e];
        }
        for (std::size_t i = 0; i < 3; ++i) {
            if (k == 0 && first_is_set[i]) set_row(b, i);
            if (k == last && last_is_set[i]) set_row(b, i);
        }
        if (!invert(b, inverse_[k])) return k;
        admittance_[k] = m;
        if (k == last) break;
        Block out = in_shift_basis(right[k]);
        if (k == 0) {
            // Rows that set their unknown do not look to the right.
            Block seen = out;
            for (std::size_t i = 0; i < 3; ++i)
                if (first_is_set[i])
                    for (std::size_t j = 0; j < 3; ++j) seen[3 * i + j] = 0;
            coupling_[0] = product(inverse_[0], seen);
            for (double& entry : coupling_[0]) entry = -entry;
            from_left = product(in_shift_basis(left[0]), coupling_[0]);
            for (std::size_t e = 0; e < 9; ++e) from_left[e] += out[e];
            continue;
        }
        coupling_[k] = product(inverse_[k], out);
        for (double& entry : coupling_[k]) entry = -entry;
        // A common shift passes a cell unchanged but for M: B^-1 left = 1 + B^-1 M on it. Exact where M is
        // small beside the cell; where it is not, the product itself is.
        const Vector slip = product(inverse_[k], Vector{m[0], m[3], m[6]});
        if (std::max({std::abs(slip[0]), std::abs(slip[1]), std::abs(slip[2])}) < 0.5)
            for (std::size_t i = 0; i < 3; ++i) coupling_[k][3 * i] = slip[i] + (i == 0 ? 1 : 0);
        from_left = product(m, coupling_[k]);
    }
    return blocks();
}

void BlockTridiagonal::solve(std::span<double> x) const {
    const std::size_t last = blocks() - 1;
    Vector carried{};  // f
    for (std::size_t k = 0; k <= last; ++k) {
        Vector c{x[3 * k], x[3 * k + 1], x[3 * k + 2]};
        if (k == 0) {
            const Vector y = product(inverse_[0], c);
            carried = product(in_shift_basis(left[0]), y);
            for (std::size_t i = 0; i < 3; ++i) x[i] = y[i];
            continue;
        }
        for (std::size_t i = 0; i < 3; ++i) c[i] += carried[i];
        if (k == last)
            for (std::size_t i = 0; i < 3; ++i)
                if (last_is_set[i]) c[i] = x[3 * k + i];
        const Vector y = product(inverse_[k], c), through = product(admittance_[k], y);
        for (std::size_t i = 0; i < 3; ++i) {
            x[3 * k + i] = y[i];
            carried[i] = c[i] + through[i];
        }
    }
    for (std::size_t k = last; k-- > 0;) {
        const Vector next = product(coupling_[k], Vector{x[3 * k + 3], x[3 * k + 4], x[3 * k + 5]});
        for (std::size_t i = 0; i < 3; ++i) x[3 * k + i] += next[i];
    }
    for (std::size_t k = 0; k <= last; ++k) {
        x[3 * k + 1] += x[3 * k];
        x[3 * k + 2] += x[3 * k];
    }
}

Block BlockTridiagonal::lower_block(std::size_t node) const {
    Block block{};
    if (node == 0) return block;
    for (std::size_t i = 0; i < 3; ++i)
        if (node + 1 < blocks() || !last_is_set[i])
            for (std::size_t j = 0; j < 3; ++j) block[3 * i + j] = -left[node - 1][3 * i + j];
    return block;
}

Block BlockTridiagonal::upper_block(std::size_t node) const {
    Block block{};
    if (node + 1 == blocks()) return block;
    for (std::size_t i = 0; i < 3; ++i)
        if (node > 0 || !first_is_set[i])
            for (std::size_t j = 0; j < 3; ++j) block[3 * i + j] = right[node][3 * i + j];
    return block;
}

Block BlockTridiagonal::diagonal_block(std::size_t node) const {
    Block block{};
    for (std::size_t i = 0; i < 3; ++i) {
        const bool is_set = (node == 0 && first_is_set[i]) || (node + 1 == blocks() && last_is_set[i]);
        for (std::size_t j = 0; j < 3; ++j) {
            if (is_set)
                block[3 * i + j] = i == j ? 1 : 0;
            else
                block[3 * i + j] = shunt[node][3 * i + j] +
                                   (node + 1 < blocks() ? left[node][3 * i + j] : 0) -
                                   (node > 0 ? right[node - 1][3 * i + j] : 0);
        }
    }
    return block;
}

}  // namespace bandwright
