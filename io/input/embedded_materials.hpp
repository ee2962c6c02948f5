// The texts of io/materials/*.json as compiled into the library.
// Not for: anybody but the material database.
// SPDX-License-Identifier: MIT
#pragma once

#include <string_view>
#include <vector>

namespace bandwright::detail {

/// One JSON text a material. Errors: none.
const std::vector<std::string_view>& embedded_materials();

}  // namespace bandwright::detail
