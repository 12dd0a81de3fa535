-- SPDX-License-Identifier: GPL-3.0-or-later
-- The statements of a Lua text that a conversation has to know of: the `local` ones outside all blocks, and what can't be repeated in one
-- function or would leave it. The parser has had its say before, so that nothing here needs to complain.
local core = ...
local tokens = core.part "lacuna.tokens"

local statements = {}

local openers, closers = {}, {}
for word in ("if do function repeat ( { ["):gmatch "%S+" do openers[word] = true end -- the do of a while or a for is its one opener
for word in ("end until ) } ]"):gmatch "%S+" do closers[word] = true end

-- The text's tokens with the depth = blocks and brackets around each, and functions = how many of them are functions. An opening token and
-- the one that closes it have the same depth.
function statements.read(text)
  local list, word = tokens.read(text)
  if word.text ~= "" then list[#list + 1] = word end
  local open, functions = {}, 0
  for _, token in ipairs(list) do
    local mark = token.kind ~= "string" and token.kind ~= "name" and token.text
    if closers[mark] and table.remove(open) == "function" then functions = functions - 1 end
    token.depth, token.functions = #open, functions
    if openers[mark] then
      open[#open + 1] = mark
      if mark == "function" then functions = functions + 1 end
    end
  end
  return list
end

-- The index of the token that closes what the one at index i opens.
local function closing(list, i)
  for j = i + 1, #list do
    if list[j].depth == list[i].depth then return j end
  end
  return #list
end

local binary = { [","] = true, ["and"] = true, ["or"] = true }
local before_operand = { ["-"] = true, ["not"] = true, ["#"] = true, ["~"] = true }
for operator in ("+ - * / // ^ % & ~ | >> << .. < <= > >= == ~="):gmatch "%S+" do binary[operator] = true end

-- The index of the last token of the list of expressions that starts at index i. Only what can be called or indexed goes on with a bracket.
local function expressions_end(list, i)
  local complete, callable = false, false
  while list[i] do
    local token, mark = list[i], list[i].kind ~= "string" and list[i].text
    if not complete then
      if not before_operand[mark] then complete = true end
      callable = token.kind == "name" or mark == "("
      if openers[mark] then i = closing(list, i) end
    elseif binary[mark] then complete = false
    elseif callable and (mark == "." or mark == ":") then i = i + 1
    elseif callable and (mark == "(" or mark == "{" or mark == "[") then i = closing(list, i)
    elseif not (callable and token.kind == "string") then return i - 1 end
    i = i + 1
  end
  return #list
end

-- The names that a `local` at index i declares, and the index of the statement's last token.
local function read_local(list, i)
  if list[i + 1].text == "function" then return { { name = list[i + 2].text } }, closing(list, i + 1) end
  local names, j = {}, i
  repeat
    local entry = { name = list[j + 1].text }
    j = j + 1
    if list[j + 1] and list[j + 1].text == "<" then entry.attribute, j = list[j + 2].text, j + 3 end
    names[#names + 1], j = entry, j + 1
  until not (list[j] and list[j].text == ",")
  if not (list[j] and list[j].text == "=") then return names, j - 1 end
  return names, expressions_end(list, j + 1)
end

local function tells(names, key, value)
  for _, entry in ipairs(names) do
    if entry[key] == value then return true end
  end
  return false
end

-- The `local` statements outside all blocks that declare for what comes after the text: {names = {{name =, attribute =}, ...}, last = place}.
-- Not among them: those with <close>, which ends with the text, and _ENV.
function statements.locals(list)
  local found = {}
  for i, token in ipairs(list) do
    if token.kind == "keyword" and token.text == "local" and token.depth == 0 then
      local names, last = read_local(list, i)
      if not tells(names, "attribute", "close") and not tells(names, "name", "_ENV") then found[#found + 1] = { names = names, last = list[last].last } end
    end
  end
  return found
end

-- Whether what the text declares or marks must end with it: a <close>, a label, an _ENV of its own.
function statements.needs_block(list)
  for i, token in ipairs(list) do
    if token.depth == 0 and (token.text == "::" or token.text == "goto") then return true end
    if token.depth == 0 and token.text == "local" and token.kind == "keyword" then
      local names = read_local(list, i)
      if tells(names, "attribute", "close") or tells(names, "name", "_ENV") then return true end
    end
  end
  return false
end

-- The text's own returns, outside its functions: the index of one that ends the text, or nil; and whether there is one inside a block.
function statements.returns(list)
  local last, inside = nil, false
  for i, token in ipairs(list) do
    if token.kind == "keyword" and token.text == "return" and token.functions == 0 then
      if token.depth == 0 then last = i else inside = true end
    end
  end
  return last, inside
end

return statements
