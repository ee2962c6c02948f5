#include "core/base/vector_math.hpp"

#include <bit>
#include <cstdint>

// One source, compiled for the plain and for the wide registers; the processor decides which is run. Results
// are the same: contraction to fused multiply-add is off.
#if defined(__x86_64__) && defined(__GNUC__) && !defined(__clang__) && !defined(__SANITIZE_ADDRESS__)
#define BANDWRIGHT_WIDE __attribute__((target_clones("avx2", "default")))
#else
#define BANDWRIGHT_WIDE
#endif

namespace bandwright {

namespace {

// x = k ln 2 + r with |r| <= ln 2 / 2. ln_2_high has 32 bits, so k ln_2_high is exact.
constexpr double per_ln_2 = 1.4426950408889634, ln_2_high = 0x1.62e42fee00000p-1,
                 ln_2_low = 0x1.a39ef35793c76p-33;
constexpr double to_integer = 0x1.8p52;  // adding it leaves the nearest integer in the lowest bits

struct Reduced {
    double power;   // 2^k
    double excess;  // exp(r) - 1
};

inline Reduced reduced(double x) {
    const double shifted = x * per_ln_2 + to_integer, k = shifted - to_integer;
    const double r = (x - k * ln_2_high) - k * ln_2_low;
    // Taylor's series to r^13: the next term is below 5e-18 of r.
    double q = 1.0 / 6227020800;
    q = q * r + 1.0 / 479001600;
    q = q * r + 1.0 / 39916800;
    q = q * r + 1.0 / 3628800;
    q = q * r + 1.0 / 362880;
    q = q * r + 1.0 / 40320;
    q = q * r + 1.0 / 5040;
    q = q * r + 1.0 / 720;
    q = q * r + 1.0 / 120;
    q = q * r + 1.0 / 24;
    q = q * r + 1.0 / 6;
    q = q * r + 0.5;
    const std::int64_t bits = (std::bit_cast<std::int64_t>(shifted) << 52) + std::bit_cast<std::int64_t>(1.0);
    return {std::bit_cast<double>(bits), r + r * r * q};
}

}  // namespace

BANDWRIGHT_WIDE void exp_of(const double* in, double* out, std::size_t count) {
    for (std::size_t i = 0; i < count; ++i) {
        const Reduced e = reduced(in[i]);
        out[i] = e.power + e.power * e.excess;
    }
}

BANDWRIGHT_WIDE void expm1_of_negative(const double* in, double* out, std::size_t count) {
    for (std::size_t i = 0; i < count; ++i) {
        const double x = in[i] < -700 ? -700 : in[i];
        const Reduced e = reduced(x);
        out[i] = e.power * e.excess + (e.power - 1);
    }
}

BANDWRIGHT_WIDE void exponentials_of_negative(const double* __restrict in, double* __restrict exponential,
                                              double* __restrict minus_one, std::size_t count) {
    for (std::size_t i = 0; i < count; ++i) {
        const double x = in[i] < -700 ? -700 : in[i];
        const Reduced e = reduced(x);
        exponential[i] = e.power + e.power * e.excess;
        minus_one[i] = e.power * e.excess + (e.power - 1);
    }
}

}  // namespace bandwright
