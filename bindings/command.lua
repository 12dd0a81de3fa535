-- SPDX-License-Identifier: GPL-3.0-or-later
-- What the command line asks of a study. The program calls take for each such option and check once, sets `program`, `script` and
-- `arguments`, and calls close when the script has ended; a host that merely loads the module leaves all of it empty.
local core = ...

local command = {
  set = {},     -- what --set says, in order: { word, value }
  only = {},    -- names of targets, by --only
  out = nil,    -- the report's folder
  resume = nil, force = nil,
  shard = nil,  -- { number, of }
  inputs = {},  -- texts of input files by the name a study gives them, where a run is put together from its parts
  records = nil, -- and the targets' records there
  threads = 1,  -- how many cores a study may use
  failed = 0,   -- targets that failed
  used = {},    -- options that a study has read
}

local function take_set(text)
  local word, value = text:match "^%s*([%w_ ]-)%s*=%s*(.-)%s*$"
  if not word or word == "" or value == "" then error(('--set wants NAME=VALUE, like --set "distance=120 pc"; got "%s"'):format(text), 0) end
  table.insert(command.set, { word = word, value = value, text = text })
end

local function take_shard(text)
  local number, of = text:match "^(%d+)/(%d+)$"
  number, of = math.tointeger(tonumber(number)), math.tointeger(tonumber(of))
  if not number or not of or number < 1 or number > of then error(('--shard wants K/N with K from 1 to N, like 3/16; got "%s"'):format(text), 0) end
  command.shard = { number = number, of = of }
end

-- One option, "--set", with its text.
function command.take(option, text)
  local name = option:sub(3)
  if text == "" then error(("%s wants something after it; got nothing"):format(option), 0) end
  if name == "set" then take_set(text)
  elseif name == "only" then table.insert(command.only, text)
  elseif name == "shard" then take_shard(text)
  else command[name] = text or true end
end

-- Whether the options go together.
function command.check()
  for _, name in ipairs { "resume", "force", "shard" } do
    if command[name] and not command.out then error(("--%s goes with --out DIR"):format(name), 0) end
  end
  if command.resume and command.force then error("--resume goes on with what is there, --force starts anew: one of them", 0) end
end

-- Called when the script has ended well: the exit status, and a line to say if it isn't 0.
function command.close()
  for _, name in ipairs { "out", "set", "only" } do
    local given = command[name]
    if given and (type(given) ~= "table" or #given > 0) and not command.used[name] then return 1, ("no study read --%s"):format(name) end
  end
  if command.failed > 0 then return 1, ("%d target%s failed; the table says why"):format(command.failed, command.failed == 1 and "" or "s") end
  return 0
end

-- Overrides -------------------------------------------------------------------------------------------------------------------------

-- "20 m:330 m:100": a sweep; anything else as it stands. Two colons alone don't make one: sky coordinates have them too.
local function value_of(name, text)
  local from, to, count = text:match "^%s*(.-)%s*:%s*(.-)%s*:%s*(%d+)%s*$"
  if not from then return text end
  return core.sweep(core.reading(from, name), core.reading(to, name), math.tointeger(tonumber(count))), true
end

local function find_name(word)
  local name = core.find(word:gsub("%s+", "_")) -- a synonym will do: it means one name
  if not name then error(core.part "lacuna.case".unknown_name(word, "--set: "), 0) end
  return name
end

local function axis_of(name, quantity)
  local entry = core.entry(name)
  local _, tex = core.unit_facts(entry.unit)
  local values = core.elements(quantity)
  for i, value in ipairs(values) do values[i] = value / entry.factor end
  return { name = name, unit = entry.unit, unit_text = core.part "lacuna.text".unit_of(name), unit_tex = tex, values = values }
end

-- What --set gives, for a study: checked and bound without a target, so that its draws are the same for all.
-- `sweeps`: { name, unit, values in it }, in the order of the command line.
function command.overrides()
  local set = { givens = {}, objects = {}, written = {}, sweeps = {} }
  command.used.set = true
  for _, one in ipairs(command.set) do
    local name = find_name(one.word)
    if set.written[name] then error(("--set: %s is set twice"):format(name), 0) end
    set.written[name] = one.value
    local ok, trouble = pcall(function()
      if core.entry(name).kind == "object" then
        set.objects[name] = core.part "lacuna.objects".take(name, one.value)
        return
      end
      local value, swept = value_of(name, one.value)
      local written = not swept and core.part "lacuna.text".as_written(name, value)
      local quantity = core.given(name, value)
      set.givens[name], set.written[name] = quantity, swept and one.value or written or core.part "lacuna.text".quantity(quantity)
      if swept then table.insert(set.sweeps, axis_of(name, quantity)) end
    end)
    if not ok then error("--set: " .. core.part "lacuna.record".bare(trouble), 0) end
  end
  return set
end

return command
