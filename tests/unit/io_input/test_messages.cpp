// Messages for wrong input, asserted in full.
// SPDX-License-Identifier: MIT
#include <gtest/gtest.h>

#include <string>

#include "core/base/error.hpp"
#include "io/input/read_structure.hpp"

using namespace bandwright;

namespace {

const std::string good = R"({"format":"bandwright-structure 1",
"layers":[{"name":"p","material":"Si","thickness":"1 um"},{"name":"n","material":"Si","thickness":"2 um"}],
"doping":[{"kind":"uniform","dopant":"B","concentration":"1e17 cm-3","layer":"p"},
{"kind":"uniform","dopant":"P","concentration":"1e16 cm-3","layer":"n"}]})";

std::string with(std::string text, const std::string& from, const std::string& to) {
    const auto at = text.find(from);
    if (at == std::string::npos) throw std::logic_error("the test looks for " + from);
    return text.replace(at, from.size(), to);
}

std::string message_for(const std::string& text) {
    try {
        read_structure_text(text, "diode.json", ".");
    } catch (const InputError& error) {
        return error.what();
    }
    return "no complaint";
}

}  // namespace

TEST(Messages, good_input_has_none) { EXPECT_EQ(message_for(good), "no complaint"); }

TEST(Messages, negative_thickness) {
    EXPECT_EQ(message_for(with(good, "2 um", "-2 um")),
              R"(diode.json: /layers/1/thickness: must be greater than 0 (found "-2 um"))");
}

TEST(Messages, thickness_without_unit) {
    EXPECT_EQ(message_for(with(good, "2 um", "2")),
              R"(diode.json: /layers/1/thickness: needs a unit of length, for example "0.4 um" (found "2"))");
    EXPECT_EQ(message_for(with(good, "\"2 um\"", "2")),
              R"(diode.json: /layers/1/thickness: needs a unit of length, for example "0.4 um" (found 2))");
}

TEST(Messages, thickness_in_volts) {
    EXPECT_EQ(message_for(with(good, "2 um", "2 V")),
              R"(diode.json: /layers/1/thickness: needs a length, for example "0.4 um" (found "2 V"))");
}

TEST(Messages, misspelt_material) {
    EXPECT_EQ(
        message_for(with(good, R"("p","material":"Si")", R"("p","material":"Silicn")")),
        R"(diode.json: /layers/0/material: there is no material "Silicn"; did you mean "Si"? Built in: Si)");
}

TEST(Messages, misspelt_doping_kind) {
    EXPECT_EQ(
        message_for(with(good, "uniform", "unifrom")),
        R"(diode.json: /doping/0/kind: there is no kind of doping "unifrom"; did you mean "uniform"? There are: uniform, step, gaussian, erfc, exponential, linear, measured, implant)");
}

TEST(Messages, unknown_layer_in_a_doping) {
    EXPECT_EQ(message_for(with(good, R"("layer":"n")", R"("layer":"m")")),
              R"(diode.json: /doping/1/layer: there is no layer "m"; layers: p, n)");
}

TEST(Messages, duplicate_key) {
    EXPECT_EQ(message_for(with(good, R"("thickness":"1 um")", R"("thickness":"1 um","thickness":"2 um")")),
              R"(diode.json: /layers/0: the key "thickness" appears twice; keep one)");
}

TEST(Messages, temperature_below_absolute_zero) {
    EXPECT_EQ(message_for(with(good, "\"layers\"", R"("temperature":"-5 K","layers")")),
              R"(diode.json: /temperature: must be greater than 0 K (found "-5 K"))");
}

TEST(Messages, empty_layers) {
    EXPECT_EQ(
        message_for(R"({"format":"bandwright-structure 1","layers":[]})"),
        R"(diode.json: /layers: needs at least one layer, for example [ { "name": "substrate", "material": "Si", "thickness": "20 um" } ])");
}

TEST(Messages, truncated_text) {
    EXPECT_EQ(message_for(R"({"format":"bandwright-structure 1","layers":[{"name":"p")"),
              "diode.json: line 1, column 57: the text ends while the object at /layers/0 is open; a \"}\" "
              "is missing");
}

TEST(Messages, all_complaints_of_a_file_come_together) {
    const std::string text =
        message_for(with(with(with(good, "1 um", "-1 um"), "2 um", "2 V"), "1e16 cm-3", "1e16"));
    EXPECT_EQ(text,
              "diode.json: /layers/0/thickness: must be greater than 0 (found \"-1 um\")\n"
              "diode.json: /layers/1/thickness: needs a length, for example \"0.4 um\" (found \"2 V\")\n"
              "diode.json: /doping/1/concentration: needs a unit of concentration, for example \"1e16 cm-3\" "
              "(found \"1e16\")");
}

TEST(Messages, missing_parameter_of_an_own_material) {
    const std::string text =
        message_for(with(with(good, R"("p","material":"Si")", R"("p","material":"mine")"), "\"layers\"",
                         R"("materials":{"mine":{"relative_permittivity":10}},"layers")"));
    EXPECT_NE(text.find("/materials/mine"), std::string::npos) << text;
    EXPECT_NE(text.find("bandgap"), std::string::npos) << text;
}

TEST(Quantities, are_the_nearest_doubles_and_agree_with_the_standard_meaning) {
    const Structure s = read_structure_text(with(good, "2 um", "2000 nm"), "diode.json", ".").structure;
    EXPECT_EQ(s.layers[0].thickness, 1e-6);
    EXPECT_EQ(s.layers[1].thickness, 2e-6);
    EXPECT_EQ(std::get<UniformDoping>(s.doping[0].shape).concentration, 1e23);
    EXPECT_EQ(read_structure_text(with(good, "\"layers\"", R"("temperature":"25 degC","layers")"),
                                  "diode.json", ".")
                  .structure.temperature,
              298.15);
}

TEST(Overrides, replace_one_value_and_refuse_a_pointer_to_nothing) {
    const auto read = [](const std::string& override) {
        return read_structure_text(good, "diode.json", ".", {override}).structure;
    };
    EXPECT_EQ(read("/layers/1/thickness=3 um").layers[1].thickness, 3e-6);
    EXPECT_EQ(
        std::get<UniformDoping>(read("/doping/0/concentration=3e19 cm-3").doping[0].shape).concentration,
        3e25);
    EXPECT_THROW(read("/layers/7/thickness=3 um"), InputError);
    EXPECT_THROW(read("/layers/1/thicknes=3 um"), InputError);
}

TEST(Reader, survives_damaged_text) {
    // 4000 texts with a few bytes changed: a complaint or a structure, never anything else. Fixed generator.
    std::uint64_t state = 12345;
    const auto next = [&] {
        return state = state * 6364136223846793005ULL + 1442695040888963407ULL, state >> 33;
    };
    int refused = 0;
    for (int round = 0; round < 4000; ++round) {
        std::string text = good;
        for (std::uint64_t k = 0; k < 1 + next() % 3; ++k) {
            const std::size_t at = next() % text.size();
            switch (next() % 3) {
                case 0:
                    text[at] = static_cast<char>(next() % 256);
                    break;
                case 1:
                    text.erase(at, 1 + next() % 5);
                    break;
                default:
                    text.insert(at, 1, "{}[]\",:0123456789e-+"[next() % 20]);
            }
        }
        try {
            read_structure_text(text, "damaged.json", ".");
        } catch (const InputError& error) {
            ++refused;
            EXPECT_FALSE(error.complaints().empty());
        }
    }
    EXPECT_GT(refused, 2000);
}
