// The summary document: the figures, points, warnings (and ledger) of a run as JSON text.
// Not for: tables for people (apps/console).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>

#include "core/base/results.hpp"

namespace bandwright {

/// Summary of a run, "bandwright-summary 1". Values in shown units; a missing value or error is null. The
/// ledger is in it for the command `ledger`. Errors: none.
std::string summary_json(const Results& results);

/// The ledger alone, as a JSON array.
std::string ledger_json(const Ledger& ledger);

}  // namespace bandwright
