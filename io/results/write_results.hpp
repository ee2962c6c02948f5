// Writes a result file, whole and renamed into place. The only file that knows the names in it.
// Not for: the numbers themselves (core/figures).
// SPDX-License-Identifier: MIT
#pragma once

#include <filesystem>

#include "core/base/results.hpp"

namespace bandwright {

/// Writes results to a temporary file beside `path`, makes it durable and renames it: `path` is at every
/// moment either the previous file or a whole new one. Errors: FileError with the file's name; ContractError
/// for an infinite number.
void write_results(const std::filesystem::path& path, const Results& results);

}  // namespace bandwright
