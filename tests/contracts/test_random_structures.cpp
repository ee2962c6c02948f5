// The structures drawn by chance: the same on every machine, readable, within their ranges, most with a
// junction.
//
// SPDX-License-Identifier: MIT
#include "tests/support/random_structure.hpp"

#include <gtest/gtest.h>

#include <cstdint>

#include "io/input/read_structure.hpp"

using namespace bandwright;

TEST(RandomStructure, is_the_same_text_on_every_machine) {
    // FNV-1a over the texts and biases of seeds 0 to 99 as they were when the algorithm was fixed.
    std::uint64_t hash = 0xcbf29ce484222325ULL;
    const auto add = [&](const std::string& text) {
        for (const char c : text) hash = (hash ^ static_cast<unsigned char>(c)) * 0x100000001b3ULL;
    };
    for (unsigned seed = 0; seed < 100; ++seed) {
        add(random_structure(seed));
        for (const double bias : random_biases(seed)) add(std::to_string(bias));
    }
    EXPECT_EQ(hash, 3574729633155676529ULL);
}

TEST(RandomStructure, is_read_without_a_complaint_and_lies_in_its_ranges) {
    int with_junction = 0, layer_counts[5] = {}, fermi = 0;
    for (unsigned seed = 0; seed < 300; ++seed) {
        const Structure s = read_structure_text(random_structure(seed), "random.json", ".").structure;
        EXPECT_TRUE(complaints(s).empty()) << seed;
        ASSERT_GE(s.layers.size(), 1u);
        ASSERT_LE(s.layers.size(), 4u);
        ++layer_counts[s.layers.size()];
        fermi += s.models.statistics == Statistics::fermi_dirac;
        EXPECT_GE(s.temperature, 250);
        EXPECT_LE(s.temperature, 450);
        for (const Layer& layer : s.layers) {
            EXPECT_GE(layer.thickness, 0.2e-6 * (1 - 1e-3));
            EXPECT_LE(layer.thickness, 50e-6 * (1 + 1e-3));
        }
        with_junction += !metallurgical_junctions(s).empty();
        const std::vector<double> biases = random_biases(seed);
        ASSERT_EQ(biases.size(), 3u);
        for (const double bias : biases) {
            EXPECT_GE(bias, -30);
            EXPECT_LE(bias, 0.6);
        }
    }
    EXPECT_GE(with_junction, 250);
    for (int count = 1; count <= 4; ++count) EXPECT_GE(layer_counts[count], 45) << count;
    EXPECT_GE(fermi, 120);
    EXPECT_LE(fermi, 180);
}
