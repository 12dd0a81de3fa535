-- SPDX-License-Identifier: GPL-3.0-or-later
-- Pages of the documents: each a file that stands alone, readable on a phone, light and dark.

local html = {
  WHO_DECIDES = "It estimates what is feasible; the observatory's own documents and staff decide.",
}

local escapes = { ["&"] = "&amp;", ["<"] = "&lt;", [">"] = "&gt;", ['"'] = "&quot;" }
function html.escape(text) return (text:gsub('[&<>"]', escapes)) end

-- As the page of a report looks, in a narrower column.
local style = dofile "bindings/page_style.lua" .. [[
body { max-width: 46rem; }
h4 { margin: 1rem 0 .2rem; font-size: 1rem; }
p, ul, ol { margin: .4rem 0; }
pre.small, .typed { white-space: pre-wrap; }
.typed { font-weight: 600; }
nav.names a { margin-right: .8rem; white-space: nowrap; }
:target { outline: 2px solid var(--link); outline-offset: .3rem; }
]]

-- An escaped conversation: what is typed is folded where it is too wide, as on a terminal; answers, which may be tables, scroll.
function html.conversation(escaped)
  return (escaped:gsub("[^\n]+", function(line) return line:find "^&gt;" and '<span class="typed">' .. line .. "</span>" or line end))
end

-- A whole page. `links`: { { file, title }, ... } of the other pages.
function html.page(title, links, body)
  local others = {}
  for i, link in ipairs(links) do others[i] = ('<a href="%s">%s</a>'):format(link[1], html.escape(link[2])) end
  return table.concat {
    '<!DOCTYPE html>\n<html lang="en">\n<head>\n<meta charset="utf-8">\n<meta name="viewport" content="width=device-width, initial-scale=1">\n',
    "<title>", html.escape(title), " – Lacuna</title>\n<style>\n", style, "</style>\n</head>\n<body>\n",
    '<header><nav aria-label="Documents" class="names">', table.concat(others, " "), "</nav></header>\n<main>\n", body, "\n</main>\n</body>\n</html>\n",
  }
end

return html
