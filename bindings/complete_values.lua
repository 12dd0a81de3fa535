-- SPDX-License-Identifier: GPL-3.0-or-later
-- What an expression stands for, as far as its text tells without running it: the value of a variable, or of which kind a result will be.
-- A finding is a table: value = (a Lua value), kind = ("case", "quantity", "dust", ...), word = (a word of the language or a name),
-- method = (its name; kind is then that of its object), unit = (what a quantity is shown in). An empty one is not known. Variables are looked
-- up raw.
local core = ...
local getmetatable, ipairs, rawget, select, type = getmetatable, ipairs, rawget, select, type

local values = {}

-- Of which kind the results of words and methods are; names give quantities.
local results = { case = "case", dust = "dust", band = "band", material = "material", study = "study" }
for word in ("quantity sweep along mean deviation median quantile chance undefined lowest highest above below both either least greatest sqrt abs exp log " ..
  "log10 sin cos tan spread"):gmatch "%a[%w]*" do results[word] = "quantity" end
local method_results = {
  case = { with = "case", using = "case", solve = "quantity" },
  quantity = setmetatable({}, { __index = function(_, method) return method ~= "value" and method ~= "axes" and "quantity" or nil end }),
  band = { flux = "quantity", magnitude = "quantity" },
  dust = setmetatable({}, { __index = function() return "quantity" end }),
}

function values.kind_of(value)
  if core.is_case(value) then return "case" end
  if select("#", core.facts(value)) > 0 then return "quantity" end
  if core.object_type(value) then return core.object_type(value) end
  local metatable = type(value) == "table" and getmetatable(value)
  return type(metatable) == "table" and rawget(metatable, "__name") or nil
end

local function of_value(value) return { value = value, kind = values.kind_of(value), unit = select(2, core.facts(value)) } end

-- A finding for a variable, a word, a unit or a name.
local function variable(name, environment)
  for _, scope in ipairs(environment) do
    local value = rawget(scope, name)
    if value ~= nil then return of_value(value) end
  end
  local own = rawget(core.part "lacuna.lacuna", name)
  if type(own) == "table" then return { word = name, value = own } end
  if own == nil and core.unit(name) or type(own) == "userdata" then return { kind = "quantity" } end
  return { word = name }
end

-- object.name
local function member(object, name)
  if object.kind == "case" then
    local found = core.find(name)
    if not found then return {} end
    local entry = core.entry(found)
    return { kind = entry.kind == "object" and found or "quantity", unit = entry.unit }
  end
  if type(object.value) ~= "table" then return {} end
  local value = rawget(object.value, name)
  if object.word then return { word = object.word, value = value } end -- spread.normal gives what spread does
  return value ~= nil and of_value(value) or {}
end

local function result(callee)
  if callee.method then
    local of_kind = method_results[callee.kind]
    return { kind = of_kind and of_kind[callee.method] }
  end
  if not callee.word then return {} end
  if results[callee.word] then return { kind = results[callee.word] } end
  local name = core.find(callee.word)
  return name and { kind = "quantity", unit = core.entry(name).unit } or {}
end

-- Whether a token can end what may be called or indexed.
function values.ends_prefix(token)
  if not token then return false end
  if token.kind == "symbol" then return token.text == ")" or token.text == "]" or token.text == "}" end
  return token.kind == "name" or token.kind == "string"
end

local find_value

-- (a * b), (c): of a single one what it is; of several a quantity where one of them is.
local function in_parentheses(tokens, partner, open, close, environment)
  local whole, first = find_value(tokens, partner, close - 1, environment)
  if first == open + 1 then return whole end
  for i = open + 1, close - 1 do
    if tokens[i].kind == "name" and not values.ends_prefix(tokens[i - 1]) and variable(tokens[i].text, environment).kind == "quantity" then return { kind = "quantity" } end
  end
  return {}
end

-- What the prefix expression that ends in token i stands for, and the number of its first token.
function find_value(tokens, partner, i, environment)
  local token, before = tokens[i], tokens[i - 1]
  if not values.ends_prefix(token) then return {}, i end
  if token.kind == "name" then
    local mark = before and before.kind == "symbol" and before.text
    if mark == "." or mark == ":" then
      local object, first = find_value(tokens, partner, i - 2, environment)
      if mark == "." then return member(object, token.text), first end
      return { method = token.text, kind = object.kind, object = object.value, unit = object.unit }, first
    end
    return variable(token.text, environment), i
  end
  local open = token.kind == "string" and i or partner[i]
  if not open then return {}, i end
  if values.ends_prefix(tokens[open - 1]) then
    local callee, first = find_value(tokens, partner, open - 1, environment)
    if token.text == "]" then return {}, first end
    return result(callee), first
  end
  if token.text == ")" then return in_parentheses(tokens, partner, open, i, environment), open end
  return { value = token.content }, open -- a text, or nothing known of a table
end
values.find = find_value

return values
