-- SPDX-License-Identifier: GPL-3.0-or-later
-- The grammar of equations (equation.lua says how they are written and renders them): tokens, the tree, and Unicode for its signs.
--
--   parse(text)       the tree; an error with the position for anything outside the subset
--   names(tree)       the names that stand in it, each once, in order
--   greek, relations, products, series   the signs by their TeX
--
-- A node is a table with its kind and its parts in order: list, relation, sum, product (with signs[i] before the i-th part), fraction,
-- root, dot, bracket, call, series, scripts (the base; above and below), number, letter, greek, word, name, function, series_sign, label.

local greek = {
  alpha = "α", beta = "β", gamma = "γ", delta = "δ", epsilon = "ε", varepsilon = "ε", zeta = "ζ", eta = "η", theta = "θ",
  vartheta = "ϑ", iota = "ι", kappa = "κ", lambda = "λ", mu = "μ", nu = "ν", xi = "ξ", pi = "π", varpi = "ϖ", rho = "ρ",
  varrho = "ϱ", sigma = "σ", tau = "τ", upsilon = "υ", phi = "ϕ", varphi = "φ", chi = "χ", psi = "ψ", omega = "ω",
  Gamma = "Γ", Delta = "Δ", Theta = "Θ", Lambda = "Λ", Xi = "Ξ", Pi = "Π", Sigma = "Σ", Upsilon = "Υ", Phi = "Φ", Psi = "Ψ",
  Omega = "Ω", ell = "ℓ",
}
local functions = {
  ln = true, log = true, exp = true, cos = true, sin = true, tan = true, arccos = true, arcsin = true, arctan = true,
  tanh = true, min = true, max = true,
}
local relations = {
  ["="] = "=", ["<"] = "<", [">"] = ">", ["<="] = "≤", [">="] = "≥", ["\\le"] = "≤", ["\\ge"] = "≥", ["\\approx"] = "≈",
  ["\\propto"] = "∝",
}
local products = { ["\\cdot"] = "·", ["\\times"] = "×", ["/"] = "/" }

local series = { ["\\sum"] = "∑", ["\\int"] = "∫" }

local tree = { greek = greek, relations = relations, products = products, series = series }

-- Tokens: { kind, text, at }. Kinds: number, letter, command, name, word (\mathrm, \mathcal: with its command), symbol, end.

local function complain(text, at, format, ...)
  error(("equation '%s', position %d: %s"):format(text, at, format:format(...)), 0)
end

local function one_token(text, at)
  local number = text:match("^%d+%.%d+", at) or text:match("^%d+", at)
  if number then
    if text:find("^[eE][-+]?%d", at + #number) then complain(text, at, "write 1\\times10^{-3}, not 1e-3") end
    return "number", number, #number
  end
  if text:find("^%a", at) then return "letter", text:sub(at, at), 1 end
  local name = text:match("^%[([%a_][%w_]*)%]", at)
  if name then return "name", name, #name + 2 end
  local command, word = text:match("^\\(math%a+){([%w ,.-]*)}", at)
  if command == "mathrm" or command == "mathcal" then return "word", word, #command + #word + 3, command end
  command = text:match("^\\%a+", at)
  if command == "\\mathrm" or command == "\\mathcal" then complain(text, at, "%s wants plain letters in braces", command) end
  if command then return "command", command, #command end
  local pair = text:match("^[<>]=", at)
  if pair then return "symbol", pair, 2 end
  local symbol = text:match("^[-+*/=<>(){}^_,%[%]]", at)
  if symbol == "[" then
    if text:sub(1, at - 1):find("\\left%s*$") then return "symbol", "[", 1 end
    complain(text, at, "a name in square brackets was expected")
  end
  if symbol then return "symbol", symbol, 1 end
  complain(text, at, "'%s' is not understood", text:match("^\\?" .. utf8.charpattern, at) or text:sub(at, at))
end

local function tokens_of(text)
  local tokens, at = {}, 1
  while true do
    at = text:find("%S", at)
    while at and text:find("^\\,", at) do at = text:find("%S", at + 2) end
    if not at then break end
    local kind, piece, length, command = one_token(text, at)
    tokens[#tokens + 1] = { kind = kind, text = piece, at = at, after = at + length, command = command }
    at = at + length
  end
  tokens[#tokens + 1] = { kind = "end", text = "the end", at = #text + 1, after = #text + 1 }
  return tokens
end

-- The parser: recursive descent over the tokens.

local Parser = {}
Parser.__index = Parser

function Parser:peek() return self.tokens[self.next] end

function Parser:is(text)
  local token = self:peek()
  return (token.kind == "symbol" or token.kind == "command") and token.text == text
end

function Parser:take()
  local token = self:peek()
  self.next = self.next + 1
  return token
end

function Parser:complain(format, ...) complain(self.text, self:peek().at, format, ...) end

function Parser:expect(text)
  if not self:is(text) then self:complain("'%s' was expected, not %s", text, self:peek().text) end
  return self:take()
end

-- What stands below a symbol: words, numbers, Greek letters, marks, and powers of these.
function Parser:label_part()
  local token = self:peek()
  if token.kind == "letter" or token.kind == "number" or token.kind == "word" then
    local words = {}
    while token.kind == "letter" or token.kind == "number" or token.kind == "word" or self:is(",") do
      words[#words + 1] = self:take().text
      token = self:peek()
    end
    return { kind = "text", text = table.concat(words) }
  end
  if token.kind == "command" and greek[token.text:sub(2)] then return { kind = "greek", text = self:take().text } end
  if self:is("*") or self:is(",") then return { kind = "text", text = self:take().text } end
  if self:is("-") or self:is("+") or self:is("=") then return { kind = "mark", text = self:take().text } end
  if self:is("^") then
    self:take()
    return { kind = "raised", self:above() }
  end
  self:complain("%s can't stand in a subscript", token.text)
end

function Parser:below()
  local label = { kind = "label" }
  local start = self:peek().at
  if not self:is("{") then
    local token = self:take()
    local command = token.kind == "command" and greek[token.text:sub(2)]
    if not (command or token.kind == "letter" or token.text == "*" or token.text:find("^%d$")) then
      complain(self.text, token.at, "one character or braces were expected after _")
    end
    label[1] = { kind = command and "greek" or "text", text = token.text }
  else
    self:take()
    repeat label[#label + 1] = self:label_part() until self:is("}")
    self:take()
  end
  label.source = self.text:sub(start, self.tokens[self.next - 1].after - 1)
  return label
end

function Parser:above()
  if self:is("{") then
    self:take()
    local inside = self:is("*") and { kind = "label", source = "*", { kind = "text", text = self:take().text } } or self:sum()
    self:expect("}")
    return inside
  end
  local token = self:peek()
  if self:is("*") then return { kind = "label", source = "*", { kind = "text", text = self:take().text } } end
  if token.kind == "number" and #token.text > 1 then self:complain("put braces around %s", token.text) end
  if token.kind ~= "number" and token.kind ~= "letter" and token.kind ~= "name" and not greek[token.text:sub(2)] then
    self:complain("one character or braces were expected after ^")
  end
  return self:base()
end

-- Scripts onto a base, at most one of each.
function Parser:scripts(base)
  local above, below
  while self:is("^") or self:is("_") do
    local up = self:is("^")
    if up and above or not up and below then self:complain("a second %s: use braces or brackets", up and "^" or "_") end
    self:take()
    if up then above = self:above() else below = self:below() end
  end
  if not above and not below then return base end
  return { kind = "scripts", base, above = above, below = below }
end

function Parser:bracket()
  local big = self:is("\\left")
  if big then self:take() end
  local open = self:take().text
  if open ~= "(" and open ~= "[" then
    self.next = self.next - 1
    self:complain("( or [ was expected")
  end
  local node = { kind = "bracket", open = open, close = open == "(" and ")" or "]", big = big }
  repeat node[#node + 1] = self:relation() until not (self:is(",") and self:take())
  if big then self:expect("\\right") end
  self:expect(node.close)
  return node
end

function Parser:at_bracket() return self:is("(") or self:is("\\left") end

function Parser:at_function() return self:peek().kind == "command" and functions[self:peek().text:sub(2)] or false end

-- An argument without brackets is one factor; what follows it must not look like more of it.
function Parser:call()
  local name = self:take().text:sub(2)
  local scripts = self:scripts({ kind = "function", name = name })
  if self:at_bracket() then
    local call = { kind = "call", scripts, self:bracket() }
    if self:is("^") then self:complain("is it the power of \\%s or of its argument? Write \\%s^2 or more brackets", name, name) end
    return call
  end
  if not self:at_factor() or self:at_function() then self:complain("an argument of \\%s was expected", name) end
  local argument = self:scripts(self:base())
  if self:at_factor() and not self:at_function() then self:complain("put the argument of \\%s in brackets", name) end
  return { kind = "call", scripts, argument }
end

function Parser:braced()
  self:expect("{")
  local inside = self:sum()
  self:expect("}")
  return inside
end

local commands = {
  ["\\frac"] = function(parser) return { kind = "fraction", parser:braced(), parser:braced() } end,
  ["\\sqrt"] = function(parser) return { kind = "root", parser:braced() } end,
  ["\\dot"] = function(parser) return { kind = "dot", parser:braced() } end,
}

function Parser:base()
  local token = self:peek()
  if self:at_bracket() then return self:bracket() end
  if self:is("{") then return self:braced() end
  local word = token.kind == "letter" and self.text:match("^%a+", token.at)
  if functions[word] then self:complain("write \\%s for the function", word) end
  if token.kind == "number" or token.kind == "letter" or token.kind == "name" or token.kind == "word" then
    self:take()
    return { kind = token.kind, text = token.text, command = token.command }
  end
  if token.kind == "command" then
    if greek[token.text:sub(2)] then return { kind = "greek", text = self:take().text } end
    if commands[token.text] then
      self:take()
      return commands[token.text](self)
    end
  end
  self:complain("%s is out of place", token.text)
end

function Parser:at_factor()
  local token = self:peek()
  if token.kind == "symbol" then return token.text == "(" or token.text == "{" end
  if token.kind ~= "command" then return token.kind ~= "end" end
  return token.text ~= "\\right" and not products[token.text] and not relations[token.text]
end

function Parser:factor()
  if self:at_function() then return self:call() end
  if self:is("\\sum") or self:is("\\int") then
    local sign = self:scripts({ kind = "series_sign", text = self:take().text })
    return { kind = "series", sign, self:product() }
  end
  return self:scripts(self:base())
end

function Parser:product()
  local node = { kind = "product", self:factor(), signs = {} }
  while true do
    local sign = self:peek().text
    if products[sign] and (self:is(sign)) then
      self:take()
    elseif self:at_factor() then
      sign = ""
    else
      break
    end
    node[#node + 1] = self:factor()
    node.signs[#node] = sign
  end
  return #node > 1 and node or node[1]
end

function Parser:sum()
  local node = { kind = "sum", signs = {} }
  repeat
    local sign = (self:is("+") or self:is("-")) and self:take().text or nil
    node[#node + 1] = self:product()
    node.signs[#node] = sign or ""
  until not (self:is("+") or self:is("-"))
  return (#node > 1 or node.signs[1] ~= "") and node or node[1]
end

function Parser:relation()
  local node = { kind = "relation", self:sum(), signs = {} }
  while relations[self:peek().text] do
    local sign = self:take().text
    node[#node + 1] = self:sum()
    node.signs[#node] = sign
  end
  return #node > 1 and node or node[1]
end

-- After a comma may stand what abbreviations in the first relation mean.
function Parser:whole()
  local list = { kind = "list" }
  repeat list[#list + 1] = self:relation() until not (self:is(",") and self:take())
  if self:peek().kind ~= "end" then self:complain("%s is out of place", self:peek().text) end
  return #list > 1 and list or list[1]
end

function tree.parse(text)
  local parser = setmetatable({ text = text, tokens = tokens_of(text), next = 1 }, Parser)
  return parser:whole()
end

function tree.names(whole)
  local list, seen = {}, {}
  local function walk(node)
    if node.kind == "name" and not seen[node.text] then
      seen[node.text] = true
      list[#list + 1] = node.text
    end
    for _, child in ipairs(node) do walk(child) end
    if node.above then walk(node.above) end
  end
  walk(whole)
  return list
end

return tree
