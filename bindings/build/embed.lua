-- SPDX-License-Identifier: GPL-3.0-or-later
-- Run at build time: writes the given Lua files, compiled, as a C array of modules ("bindings/case.lua" is "lacuna.case").
-- Line numbers are kept, so that an error inside can be found.

print('#include "binding.h"\n')
local rows = {}
for i, file in ipairs(arg) do
  local source = assert(io.open(file, "rb"))
  local name = "lacuna." .. file:match("([^/]+)%.lua$")
  local code = string.dump(assert(load(source:read("a"), "=" .. name, "t")))
  source:close()
  print(("static const unsigned char code_%d[] = {"):format(i))
  for at = 1, #code, 32 do print(table.concat({ code:byte(at, at + 31) }, ",") .. ",") end
  print("};\n")
  rows[i] = ('  {"%s", code_%d, sizeof code_%d},'):format(name, i, i)
end
print("const lac_embedded lac_embedded_modules[] = {")
print(table.concat(rows, "\n"))
print("  {NULL, NULL, 0},\n};")
