-- SPDX-License-Identifier: GPL-3.0-or-later
-- Records in a file: a head that says what was asked, then one record for each target, appended as it is done. Each stands behind its
-- length and the start of its SHA-256, so that one that was cut in the middle or damaged is seen, and left out with what follows it; numbers
-- are written exactly.
--
--   lacuna records 1
--   LENGTH SHA-256
--   { s6:script ...     a table: keys and values in turn, keys in order; texts behind their length, numbers as C's %a
local core = ...
local case = core.part "lacuna.case"

local file = {}
local FIRST_LINE = "lacuna records 1\n"

-- Values as text --------------------------------------------------------------------------------------------------------------------

local function add(parts, value)
  local kind = type(value)
  if kind == "string" then parts[#parts + 1] = "s" .. #value .. ":" .. value
  elseif math.type(value) == "integer" then parts[#parts + 1] = "i" .. value .. ";"
  elseif kind == "number" then parts[#parts + 1] = "n" .. ("%a"):format(value) .. ";"
  elseif kind == "boolean" then parts[#parts + 1] = value and "t" or "f"
  else
    parts[#parts + 1] = "{"
    for i = 1, #value do add(parts, value[i]) end
    parts[#parts + 1] = "|"
    local keys = {}
    for key in pairs(value) do if type(key) == "string" then keys[#keys + 1] = key end end
    table.sort(keys)
    for _, key in ipairs(keys) do
      add(parts, key)
      add(parts, value[key])
    end
    parts[#parts + 1] = "}"
  end
end

-- The text of a table of texts, numbers, booleans and such tables: its list first, then its other fields by name.
function file.encode(value)
  local parts = {}
  add(parts, value)
  return table.concat(parts)
end

local not_numbers = { inf = math.huge, ["-inf"] = -math.huge, nan = 0 / 0, ["-nan"] = 0 / 0 }

-- The value that starts at a place of the text, and where it ends; an error if the text is none of encode's.
local function read_value(text, at)
  local mark = text:sub(at, at)
  if mark == "s" then
    local length, start = text:match("^(%d+):()", at + 1)
    return text:sub(start, start + length - 1), start + length
  elseif mark == "n" or mark == "i" then
    local number, after = text:match("^([^;]*);()", at + 1)
    return not_numbers[number] or tonumber(number), after
  elseif mark == "t" or mark == "f" then return mark == "t", at + 1
  end
  assert(mark == "{", "no value")
  local value, key = {}, nil
  at = at + 1
  while text:byte(at) ~= 124 do value[#value + 1], at = read_value(text, at) end -- |
  at = at + 1
  while text:byte(at) ~= 125 do -- }
    key, at = read_value(text, at)
    value[key], at = read_value(text, at)
  end
  return value, at + 1
end

function file.decode(text) return (read_value(text, 1)) end

-- Files -----------------------------------------------------------------------------------------------------------------------------

local function sum_of(text) return core.sha256(text):sub(1, 16) end

local function framed(text) return ("%d %s\n%s\n"):format(#text, sum_of(text), text) end

-- The text of the frame that starts at a place of the content, and where the next one starts; nil if it isn't whole.
local function unframed(content, at)
  local length, sum, start = content:match("^(%d+) (%x+)\n()", at)
  local text = length and tonumber(length) <= #content and content:sub(start, start + length - 1)
  if text and sum_of(text) == sum and content:byte(start + length) == 10 then return text, start + length + 1 end
end

-- A file's text: its head and the records' texts.
function file.whole(head, texts)
  local parts = { FIRST_LINE, framed(file.encode(head)) }
  for _, text in ipairs(texts) do parts[#parts + 1] = framed(text) end
  return table.concat(parts)
end

-- The head and the records' texts of a file, up to the first that isn't whole; nil and why if it is no such file.
function file.read(path)
  local handle, trouble = io.open(path, "rb")
  if not handle then return nil, trouble end
  local content = handle:read "a" or ""
  handle:close()
  if content:sub(1, #FIRST_LINE) ~= FIRST_LINE then return nil, path .. ": not a file of records of this version" end
  local head, at = unframed(content, #FIRST_LINE + 1)
  if not head then return nil, path .. ": it is cut or damaged before its first record" end
  local texts = {}
  while at do texts[#texts + 1], at = unframed(content, at) end
  return file.decode(head), texts
end

-- How two heads differ, in words; nil if they are the same.
function file.difference(there, here)
  for _, key in ipairs(case.sorted_keys(core.part "lacuna.record".both(there, here))) do
    local a, b = there[key], here[key]
    if file.encode { a } ~= file.encode { b } then
      if key == "script" or key == "inputs" then return key == "script" and "the study file isn't the same" or "its input files aren't the same" end
      local function shown(value)
        if value == nil or type(value) == "table" and #value == 0 then return "none" end
        return type(value) == "table" and "'" .. table.concat(value, "', '") .. "'" or tostring(value)
      end
      return ("%s was %s there, is %s here"):format(key, shown(a), shown(b))
    end
  end
end

-- A file that records are appended to; each is in the system's hands when append returns.
local appender = {}
appender.__index = appender

function file.append_to(path)
  local handle, trouble = io.open(path, "ab")
  if not handle then return nil, trouble end
  return setmetatable({ handle = handle, path = path }, appender)
end

function appender:append(text)
  local ok, trouble = self.handle:write(framed(text))
  if ok then ok, trouble = self.handle:flush() end
  if not ok then error(("cannot write %s: %s; what is done is kept there, and --resume goes on"):format(self.path, trouble), 0) end
end

function appender:close() self.handle:close() end

return file
