-- SPDX-License-Identifier: GPL-3.0-or-later
-- Inputs that share their locals, and the scripts that come of them. What a text does as inputs must be what it does as one script: that is
-- the reference here, run by Lua itself (Lua 5.4 Reference Manual, sections 3.3 and 3.5).
package.path = "tests/lua/?.lua;" .. package.path
local t = require "harness"
setmetatable(_G, nil) -- in the program the globals have units behind them: here a and b are plain names

-- The parts with a core of their own, so that each test begins with a fresh session; files are a table. In place of spreads there is only
-- their count: make_spread() adds one.
local function fresh()
  local made, parts, core, files = 0, {}, {}, {}
  function make_spread()
    made = made + 1
    return {}
  end
  function core.part(name)
    if not parts[name] then parts[name] = assert(loadfile("bindings/" .. name:match "[%w_]+$" .. ".lua"))(core) end
    return parts[name]
  end
  function core.settings() return { seed = 3, draws = 100 } end
  function core.unbound_made(n)
    made = n or made
    return made
  end
  function core.unbound_hold() end
  function core.raise(message) error(message, 0) end
  function core.shown(value) return tostring(value) end
  function core.write_file(path, text) files[path] = text end
  core.version = "1"
  return core.part "lacuna.session", core.part "lacuna.notebook", files
end

-- What an input returns, or its error.
local function answer(session, text)
  local chunk, message = session.compile(text, "=prompt")
  if not chunk then return message end
  local results = table.pack(pcall(chunk))
  session.ran(text, results[1], results[1] and results.n - 1 or 0)
  return table.unpack(results, 2, results.n)
end

-- Runs the inputs one after the other, and all of them as one script; both must leave the same list `seen`.
local function same_as_script(inputs, label)
  local session = fresh()
  seen = {}
  for _, text in ipairs(inputs) do
    local message = answer(session, text)
    t.equal(message, nil, text)
  end
  local got = seen
  seen = {}
  assert(load(table.concat(inputs, "\n"), "=script"))()
  t.equal(got, seen, label or inputs[1])
  t.equal(#got > 0, true, "something was seen")
  return session
end

local function see(...) table.insert(seen, table.pack(...)) end
_G.see = see

t.test("locals in all forms", function()
  same_as_script { "local a = 1", "see(a)" }
  same_as_script { "local a, b, c = 1, 2", "see(a, b, c)", "c = 3", "see(a, b, c)" }
  same_as_script { "local a", "see(a)", "a = 5", "see(a)", "see(_G.a)" }
  same_as_script { "local a = 1 local b = a + 1 local c", "see(a, b, c)" }
  same_as_script { "local a, b = (function() return 4, 5 end)()", "see(a, b)" }
  same_as_script { "local a = 1; local b = 2;", "see(a, b)" }
  same_as_script { "local a = 7 -- local b = 8", "see(a, b)" }
  same_as_script { "local a = 2 --[[ local b = 3\n]] local c = 4", "see(a, b, c)" }
  same_as_script { "local function fact(n) return n < 2 and 1 or n * fact(n - 1) end", "see(fact(5))" }
  same_as_script { "local see_all = see", "see_all(1)" }
end)

t.test("the right side is evaluated before the name is declared", function()
  same_as_script { "local a = 1", "local a = a + 1", "local a = a * 10", "see(a)" }
  same_as_script { "local print = print", "see(print)", "local print = nil", "see(print)", "see(_G.print ~= nil)" }
  same_as_script { "local a, b = 1, 2", "local a, b = b, a", "see(a, b)", "a, b = b, a", "see(a, b)" }
end)

t.test("closures keep their variable", function()
  same_as_script { "local a = 1", "local function f() return a end", "a = 2", "see(f())", "local a = 3", "see(f(), a)", "a = 4", "see(f(), a)" }
  same_as_script { "local n = 0", "local function count() n = n + 1 return n end", "count() count()", "see(n)" }
  same_as_script { "function outer() return au_ end", "au_ = 5", "local au_ = 6", "see(outer(), au_)", "au_ = 7", "see(outer(), au_, _G.au_)" }
  same_as_script { "local a = 1 function get() return a end local a = 2 function get2() return a end", "see(get(), get2(), a)", "a = 9", "see(get(), get2())" }
  same_as_script { "local fs = {}", "for i = 1, 3 do fs[i] = function() return i end end", "see(fs[1](), fs[3]())" }
  same_as_script { "local a = 1", "local function f() return function() a = a + 1 return a end end", "local g = f()", "see(g(), g(), a)" }
  _G.au_, _G.outer, _G.get, _G.get2 = nil, nil, nil, nil
end)

t.test("only what stands outside all blocks is shared", function()
  same_as_script { "do local a = 1 end", "see(a)" }
  same_as_script { "for i = 1, 2 do local a = i see(a) end", "see(i, a)" }
  same_as_script { "for key, value in pairs { 5 } do local a = key see(key, value) end", "see(key, value, a)" }
  same_as_script { "local i = 0", "repeat local done = i > 2; i = i + 1 until done", "see(i, done)" }
  same_as_script { "local i = 0", "while i < 3 do local step = 1; i = i + step end", "see(i, step)" }
  same_as_script { "if true then local a = 1 elseif false then local a = 2 else local a = 3 end", "see(a)" }
  same_as_script { "local object = { n = 1 }", "function object:add(k) local n = self.n self.n = n + k end", "object:add(4)", "see(object.n, n)" }
  same_as_script { "local f = function() local inner = 1 return inner end local g = 2", "see(inner, g, f())" }
  same_as_script { "local q = { f = function() local a = 1 return a end, [1] = (function() local b = 2 return b end)() }", "see(q.f(), q[1], a, b)" }
end)

t.test("words in strings, comments and long brackets are none", function()
  same_as_script { "local a = 'local b = 2 end' local c = \"do\\\" local d = 1\"", "see(a, b, c, d)" }
  same_as_script { "local a = [[local b = 1 end]] local c = [==[ ]] function ]==]", "see(a, b, c)" }
  same_as_script { "local a = 'one\\z\n   two' --[==[ function ]] do ]==] local b = 2", "see(a, b)" }
  same_as_script { "local a --[[ first ]], --[[ then ]] b = 1, 2", "see(a, b)" }
  same_as_script { "local s = 'it' .. \"'s\" .. [[ \"]]", "see(s)" }
end)

t.test("where a statement ends", function()
  same_as_script { "local a = 1 + 2 * 3 ^ 2 .. 'x' local b = not nil", "see(a, b)" }
  same_as_script { "local a = -3 // 2 local b = ~5 ~ 3 local c = 1 << 4 >> 2 local d = 7 & 3 | 8", "see(a, b, c, d)" }
  same_as_script { "local a = 0x1p4 + 0xA.8p-1 local b = 3e-2 + .5 local c = 5.", "see(a, b, c)" }
  same_as_script { "local a = ('x'):rep(3) local b = #'four' local c = {1, 2}", "see(a, b, #c)" }
  same_as_script { "local a = 1\n;(see)(a) local b = type 'x' == nil", "see(b)" }
  same_as_script { "local upper = string.upper", "local a = upper 'abc' local b = upper [[x]] local c = (upper)('d'):lower() local d = ({ 'e' })[1]", "see(a, b, c, d)" }
  same_as_script { "local a = 5\n(see or print)(1)" }
  same_as_script { "local a = function() return 1 end local b = a() + a()", "see(a() + b)" }
  same_as_script { "local a <const>, b = 1, 2", "see(a, b)" }
  same_as_script { "local a = 1 goto over do see 'skipped' end ::over:: local b = 2", "see(a, b)" }
  same_as_script { "local n = 0 ::top:: n = n + 1 if n < 3 then goto top end", "see(n)" }
  same_as_script { "local a = ... local b = select('#', ...)", "see(a, b)" }
  same_as_script { "local a, b = 2, 1 local c = a <= b, a ~= b local d = a == b or a and b", "see(a, b, c, d)" }
end)

t.test("attributes", function()
  local session = same_as_script { "local k <const> = 5", "see(k)", "local t <const> = { 1 }", "t[1] = 2", "see(t[1])", "local function f() return k end", "see(f())" }
  t.equal(answer(session, "k = 6"), "prompt:1: attempt to assign to const variable 'k'")
  t.equal(answer(session, "function g() t = nil end"), "prompt:1: attempt to assign to const variable 't'")
  t.equal(answer(session, "return k, t[1]"), 5)
  t.equal(answer(session, "local k = 7"), nil)
  t.equal(answer(session, "k = k + 1 return k"), 8, "a second one may change")
  closed = nil
  session = fresh()
  t.equal(answer(session, "local a <close> = setmetatable({}, { __close = function() closed = true end }) local b = 3"), nil)
  t.equal(closed, true, "what is to be closed is closed when its input ends")
  t.equal(answer(session, "a"), nil, "and is gone then")
  t.equal(answer(session, "b"), 3, "its neighbours stay")
  t.equal(answer(session, "local _ENV = { x = 1 } local y = x"), nil)
  t.equal(answer(session, "y"), 1, "an environment of its own ends with the input")
  t.equal(answer(session, "type(print)"), "function")
  closed = nil
end)

t.test("errors name the line that was typed", function()
  local session = fresh()
  answer(session, "local a, b = 1, 2")
  t.equal(answer(session, "local c = a\nlocal d = b\nerror 'third'"), "prompt:3: third")
  t.equal(answer(session, "local x\n\nx = nil + a"), "prompt:3: attempt to perform arithmetic on a nil value")
  t.equal(answer(session, "c + d"), 3, "what was declared before the error stays")
  t.equal(answer(session, "x = = 1"), "prompt:1: unexpected symbol near '='")
  t.equal(answer(session, "end return function()"), "prompt:1: <eof> expected near 'end'")
  t.equal(answer(session, "1 +\n* 2"), "prompt:2: unexpected symbol near '*'", "the mistake of an expression, not that it is no statement")
  t.equal(answer(session, "{1, 2,, 3}"), "prompt:1: unexpected symbol near ','")
  t.equal(answer(session, "x = = 3"), "prompt:1: unexpected symbol near '='")
  for _, beginning in ipairs { "local a =", "for i = 1, 2 do", "f(", "local function f()", "x = {", "if a then", "1 +" } do
    local chunk, message = session.compile(beginning, "=prompt")
    t.equal(chunk, nil)
    t.equal(message:find "<eof>$" ~= nil, true, beginning)
  end
  t.equal(answer(session, "-- only a comment"), nil)
  t.equal(answer(session, "a -- and a comment"), 1)
end)

-- One statement of a random program, of few names, so that they are declared again and again.
local function random_statement(random)
  local function name() return ("abcd"):sub(random(4)):sub(1, 1) end
  local function value() return ({ name(), tostring(random(9)), name() .. " or " .. random(9), "f and f() or " .. name(), "'local a = 1'" })[random(5)] end
  local forms = {
    function() return ("local %s = %s"):format(name(), value()) end,
    function() return ("local %s, %s = %s, %s"):format(name(), name() .. "2", value(), value()) end,
    function() return "local " .. name() end,
    function() return ("%s = %s"):format(name(), value()) end,
    function() return ("local function f() return %s or %d end"):format(name(), random(9)) end,
    function() return ("do local %s = %s see(a, b, c, d) end"):format(name(), value()) end,
    function() return ("function _G.set(x) %s = x end"):format(name()) end,
    function() return ("if set then set(%s) end"):format(value()) end,
    function() return "see(a, b, c, d, f and f())" end,
  }
  return forms[random(#forms)]()
end

t.test("random programs do as inputs, and read again, what they do as a script", function()
  local function clear() a, b, c, d, f, set, f2 = nil, nil, nil, nil, nil, nil, nil end
  math.randomseed(20)
  local file = os.tmpname()
  for round = 1, 200 do
    local inputs = {}
    for i = 1, 12 do inputs[i] = random_statement(math.random) end
    inputs[13] = "see(a, b, c, d)"
    clear()
    local text, session = table.concat(inputs, math.random(2) == 1 and "\n" or "\n -- local a = 0\n"), fresh()
    seen = {}
    local good, trouble = pcall(assert(load(text, "=script")))
    local want = seen
    clear()
    seen = {}
    local got_trouble
    for _, input in ipairs(inputs) do
      got_trouble = answer(session, input)
      if got_trouble then break end
    end
    t.equal({ got_trouble == nil, seen }, { good, want }, ("round %d: %s; %s, %s"):format(round, text, trouble, got_trouble))
    clear()
    seen = {}
    io.open(file, "w"):write(text):close()
    session, notebook = fresh()
    again = notebook.again
    got_trouble = answer(session, ("again %q"):format(file))
    t.equal({ got_trouble == nil, seen }, { good, want }, ("round %d, read again: %s; %s, %s"):format(round, text, trouble, got_trouble))
  end
  os.remove(file)
  clear()
  again, notebook = nil, nil
end)

t.test("what completion looks names up in", function()
  local session = fresh()
  answer(session, "local first, second = 1")
  t.equal(session.environment[1], { first = 1 })
  answer(session, "second = 2")
  t.equal(session.environment[1], { first = 1, second = 2 })
  t.equal(session.environment[2], _G)
end)

-- The script of a session in which these inputs were typed, without its first line; and what the session printed.
local function kept(...)
  local printed, print = {}, print
  _G.print = function(...) printed[#printed + 1] = table.concat({ ... }, " ") end
  local session, notebook, files = fresh() -- the notebook knows this print as the usual one
  keep, again = notebook.keep, notebook.again
  for _, text in ipairs { ... } do answer(session, text) end
  answer(session, "keep 'out.lua'")
  _G.print, keep, again = print, nil, nil
  return files["out.lua"]:gsub("^[^\n]*\n", ""), printed
end

t.test("keep: what was typed, without what failed", function()
  local head = "settings { seed = 3, draws = 100 }\n\n"
  t.equal(kept("local a = 1", "a", "a + ", "b.c = 1", "a, 2 -- two"), head .. "local a = 1\nprint(show(a))\nprint(show(a, 2)) -- two\n")
  t.equal(kept("return 5", "return", "local z = 3 return z;", "(type)(1)", "('x'):rep(2);"),
    head .. "print(show(5))\nlocal z = 3 print(show(z))\nprint(show((type)(1)))\nprint(show(('x'):rep(2)))\n")
  t.equal(kept("type(1) -- [[ note", "-- note", "table.unpack {}", "select(2, 1), nil"),
    head .. "print(show(type(1))) -- [[ note\n-- note\ntable.unpack {}\nprint(show(select(2, 1), nil))\n")
  t.equal(kept("do goto over end local x = 1 ::over::", "x"), head .. "-- left out: jumps in a way that a script can't: do goto over end local x = 1 ::over::\nprint(show(x))\n")
  t.equal(kept("if true then return 7 end", "local y = 2 ::here::", "y"),
    head .. "print(show((function()\nif true then return 7 end\nend)()))\nlocal y = (function()\nlocal y = 2 ::here::\nreturn y\nend)()\nprint(show(y))\n")
  t.equal(kept("local print = print", "local show = 5", "show"), head:gsub("\n\n", "\n" ..
    "local print_shown = (function(print, show) return function(...) print(show(...)) end end)(print, show)\n\n") ..
    "local print = print\nlocal show = 5\nprint_shown(show)\n")
  t.equal(kept("again 'nowhere'", "help 'x'", "keep 'other'", "more()"), head)
  local text, printed = kept("a_global = 1 error 'x'")
  t.equal(text, head .. "-- left out: failed after it had set a_global: a_global = 1 error 'x'\n")
  t.equal(printed[2], "  left out: failed after it had set a_global: a_global = 1 error 'x'")
  a_global = nil
end)

t.test("keep: a script of many locals runs", function()
  local inputs, sum = {}, 0
  for i = 1, 50 do inputs[i] = ("local a%d, b%d, c%d, d%d, e%d, f%d = %d"):format(i, i, i, i, i, i, i) end
  inputs[51] = "many_sum = a1 + a25 + a50"
  local text = kept(table.unpack(inputs))
  many_sum = nil
  local environment = setmetatable({ settings = function() end }, { __index = _G })
  assert(load(text, "=script", "t", environment))()
  t.equal(environment.many_sum, 76)
end)

t.test("free spreads: a failed input gives its numbers back, or the script skips them", function()
  local session = fresh()
  local function skips_after(text)
    answer(session, text)
    local last = session.inputs[#session.inputs]
    return last.text == text and last.skips
  end
  t.equal(skips_after "local s = make_spread()", nil, "one that doesn't fail")
  t.equal(skips_after "local u = make_spread() + 1", false, "one assignment, failed: given back")
  t.equal(skips_after "make_spread() + 1", false, "an expression: given back")
  t.equal(skips_after "local v = make_spread() error 'x'", 1, "v lives on")
  t.equal(skips_after "s.x = make_spread(); error 'x'", 1, "it may live on in a table")
  t.equal(kept("a = 1", "for i = 1, 2 do make_spread() end error 'x'", "a"),
    "settings { seed = 3, draws = 100 }\n\na = 1\nfor _ = 1, 2 do spread.uniform(0, 1) end -- as many as what is left out had made\nprint(show(a))\n")
  a = nil
end)

seen, _G.see, make_spread = nil, nil, nil
t.finish()
