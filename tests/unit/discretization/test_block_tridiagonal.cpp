// Block elimination against a dense solver with full pivoting, and where a dense solver has no digits left.
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

BlockTridiagonal random_chain(std::size_t nodes, std::mt19937_64& engine) {
    BlockTridiagonal m;
    m.resize(nodes);
    for (std::size_t cell = 0; cell + 1 < nodes; ++cell) {
        m.dielectric[cell] = 1.5 + 0.3 * next(engine);
        m.electron_left[cell] = 1.5 + 0.3 * next(engine);
        m.hole_left[cell] = 1.5 + 0.3 * next(engine);
        for (std::vector<double>* values :
             {&m.electron_sum, &m.hole_sum, &m.potential_flux, &m.electron_flux, &m.hole_flux})
            (*values)[cell] = 0.3 * next(engine);
        m.electron_shift[cell] = -1.5 + 0.3 * next(engine);
        m.hole_shift[cell] = -1.5 + 0.3 * next(engine);
    }
    for (std::size_t node = 0; node < nodes; ++node) {
        m.potential_by_both[node] = 0.7 + 0.3 * next(engine);
        m.potential_by_minor[node] = 0.3 + 0.2 * next(engine);
        m.hole_by_both[node] = 0.2 * next(engine);
        m.hole_by_minor[node] = 0.5 + 0.3 * next(engine);
        for (std::size_t r = 0; r < 3; ++r) m.source[3 * node + r] = next(engine);
        m.holes_lead[node] = next(engine) > 0;
    }
    m.first_is_set = {true, true, false};
    m.last_is_set = {true, false, true};
    m.first_own = {0, 0.8};
    m.last_own = {0.6, 0};
    return m;
}

Eigen::MatrixXd dense(const BlockTridiagonal& m) {
    const auto n = static_cast<Eigen::Index>(3 * m.blocks());
    Eigen::MatrixXd matrix = Eigen::MatrixXd::Zero(n, n);
    for (std::size_t k = 0; k < m.blocks(); ++k) {
        const Block lower = m.lower_block(k), diagonal = m.diagonal_block(k), upper = m.upper_block(k);
        for (Eigen::Index i = 0; i < 3; ++i)
            for (Eigen::Index j = 0; j < 3; ++j) {
                const auto row = static_cast<Eigen::Index>(3 * k) + i,
                           column = static_cast<Eigen::Index>(3 * k) + j;
                const auto e = static_cast<std::size_t>(3 * i + j);
                matrix(row, column) = diagonal[e];
                if (k > 0) matrix(row, column - 3) = lower[e];
                if (k + 1 < m.blocks()) matrix(row, column + 3) = upper[e];
            }
    }
    return matrix;
}

}  // namespace

TEST(BlockTridiagonal, equals_a_dense_solver_with_full_pivoting) {
    std::mt19937_64 engine(7);
    for (const std::size_t nodes : {2, 3, 4, 5, 10, 41}) {
        BlockTridiagonal m = random_chain(nodes, engine);
        const auto n = static_cast<Eigen::Index>(3 * nodes);
        const Eigen::FullPivLU<Eigen::MatrixXd> reference(dense(m));
        Eigen::VectorXd b(n), pulled = Eigen::VectorXd::Zero(n);
        const std::array<double, 3> pull{0.4, -0.7, 1.1};
        for (std::size_t k = 0; k < 3 * nodes; ++k)
            b(static_cast<Eigen::Index>(k)) = -m.balance(k / 3, k % 3);
        for (Eigen::Index r = 0; r < 3; ++r) pulled(r) = pull[static_cast<std::size_t>(r)];
        const Eigen::VectorXd expected = reference.solve(b), expected_answer = reference.solve(pulled);
        std::vector<double> step(3 * nodes), alone(3 * nodes), answer(3 * nodes);
        ASSERT_TRUE(m.solve(alone));
        ASSERT_TRUE(m.solve(step, answer, pull));
        EXPECT_EQ(alone, step);
        potentials_from_gaps(step);
        potentials_from_gaps(answer);
        // Condition numbers of these matrices are below 1e4.
        for (Eigen::Index k = 0; k < n; ++k) {
            EXPECT_NEAR(step[static_cast<std::size_t>(k)], expected(k),
                        1e-11 * expected.lpNorm<Eigen::Infinity>());
            EXPECT_NEAR(answer[static_cast<std::size_t>(k)], expected_answer(k),
                        1e-11 * expected_answer.lpNorm<Eigen::Infinity>());
        }
    }
}

TEST(BlockTridiagonal, says_that_a_block_is_singular) {
    std::mt19937_64 engine(3);
    BlockTridiagonal m = random_chain(5, engine);
    std::vector<double> step(15);
    EXPECT_TRUE(m.solve(step));
    for (const std::size_t cell : {1, 2}) m.hole_shift[cell] = m.hole_left[cell] = m.hole_sum[cell] = 0;
    m.hole_by_both[2] = m.hole_by_minor[2] = 0;
    EXPECT_FALSE(m.solve(step));
}

namespace {

// Two chains of conductances, electrons' and holes', in equilibrium: fluxes depend on phi alone.
BlockTridiagonal resistors(std::size_t nodes, double conductance) {
    BlockTridiagonal m;
    m.resize(nodes);
    m.first_is_set = {true, true, true};
    m.last_is_set = {true, false, false};
    for (std::size_t cell = 0; cell + 1 < nodes; ++cell) {
        m.dielectric[cell] = 1;
        m.electron_left[cell] = m.hole_left[cell] = conductance;
        m.electron_shift[cell] = m.hole_shift[cell] = -conductance;
    }
    return m;
}

}  // namespace

TEST(BlockTridiagonal, keeps_a_floating_region_to_full_precision) {
    // A chain of conductance 1, tied to a set value only through one link of 1e-25: with unit current fed
    // into the far end every level beyond the link is 1e25. An elimination that subtracts loses the link in
    // rounding.
    const std::size_t nodes = 30, link = 10;
    const double weak = 1e-25;
    BlockTridiagonal m = resistors(nodes, 1);
    m.electron_left[link] = weak;
    m.electron_shift[link] = -weak;
    m.source[3 * (nodes - 1) + 1] = -1;
    std::vector<double> x(3 * nodes);
    ASSERT_TRUE(m.solve(x));
    potentials_from_gaps(x);
    EXPECT_NEAR(x[3 * (nodes - 1) + 1] / 1e25, 1, 1e-12);
    EXPECT_NEAR(x[3 * link + 1], static_cast<double>(link), 1e-10);
}

TEST(BlockTridiagonal, is_not_misled_by_rounded_fluxes_of_a_floating_region) {
    // The present fluxes inside the region are rounding noise of 1e10; the link carries none. The step levels
    // them out inside and moves the region itself by nothing but the source that it has, 1e-30.
    std::mt19937_64 engine(11);
    const std::size_t nodes = 41, link = 10;
    const double weak = 1e-20, strong = 1e26, source = 1e-30;
    BlockTridiagonal m = resistors(nodes, strong);
    m.electron_left[link] = weak;
    m.electron_shift[link] = -weak;
    for (std::size_t cell = link + 1; cell + 1 < nodes; ++cell) m.electron_flux[cell] = 1e10 * next(engine);
    m.source[3 * (nodes - 1) + 1] = -source;
    std::vector<double> x(3 * nodes);
    ASSERT_TRUE(m.solve(x));
    potentials_from_gaps(x);
    for (std::size_t node = link + 1; node < nodes; ++node)
        EXPECT_NEAR(x[3 * node + 1], source / weak, 1e-12 * source / weak + 40 * 1e10 / strong) << node;
}

TEST(BlockTridiagonal, keeps_a_weak_carrier_that_a_strong_rate_ties_to_the_other) {
    // Holes conduct 30 decades worse than the rate ties them to electrons, and are tied to nothing else: both
    // levels follow the electrons', which fall straight from 1 to 0.
    const std::size_t nodes = 21;
    BlockTridiagonal m = resistors(nodes, 1);
    m.last_is_set = {true, true, true};
    for (std::size_t cell = 0; cell + 1 < nodes; ++cell) {
        m.hole_left[cell] = 1e-40;
        m.hole_shift[cell] = -1e-40;
    }
    for (std::size_t node = 1; node + 1 < nodes; ++node) m.hole_by_minor[node] = 1e-10;
    std::vector<double> step(3 * nodes), answer(3 * nodes);
    ASSERT_TRUE(m.solve(step, answer, {0, 1, 1}));
    for (std::size_t node = 1; node + 1 < nodes; ++node) {
        const double level = 1 - static_cast<double>(node) / (nodes - 1);
        EXPECT_NEAR(answer[3 * node] + answer[3 * node + 1], level, 1e-12);
        EXPECT_NEAR(answer[3 * node + 2], answer[3 * node + 1], 1e-15);
    }
}
