#include "core/discretization/block_tridiagonal.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

namespace bandwright {

namespace {

Block product(const Block& a, const Block& b) {
    Block c;
    for (int i = 0; i < 3; ++i)
        for (int j = 0; j < 3; ++j) c[3 * i + j] = a[3 * i] * b[j] + a[3 * i + 1] * b[3 + j] + a[3 * i + 2] * b[6 + j];
    return c;
}

// Inverse by Gauss-Jordan elimination with row scaling and partial pivoting; false when singular or not finite.
bool invert(const Block& matrix, Block& inverse) {
    double a[3][6];
    for (int i = 0; i < 3; ++i) {
        const double largest = std::max({std::abs(matrix[3 * i]), std::abs(matrix[3 * i + 1]), std::abs(matrix[3 * i + 2])});
        if (!(largest > 0) || !std::isfinite(largest)) return false;
        const double scale = 1 / largest;
        for (int j = 0; j < 3; ++j) {
            a[i][j] = matrix[3 * i + j] * scale;
            a[i][3 + j] = i == j ? scale : 0;
        }
    }
    for (int column = 0; column < 3; ++column) {
        int pivot = column;
        for (int row = column + 1; row < 3; ++row)
            if (std::abs(a[row][column]) > std::abs(a[pivot][column])) pivot = row;
        if (!(std::abs(a[pivot][column]) > 0)) return false;
        if (pivot != column) std::swap(a[pivot], a[column]);
        const double factor = 1 / a[column][column];
        for (int j = column; j < 6; ++j) a[column][j] *= factor;
        for (int row = 0; row < 3; ++row) {
            if (row == column) continue;
            const double multiple = a[row][column];
            for (int j = column; j < 6; ++j) a[row][j] -= multiple * a[column][j];
        }
    }
    for (int i = 0; i < 3; ++i)
        for (int j = 0; j < 3; ++j) inverse[3 * i + j] = a[i][3 + j];
    return std::all_of(inverse.begin(), inverse.end(), [](double value) { return std::isfinite(value); });
}

}  // namespace

void BlockTridiagonal::resize(std::size_t blocks) {
    lower.assign(blocks, Block{});
    diagonal.assign(blocks, Block{});
    upper.assign(blocks, Block{});
    inverse_.resize(blocks);
    coupling_.resize(blocks);
}

std::size_t BlockTridiagonal::factorize() {
    for (std::size_t k = 0; k < blocks(); ++k) {
        Block reduced = diagonal[k];
        if (k > 0) {
            const Block correction = product(lower[k], coupling_[k - 1]);
            for (int e = 0; e < 9; ++e) reduced[e] -= correction[e];
        }
        if (!invert(reduced, inverse_[k])) return k;
        coupling_[k] = product(inverse_[k], upper[k]);
    }
    return blocks();
}

void BlockTridiagonal::solve(std::span<double> x) const {
    for (std::size_t k = 0; k < blocks(); ++k) {
        double r[3] = {x[3 * k], x[3 * k + 1], x[3 * k + 2]};
        if (k > 0)
            for (int i = 0; i < 3; ++i)
                r[i] -= lower[k][3 * i] * x[3 * k - 3] + lower[k][3 * i + 1] * x[3 * k - 2] + lower[k][3 * i + 2] * x[3 * k - 1];
        for (int i = 0; i < 3; ++i)
            x[3 * k + i] = inverse_[k][3 * i] * r[0] + inverse_[k][3 * i + 1] * r[1] + inverse_[k][3 * i + 2] * r[2];
    }
    for (std::size_t k = blocks() - 1; k-- > 0;)
        for (int i = 0; i < 3; ++i)
            x[3 * k + i] -= coupling_[k][3 * i] * x[3 * k + 3] + coupling_[k][3 * i + 1] * x[3 * k + 4] +
                            coupling_[k][3 * i + 2] * x[3 * k + 5];
}

void BlockTridiagonal::multiply(std::span<const double> x, std::span<double> product) const {
    for (std::size_t k = 0; k < blocks(); ++k)
        for (int i = 0; i < 3; ++i) {
            double sum = 0;
            for (int j = 0; j < 3; ++j) {
                sum += diagonal[k][3 * i + j] * x[3 * k + j];
                if (k > 0) sum += lower[k][3 * i + j] * x[3 * k - 3 + j];
                if (k + 1 < blocks()) sum += upper[k][3 * i + j] * x[3 * k + 3 + j];
            }
            product[3 * k + i] = sum;
        }
}

}  // namespace bandwright
