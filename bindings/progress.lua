-- SPDX-License-Identifier: GPL-3.0-or-later
-- How far a study is, on standard error: a bar with the time left on a terminal, redrawn at most ten times a second; elsewhere a line
-- after each tenth of the targets, where a run takes long enough for anybody to wonder. In the program alone.
local core = ...
local command = core.part "lacuna.command"

local progress = {}
local BAR = 30
local QUICK = 0.3 -- s, without a bar
local PATIENCE = { with_folder = 2, without = 10 } -- s, without a line: who writes to a folder has a long run in mind

-- "3 s", "2 min 5 s", "1 h 3 min"
local function duration(seconds)
  seconds = math.floor(seconds + 0.5)
  if seconds < 60 then return seconds .. " s" end
  if seconds < 3600 then return ("%d min %d s"):format(seconds // 60, seconds % 60) end
  return ("%d h %d min"):format(seconds // 3600, seconds % 3600 // 60)
end

local eighths = { "▏", "▎", "▍", "▌", "▋", "▊", "▉" }
local function bar(share)
  local full = math.floor(share * BAR * 8)
  local text = ("█"):rep(full // 8) .. (eighths[full % 8] or "")
  return text .. (" "):rep(BAR - full // 8 - (full % 8 > 0 and 1 or 0))
end

local methods = {}
methods.__index = methods

-- For a run over so many targets, of which some were done before.
function progress.new(total, before)
  local self = setmetatable({ total = total, before = before, done = before, drawn = 0, tenth = before * 10 // math.max(total, 1) }, methods)
  if not command.program then return self end
  self.started, self.columns = command.clock(), command.terminal()
  self.patience = command.out and PATIENCE.with_folder or PATIENCE.without
  return self
end

local function words(self, elapsed)
  local rate = (self.done - self.before) / elapsed
  local left = rate > 0 and ", " .. duration((self.total - self.done) / rate) .. " left" or ""
  return ("%d of %d targets%s"):format(self.done, self.total, left)
end

function methods.draw(self)
  if not self.started then return end
  local now = command.clock()
  local elapsed = now - self.started
  if self.columns then
    if elapsed < QUICK or now - self.drawn < 0.1 then return end
    self.drawn = now
    local text = words(self, elapsed)
    if self.columns > #text + BAR + 4 then text = "▕" .. bar(self.done / self.total) .. "▏ " .. text end
    io.stderr:write("\r\27[K", text)
  elseif self.done * 10 // self.total > self.tenth and elapsed > self.patience and self.done < self.total then
    self.tenth = self.done * 10 // self.total
    io.stderr:write(words(self, elapsed), "\n")
  end
end

function methods.step(self)
  self.done = self.done + 1
  self:draw()
end

-- Takes the bar away.
function methods.clear(self)
  if self.drawn > 0 then io.stderr:write "\r\27[K" end
  self.drawn = 0
end

-- Says what a run took: "500 targets in 7.3 s, 84 MB".
function methods.close(self, what, children)
  self:clear()
  if not self.started then return end
  local elapsed = command.clock() - self.started
  self.elapsed, self.peak = elapsed, command.peak() + children
  if command.out or elapsed > PATIENCE.without then
    io.stderr:write(("%s in %s, %.0f MB\n"):format(what, elapsed < 60 and ("%.1f s"):format(elapsed) or duration(elapsed), self.peak))
  end
end

return progress
