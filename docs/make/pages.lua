-- SPDX-License-Identifier: GPL-3.0-or-later
-- Makes the pages: the guide, the reference manual and the C interface, each a file that stands alone.
-- Run from the top directory by the program itself: lacuna docs/make/pages.lua FOLDER
package.path = "docs/make/?.lua;" .. package.path
local files = require "files"
local headers = require "headers"
local html = require "html"
local interface = require "interface"
local manual = require "manual"
local markdown = require "markdown"

local folder = assert(arg[1], "wants a folder")

local guide, links = {}, {} -- { file, title, source }; every page links to all
for i, path in ipairs(files.listed "docs/guide/*.md") do
  local title = files.read(path):match "\n# ([^\n]+)"
  guide[i] = { path:match("([^/]+)%.md$"):gsub("^%d+_", "guide_") .. ".html", title, path }
  links[i] = guide[i]
end
links[#links + 1] = { "manual.html", "Reference manual" }
links[#links + 1] = { "interface.html", "C interface" }

local function write(name, title, body) files.write(folder .. "/" .. name, html.page(title, links, body)) end

for _, page in ipairs(guide) do write(page[1], page[2], markdown.html(page[3])) end
write("index.html", "Documents", markdown.index(guide, links))
write("manual.html", "Reference manual", manual.html())
write("interface.html", "C interface", interface.html(headers.all()))
