-- SPDX-License-Identifier: GPL-3.0-or-later
-- c:solve(given, {name = value}): for which value of a given does a name reach a goal? The chain stays fixed. Where the goal is the
-- chance of a verdict over draws, the chance is solved for by bisection; everything else goes to the root finder, element by element.
local core = ...
local text = core.part "lacuna.text"
local case = core.part "lacuna.case"
local format = core.part "lacuna.format"

local decades = 4 -- how far to either side of the present value a positive given is searched

local function has_axis(quantity, name)
  for _, axis in ipairs(core.axes(quantity)) do if axis.name == name then return true end end
  return false
end

-- The one number that a given stands for at present: its median, in the middle of its sweeps. SI.
local function present(quantity)
  for _, axis in ipairs(core.axes(quantity)) do
    quantity = axis.name == "draw" and core.median(quantity) or core.at(quantity, { [axis.name] = (axis.length + 1) // 2 })
  end
  return core.elements(quantity)[1]
end

-- Where to search: two bounds in SI and whether in equal ratios.
local function bounds(name, quantity, between)
  local range, start = core.entry(name).range, present(quantity)
  if between then
    if type(between) ~= "table" or #between ~= 2 then core.raise("solve: between wants two bounds, like {\"10 m\", \"300 m\"}; got " .. core.shown(between)) end
    local low, high = core.elements(core.given(name, between[1]))[1], core.elements(core.given(name, between[2]))[1]
    if not (low < high) then core.raise("solve: between wants a lower and a higher bound") end
    return low, high, low > 0 and high / low > 10, math.max(low, math.min(high, start))
  end
  local low, high = core.bounds(name)
  if low >= 0 and start > 0 then
    local least, most = start / 10 ^ decades, start * 10 ^ decades
    if high < most then return math.max(low, least), high, low > 0, start end
    return math.max(low, least), most, true, start
  end
  local width = 10 * math.abs(start) + 3.2 -- for names of any sign; more than half a turn for angles
  return math.max(low, start - width), math.min(high, start + width), false, start
end

local function write(name, number)
  return text.quantity(core.like(core.given_like(name), number))
end

-- "it runs from 1 au to 3 au there", "it is 2 au throughout"
local function runs(what, least, most)
  return least == most and ("%s is %s throughout"):format(what, least) or ("%s runs from %s to %s there"):format(what, least, most)
end

local function nothing_found(given, goal_name, goal, low, high, least, most)
  local between = ("no %s between %s and %s "):format(given, write(given, low), write(given, high))
  if not (least <= most) then return between .. ("gives %s = %s: it is undefined there"):format(goal_name, goal) end
  local there = runs("it", write(goal_name, least), write(goal_name, most))
  if core.entry(goal_name).kind == "verdict" then return between .. ("turns %s: %s"):format(goal_name, there) end
  return between .. ("gives %s = %s: %s"):format(goal_name, goal, there)
end

local function single(quantity) return #core.axes(quantity) == 0 and core.elements(quantity)[1] or nil end

-- The case with other givens, checked already.
local function with_givens(self, givens)
  local info = core.info(self)
  return core.new_case(givens, info.using, { givens = givens, using = info.using, target = info.target, objects = info.objects, written = {} })
end

-- The chance of a verdict at one value (SI) of a given, in a case without other axes than draw.
local function chance_at(self, given, goal_name, x)
  local givens = {}
  for name, quantity in pairs(core.info(self).givens) do givens[name] = quantity end
  givens[given] = core.like(core.given_like(given), x)
  return core.elements(core.chance(core.raw(with_givens(self, givens), goal_name)))[1]
end

-- Bisection of the chance, which is a step function of x: the place where it first reaches the share, nearest to the start; besides, the
-- least and the greatest chance, which way it goes on being reached from there, and how many such places were seen.
local function solve_chance(self, given, goal_name, share, low, high, logarithmic, start)
  local to, from = function(x) return x end, function(x) return x end
  if logarithmic then to, from = math.log, math.exp end
  local a, b, points = to(low), to(high), 49
  local least, most, left, right = math.huge, -math.huge, nil, nil
  local before, at
  local places = 0
  for i = 0, points - 1 do
    local x = a + (b - a) * i / (points - 1)
    local value = chance_at(self, given, goal_name, from(x))
    least, most = math.min(least, value), math.max(most, value)
    if before and (before < share) ~= (value < share) then
      places = places + 1
      if not left or math.abs((at + x) / 2 - to(start)) < math.abs((left + right) / 2 - to(start)) then left, right = at, x end
    end
    before, at = value, x
  end
  if not left then return nil, least, most end
  local rising = chance_at(self, given, goal_name, from(left)) < share
  for _ = 1, 60 do
    local middle = (left + right) / 2
    if middle == left or middle == right then break end
    if (chance_at(self, given, goal_name, from(middle)) < share) == rising then left = middle else right = middle end
  end
  return from(rising and right or left), least, most, rising and "up" or "down", places -- the side on which the share is reached
end

-- The case with the named axes of its givens fixed at these points.
local function fixed(self, points)
  local givens = {}
  for name, quantity in pairs(core.info(self).givens) do givens[name] = core.at(quantity, points) end
  return with_givens(self, givens)
end

-- All points of the axes but draw, in storage order: calls f with {axis = index}.
local function each_point(axes, f, points, depth)
  points, depth = points or {}, depth or 1
  if depth > #axes then return f(points) end
  if axes[depth].name == "draw" then return each_point(axes, f, points, depth + 1) end
  for i = 1, axes[depth].length do
    points[axes[depth].name] = i
    each_point(axes, f, points, depth + 1)
  end
end

local function solve_chances(self, given, goal_name, goal, share, range)
  local others = {} -- the given itself is replaced: its own axes don't count
  for name, quantity in pairs(core.info(self).givens) do others[name] = quantity end
  others[given] = core.like(core.given_like(given), range.start)
  local without = with_givens(self, others)
  local shape = core.chance(core.raw(without, goal_name))
  local axes = core.axes(shape)
  local function none(least, most)
    return nil, ("no %s between %s and %s gives %s in %s of draws: %s"):format(given, write(given, range.low), write(given, range.high), goal_name,
      goal, runs("the share", format.percent(least), format.percent(most)))
  end
  if #axes == 0 then
    local x, least, most, way, places = solve_chance(without, given, goal_name, share, range.low, range.high, range.logarithmic, range.start)
    if not x then return none(least, most) end
    local note = ("%s in %s%s of draws from there %s"):format(goal_name, share < 1 and "at least " or "", goal, way)
    if places > 1 then note = note .. (", up to the next of %d turns between %s and %s"):format(places, write(given, range.low), write(given, range.high)) end
    return core.like(core.given_like(given), x), note
  end
  local roots, defined, lowest, highest = {}, false, math.huge, -math.huge
  each_point(axes, function(points)
    local x, least, most = solve_chance(fixed(without, points), given, goal_name, share, range.low, range.high, range.logarithmic, range.start)
    roots[#roots + 1] = x or 0 / 0
    defined, lowest, highest = defined or x ~= nil, math.min(lowest, least), math.max(highest, most)
  end)
  if not defined then return none(lowest, highest) end
  return core.along_axes(shape, core.given_like(given), roots)
end

local function share_of(goal)
  local share = goal == true and 1 or tonumber(goal) or (core.facts(goal) ~= nil or type(goal) == "userdata") and single(goal)
  if type(goal) == "string" and goal:find "^%s*[%d.]+%s*%%%s*$" then share = tonumber(goal:match "[%d.]+") / 100 end
  if not share or not (share > 0 and share <= 1) then core.raise(("solve: the chance of a verdict wants a share above 0 and up to 1; got %s"):format(tostring(goal))) end
  return share
end

-- The case with a name's assumed value given, where it is assumed.
local function with_assumed(self, name)
  local row = core.row_of(self, name)
  if not row or core.row(row).kind ~= "assumed" then return self end
  return self:with { [name] = core.raw(self, name) }
end

-- What a single verdict does from its turn on.
local function way_of_verdict(self, given, goal_name, found, places, low, high)
  local x = single(found)
  if not x then return nil end
  local note = ("%s is yes from there %s"):format(goal_name, chance_at(self, given, goal_name, x + 1e-9 * math.abs(x)) == 1 and "up" or "down")
  return places > 1 and note .. (", up to the next of %d turns between %s and %s"):format(places, write(given, low), write(given, high)) or note
end

local function solve(self, word, goals, options)
  if options ~= nil and type(options) ~= "table" then core.raise("solve wants its options in a table, like {between = {\"10 m\", \"300 m\"}}; got " .. core.shown(options)) end
  for option in pairs(options or {}) do
    if option ~= "between" then core.raise(("solve: unknown option '%s'; there is between = {low, high}"):format(tostring(option))) end
  end
  if type(goals) ~= "table" or next(goals) == nil or next(goals, next(goals)) ~= nil then
    core.raise("solve wants one goal, like {gap_elements_by_array = 2}")
  end
  local given = case.name_of(word, "solve: ")
  local goal_word, goal = next(goals)
  local goal_name = case.name_of(goal_word, "solve: ")
  self = with_assumed(self, given)
  local info = core.info(self)
  if not info.givens[given] then core.raise(("solve: %s is not given in this case; only what is given or assumed can be solved for"):format(given)) end
  if core.row_of(self, goal_name) == nil then core.raise(core.part "lacuna.missing".not_had(self, goal_name)) end
  local depends = false
  for _, step in ipairs(core.steps(self, goal_name)) do depends = depends or step.name == given end
  if not depends then core.raise(("solve: %s doesn't depend on %s in this case"):format(goal_name, given)) end
  local low, high, logarithmic, start = bounds(given, info.givens[given], options and options.between)
  if core.entry(goal_name).kind == "verdict" then
    local share = share_of(goal)
    local over_draws = false
    for name, quantity in pairs(info.givens) do over_draws = over_draws or name ~= given and has_axis(quantity, "draw") end
    if over_draws then
      return solve_chances(self, given, goal_name, format.percent(share), share, { low = low, high = high, logarithmic = logarithmic, start = start })
    end
    goal = core.quantity(0.5, "1") -- between no and yes: where the verdict turns
  else
    goal = core.given(goal_name, goal)
  end
  local found, least, most, brackets, defined = core.solve(self, given, goal_name, goal, low, high, logarithmic, start)
  if defined == 0 then return nil, nothing_found(given, goal_name, text.quantity(goal), low, high, least, most) end
  if core.entry(goal_name).kind == "verdict" then return found, way_of_verdict(self, given, goal_name, found, brackets, low, high) end
  local _, _, _, _, size = core.facts(found)
  if defined < size then
    return found, ("where undefined, no %s between %s and %s gives %s = %s"):format(given, write(given, low), write(given, high), goal_name, text.brief(goal))
  end
  if brackets > 1 then return found, ("the nearest of %d solutions between %s and %s"):format(brackets, write(given, low), write(given, high)) end
  return found
end

core.case_methods.solve = solve

return { bounds = bounds, with_givens = with_givens, with_assumed = with_assumed, write = write }
