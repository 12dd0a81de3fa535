-- SPDX-License-Identifier: GPL-3.0-or-later
-- Every line of the README's tour and of the guide's pages is run, each document in a session of its own, and its answer compared with what
-- the document shows. With REWRITE=1 in the environment the answers are put into the documents instead, to be read before they are kept.
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
local documents = require "documents"

local pages = io.popen "ls docs/guide/*.md 2>/dev/null"
local files = { "README.md" }
for file in pages:lines() do files[#files + 1] = file end
pages:close()

for _, file in ipairs(files) do
  if os.getenv "REWRITE" then documents.rewrite(file) end
  local entries = documents.check(file)
  for _, entry in ipairs(entries) do
    t.test(file .. ": " .. entry.line, function() t.equal(entry.got, entry.shown, "the answer shown") end)
  end
  if file == "README.md" then
    t.test("the tour has lines", function() t.equal(#entries > 15, true, "more than 15 lines") end)
  end
end
t.finish()
