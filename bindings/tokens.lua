-- SPDX-License-Identifier: GPL-3.0-or-later
-- Reads an input in Lua, whole or up to the cursor: its tokens, and which brackets stand open at the end.
-- It never fails: what is no Lua is read as symbols. (Forms of words in help, "case{name = value, ...}", are read by it too.)
--
--   read(text) -> tokens, word, open
--     tokens   {kind = "name" | "keyword" | "number" | "string" | "symbol", text =, first =, last =, content = of a string}
--     word     {text =, first =}: the name that the text ends in, or an empty one at its end; it is not among the tokens
--     open     nil; or what stands open at the end: {kind = "comment"}, or {kind = "string", first = of its content, text = so far, quote =}
--   brackets(tokens) -> stack, partner
--     stack    of the open ones, the outermost first: {open = "(", at = its token, argument = 1.., start = the token before the present item,
--              key = of the present item, keys = {name = true}}
--     partner  by the number of a closing bracket's token: that of its opening one
local find, sub, gmatch = string.find, string.sub, string.gmatch

local tokens = {}

local keywords = {}
for word in gmatch("and break do else elseif end false for function goto if in local nil not or repeat return then true until while", "%a+") do
  keywords[word] = true
end
tokens.keywords = keywords

-- The end of a quoted string that begins at a place; nil and true where it stands open, nil where its line ends before.
local function end_of_quoted(text, first)
  local stops, at = "[\\\n" .. sub(text, first, first) .. "]", first + 1
  while true do
    local place = find(text, stops, at)
    if not place then return nil, true end
    local stop = sub(text, place, place)
    if stop == "\n" then return place - 1 end
    if stop ~= "\\" then return place end
    at = sub(text, place + 1, place + 1) == "z" and find(text, "%S", place + 2) or place + 2
  end
end

-- A long bracket at a place: where its content begins, where that ends, where the bracket does. Nothing past the first if it stands open.
local function long_bracket(text, at)
  local _, last, level = find(text, "^%[(=*)%[", at)
  if not last then return end
  local closing, closed = find(text, "]" .. level .. "]", last + 1, true)
  return last + 1, closing and closing - 1, closed
end

-- A comment: where it ends, or nil where the text does.
local function end_of_comment(text, at)
  local content, _, closed = long_bracket(text, at + 2)
  if content then return closed end
  return (find(text, "\n", at, true))
end

local number_forms = { "^0[xX][%x.]*[pP][-+]?%d+", "^0[xX][%x.]*", "^%d*%.?%d*[eE][-+]?%d+", "^%d*%.?%d*" }
local symbol_forms = { "^%.%.%.", "^%.%.", "^[=~<>]=", "^//", "^::", "^<<", "^>>", "^." }

local function first_match(text, forms, at)
  for i = 1, #forms do
    local _, last = find(text, forms[i], at)
    if last then return last end
  end
end

-- One string or comment at a place: its end, its content; or nil and what stands open.
local function take_text(text, at)
  local content, ends, closed = long_bracket(text, at)
  if content then
    if closed then return closed, sub(text, content, ends) end
    return nil, { kind = "string", first = content, text = sub(text, content), quote = "" }
  end
  local last, open = end_of_quoted(text, at)
  if open then return nil, { kind = "string", first = at + 1, text = sub(text, at + 1), quote = sub(text, at, at) } end
  return last, sub(text, at + 1, last - 1)
end

function tokens.read(text)
  local list, at = {}, 1
  local function add(kind, last, content)
    list[#list + 1] = { kind = kind, text = sub(text, at, last), first = at, last = last, content = content }
    at = last + 1
  end
  while true do
    at = find(text, "%S", at)
    if not at then break end
    if find(text, "^[%a_]", at) then
      local _, last = find(text, "^[%w_]+", at)
      add(keywords[sub(text, at, last)] and "keyword" or "name", last)
    elseif find(text, "^%.?%d", at) then add("number", first_match(text, number_forms, at))
    elseif find(text, "^%-%-", at) then
      at = end_of_comment(text, at)
      if not at then return list, { text = "", first = #text + 1 }, { kind = "comment" } end
      at = at + 1
    elseif find(text, "^[\"']", at) or find(text, "^%[=*%[", at) then
      local last, content = take_text(text, at)
      if not last then return list, { text = "", first = #text + 1 }, content end
      add("string", last, content)
    else add("symbol", first_match(text, symbol_forms, at)) end
  end
  local last = list[#list]
  if not last or last.last < #text or last.kind ~= "name" and last.kind ~= "keyword" then return list, { text = "", first = #text + 1 } end
  list[#list] = nil
  return list, last
end

local closing = { [")"] = true, ["]"] = true, ["}"] = true }

-- The key that stands before the "=" at i, if it belongs to the frame's present item: name = or ["name"] =.
local function key_before(list, i, frame)
  local before = list[i - 1]
  if before.kind == "name" and frame.start == i - 2 then return before.text end
  if before.text == "]" and list[i - 2] and list[i - 2].kind == "string" and frame.start == i - 4 then return list[i - 2].content end
end

function tokens.brackets(list)
  local stack, partner = {}, {}
  for i = 1, #list do
    local text, frame = list[i].kind == "symbol" and list[i].text, stack[#stack]
    if text == "(" or text == "[" or text == "{" then
      stack[#stack + 1] = { open = text, at = i, argument = 1, start = i, keys = {} }
    elseif frame and closing[text] then
      partner[i], stack[#stack] = frame.at, nil
    elseif frame and (text == "," or text == ";") then
      frame.argument, frame.start, frame.key = frame.argument + 1, i, nil
    elseif frame and frame.open == "{" and text == "=" then
      local key = key_before(list, i, frame)
      if key then frame.key, frame.keys[key] = key, true end
    end
  end
  return stack, partner
end

return tokens
