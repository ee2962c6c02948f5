// Block elimination against a dense solver with full pivoting.
// SPDX-License-Identifier: MIT
#include "core/discretization/block_tridiagonal.hpp"

#include <gtest/gtest.h>

#include <Eigen/Dense>
#include <cmath>
#include <random>

using namespace bandwright;

namespace {

// Reproducible numbers in (-1, 1) that do not depend on the standard library's distributions.
double next(std::mt19937_64& engine) { return static_cast<double>(engine() >> 11) * 0x1p-52 - 1; }

BlockTridiagonal random_matrix(std::size_t blocks, double dominance, std::mt19937_64& engine) {
    BlockTridiagonal matrix;
    matrix.resize(blocks);
    for (std::size_t k = 0; k < blocks; ++k)
        for (int e = 0; e < 9; ++e) {
            matrix.diagonal[k][static_cast<std::size_t>(e)] = next(engine) + (e % 4 == 0 ? dominance : 0);
            if (k > 0) matrix.lower[k][static_cast<std::size_t>(e)] = next(engine);
            if (k + 1 < blocks) matrix.upper[k][static_cast<std::size_t>(e)] = next(engine);
        }
    return matrix;
}

}  // namespace

TEST(BlockTridiagonal, equals_a_dense_solver_with_full_pivoting) {
    std::mt19937_64 engine(7);
    for (const std::size_t blocks : {1, 2, 3, 10, 40}) {
        BlockTridiagonal matrix = random_matrix(blocks, 4, engine);
        const auto n = static_cast<Eigen::Index>(3 * blocks);
        Eigen::MatrixXd dense = Eigen::MatrixXd::Zero(n, n);
        std::vector<double> x(3 * blocks);
        for (std::size_t k = 0; k < blocks; ++k)
            for (int i = 0; i < 3; ++i)
                for (int j = 0; j < 3; ++j) {
                    const auto row = static_cast<Eigen::Index>(3 * k) + i;
                    const auto e = static_cast<std::size_t>(3 * i + j);
                    dense(row, static_cast<Eigen::Index>(3 * k) + j) = matrix.diagonal[k][e];
                    if (k > 0) dense(row, static_cast<Eigen::Index>(3 * k) - 3 + j) = matrix.lower[k][e];
                    if (k + 1 < blocks) dense(row, static_cast<Eigen::Index>(3 * k) + 3 + j) = matrix.upper[k][e];
                }
        Eigen::VectorXd b(n);
        for (Eigen::Index k = 0; k < n; ++k) x[static_cast<std::size_t>(k)] = b(k) = next(engine);
        const Eigen::VectorXd expected = dense.fullPivLu().solve(b);
        ASSERT_EQ(matrix.factorize(), blocks);
        matrix.solve(x);
        // Condition numbers of these matrices are below 1e3.
        for (Eigen::Index k = 0; k < n; ++k) EXPECT_NEAR(x[static_cast<std::size_t>(k)], expected(k), 1e-12);
        std::vector<double> back(3 * blocks);
        matrix.multiply(x, back);
        for (Eigen::Index k = 0; k < n; ++k) EXPECT_NEAR(back[static_cast<std::size_t>(k)], b(k), 1e-12);
    }
}

TEST(BlockTridiagonal, pivots_inside_a_block) {
    BlockTridiagonal matrix;
    matrix.resize(1);
    matrix.diagonal[0] = {0, 1, 0, 0, 0, 1, 1, 0, 0};
    ASSERT_EQ(matrix.factorize(), 1u);
    std::vector<double> x{1, 2, 3};
    matrix.solve(x);
    EXPECT_EQ(x, (std::vector<double>{3, 1, 2}));
}

TEST(BlockTridiagonal, names_the_singular_block) {
    std::mt19937_64 engine(3);
    BlockTridiagonal matrix = random_matrix(5, 4, engine);
    matrix.diagonal[2].fill(0);
    matrix.lower[2].fill(0);
    EXPECT_EQ(matrix.factorize(), 2u);
}
