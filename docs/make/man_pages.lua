-- SPDX-License-Identifier: GPL-3.0-or-later
-- Makes the manual pages lacuna(1) and lacuna(3).
-- Run from the top directory by the program itself: lacuna docs/make/man_pages.lua FOLDER VERSION
package.path = "docs/make/?.lua;" .. package.path
local files = require "files"
local headers = require "headers"
local interface = require "interface"
local program = require "program"

local folder, version = assert(arg[1], "wants a folder"), assert(arg[2], "wants a version")
local date = os.date("!%Y-%m-%d", tonumber(os.getenv "SOURCE_DATE_EPOCH"))

files.write(folder .. "/lacuna.1", program.man(version, date))
files.write(folder .. "/lacuna.3", interface.man(headers.all(), version, date))
