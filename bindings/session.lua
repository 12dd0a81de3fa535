-- SPDX-License-Identifier: GPL-3.0-or-later
-- A conversation's inputs, each a chunk of its own, share their locals as the statements of one script do: what an input declares outside
-- all blocks, later inputs have as an upvalue, joined to the very variable. So a function sees later changes of the locals it uses,
-- a second `local x` is a second variable, <const> stays, and a local may have the name of a unit or a word.
-- Besides, what was typed and what came of it is noted for the notebook.
local core = ...
local statements = core.part "lacuna.statements"
local tokens = core.part "lacuna.tokens"
local debug, load, globals, pairs, type = debug, load, _G, pairs, type -- the user may give these names away

-- A variable: {name =, attribute =, read = a function whose first upvalue is the variable}.
local variables, latest = {}, {} -- by name; and {name = value} after the last input

local session = {
  environment = { latest, globals }, -- where names can be looked up, raw
  inputs = {},                       -- for the notebook: {text =, expression =, results =, as_text = of a figure, which show would draw, from = file} or
                                     -- {text =, failed = names, skips = n, settings = the changed ones}
}

-- What is known before an input, to be compared with after one that failed.
local pending
local function all_values()
  local values = {}
  for name, value in pairs(globals) do values[name] = value end
  for name, variable in pairs(variables) do values[name] = variable.read() end
  return values
end

-- The spreads and sweeps among them that nothing has named yet.
local function unbound_among(values)
  local held = {}
  for _, value in pairs(values) do
    local hold = type(value) == "userdata" and core.unbound_hold(value)
    if hold then held[value] = hold end
  end
  return held
end

local function keep_local(name, read, attribute)
  if not debug.getupvalue(read, 1) then -- a constant that the compiler has put in
    local value = read()
    read = function() return value end
  end
  variables[name] = { name = name, attribute = attribute, read = read }
end

-- The text with a call after each of its `local` statements that hands the variables over. Lines stay.
local keeper = "__keep_local"
local function handing_over(text, list)
  local parts, from = {}, 1
  for _, statement in ipairs(statements.locals(list)) do
    parts[#parts + 1] = text:sub(from, statement.last)
    for _, entry in ipairs(statement.names) do
      local attribute = entry.attribute and (',"%s"'):format(entry.attribute) or ""
      parts[#parts + 1] = (' %s("%s",function() return %s end%s);'):format(keeper, entry.name, entry.name, attribute)
    end
    from = statement.last + 1
  end
  parts[#parts + 1] = text:sub(from)
  return table.concat(parts)
end

-- The variables that the text's names may mean, as a list of declarations.
local function declarations(list)
  local parts, seen = { keeper }, {}
  for _, token in ipairs(list) do
    local variable = token.kind == "name" and not seen[token.text] and variables[token.text]
    if variable then
      seen[token.text] = true
      parts[#parts + 1] = variable.name .. (variable.attribute and " <" .. variable.attribute .. ">" or "")
    end
  end
  return table.concat(parts, ",")
end

local function join(chunk)
  for i = 1, math.huge do
    local name = debug.getupvalue(chunk, i)
    if not name then return end
    if variables[name] then debug.upvaluejoin(chunk, i, variables[name].read, 1) end
  end
end

-- Whether the text is an expression, which `never` rules out, and whether it could be one; or nil and the parser's message. Of what is neither
-- the mistake is that of the expression where no statement begins like it: in "1 + * 2" it is the star.
local function parse(text, chunk_name, never)
  local chunk, message = load("return " .. text, chunk_name, "t")
  if chunk then return not never, true end
  if not never and message:find "<eof>$" then return nil, message end
  local statement, complaint = load(text, chunk_name, "t")
  if statement then return false, false end
  local first = tokens.read(text)[1]
  if never or not first or not complaint:find(("unexpected symbol near '%s'"):format(first.text), 1, true) then message = complaint end
  return nil, message
end

-- An input that begins with one of these words is about the conversation, and no part of it.
local not_kept = { help = true, keep = true, again = true, more = true }

local function note_before(input)
  local first = input.list[1] and input.list[1].text
  input.apart = input.could_be_one and not_kept[first] and not variables[first]
  input.values, input.settings, input.made = all_values(), core.settings(), core.unbound_made()
  input.unbound = unbound_among(input.values)
  session.began = session.began or input.settings
  pending = input
end

-- compile(text, chunk_name): the input as a function, or nil and a message, which ends in <eof> where the text is only a beginning.
-- The text is an expression, whose values are returned, if it can be one, or the beginning of one. With `never` it is none.
function session.compile(text, chunk_name, never)
  local expression, could_be_one = parse(text, chunk_name, never)
  if expression == nil then return nil, could_be_one end
  local list = statements.read(text)
  local code = expression and "return " .. text or handing_over(text, list)
  local maker, message = load(("local %s = ... return function(...) %s\nend"):format(declarations(list), code), chunk_name, "t")
  if not maker then return nil, message end
  local chunk = maker(keep_local)
  join(chunk)
  note_before { text = text, list = list, expression = expression, could_be_one = could_be_one }
  return chunk
end

-- The input that is being run: {text =, apart = whether it is a call of one of these words}; nil outside a conversation.
function session.current() return pending end

-- Names whose values differ from what they were, in order.
local function changed(before)
  local now, names = all_values(), {}
  for name, value in pairs(now) do
    if not rawequal(value, before[name]) then names[#names + 1] = tostring(name) end
  end
  for name in pairs(before) do
    if now[name] == nil then names[#names + 1] = tostring(name) end
  end
  table.sort(names)
  return names
end

-- Whether nothing of an input that failed can have stayed but in a variable: an expression, or one assignment, and no block.
local block = { ["do"] = true, ["if"] = true, ["repeat"] = true, ["function"] = true, [";"] = true }
local function is_simple(input)
  local assignments = 0
  for _, token in ipairs(input.list) do
    if block[token.text] then return false end
    if token.text == "=" and token.depth == 0 then assignments = assignments + 1 end
  end
  return input.expression or assignments == 1
end

-- Free spreads and sweeps are named by their first use, or by the order of their making. A failed input gives names and numbers back, so that
-- a script without it draws the same; where one of its spreads may live on, the script has to skip the numbers.
local function note_failure(input)
  local names, skips = changed(input.values), core.unbound_made() - input.made
  local settings, now = {}, core.settings()
  for _, key in ipairs { "draws", "seed" } do
    if now[key] ~= input.settings[key] then names[#names + 1], settings[key] = key, now[key] end
  end
  if #names == 0 and is_simple(input) then
    core.unbound_made(input.made)
    for quantity, held in pairs(input.unbound) do core.unbound_restore(quantity, held) end
  elseif #names > 0 or skips > 0 then
    table.insert(session.inputs, { text = input.text, failed = names, skips = skips, settings = settings })
  end
end

-- ran(text, ok, results, from): to be called after each input, with how many values were shown, and the file it came from if any.
function session.ran(text, ok, results, from)
  local input = pending
  pending = nil
  for name in pairs(latest) do latest[name] = nil end
  for name, variable in pairs(variables) do latest[name] = variable.read() end
  if not input or input.apart then return end
  if ok then table.insert(session.inputs, { text = text, expression = input.expression, results = results, as_text = input.as_text, from = from })
  else note_failure(input) end
end

return session
