-- SPDX-License-Identifier: GPL-3.0-or-later
-- Pages of the documents: each a file that stands alone, readable on a phone, light and dark.

local html = {}

local escapes = { ["&"] = "&amp;", ["<"] = "&lt;", [">"] = "&gt;", ['"'] = "&quot;" }
function html.escape(text) return (text:gsub('[&<>"]', escapes)) end

local style = [[
:root { color-scheme: light dark; --ink: #1c2430; --paper: #fdfdfb; --quiet: #566070; --line: #c9ced6; --shade: #f0f1ee; --link: #0b57a4; }
@media (prefers-color-scheme: dark) { :root { --ink: #e4e7ec; --paper: #14181e; --quiet: #a4adba; --line: #3c4552; --shade: #1f252e; --link: #8fc1ff; } }
body { margin: 0 auto; padding: 1rem; max-width: 46rem; color: var(--ink); background: var(--paper); font: 1rem/1.5 system-ui, sans-serif; overflow-wrap: break-word; }
h1 { line-height: 1.2; } h2 { margin-top: 2.5rem; border-bottom: 1px solid var(--line); } h3 { margin: 2rem 0 .3rem; font-size: 1.1rem; } h4 { margin: 1rem 0 .2rem; font-size: 1rem; }
a { color: var(--link); } p, ul, ol { margin: .4rem 0; } li { margin: .15rem 0; } .quiet { color: var(--quiet); }
code, pre { font-family: ui-monospace, monospace; font-size: .9em; } pre, .box { overflow-x: auto; background: var(--shade); padding: .6rem .8rem; border-radius: .3rem; }
.equation { overflow-x: auto; padding: .2rem 0 .2rem 1.5rem; } math { font-size: 1.1em; } .equation math { math-style: normal; }
table { border-collapse: collapse; } th, td { text-align: left; vertical-align: top; padding: .2rem .8rem .2rem 0; border-bottom: 1px solid var(--line); }
nav.names a { margin-right: .8rem; white-space: nowrap; } dt { margin-top: .5rem; } dd { margin-left: 1.5rem; }
:target { outline: 2px solid var(--link); outline-offset: .3rem; }
@media print { body { max-width: none; } }
]]

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
