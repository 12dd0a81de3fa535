-- SPDX-License-Identifier: GPL-3.0-or-later
-- Equations. They are written once, in a small subset of TeX, with the quantities' names in square brackets:
--
--   [hill_radius] = [planet_semi_major_axis] \left(\frac{[planet_star_mass_ratio]}{3}\right)^{1/3}
--
-- Here they are parsed into a tree, which is rendered as TeX, as plain text in Unicode, and as MathML. The renderers ask the
-- caller for each name's symbol, or, in plain text, for its value just as well, and set brackets where the answer needs them.
--
--   parse(text)                 the tree; an error with the position for anything outside the subset. All below take text or tree.
--   tex(equation, symbol_of)    symbol_of(name): TeX of a symbol or of a value ("5\\,\\mathrm{au}")
--   plain(equation, text_of)    text_of(name): plain text of a symbol ("M_p") or of a value ("5 au")
--   mathml(equation, symbol_of) symbol_of(name): TeX, of the subset; or nil and a value in MathML; one <math> element
--   plain_symbol(tex)           "\\theta_{gap,arr}" as "θ_gap,arr", "M_*" as "M*"
--   marked_symbol(tex)          the same with marks for gnuplot, "{/:Italic θ}_{gap,arr}"
--   names(equation)             the names that stand in it, each once, in order
--
-- The subset: relations apart by commas; numbers, letters, [names], + - / = < > <= >= \le \ge \approx \propto \cdot \times, ( ) \left( \right) \left[ \right],
-- { }, ^ and _, \frac, \sqrt, \dot, \mathrm, \mathcal, \sum, \int, \, (a space), Greek letters, and the functions that equation_tree.lua lists.

-- Inside the program the parts come from the binary, elsewhere from files.
local core = ...
local tree = type(core) == "table" and core.part "lacuna.equation_tree" or require "equation_tree"
local greek, relations, products = tree.greek, tree.relations, tree.products

local equation = { parse = tree.parse }

local function tree_of(either) return type(either) == "string" and tree.parse(either) or either end

function equation.names(either) return tree.names(tree_of(either)) end

-- Renderers are tables of functions by kind. Each takes the node and the context (symbol_of, and itself as render), and returns
-- the text and how tightly it binds, so that the one above knows whether it needs brackets.
local SUM, PRODUCT, VALUE, TIGHT, ATOM = 1, 2, 3, 4, 5

local function renderer(kinds, lookup)
  local function render(node) return kinds[node.kind](node, render, lookup) end
  return render
end

-- All parts, each bracketed where it binds less than wanted.
local function bracketed(text, binds, wanted, open, close)
  if binds >= wanted then return text end
  return (open or "(") .. text .. (close or ")")
end

local function joined(node, render, between)
  local parts = {}
  for i, child in ipairs(node) do
    if i > 1 or node.signs[i] and node.signs[i] ~= "" then parts[#parts + 1] = between(node.signs[i], i) end
    parts[#parts + 1] = render(child)
  end
  return table.concat(parts)
end

-- Plain text.

local raised_digits = {
  ["0"] = "⁰", ["1"] = "¹", ["2"] = "²", ["3"] = "³", ["4"] = "⁴", ["5"] = "⁵", ["6"] = "⁶", ["7"] = "⁷", ["8"] = "⁸",
  ["9"] = "⁹", ["-"] = "⁻", ["/"] = "ᐟ",
}

-- Integers and halves are set as superscripts, which fonts have; a third as ^(1/3), which can be read.
local function power(text, binds)
  if text:find("^%-?%d+$") or text:find("^%-?%d+/2$") then return (text:gsub(".", raised_digits)) end
  return "^" .. bracketed(text, binds, ATOM)
end

-- How tightly a symbol or a value binds that the caller gave as text.
local function binds_of(text)
  if text:find("^[-+]") or text:find("^−") or text:find(" [-+]") or text:find(" ±", 1, true) or text:find(" −", 1, true) then
    return SUM
  end
  if text:find(" ", 1, true) then return text:find("^%d") and VALUE or PRODUCT end
  if text:find("/", 1, true) then return PRODUCT end
  if text:find("^%d+%.?%d*$") or text:find("^%a[%w_,*]*$") then return ATOM end
  local first = text:match("^" .. utf8.charpattern) or ""
  local rest = text:sub(#first + 1):gsub("^\u{307}", "")
  local one_symbol = rest == "" or rest == "*" or rest:find("^_[%w,*]+$") or rest:find("^_[%w,]*[\xce\xcf][\x80-\xbf]$")
  return one_symbol and not first:find("%d") and ATOM or TIGHT
end

-- Whether a number was put in for a name somewhere below.
local function has_value(node, text_of)
  if node.kind == "name" then
    local text = text_of(node.text)
    return text:find("^[-(]?%d") and not text:find("^%S+ [-+] ") -- 1 - V² is a symbol
  end
  for _, child in ipairs(node) do
    if has_value(child, text_of) then return true end
  end
  return false
end

-- A unit stands behind its number or behind another unit.
local function is_unit(node) return node.kind == "word" or node.kind == "scripts" and node[1].kind == "word" end

local plain = {}

function plain.number(node) return node.text, ATOM end
function plain.letter(node) return node.text, ATOM end
function plain.greek(node) return greek[node.text:sub(2)], ATOM end
function plain.word(node) return node.text, ATOM end
function plain.name(node, _, text_of)
  local text = text_of(node.text)
  return text, binds_of(text)
end

function plain.label(node, render)
  local parts, compound = {}, false
  for i, part in ipairs(node) do
    if part.kind == "raised" then parts[i] = power(render(part[1]))
    elseif part.kind == "greek" then parts[i] = greek[part.text:sub(2)]
    else parts[i] = part.text end
    compound = compound or part.kind == "raised" or part.kind == "mark"
  end
  return table.concat(parts), compound and SUM or ATOM
end

plain["function"] = function(node) return node.name, ATOM end
function plain.series_sign(node) return tree.series[node.text], ATOM end

function plain.scripts(node, render)
  local base, binds = render(node[1])
  local text = bracketed(base, binds, ATOM)
  if node.below then
    local label, label_binds = render(node.below)
    text = text .. (label == "*" and "*" or "_" .. bracketed(label, label_binds, ATOM))
  end
  if not node.above then return text, ATOM end
  if node.above.kind == "label" then return text .. render(node.above), ATOM end
  return text .. power(render(node.above)), TIGHT
end

-- Brackets that group one thing are set again where they are needed; lists of arguments keep theirs.
function plain.bracket(node, render)
  if #node == 1 then return render(node[1]) end
  local items = {}
  for i, item in ipairs(node) do items[i] = render(item) end
  return "(" .. table.concat(items, ", ") .. ")", ATOM
end

function plain.call(node, render)
  local argument = render(node[2])
  if not (node[2].kind == "bracket" and #node[2] > 1) then argument = "(" .. argument .. ")" end
  return (render(node[1])) .. argument, TIGHT
end

function plain.series(node, render)
  local term, binds = render(node[2])
  return (render(node[1])) .. " " .. bracketed(term, binds, PRODUCT), PRODUCT
end

function plain.root(node, render)
  local inside, binds = render(node[1])
  return "√" .. bracketed(inside, binds, ATOM), TIGHT
end

function plain.dot(node, render)
  local inside, binds = render(node[1])
  return inside == "M" and "Ṁ" or bracketed(inside, binds, ATOM) .. "\u{307}", ATOM
end

-- a/b, or with spaces where a part has some. A product above needs no brackets, one below does.
local function over(above, above_binds, below, below_binds)
  above, below = bracketed(above, above_binds, PRODUCT), bracketed(below, below_binds, TIGHT)
  local loose = (above .. below):find(" ", 1, true)
  return above .. (loose and " / " or "/") .. below
end

function plain.fraction(node, render)
  local above, above_binds = render(node[1])
  return over(above, above_binds, render(node[2])), PRODUCT
end

-- Symbols side by side are set apart by a space, numbers put in for them by a dot.
function plain.product(node, render, text_of)
  local beside = has_value(node, text_of) and " · " or " "
  local text, binds = render(node[1])
  text = bracketed(text, binds, node.signs[2] == "/" and PRODUCT or VALUE)
  for i = 2, #node do
    local sign = node.signs[i]
    local part, part_binds = render(node[i])
    if sign == "/" then
      text = over(text, PRODUCT, part, part_binds)
    else
      if node.signs[i - 1] == "/" then text = "(" .. text .. ")" end
      local mark = sign ~= "" and " " .. products[sign] .. " " or is_unit(node[i]) and " " or beside
      text = text .. mark .. bracketed(part, part_binds, VALUE)
    end
  end
  return text, PRODUCT
end

function plain.sum(node, render)
  local parts = {}
  for i, item in ipairs(node) do
    local text, binds = render(item)
    local sign = node.signs[i]
    parts[#parts + 1] = (i > 1 and " " .. sign .. " " or sign) .. bracketed(text, binds, PRODUCT)
  end
  return table.concat(parts), SUM
end

function plain.relation(node, render)
  return joined(node, function(child) return (render(child)) end, function(sign) return " " .. relations[sign] .. " " end), 0
end

function plain.list(node, render)
  local items = {}
  for i, item in ipairs(node) do items[i] = render(item) end
  return table.concat(items, ", "), 0
end

function equation.plain(either, text_of) return (renderer(plain, text_of)(tree_of(either))) end

local function no_names(name) error(("a symbol can't have the name [%s] in it"):format(name), 0) end

-- A symbol, rendered by these kinds.
local function symbol(kinds, tex)
  local whole = tree.parse(tex)
  local render = renderer(kinds, no_names)
  -- Letters side by side in a symbol are one word or an increment: St, Δv.
  if whole.kind == "product" then
    local parts, together = {}, true
    for i, factor in ipairs(whole) do
      parts[i] = render(factor)
      together = together and (whole.signs[i] or "") == ""
    end
    if together then return table.concat(parts) end
  end
  return (render(whole))
end

function equation.plain_symbol(tex) return symbol(plain, tex) end

-- Text with marks for figures, as gnuplot's enhanced text has them: _{} and ^{}, with @ one above the other, and italics. What it shares with
-- plain text is taken from there.

local marked = setmetatable({}, { __index = plain })

local function italic(text) return "{/:Italic " .. text .. "}" end

function marked.letter(node) return italic(node.text), ATOM end
function marked.greek(node)
  local sign = greek[node.text:sub(2)]
  return node.text:find "^\\%l" and italic(sign) or sign, ATOM
end
function marked.dot(node) return italic((plain.dot(node, renderer(plain, no_names)))), ATOM end

function marked.label(node)
  local parts = {}
  for i, part in ipairs(node) do
    parts[i] = part.kind == "raised" and "^{" .. renderer(plain, no_names)(part[1]) .. "}" or part.kind == "greek" and greek[part.text:sub(2)] or part.text
  end
  return table.concat(parts), ATOM
end

function marked.scripts(node, render)
  local base, binds = render(node[1])
  base = bracketed(base, binds, ATOM)
  local below = node.below and "_{" .. render(node.below) .. "}" or ""
  if not node.above then return base .. below, ATOM end
  local above = "^{" .. render(node.above) .. "}"
  return base .. (below ~= "" and "@" or "") .. above .. below, TIGHT
end

function equation.marked_symbol(tex) return symbol(marked, tex) end

-- TeX.

-- How tightly a symbol in TeX binds: one letter, command or group with its scripts is an atom, with a ^ among them only tight.
local function tex_binds_of(symbol)
  local function skip_piece(at)
    local command = symbol:match("^\\%a+()", at)
    if command then
      local after = symbol:match("^%b{}()", command)
      return after or command
    end
    return symbol:match("^%b{}()", at) or symbol:match("^[%w*]()", at)
  end
  local at, raised = skip_piece(1), false
  while at and symbol:find("^[_^]", at) do
    raised = raised or symbol:sub(at, at) == "^"
    at = skip_piece(at + 1)
  end
  if at == #symbol + 1 then return raised and TIGHT or ATOM end
  if symbol:find("^%d+%.?%d*$") then return ATOM end
  local outside = symbol:gsub("%b{}", "")
  if outside:find("[-+]") or outside:find("\\pm") then return SUM end
  if outside:find("/", 1, true) then return PRODUCT end
  return VALUE
end

local function tex_bracketed(text, binds, wanted) return bracketed(text, binds, wanted, "\\left(", "\\right)") end

local relation_tex = { ["<="] = "\\le", [">="] = "\\ge" }
local tex = {}

function tex.number(node) return node.text, ATOM end
function tex.letter(node) return node.text, ATOM end
function tex.greek(node) return node.text, ATOM end
function tex.word(node) return "\\" .. node.command .. "{" .. node.text .. "}", ATOM end
function tex.name(node, _, symbol_of)
  local symbol = symbol_of(node.text)
  return symbol, tex_binds_of(symbol)
end
function tex.label(node) return node.source, ATOM end
tex["function"] = function(node) return "\\" .. node.name, ATOM end
function tex.series_sign(node) return node.text, ATOM end

function tex.scripts(node, render)
  local base, binds = render(node[1])
  local text = tex_bracketed(base, binds, ATOM)
  if node.below then text = text .. "_" .. render(node.below) end
  if not node.above then return text, ATOM end
  local above = render(node.above)
  return text .. "^" .. (above:find("^%w$") and above or "{" .. above .. "}"), TIGHT
end

function tex.bracket(node, render)
  local items = {}
  for i, item in ipairs(node) do items[i] = render(item) end
  local left, right = node.big and "\\left" or "", node.big and "\\right" or ""
  return left .. node.open .. table.concat(items, ", ") .. right .. node.close, ATOM
end

function tex.call(node, render)
  local argument = render(node[2])
  return (render(node[1])) .. (argument:find("^%w") and " " or "") .. argument, TIGHT
end
function tex.series(node, render) return (render(node[1])) .. " " .. (render(node[2])), PRODUCT end
function tex.root(node, render) return "\\sqrt{" .. render(node[1]) .. "}", ATOM end
function tex.dot(node, render) return "\\dot{" .. render(node[1]) .. "}", ATOM end
function tex.fraction(node, render) return "\\frac{" .. render(node[1]) .. "}{" .. render(node[2]) .. "}", TIGHT end

function tex.product(node, render, symbol_of)
  local text, values = "", has_value(node, symbol_of)
  for i, factor in ipairs(node) do
    local part, binds = render(factor)
    local sign = node.signs[i]
    part = tex_bracketed(part, binds, sign == "/" and TIGHT or VALUE)
    if i == 1 then sign = ""
    elseif sign == "/" then sign = "/"
    elseif sign ~= "" then sign = " " .. sign .. " "
    elseif is_unit(factor) then sign = "\\,"
    elseif values or text:find("%d$") and part:find("^%d") then sign = " \\cdot "
    else sign = " " end
    text = text .. sign .. part
  end
  return text, PRODUCT
end

function tex.sum(node, render)
  local text = ""
  for i, item in ipairs(node) do
    local part, binds = render(item)
    text = text .. (i > 1 and " " .. node.signs[i] .. " " or node.signs[i]) .. tex_bracketed(part, binds, PRODUCT)
  end
  return text, SUM
end

function tex.relation(node, render)
  return joined(node, function(child) return (render(child)) end, function(sign) return " " .. (relation_tex[sign] or sign) .. " " end), 0
end

tex.list = plain.list

function equation.tex(either, symbol_of) return (renderer(tex, symbol_of)(tree_of(either))) end

-- MathML.

local escapes = { ["<"] = "&lt;", [">"] = "&gt;", ["&"] = "&amp;" }

local function element(tag, ...) return "<" .. tag .. ">" .. table.concat({ ... }) .. "</" .. tag .. ">" end
local function operator(text) return element("mo", (text:gsub("[<>&]", escapes))) end
local invisible_times, apply, thin_space = operator("\u{2062}"), operator("\u{2061}"), '<mspace width="0.167em"/>'

local mathml = {}

function mathml.number(node) return element("mn", node.text), ATOM end
function mathml.letter(node) return element("mi", node.text), ATOM end
function mathml.greek(node) return element("mi", greek[node.text:sub(2)]), ATOM end
function mathml.word(node)
  return '<mi mathvariant="' .. (node.command == "mathcal" and "script" or "normal") .. '">' .. node.text .. "</mi>", ATOM
end
function mathml.name(node, _, symbol_of)
  local symbol, value = symbol_of(node.text)
  if value then return value, value:find "^<mn>[%d.]+</mn>$" and ATOM or VALUE end
  local inside = renderer(mathml, no_names)(equation.parse(symbol))
  return element("mrow", inside), tex_binds_of(symbol)
end
mathml["function"] = function(node) return element("mi", node.name), ATOM end
function mathml.series_sign(node) return operator(tree.series[node.text]), ATOM end

function mathml.label(node, render)
  local parts = {}
  for i, part in ipairs(node) do
    if part.kind == "raised" then
      parts[#parts] = element("msup", parts[#parts] or element("mrow"), (render(part[1])))
    elseif part.kind == "greek" then parts[#parts + 1] = element("mi", greek[part.text:sub(2)])
    elseif part.kind == "mark" then parts[#parts + 1] = operator(part.text)
    else parts[#parts + 1] = element(part.text:find("^%d+$") and "mn" or "mtext", part.text) end
  end
  return element("mrow", table.unpack(parts)), ATOM
end

local function mathml_bracketed(text, binds, wanted)
  return bracketed(text, binds, wanted, "<mrow>" .. operator("("), operator(")") .. "</mrow>")
end

function mathml.scripts(node, render)
  local base, binds = render(node[1])
  base = mathml_bracketed(base, binds, ATOM)
  local above, below = node.above and (render(node.above)), node.below and (render(node.below))
  if above and below then return element("msubsup", base, below, above), TIGHT end
  if above then return element("msup", base, above), TIGHT end
  return element("msub", base, below), ATOM
end

function mathml.bracket(node, render)
  local items = {}
  for i, item in ipairs(node) do items[i] = render(item) end
  return element("mrow", operator(node.open), table.concat(items, operator(",")), operator(node.close)), ATOM
end

function mathml.call(node, render) return element("mrow", (render(node[1])), apply, (render(node[2]))), TIGHT end
function mathml.series(node, render) return element("mrow", (render(node[1])), (render(node[2]))), PRODUCT end
function mathml.root(node, render) return element("msqrt", (render(node[1]))), ATOM end
function mathml.dot(node, render) return element("mover", (render(node[1])), operator("˙")), ATOM end
function mathml.fraction(node, render) return element("mfrac", (render(node[1])), (render(node[2]))), TIGHT end

function mathml.product(node, render, symbol_of)
  local parts, values = {}, has_value(node, function(name) return select(2, symbol_of(name)) and "1" or "" end)
  for i, factor in ipairs(node) do
    local text, binds = render(factor)
    local sign = node.signs[i]
    if i > 1 then parts[#parts + 1] = sign ~= "" and operator(products[sign]) or is_unit(factor) and thin_space or values and operator "·" or invisible_times end
    parts[#parts + 1] = mathml_bracketed(text, binds, sign == "/" and TIGHT or VALUE)
  end
  return element("mrow", table.unpack(parts)), PRODUCT
end

function mathml.sum(node, render)
  local parts = {}
  for i, item in ipairs(node) do
    local text, binds = render(item)
    if node.signs[i] ~= "" then parts[#parts + 1] = operator(node.signs[i] == "-" and "−" or "+") end
    parts[#parts + 1] = mathml_bracketed(text, binds, PRODUCT)
  end
  return element("mrow", table.unpack(parts)), SUM
end

function mathml.relation(node, render)
  return element("mrow", joined(node, function(child) return (render(child)) end, function(sign) return operator(relations[sign]) end)), 0
end

function mathml.list(node, render)
  local items = {}
  for i, item in ipairs(node) do items[i] = render(item) end
  return element("mrow", table.concat(items, operator(","))), 0
end

function equation.mathml(either, symbol_of)
  local inside = renderer(mathml, symbol_of)(tree_of(either))
  return '<math xmlns="http://www.w3.org/1998/Math/MathML">' .. inside .. "</math>"
end

return equation
