// One KINSOL solve behind a wall: the .cpp alone includes SUNDIALS; this header is private to newton.cpp.
// Not for: deciding whether a solve has converged (newton.cpp does).
// SPDX-License-Identifier: MIT
#pragma once

#include <functional>
#include <memory>
#include <span>
#include <string>

namespace bandwright::detail {

/// What a residual callback found.
enum class Trial { good, not_finite };

/// RAII around KINSOL's context, memory, vectors and our linear solver.
class KinsolSession {
  public:
    /// residual(u, f): fills f; Trial::not_finite lets KINSOL shorten its step.
    /// step(x): fills the step to be added to u; false when the linear system is singular.
    using Residual = std::function<Trial(std::span<const double>, std::span<double>)>;
    using Step = std::function<bool(std::span<double>)>;

    KinsolSession();
    ~KinsolSession();
    KinsolSession(const KinsolSession&) = delete;
    KinsolSession& operator=(const KinsolSession&) = delete;

    /// Full Newton steps (KIN_NONE) from `unknowns`, which is updated in place, until the residual is
    /// reported as zero. Returns KINSOL's own words for how it ended; "" for success. Exceptions of the
    /// callbacks pass through.
    std::string solve(std::span<double> unknowns, int most_iterations, Residual residual, Step step);

  private:
    struct Memory;
    std::unique_ptr<Memory> memory_;
};

}  // namespace bandwright::detail
