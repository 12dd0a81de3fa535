-- SPDX-License-Identifier: GPL-3.0-or-later
-- The example that help shows of each name: it computes, asks for the name or gives it, and prints what help says.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local lacuna = require "lacuna"
local core = require "private"
local example = core.part "lacuna.example"

for _, name in ipairs(core.names()) do
  t.test(name, function()
    local found = example.of(name)
    local answer = lacuna.show(load("return " .. found.line, "=example", "t", lacuna.globals {})())
    if answer == "" or answer:find "undefined" then error(found.line .. " prints " .. answer) end
    if not found.line:find("%f[%w_]" .. name .. "%f[^%w_]") then error(name .. " isn't in " .. found.line) end
    local help = tostring(lacuna.help(name))
    if not help:find("> " .. found.line .. "\n    " .. answer:match "[^\n]+", 1, true) then error("no example in " .. help) end
  end)
end

t.test("a name of one's own has an example once something plausible leads there", function()
  lacuna.quantity { name = "wall_height", unit = "au", meaning = "height of an invented wall" }
  t.equal(example.of "wall_height", nil)
  t.equal(tostring(lacuna.help "wall_height"):find "example", nil)
  lacuna.relation { gives = "wall_height", by = "tenth", from = { "rim_radius" }, function(r) return 0.1 * r end }
  t.equal(example.of("wall_height").line, 'case{rim_radius = "0.4 au"}.wall_height')
end)
t.finish()
