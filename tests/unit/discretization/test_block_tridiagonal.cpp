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

// Fluxes that do not change when all unknowns are shifted alike, as in a chain of boxes, and shunts that make
// the chain solvable.
BlockTridiagonal random_chain(std::size_t nodes, std::mt19937_64& engine) {
    BlockTridiagonal matrix;
    matrix.resize(nodes);
    for (std::size_t cell = 0; cell + 1 < nodes; ++cell)
        for (std::size_t i = 0; i < 3; ++i) {
            double sum = 0;
            for (std::size_t j = 0; j < 3; ++j) {
                matrix.left[cell][3 * i + j] = 0.3 * next(engine) - (i == j ? 1.5 : 0);
                matrix.right[cell][3 * i + j] = 0.3 * next(engine) + (i == j ? 1.5 : 0);
                sum += matrix.left[cell][3 * i + j] + matrix.right[cell][3 * i + j];
            }
            matrix.right[cell][3 * i] -= sum;
        }
    for (Block& block : matrix.shunt)
        for (std::size_t e = 0; e < 9; ++e) block[e] = 0.3 * next(engine) - (e % 4 == 0 ? 0.7 : 0);
    matrix.first_is_set = {true, true, false};
    matrix.last_is_set = {true, false, true};
    return matrix;
}

}  // namespace

TEST(BlockTridiagonal, equals_a_dense_solver_with_full_pivoting) {
    std::mt19937_64 engine(7);
    for (const std::size_t nodes : {2, 3, 10, 40}) {
        BlockTridiagonal matrix = random_chain(nodes, engine);
        const auto n = static_cast<Eigen::Index>(3 * nodes);
        Eigen::MatrixXd dense = Eigen::MatrixXd::Zero(n, n);
        for (std::size_t k = 0; k < nodes; ++k) {
            const Block lower = matrix.lower_block(k), diagonal = matrix.diagonal_block(k),
                        upper = matrix.upper_block(k);
            for (Eigen::Index i = 0; i < 3; ++i)
                for (Eigen::Index j = 0; j < 3; ++j) {
                    const auto row = static_cast<Eigen::Index>(3 * k) + i,
                               column = static_cast<Eigen::Index>(3 * k) + j;
                    const auto e = static_cast<std::size_t>(3 * i + j);
                    dense(row, column) = diagonal[e];
                    if (k > 0) dense(row, column - 3) = lower[e];
                    if (k + 1 < nodes) dense(row, column + 3) = upper[e];
                }
        }
        Eigen::VectorXd b(n);
        std::vector<double> x(3 * nodes);
        for (Eigen::Index k = 0; k < n; ++k) x[static_cast<std::size_t>(k)] = b(k) = next(engine);
        const Eigen::VectorXd expected = dense.fullPivLu().solve(b);
        ASSERT_EQ(matrix.factorize(), nodes);
        matrix.solve(x);
        // Condition numbers of these matrices are below 1e4.
        for (Eigen::Index k = 0; k < n; ++k)
            EXPECT_NEAR(x[static_cast<std::size_t>(k)], expected(k),
                        1e-11 * expected.lpNorm<Eigen::Infinity>());
    }
}

TEST(BlockTridiagonal, names_the_singular_node) {
    std::mt19937_64 engine(3);
    BlockTridiagonal matrix = random_chain(5, engine);
    for (Block* block :
         {&matrix.left[1], &matrix.right[1], &matrix.left[2], &matrix.right[2], &matrix.shunt[2]})
        block->fill(0);
    EXPECT_EQ(matrix.factorize(), 2u);
}

TEST(BlockTridiagonal, keeps_a_floating_region_to_full_precision) {
    // A chain of conductance 1, tied to a set value only through one link of 1e-25: with unit current fed
    // into the far end every unknown beyond the link is 1e25. An elimination that subtracts loses the link in
    // rounding.
    const std::size_t nodes = 30, link = 10;
    const double weak = 1e-25;
    BlockTridiagonal matrix;
    matrix.resize(nodes);
    matrix.first_is_set = {true, true, true};
    for (std::size_t cell = 0; cell + 1 < nodes; ++cell)
        for (std::size_t r = 0; r < 3; ++r) {
            matrix.right[cell][4 * r] = cell == link ? weak : 1;
            matrix.left[cell][4 * r] = -matrix.right[cell][4 * r];
        }
    // The three unknowns of a node hang together: a tie of 0.5 between each pair changes nothing here.
    for (Block& block : matrix.shunt)
        for (std::size_t i = 0; i < 3; ++i)
            for (std::size_t j = 0; j < 3; ++j) block[3 * i + j] = i == j ? -1 : 0.5;
    std::vector<double> x(3 * nodes, 0.0);
    for (std::size_t r = 0; r < 3; ++r) x[3 * (nodes - 1) + r] = -1;
    ASSERT_EQ(matrix.factorize(), nodes);
    matrix.solve(x);
    for (std::size_t r = 0; r < 3; ++r) {
        EXPECT_NEAR(x[3 * (nodes - 1) + r] / 1e25, 1, 1e-12);
        EXPECT_NEAR(x[3 * link + r], static_cast<double>(link), 1e-10);
    }
}
