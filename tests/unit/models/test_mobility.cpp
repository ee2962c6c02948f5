// Mobility models against their own published forms' sample values, and against the resistivity standard
// F723.
//
// SPDX-License-Identifier: MIT
#include "core/models/mobility.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "core/figures/sheet_resistance.hpp"
#include "io/input/material_database.hpp"
#include "io/input/read_structure.hpp"

using namespace bandwright;

namespace {

// [cm2/Vs] at a donor or acceptor density [cm^-3].
double mu(MobilityModel model, Carrier carrier, double N, double T = 300, bool arsenic = false) {
    const Material si = *find_material("Si");
    Doping doping;
    (carrier == Carrier::electron ? doping.donors : doping.acceptors) = N * 1e6;
    if (arsenic) doping.arsenic = N * 1e6;
    return mobility(carrier, model, si, doping, T) * 1e4;
}

constexpr auto n = Carrier::electron;
constexpr auto p = Carrier::hole;

// ASTM F723-99 at 23 C: resistivity of boron and phosphorus doped silicon [ohm cm]; formulas from two public
// copies.
double boron_resistivity(double N) {
    return 1.305e16 / N + 1.133e17 / (N * (1 + std::pow(2.58e-19 * N, -0.737)));
}
double phosphorus_resistivity(double N) {
    const double x = std::log10(N) - 16;
    const double Z = (-3.0769 + 2.2108 * x - 0.62272 * x * x + 0.057501 * x * x * x) /
                     (1 - 0.68157 * x + 0.19833 * x * x - 0.018376 * x * x * x);
    return 6.242e18 / N * std::pow(10, Z);
}

}  // namespace

TEST(Masetti, equals_its_table) {
    const double densities[] = {1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21};
    const double P[] = {1403.6, 1362.1, 1183.8, 721.31, 276.96, 114.78, 73.227, 20.171};
    const double As[] = {1404.4, 1358.7, 1176.8, 727.05, 283.78, 108.05, 60.867, 15.907};
    const double B[] = {468.67, 461.05, 424.91, 319.10, 160.31, 73.166, 49.862, 24.872};
    for (int k = 0; k < 8; ++k) {  // five printed digits
        EXPECT_NEAR(mu(MobilityModel::masetti, n, densities[k]) / P[k], 1, 5e-5);
        EXPECT_NEAR(mu(MobilityModel::masetti, n, densities[k], 300, true) / As[k], 1, 5e-5);
        EXPECT_NEAR(mu(MobilityModel::masetti, p, densities[k]) / B[k], 1, 5e-5);
    }
    EXPECT_NEAR(mu(MobilityModel::masetti, n, 1e17, 400) / 390.78999, 1, 1e-6);
    EXPECT_NEAR(mu(MobilityModel::masetti, p, 1e19, 400) / 59.508799, 1, 1e-6);
}

TEST(Arora, has_an_exponent_where_copies_print_a_factor) {
    const double rows[][4] = {{300, 1e15, 1322.3, 457.96}, {300, 1e16, 1218.2, 437.45},
                              {300, 1e17, 777.34, 330.87}, {300, 1e18, 262.11, 143.22},
                              {250, 1e16, 1761.7, 623.17}, {400, 1e17, 513.45, 214.59},
                              {500, 1e16, 429.63, 167.32}};
    for (const auto& [T, N, electrons, holes] : rows) {
        EXPECT_NEAR(mu(MobilityModel::arora, n, N, T) / electrons, 1, 5e-5);
        EXPECT_NEAR(mu(MobilityModel::arora, p, N, T) / holes, 1, 5e-5);
    }
}

TEST(Resistivity, differs_from_the_standard_by_the_expected_amounts) {
    // Per cent, as the models stand (300 K against 23 C); each pinned to 1 %.
    const double densities[] = {1e14, 1e15, 1e16, 1e17, 3e17, 1e18, 3e18, 1e19, 1e20};
    const double masetti_B[] = {-1.7, -1.7, -1.7, 3.3, 9.0, 11.9, 9.8, 4.0, -6.6},
                 masetti_P[] = {-3.6, -2.2, -0.8, -3.1, -2.0, 4.5, 10.0, 6.2, -9.6};
    const double arora_p[] = {-3.3, -2.4, 1.2, 7.2, 5.8, -0.1, -3.7, -2.3, 5.4},
                 arora_n[] = {-8.1, -5.0, 2.1, 4.4, 0.4, -1.1, 2.2, 5.6, 12.9};
    for (int k = 0; k < 9; ++k) {
        const double N = densities[k], q = 1.602176634e-19;
        const double holes = 1 / (q * N * boron_resistivity(N)),
                     electrons = 1 / (q * N * phosphorus_resistivity(N));
        EXPECT_NEAR(100 * (mu(MobilityModel::masetti, p, N) / holes - 1), masetti_B[k], 1) << N;
        EXPECT_NEAR(100 * (mu(MobilityModel::masetti, n, N) / electrons - 1), masetti_P[k], 1) << N;
        EXPECT_NEAR(100 * (mu(MobilityModel::arora, p, N) / holes - 1), arora_p[k], 1) << N;
        EXPECT_NEAR(100 * (mu(MobilityModel::arora, n, N) / electrons - 1), arora_n[k], 1) << N;
    }
}

TEST(SheetResistance, of_diffused_layers_equals_its_definition) {
    // Own quadrature of q mu(N_total) N_net with Masetti's mobility, 6 digits; tolerance 0.1 %.
    struct Row {
        const char* dopant;
        const char* profile;
        const char* background;
        double ohm;
    };
    // Gaussian length 2 sqrt(Dt) = sqrt(2) straggle, chosen so that the junction lies at 2, 1 and 3 um.
    const Row rows[] = {
        {"B", R"("kind":"gaussian","peak":"1e18 cm-3","depth":"0 um","straggle":"0.53807959 um")",
         "1e15 cm-3", 481.325},
        {"B", R"("kind":"gaussian","peak":"1e19 cm-3","depth":"0 um","straggle":"0.26903980 um")",
         "1e16 cm-3", 211.375},
        {"P", R"("kind":"gaussian","peak":"1e19 cm-3","depth":"0 um","straggle":"0.69898820 um")",
         "1e15 cm-3", 49.8705},
        {"B", R"("kind":"gaussian","peak":"1e20 cm-3","depth":"0 um","straggle":"0.20839373 um")",
         "1e15 cm-3", 44.0734},
        {"B", R"("kind":"erfc","surface":"1e20 cm-3","length":"0.32016256 um")", "1e15 cm-3", 61.1131},
        {"P", R"("kind":"erfc","surface":"1e20 cm-3","length":"0.32016256 um")", "1e15 cm-3", 39.9994}};
    for (const Row& row : rows) {
        const std::string other = std::string(row.dopant) == "B" ? "P" : "B";
        const std::string text =
            R"({"format":"bandwright-structure 1","layers":[{"name":"a","material":"Si","thickness":"8 um"}],"doping":[{"dopant":")" +
            std::string(row.dopant) + "\"," + row.profile + R"(},{"kind":"uniform","dopant":")" + other +
            R"(","concentration":")" + row.background + R"("}],"models":{"mobility":"masetti"}})";
        const auto lines = sheet_resistances(read_structure_text(text, "a.json", ".").structure);
        ASSERT_EQ(lines.size(), 2u);
        EXPECT_NEAR(lines[0].value / row.ohm, 1, 1e-3) << row.profile;
    }
}

TEST(Silicon, has_its_intrinsic_density) {
    // Own set: 9.65e9 at 300 K by construction [Altermatt2003]; elsewhere against Misiakos and Tsamakis 1993,
    // 5.29e19 (T/300)^2.54 exp(-6726/T), within 1.3 %.
    const Material si = *find_material("Si");
    const auto ni = [&](double T) { return std::exp(0.5 * bands_at(si, T).log_intrinsic_squared) * 1e-6; };
    EXPECT_NEAR(ni(300) / 9.65e9, 1, 1e-9);
    EXPECT_NEAR(ni(250) / 6.878811e7, 1, 1e-6);
    EXPECT_NEAR(ni(400) / 5.418305e12, 1, 1e-6);
    for (const double T : {250.0, 300.0, 350.0, 400.0, 450.0})
        EXPECT_NEAR(ni(T) / (5.29e19 * std::pow(T / 300, 2.54) * std::exp(-6726 / T)), 1, 0.013);
}
