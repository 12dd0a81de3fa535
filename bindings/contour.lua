-- SPDX-License-Identifier: GPL-3.0-or-later
-- Lines of constant height on a rectangular grid: each cell's edges are crossed where linear interpolation along them says, and the crossings
-- are joined from cell to cell. Along a logarithmic axis the interpolation is in the logarithm. A cell with an undefined corner has no line.
local contour = {}

-- Where the edges of one cell are crossed, in pairs. Edges are named by their lower left grid point and their direction.
local function crossings(rows, level, i, j)
  local a, b, c, d = rows[j][i], rows[j][i + 1], rows[j + 1][i + 1], rows[j + 1][i]
  if a ~= a or b ~= b or c ~= c or d ~= d then return {} end
  local bottom, right, top, left = { i, j, "x" }, { i + 1, j, "y" }, { i, j + 1, "x" }, { i, j, "y" }
  local crossed = {}
  for _, edge in ipairs { { bottom, a, b }, { right, b, c }, { top, d, c }, { left, a, d } } do
    if (edge[2] >= level) ~= (edge[3] >= level) then crossed[#crossed + 1] = edge[1] end
  end
  -- A saddle: its mean says which corners hang together.
  if #crossed == 4 and ((a + b + c + d) / 4 >= level) == (a >= level) then return { bottom, right, top, left } end
  if #crossed == 4 then return { left, bottom, right, top } end
  return crossed
end

local function key_of(edge) return edge[1] .. " " .. edge[2] .. edge[3] end

local function between(low, high, share, log)
  return log and math.exp(math.log(low) + share * (math.log(high) - math.log(low))) or low + share * (high - low)
end

-- Follows the joined edges from one end, taking them away; returns their keys in order.
local function follow(joined, key)
  local path = { key }
  while true do
    local next_key = joined[key] and table.remove(joined[key])
    if not next_key then return path end
    for i, back in ipairs(joined[next_key]) do
      if back == key then
        table.remove(joined[next_key], i)
        break
      end
    end
    path[#path + 1] = next_key
    key = next_key
  end
end

-- lines(xs, ys, rows, level, x_log, y_log): rows[j][i] is the height at xs[i], ys[j], both rising. Returns a list of { x = {...}, y = {...} }.
function contour.lines(xs, ys, rows, level, x_log, y_log)
  local joined, places, keys = {}, {}, {}
  local function take(edge)
    local key = key_of(edge)
    if not joined[key] then
      local i, j, across = edge[1], edge[2], edge[3] == "x"
      local low, high = rows[j][i], across and rows[j][i + 1] or rows[j + 1][i]
      local share = (level - low) / (high - low)
      places[key] = across and { between(xs[i], xs[i + 1], share, x_log), ys[j] } or { xs[i], between(ys[j], ys[j + 1], share, y_log) }
      joined[key], keys[#keys + 1] = {}, key
    end
    return key
  end
  for j = 1, #ys - 1 do
    for i = 1, #xs - 1 do
      local crossed = crossings(rows, level, i, j)
      for k = 1, #crossed, 2 do
        local a, b = take(crossed[k]), take(crossed[k + 1])
        table.insert(joined[a], b)
        table.insert(joined[b], a)
      end
    end
  end
  local lines = {}
  local function add(path)
    local line = { x = {}, y = {} }
    for n, key in ipairs(path) do line.x[n], line.y[n] = places[key][1], places[key][2] end
    lines[#lines + 1] = line
  end
  for _, key in ipairs(keys) do if #joined[key] == 1 then add(follow(joined, key)) end end -- those with ends first,
  for _, key in ipairs(keys) do if #joined[key] > 0 then add(follow(joined, key)) end end -- then the rings
  return lines
end

return contour
