// Two doubles that are computed with at once. Not for: whole arrays (core/base/vector_math.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <cmath>
#include <cstring>

namespace bandwright {

/// Two lanes of a vector register; +, -, *, / act on both (a GNU extension that g++ and clang++ share).
using LanePair = double __attribute__((vector_size(16)));

inline LanePair pair(double first, double second) { return LanePair{first, second}; }
inline void store(double* to, LanePair value) { std::memcpy(to, &value, sizeof value); }

inline double magnitude(double a) { return std::abs(a); }
inline double larger(double a, double b) { return a > b ? a : b; }
/// `below` where size < limit, else `above`.
inline double chosen(double size, double limit, double below, double above) {
    return size < limit ? below : above;
}

inline LanePair larger(LanePair a, LanePair b) { return a > b ? a : b; }
inline LanePair magnitude(LanePair a) { return larger(a, -a); }
inline LanePair chosen(LanePair size, LanePair limit, LanePair below, LanePair above) {
    return size < limit ? below : above;
}

}  // namespace bandwright
