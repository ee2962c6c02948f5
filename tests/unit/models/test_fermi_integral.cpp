// F_1/2, its derivative and inverse against 13-digit values computed with 30-digit arithmetic
// (-Li_3/2(-exp(eta))), and against the Joyce-Dixon series [JoyceDixon1977] where that holds.
// SPDX-License-Identifier: MIT
#include "core/models/fermi_integral.hpp"

#include <gtest/gtest.h>

#include <cmath>

using namespace bandwright;

TEST(FermiIntegral, equals_tabulated_values) {
    const double rows[][3] = {
        {-10, 4.5398472360805e-5, 4.5399201052641e-5}, {-6, 2.4744163366453e-3, 2.4765827958567e-3},
        {-5, 6.7060199892682e-3, 6.7219543145059e-3},  {-2, 0.12366562180121, 0.12929851332008},
        {0, 0.60489864342163, 0.76514702462541},       {1, 1.0270571254744, 1.5756407761513},
        {2, 1.4642945890876, 2.8237212774016},         {4, 2.1858696906238, 6.5115675927548},
        {5, 2.4729876224829, 8.8442088952430},         {8, 3.1691247564959, 17.355020120423},
        {12, 3.8972682319254, 31.540203287044},        {20, 5.0410185075353, 67.491512221659},
        {30, 6.1775494458221, 123.77734775010}};
    // The rows carry 14 digits.
    for (const auto& [eta, minus_half, half] : rows) {
        EXPECT_NEAR(fermi_half(eta) / half, 1, 2e-13) << eta;
        EXPECT_NEAR(fermi_minus_half(eta) / minus_half, 1, 2e-13) << eta;
    }
}

TEST(FermiIntegral, is_continuous_where_the_fit_changes) {
    for (const double eta : {-6.0, 0.0, 4.0, 12.0, 40.0}) {
        const double below = std::nextafter(eta, -100.0), above = std::nextafter(eta, 100.0);
        EXPECT_NEAR(fermi_half(below) / fermi_half(above), 1, 3e-15) << eta;
        EXPECT_NEAR(fermi_minus_half(below) / fermi_minus_half(above), 1, 5e-14) << eta;
    }
}

TEST(FermiIntegral, degeneracy_has_its_derivative) {
    for (double eta = -30; eta < 60; eta += 0.731) {
        const double h = 1e-5;
        // Central difference: h^2/6 and 1e-16/h.
        EXPECT_NEAR(degeneracy(eta).ratio - 1,
                    (degeneracy(eta + h).log_gamma - degeneracy(eta - h).log_gamma) / (2 * h), 1e-9)
            << eta;
    }
    EXPECT_NEAR(degeneracy(-700).log_gamma, 0, 1e-300);
    EXPECT_EQ(degeneracy(-700).ratio, 1);
}

TEST(FermiIntegral, inverse_returns) {
    const double rows[][2] = {{1e-6, -13.8155102044109},
                              {0.1, -2.2672791068878},
                              {1, 0.348747361103643},
                              {10, 5.45625191452413},
                              {100, 26.0153394151231}};
    for (const auto& [u, eta] : rows)
        EXPECT_NEAR(inverse_fermi_half(u), eta, 2e-13 * std::max(1.0, std::abs(eta))) << u;
    for (double u = 1e-12; u < 1e3; u *= 3.7)
        EXPECT_NEAR(fermi_half(inverse_fermi_half(u)) / u, 1, 5e-14) << u;
}

TEST(FermiIntegral, agrees_with_the_joyce_dixon_series_and_its_negative_second_coefficient) {
    const double A[] = {3.53553390593e-1, -4.95008972988e-3, 1.48385771289e-4, -4.42563011900e-6};
    // The series' own error: 2e-7 at u = 0.5, below 5e-7 at 1.
    for (const double u : {0.001, 0.01, 0.1, 0.5, 1.0}) {
        const double series = std::log(u) + u * (A[0] + u * (A[1] + u * (A[2] + u * A[3])));
        EXPECT_NEAR(inverse_fermi_half(u), series, 6e-7);
    }
}

TEST(FermiIntegral, inverse_equals_computed_energies_over_five_decades) {
    // u = n/Nc and its reduced energy, 13 digits from 30-digit arithmetic.
    const double rows[][2] = {{0.001, -6.907401730541}, {0.01, -4.601635146943}, {0.5, -0.5175897329389},
                              {2, 1.381573058774},      {4, 2.729770039781},     {5, 3.269536028075},
                              {8, 4.651947368860},      {20, 8.813661405447}};
    for (const auto& [u, eta] : rows) EXPECT_NEAR(inverse_fermi_half(u), eta, 3e-12) << u;
}

TEST(FermiIntegral, moves_the_level_of_degenerate_silicon_by_the_computed_energies) {
    // Nc 2.86e19, Nv 3.10e19 cm^-3, 300 K: reduced energy, shift against Boltzmann [meV] and F_1/2 / F_-1/2.
    const double kT = 25.851999786435535;  // meV
    struct Row {
        double N, band, eta, shift, g;
    };
    for (const Row& row : {Row{1e20, 2.86e19, 2.43317936815, 30.5420, 2.13180300},
                           Row{1e20, 3.10e19, 2.26470401667, 28.2697, 2.05067161},
                           Row{1e19, 2.86e19, -0.92780045586, 3.18034, 1.12242848},
                           Row{1e19, 3.10e19, -1.01786279512, 2.93522, 1.11303404},
                           Row{1e18, 2.86e19, -3.34105075658, 0.319426, 1.01234992}}) {
        const double eta = inverse_fermi_half(row.N / row.band);
        EXPECT_NEAR(eta, row.eta, 2e-11);
        EXPECT_NEAR(kT * (eta - std::log(row.N / row.band)), row.shift, 6e-6 * std::max(1.0, row.shift));
        EXPECT_NEAR(1 / degeneracy(eta).ratio, row.g, 1e-8);
    }
}
