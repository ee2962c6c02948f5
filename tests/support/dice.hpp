// Numbers drawn by chance, the same on every machine and library. Not for: what is drawn with them.
// SPDX-License-Identifier: MIT
#pragma once

#include <cmath>
#include <cstdint>

namespace bandwright {

inline constexpr std::uint64_t golden_step = 0x9e3779b97f4a7c15ULL;

/// splitmix64 [Steele, Lea, Flood, OOPSLA 2014; constants from memory]; a number in [0, 1) is the upper 53
/// bits times 2^-53; an integer below n is floor(n u).
struct Dice {
    std::uint64_t state;

    std::uint64_t next() {
        state += golden_step;
        std::uint64_t z = state;
        z = (z ^ (z >> 30)) * 0xbf58476d1ce4e5b9ULL;
        z = (z ^ (z >> 27)) * 0x94d049bb133111ebULL;
        return z ^ (z >> 31);
    }
    double unit() { return static_cast<double>(next() >> 11) * 0x1p-53; }
    double between(double low, double high) { return low + (high - low) * unit(); }
    double log_between(double low, double high) { return low * std::exp(std::log(high / low) * unit()); }
    int below(int count) { return static_cast<int>(count * unit()); }
    bool chance(double share) { return unit() < share; }
};

}  // namespace bandwright
