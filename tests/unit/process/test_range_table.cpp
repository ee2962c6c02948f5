// The range table against its listed rows, polynomial fits of the literature and its own interpolation rule.
//
// SPDX-License-Identifier: MIT
#include "core/process/range_table.hpp"

#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <map>
#include <string>
#include <vector>

#include "core/process/range_data.hpp"

using namespace bandwright;

namespace {

constexpr double keV = 1e3, um = 1e-6, angstrom = 1e-10;

// Polynomials in the energy [keV] without a constant term, in um [Selberherr1984], chapter 3, from memory.
struct Fit {
    const char* ion;
    std::vector<double> range, straggle;
    double straggle_tolerance;
};
const std::vector<Fit> fits{
    {"B", {3.338e-3, -3.308e-6}, {1.781e-3, -2.086e-5, 1.403e-7, -4.545e-10, 5.525e-13}, 0.05},
    {"P", {1.259e-3, -2.743e-7, 1.290e-9}, {6.542e-4, -3.161e-6, 1.371e-8, -2.252e-11}, 0.05},
    {"As",
     {9.818e-4, -1.022e-5, 9.067e-8, -3.442e-10, 4.608e-13},
     {3.652e-4, -3.820e-6, 3.235e-8, -1.202e-10, 1.601e-13},
     0.05},
    {"Sb",
     {8.887e-4, -1.013e-5, 8.372e-8, -3.056e-10, 4.028e-13},
     {2.674e-4, -2.885e-6, 2.311e-8, -8.310e-11, 1.084e-13},
     0.09},
};

double polynomial(const std::vector<double>& coefficients, double E) {
    double sum = 0;
    for (auto it = coefficients.rbegin(); it != coefficients.rend(); ++it) sum = (sum + *it) * E;
    return sum;
}

}  // namespace

// [Gibbons1975], from memory: energy [keV], range and straggle [angstrom].
TEST(RangeTable, published_rows_come_back_exactly) {
    struct Row {
        double energy;
        std::array<double, 8> values;
    };
    const std::vector<Row> rows{
        {10, {333, 171, 139, 69, 97, 36, 88, 26}},       {20, {662, 283, 253, 119, 159, 59, 141, 43}},
        {30, {987, 371, 368, 166, 215, 80, 187, 58}},    {40, {1302, 443, 486, 212, 269, 99, 230, 71}},
        {50, {1608, 504, 607, 256, 322, 118, 271, 84}},  {60, {1903, 556, 730, 298, 374, 136, 310, 96}},
        {80, {2465, 641, 981, 380, 478, 172, 385, 118}}, {100, {2994, 710, 1238, 456, 582, 207, 457, 140}},
        {120, {3496, 766, 1497, 528, 686, 241}},         {150, {4205, 834, 1888, 628, 845, 292}},
        {180, {4872, 890, 2279, 719, 1005, 341}},        {200, {5297, 921, 2539, 775, 1114, 374}},
    };
    const std::array<const char*, 4> ions{"B", "P", "As", "Sb"};
    int seen = 0;
    for (const Row& row : rows)
        for (std::size_t k = 0; k < ions.size(); ++k) {
            if (row.values[2 * k] == 0) continue;
            const auto r = projected_range(ions[k], row.energy * keV);
            ASSERT_TRUE(r) << ions[k];
            EXPECT_NEAR(r->range / angstrom, row.values[2 * k], 1e-8) << ions[k] << row.energy;
            EXPECT_NEAR(r->straggle / angstrom, row.values[2 * k + 1], 1e-8) << ions[k] << row.energy;
            EXPECT_EQ(r->status, Status::from_memory);
            EXPECT_TRUE(r->source.starts_with("Gibbons1975")) << r->source;
            ++seen;
        }
    EXPECT_EQ(seen, 44);
}

TEST(RangeTable, agrees_with_the_polynomial_fits_from_20_to_200_keV) {
    for (const Fit& fit : fits)
        for (const double E : {20.0, 30.0, 40.0, 50.0, 60.0, 80.0, 100.0, 120.0, 150.0, 180.0, 200.0}) {
            const auto r = projected_range(fit.ion, E * keV);
            ASSERT_TRUE(r);
            EXPECT_NEAR(r->range / um / polynomial(fit.range, E), 1, 0.05) << fit.ion << " " << E;
            EXPECT_NEAR(r->straggle / um / polynomial(fit.straggle, E), 1, fit.straggle_tolerance)
                << fit.ion << " " << E;
        }
}

// Antimony rows above 100 keV [Gibbons1975] are not in the table; its scaled rows come close to them.
TEST(RangeTable, scaled_antimony_rows_are_near_the_published_ones) {
    const std::vector<std::array<double, 3>> rows{
        {120, 529, 153}, {150, 634, 181}, {180, 739, 209}, {200, 808, 227}};
    for (const auto& [E, range, straggle] : rows) {
        const auto r = projected_range("Sb", E * keV);
        ASSERT_TRUE(r);
        EXPECT_NEAR(r->range / angstrom / range, 1, 0.02) << E;
        EXPECT_NEAR(r->straggle / angstrom / straggle, 1, 0.06) << E;
        EXPECT_EQ(r->status, Status::computed);
    }
}

TEST(RangeTable, computed_rows_are_interpolated_in_logarithms) {
    struct Row {
        const char* ion;
        double energy, range, straggle, skewness;
    };
    const std::vector<Row> rows{
        {"B", 45, 0.15650452, 0.047271759, -0.62278353},
        {"B", 180, 0.5404, 0.0969, -1.41},
        {"P", 90, 0.11560249, 0.039944374, -0.18278353},
        {"As", 35, 0.028955874, 0.010469114, 0.44392489},
        {"Sb", 110, 0.056892542, 0.016912006, 0.38477241},
        {"BF2", 15, 0.01489526, 0.0074067078, 0.2195222},
        {"BF2", 30, 0.027104485, 0.012371954, 0.061642137},
        {"BF2", 60, 0.050664974, 0.020461078, -0.13835786},
    };
    for (const Row& row : rows) {
        const auto m = computed_moments(row.ion, row.energy * keV);
        ASSERT_TRUE(m);
        EXPECT_NEAR(m->range / um / row.range, 1, 5e-8) << row.ion << row.energy;
        EXPECT_NEAR(m->straggle / um / row.straggle, 1, 5e-8) << row.ion << row.energy;
        EXPECT_NEAR(m->skewness, row.skewness, 5e-8 * std::max(1.0, std::abs(row.skewness)))
            << row.ion << row.energy;
    }
    const auto row = computed_moments("As", 300 * keV);
    ASSERT_TRUE(row);
    EXPECT_DOUBLE_EQ(row->kurtosis, 2.69);
}

TEST(RangeTable, nothing_jumps_where_the_published_rows_end) {
    const std::map<std::string, std::array<double, 2>> ends{
        {"B", {10, 300}}, {"P", {10, 300}}, {"As", {10, 300}}, {"Sb", {10, 100}}};
    for (const auto& [ion, energies] : ends)
        for (const double E : energies) {
            const double outside = E == 10 ? E * (1 - 1e-9) : E * (1 + 1e-9);
            const auto inner = projected_range(ion, E * keV), outer = projected_range(ion, outside * keV);
            ASSERT_TRUE(inner && outer);
            EXPECT_EQ(inner->status, Status::from_memory);
            EXPECT_EQ(outer->status, Status::computed);
            EXPECT_NE(outer->source.find("scaled to Gibbons1975"), std::string::npos) << outer->source;
            EXPECT_NEAR(outer->range / inner->range, 1, 3e-9) << ion << E;
            EXPECT_NEAR(outer->straggle / inner->straggle, 1, 3e-9) << ion << E;
        }
    // Boron at 500 keV: the computed 1.1341 and 0.1321 um times the ratios at 300 keV.
    const auto far = projected_range("B", 500 * keV);
    ASSERT_TRUE(far);
    EXPECT_NEAR(far->range / um, 1.1341 * 0.7245 / 0.8008, 1e-12);
    EXPECT_NEAR(far->straggle / um, 0.1321 * 0.1040 / 0.1158, 1e-12);
}

TEST(RangeTable, ends_where_its_rows_end) {
    const auto boron = energy_limits("B"), molecule = energy_limits("BF2"), arsenic = energy_limits("As");
    ASSERT_TRUE(boron && molecule && arsenic);
    EXPECT_DOUBLE_EQ(boron->lowest, 1 * keV);
    EXPECT_DOUBLE_EQ(boron->highest, 1000 * keV);
    EXPECT_DOUBLE_EQ(arsenic->lowest, 5 * keV);
    EXPECT_NEAR(molecule->lowest / keV, 1 / 0.2246505459, 1e-9);
    for (const char* ion : {"B", "P", "As", "Sb", "BF2"}) {
        const auto limits = energy_limits(ion);
        ASSERT_TRUE(limits);
        EXPECT_TRUE(projected_range(ion, limits->lowest)) << ion;
        EXPECT_TRUE(projected_range(ion, limits->highest)) << ion;
        EXPECT_FALSE(projected_range(ion, limits->lowest * 0.999)) << ion;
        EXPECT_FALSE(projected_range(ion, limits->highest * 1.001)) << ion;
        EXPECT_FALSE(computed_moments(ion, limits->highest * 1.001)) << ion;
        EXPECT_FALSE(projected_range(ion, std::nan(""))) << ion;
    }
    EXPECT_FALSE(energy_limits("Al"));
    EXPECT_FALSE(projected_range("Al", 50 * keV));
    EXPECT_FALSE(computed_moments("", 50 * keV));
}

TEST(RangeTable, the_boron_of_BF2_carries_its_share_of_the_energy) {
    const auto molecule = projected_range("BF2", 60 * keV),
               boron = projected_range("B", 60 * keV * 11.009 / 49.005);
    ASSERT_TRUE(molecule && boron);
    EXPECT_DOUBLE_EQ(molecule->range, boron->range);
    EXPECT_DOUBLE_EQ(molecule->straggle, boron->straggle);
    EXPECT_NE(molecule->source.find("22.47 %"), std::string::npos) << molecule->source;
}

TEST(FilmFactor, follows_the_ranges_in_silicon_and_oxide) {
    const auto row = film_factor("B", "SiO2", 100 * keV), high = film_factor("B", "SiO2", 3000 * keV),
               low = film_factor("As", "SiO2", 1 * keV), between = film_factor("P", "SiO2", 50 * keV);
    ASSERT_TRUE(row && high && low && between);
    EXPECT_DOUBLE_EQ(row->value, 0.3244 / 0.3621);
    EXPECT_DOUBLE_EQ(high->value, 1.7558 / 1.8372);
    EXPECT_DOUBLE_EQ(low->value, 0.0120 / 0.0119);
    const double w = std::log(50.0 / 30) / std::log(100.0 / 30), a = 0.0410 / 0.0424, b = 0.1284 / 0.1358;
    EXPECT_NEAR(between->value, a + w * (b - a), 1e-15);
    EXPECT_EQ(row->status, Status::computed);
    const auto nitride = film_factor("Sb", "Si3N4", 100 * keV);
    ASSERT_TRUE(nitride);
    EXPECT_DOUBLE_EQ(nitride->value, 1.3);
    EXPECT_EQ(nitride->status, Status::estimate);
    EXPECT_FALSE(film_factor("B", "resist", 100 * keV));
    EXPECT_FALSE(film_factor("Al", "SiO2", 100 * keV));
    EXPECT_FALSE(film_factor("B", "SiO2", 0));
}

// The quotients as printed to three digits.
TEST(FilmFactor, printed_quotients) {
    const std::map<std::string, std::array<double, 5>> printed{{"B", {0.930, 0.899, 0.896, 0.920, 0.956}},
                                                               {"P", {1.000, 0.967, 0.946, 0.933, 0.939}},
                                                               {"As", {1.008, 1.008, 1.004, 0.990, 0.974}},
                                                               {"Sb", {1.000, 0.996, 1.004, 1.001, 0.992}}};
    const std::array<double, 5> energies{10, 30, 100, 300, 1000};
    for (const auto& [ion, factors] : printed)
        for (std::size_t k = 0; k < energies.size(); ++k) {
            const auto factor = film_factor(ion, "SiO2", energies[k] * keV);
            ASSERT_TRUE(factor);
            EXPECT_NEAR(factor->value, factors[k], 5.1e-4) << ion << energies[k];
        }
}
