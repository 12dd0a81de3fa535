-- SPDX-License-Identifier: GPL-3.0-or-later
-- A page of the guide as HTML, converted by cmark-gfm; its scroll boxes and links are made fit for a phone and for the folder of pages.
local files = require "files"
local html = require "html"

local markdown = {}

-- A path as one word of the shell.
local function quoted(path) return "'" .. path:gsub("'", "'\\''") .. "'" end

function markdown.html(path)
  local text = files.output_of("cmark-gfm --extension table " .. quoted(path))
  text = text:gsub("<!%-%-.-%-%->\n?", ""):gsub("<table>", '<div class="scroll"><table>'):gsub("</table>", "</table></div>"):gsub("<th>", '<th scope="col">')
  text = text:gsub('(<code class="language%-lacuna">)(.-)(</code>)', function(before, lines, after) return before .. html.conversation(lines) .. after end)
  return (text:gsub('href="(%d+_[%w_]+)%.md', function(file) return 'href="' .. file:gsub("^%d+_", "guide_") .. ".html" end))
end

function markdown.index(guide, links)
  local out = { "<h1>Lacuna</h1>", "<p>What can be resolved around young stars. " .. html.WHO_DECIDES .. "</p>", "<h2>Guide</h2>", "<ol>" }
  for _, page in ipairs(guide) do out[#out + 1] = ('<li><a href="%s">%s</a></li>'):format(page[1], html.escape(page[2])) end
  out[#out + 1] = "</ol>\n<h2>Reference</h2>\n<ul>"
  for i = #guide + 1, #links do out[#out + 1] = ('<li><a href="%s">%s</a></li>'):format(links[i][1], html.escape(links[i][2])) end
  out[#out + 1] = "</ul>"
  return table.concat(out, "\n")
end

return markdown
