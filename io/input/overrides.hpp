// --set POINTER=VALUE: replaces values of the structure file before it is read.
// Not for: the command line itself (apps).
// SPDX-License-Identifier: MIT
#pragma once

#include <string>
#include <vector>

#include "core/base/error.hpp"
#include "io/input/json_value.hpp"

namespace bandwright {

/// Replaces the value at an RFC 6901 JSON Pointer by VALUE, for example "/doping/2/peak=3e19 cm-3". VALUE is
/// taken as JSON when it is a JSON number, object, list, truth value or text in quotation marks, and as a
/// text otherwise. Errors: a complaint with where = "--set POINTER" for a pointer to nothing; the document is
/// then unchanged.
void apply_override(JsonValue& document, const std::string& assignment, std::vector<Complaint>& complaints);

}  // namespace bandwright
