// Structures and biases drawn by chance from a seed, the same on every machine, to ask whether every
// reasonable file is solved. Not for: structures with a known answer (tests/verification) or the demos.
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <vector>

namespace bandwright {

/// JSON text of a structure drawn from a seed.
///
/// Generator: splitmix64 started at seed + 1 times 0x9e3779b97f4a7c15; a number in [0, 1) is the upper 53
/// bits times 2^-53; an integer below n is floor(n u); no standard distribution, because their algorithms
/// differ between libraries. [splitmix64: Steele, Lea, Flood, OOPSLA 2014; constants from memory]
/// Drawn in this order: statistics (either, 1/2); temperature 250 to 450 K; lifetimes of "house silicon"
/// (1e-8 to 1e-4 s, log-uniform, electrons then holes); number of layers 1 to 4;
/// with chance 0.3 a material "other silicon" with a gap of 0.9 to 1.3 eV and a permittivity of 9 to 14; per
/// layer the material and a thickness of 0.2 to 50 um (log-uniform); per layer one uniform doping (chance
/// 0.8) or step over part of it, donors or acceptors (1/2), 1e14 to 1e20 cm-3 (log-uniform); with chance 0.85
/// a shape from the top of the type opposite to the first layer and 3 to 300 times as high (at most 1e20
/// cm-3), so that most structures have a junction; then 0 to 2 more shapes of any kind. Values are written
/// with 4 significant digits, so a last-bit difference in exp or log changes nothing.
/// Errors: none. Tests: contracts/test_random_structures.cpp
std::string random_structure(unsigned seed);

/// Three biases V_top - V_bottom [V] for the structure of the same seed, whichever way its junctions point:
/// one in 0 to 0.6, one in -3 to 0, one in -30 to -3, each uniform, rounded to 4 significant digits. Errors:
/// none.
std::vector<double> random_biases(unsigned seed);

}  // namespace bandwright
