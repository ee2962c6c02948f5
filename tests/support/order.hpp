// Observed order of convergence. Not for: single tolerances.
// SPDX-License-Identifier: MIT
#pragma once

#include <cmath>
#include <vector>

namespace bandwright {

/// Orders log2(e_k / e_(k+1)) of errors on meshes whose width halves each time.
inline std::vector<double> observed_orders(const std::vector<double>& errors) {
    std::vector<double> orders;
    for (std::size_t k = 0; k + 1 < errors.size(); ++k)
        orders.push_back(std::log2(std::abs(errors[k] / errors[k + 1])));
    return orders;
}

}  // namespace bandwright
