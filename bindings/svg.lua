-- SPDX-License-Identifier: GPL-3.0-or-later
-- What gnuplot's SVG lacks to stand inside a page: ids that no other figure has, a name and a description for those who don't see it, a size
-- that follows the page, and fonts that browsers have.
local svg = {}

local FONTS = "'DejaVu Sans', Verdana, Arial, sans-serif"
local escapes = { ["<"] = "&lt;", [">"] = "&gt;", ["&"] = "&amp;", ['"'] = "&quot;" }

local function escaped(text) return (text:gsub('[<>&"]', escapes)) end

-- All ids and what refers to them, with the figure's own before.
local function with_own_ids(text, own)
  return (text:gsub("(%sid=)(['\"])([^'\"]+)%2", "%1%2" .. own .. "-%3%2"):gsub("(href=)(['\"])#([^'\"]+)%2", "%1%2#" .. own .. "-%3%2"):gsub("url%(#", "url(#" .. own .. "-"))
end

-- The picture as gnuplot drew it, size in mm, made ready for a page.
function svg.settled(drawn, figure, size)
  local own = ("figure%s-"):format(figure.number or "") .. figure.name:gsub("[^%w_-]", "_")
  local view, inside = drawn:match 'viewBox="([^"]*)".-</desc>%s*(.*)$'
  local head = ([[<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" role="img" aria-labelledby="%s-title %s-desc" width="%gmm" height="%gmm" viewBox="%s" style="max-width: 100%%; height: auto">
<title id="%s-title">%s</title>
<desc id="%s-desc">%s</desc>
]]):format(own, own, size[1], size[2], view, own, escaped(figure.title), own, escaped(figure:alternative()))
  inside = with_own_ids(inside, own):gsub('font%-family="[^"]*"', 'font-family="' .. FONTS .. '"')
  return head .. inside:gsub("%s*$", "\n")
end

return svg
