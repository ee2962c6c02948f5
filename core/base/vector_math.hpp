// Exponentials of whole arrays, written so that a compiler turns them into vector instructions.
// Not for: single values (std::exp).
// SPDX-License-Identifier: MIT
#pragma once

#include <cstddef>

namespace bandwright {

/// out[k] = exp(in[k]) for |in[k]| <= 700, relative error below 4e-16; `in` and `out` may be the same array.
/// Source: argument reduction by ln 2 in two parts, Taylor's series on half of it.
/// Tests: unit/base/test_vector_math.cpp
void exp_of(const double* in, double* out, std::size_t count);

/// out[k] = exp(in[k]) - 1 for in[k] <= 0, without cancellation, relative error below 6e-16; -1 below -700.
/// `in` and `out` may be the same array.
void expm1_of_negative(const double* in, double* out, std::size_t count);

/// Both of the above for in[k] <= 0; exp(-700) below -700. No two of the arrays may be the same.
void exponentials_of_negative(const double* in, double* exponential, double* minus_one, std::size_t count);

}  // namespace bandwright
