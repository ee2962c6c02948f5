# Writes a C++ file that carries text files as string literals. Run as a script:
#   cmake -DOUTPUT=out.cpp "-DFILES=a.json|b.json" -P embed.cmake
# SPDX-License-Identifier: MIT
string(REPLACE "|" ";" files "${FILES}")
set(text "// Made by embed.cmake from io/materials/*.json; edit those.\n")
string(APPEND text "#include \"io/input/embedded_materials.hpp\"\n\nnamespace bandwright::detail {\n\n")
string(APPEND text "const std::vector<std::string_view>& embedded_materials() {\n")
string(APPEND text "    static const std::vector<std::string_view> texts{\n")
foreach(file IN LISTS files)
  file(READ "${file}" content)
  string(APPEND text "        R\"material(${content})material\",\n")
endforeach()
string(APPEND text "    };\n    return texts;\n}\n\n}  // namespace bandwright::detail\n")
file(WRITE "${OUTPUT}" "${text}")
