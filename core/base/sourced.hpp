// A number with its origin: value, source, status and valid range, and the ledger line made of it.
// Not for: computed results (figure.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "core/base/unit.hpp"

namespace bandwright {

/// How well the origin of a number is known.
enum class Status { published, from_memory, computed, estimate, yours };

/// The word used in the ledger: "published", "from memory", "computed", "estimate", "yours".
constexpr std::string_view text(Status status) {
    switch (status) {
        case Status::published:
            return "published";
        case Status::from_memory:
            return "from memory";
        case Status::computed:
            return "computed";
        case Status::estimate:
            return "estimate";
        case Status::yours:
            return "yours";
    }
    return "";
}

/// One physical number in memory units with its origin.
struct Sourced {
    double value = 0;
    Unit unit = Unit::one;
    /// Key in core/references.md, then page, table or equation; "structure file" for the user's own.
    std::string source;
    Status status = Status::estimate;
    /// Range of validity in words, may be empty.
    std::string valid;
    bool operator==(const Sourced&) const = default;
};

/// One line of the ledger: a parameter that a run uses.
struct LedgerLine {
    /// Name, for example "electron_mobility".
    std::string parameter;
    /// Material, contact or model it belongs to.
    std::string where;
    Sourced number;
};

using Ledger = std::vector<LedgerLine>;

}  // namespace bandwright
