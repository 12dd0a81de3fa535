-- SPDX-License-Identifier: GPL-3.0-or-later
-- help "search words": the queries in tests/reference/search_queries.csv, which were written before the search, find their names among the
-- first three.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local lacuna = require "lacuna"
local core = require "private"
local search = core.part "lacuna.search"

-- The names that help prints for a query, the best first.
local function found_by(query)
  local names = {}
  for name in tostring(lacuna.help(query)):gmatch "\n  ([%w_:.]+)" do names[#names + 1] = name:match "[%w_]+$" end
  return names
end

local count = 0
for line in io.lines "tests/reference/search_queries.csv" do
  local query, name = line:match "^([^#,]+),(%S+)$"
  if query and query ~= "query" then
    count = count + 1
    t.test(query .. " finds " .. name, function()
      local names = {}
      for i, entry in ipairs(search.find(query)) do names[i] = entry.title:match "[%w_]+$" end
      for i = 1, 3 do
        if names[i] == name then return end
      end
      error(("found %s"):format(table.concat(names, ", ", 1, math.min(#names, 6))))
    end)
  end
end
t.test("there are thirty queries and more", function() t.equal(count >= 30, true) end)
t.finish()
