-- SPDX-License-Identifier: GPL-3.0-or-later
-- The renderers of equations: what each must print is read off the TeX (common practice, no source); that TeX output means the
-- same is checked by parsing it again; that plain text means the same, by evaluating it with random numbers as Lua would.
-- Stars and instruments are invented.
package.path = "tests/lua/?.lua;bindings/?.lua;" .. package.path
local t = require "harness"
local equation = require "equation"

local symbols = {
  hill_radius = "R_H", planet_semi_major_axis = "a_p", planet_star_mass_ratio = "q", stellar_luminosity = "L_*", distance = "d",
  bolometric_flux = "F_{bol}", rim_squared_visibility = "V^2_{rim}", rim_visibility_drop = "1 - V^2_{rim}",
  gap_depth = "\\Sigma_{min}/\\Sigma_0", bandwidth = "\\Delta \\lambda", headwind_speed = "\\Delta v", stokes_number = "St",
  stellar_mass = "M_*", mass_accretion_rate = "\\dot{M}", inclination = "i", projected_baseline = "B", gap_resolved = "\\mathrm{res}_{gap,arr}",
}
local function symbol_of(name) return symbols[name] or error("no symbol for " .. name) end
local function text_of(name) return equation.plain_symbol(symbol_of(name)) end
local function plain(text) return equation.plain(text, text_of) end
local function tex(text) return equation.tex(text, symbol_of) end
local hill = [[ [hill_radius] = [planet_semi_major_axis] \left(\frac{[planet_star_mass_ratio]}{3}\right)^{1/3} ]]

t.test("one equation, three renderings", function()
  t.equal(plain(hill), "R_H = a_p (q/3)^(1/3)")
  t.equal(tex(hill), [[R_H = a_p \left(\frac{q}{3}\right)^{1/3}]])
  t.equal(equation.mathml(hill, symbol_of), '<math xmlns="http://www.w3.org/1998/Math/MathML"><mrow>'
    .. "<mrow><msub><mi>R</mi><mrow><mtext>H</mtext></mrow></msub></mrow><mo>=</mo>"
    .. "<mrow><mrow><msub><mi>a</mi><mrow><mtext>p</mtext></mrow></msub></mrow><mo>\u{2062}</mo>"
    .. "<msup><mrow><mo>(</mo><mfrac><mrow><mi>q</mi></mrow><mn>3</mn></mfrac><mo>)</mo></mrow>"
    .. "<mrow><mn>1</mn><mo>/</mo><mn>3</mn></mrow></msup></mrow></mrow></math>")
  t.equal(equation.names(hill), { "hill_radius", "planet_semi_major_axis", "planet_star_mass_ratio" })
end)

t.test("a tree parsed once serves every renderer", function()
  local tree = equation.parse(hill)
  t.equal(equation.plain(tree, text_of), plain(hill))
  t.equal(equation.tex(tree, symbol_of), tex(hill))
  t.equal(equation.mathml(tree, symbol_of), equation.mathml(hill, symbol_of))
end)

t.test("numbers put in for the names", function()
  local values = {
    hill_radius = "0.346 au", planet_semi_major_axis = "5 au", planet_star_mass_ratio = "9.546e-4", distance = "156 ± 3 pc",
    bolometric_flux = "2.4e-11 W m⁻²", stellar_luminosity = "18 Lsun", inclination = "-3", stellar_mass = "1.9 Msun",
  }
  local function with_values(text) return equation.plain(text, function(name) return values[name] end) end
  t.equal(with_values(hill), "0.346 au = 5 au · (9.546e-4/3)^(1/3)")
  t.equal(with_values [[ [stellar_luminosity] = 4 \pi [distance]^{2} [bolometric_flux] ]], "18 Lsun = 4 · π · (156 ± 3 pc)² · 2.4e-11 W m⁻²")
  t.equal(with_values [[ \frac{[distance]}{[planet_semi_major_axis]} ]], "(156 ± 3 pc) / (5 au)")
  t.equal(with_values [[ 2 - [inclination] ]], "2 - (-3)")
  t.equal(with_values [[ [planet_star_mass_ratio]^2 ]], "(9.546e-4)²")
  t.equal(with_values [[ [stellar_mass] \frac{1 \mathrm{g} \mathrm{cm}^{-2}}{2 \mathrm{K}} ]], "1.9 Msun · (1 g cm⁻² / (2 K))")
end)

local renderings = { -- equation, plain, TeX
  { [=[\frac{[stellar_luminosity]}{4 \pi [distance]^{2}}]=], "L* / (4 π d²)", [=[\frac{L_*}{4 \pi d^2}]=] },
  { [=[\frac{1}{2} [stellar_mass] [distance]^2]=], "(1/2) M* d²", [=[\frac{1}{2} M_* d^2]=] },
  { [=[[distance] / [planet_star_mass_ratio] / 2]=], "d/q/2", [=[d/q/2]=] },
  { [=[[distance] / [planet_star_mass_ratio] [stellar_mass]]=], "(d/q) M*", [=[d/q M_*]=] },
  { [=[\sqrt{\frac{[distance]}{2}}]=], "√(d/2)", [=[\sqrt{\frac{d}{2}}]=] },
  { [=[\sqrt{[distance]}]=], "√d", [=[\sqrt{d}]=] },
  { [=[[planet_star_mass_ratio]^{-1/2}]=], "q⁻¹ᐟ²", [=[q^{-1/2}]=] },
  { [=[[planet_star_mass_ratio]^{1/3} x^{-12} y^{1.5} z^p]=], "q^(1/3) x⁻¹² y^1.5 z^p", [=[q^{1/3} x^{-12} y^{1.5} z^p]=] },
  { [=[[rim_squared_visibility]^2]=], "(V_rim²)²", [=[\left(V^2_{rim}\right)^2]=] },
  { [=[2 [rim_visibility_drop]]=], "2 (1 - V_rim²)", [=[2 \left(1 - V^2_{rim}\right)]=] },
  { [=[x - [rim_visibility_drop]]=], "x - (1 - V_rim²)", [=[x - \left(1 - V^2_{rim}\right)]=] },
  { [=[x - \left(y - z\right)]=], "x - (y - z)", [=[x - \left(y - z\right)]=] },
  { [=[[gap_depth] x]=], "(Σ_min/Σ_0) x", [=[\left(\Sigma_{min}/\Sigma_0\right) x]=] },
  { [=[[headwind_speed]^2 [bandwidth]]=], "(Δv)² Δλ", [=[\left(\Delta v\right)^2 \Delta \lambda]=] },
  { [=[\cos [inclination]]=], "cos(i)", [=[\cos i]=] },
  { [=[\cos^2\left([inclination]\right) x]=], "cos²(i) x", [=[\cos^2\left(i\right) x]=] },
  { [=[\sin x \cos y]=], "sin(x) cos(y)", [=[\sin x \cos y]=] },
  { [=[\log_{10}\left(x\right)]=], "log_10(x)", [=[\log_{10}\left(x\right)]=] },
  { [=[\exp\left(-\frac{x}{2}\right)]=], "exp(-x/2)", [=[\exp\left(-\frac{x}{2}\right)]=] },
  { [=[\min\left(x, [distance]\right)]=], "min(x, d)", [=[\min\left(x, d\right)]=] },
  { [=[\sum_{i=1}^{n} x_i y]=], "∑_(i=1)^n x_i y", [=[\sum_{i=1}^n x_i y]=] },
  { [=[\int_{a}^{b} x y]=], "∫_a^b x y", [=[\int_{a}^b x y]=] },
  { [=[2.2 \times 10^{-11} \cdot x]=], "2.2 × 10⁻¹¹ · x", [=[2.2 \times 10^{-11} \cdot x]=] },
  { [=[170 \mathrm{K}]=], "170 K", [=[170\,\mathrm{K}]=] },
  { [=[[distance] >= 2 x]=], "d ≥ 2 x", [=[d \ge 2 x]=] },
  { [=[x \approx y \le z]=], "x ≈ y ≤ z", [=[x \approx y \le z]=] },
  { [=[\left[x + y\right] z]=], "(x + y) z", [=[\left[x + y\right] z]=] },
  { [=[\mathcal{P} = [mass_accretion_rate] \dot{q}]=], "P = Ṁ q\u{307}", [=[\mathcal{P} = \dot{M} \dot{q}]=] },
  { [=[y = \frac{1}{x}, x = 2 [distance] ]=], "y = 1/x, x = 2 d", [=[y = \frac{1}{x}, x = 2 d]=] },
  { [=[-x + {y}]=], "-x + y", [=[-x + y]=] },
}

-- Every element is closed, in order.
local function check_nesting(xml)
  local open = {}
  for close, tag, empty in xml:gmatch("<(/?)(%a+)[^>]-(/?)>") do
    if close == "/" then t.equal(table.remove(open), tag, xml)
    elseif empty == "" then open[#open + 1] = tag end
  end
  t.equal(#open, 0, xml)
end

t.test("renderings", function()
  for _, row in ipairs(renderings) do
    t.equal(plain(row[1]), row[2], row[1])
    t.equal(tex(row[1]), row[3], row[1])
    local scripts_in_order = row[3]:gsub("V%^2_{rim}", "V_{rim}^2")
    t.equal(tex(row[3]), scripts_in_order, "parsed again")
    check_nesting(equation.mathml(row[1], symbol_of))
  end
end)

t.test("symbols in plain text", function()
  local rows = {
    ["\\theta_{gap,arr}"] = "θ_gap,arr", ["M_*"] = "M*", ["\\dot{M}"] = "Ṁ", ["F_{0-\\lambda}"] = "F_(0-λ)", ["V^2_{rim}"] = "V_rim²",
    ["1 - V^2_{rim}"] = "1 - V_rim²", ["\\Sigma_{min}/\\Sigma_0"] = "Σ_min/Σ_0", ["\\sigma_{V^2}"] = "σ_(V²)", ["\\mathrm{PA}_d"] = "PA_d",
    ["\\Delta v"] = "Δv", ["\\Delta\\lambda"] = "Δλ", ["St"] = "St", ["B_\\nu"] = "B_ν", ["\\mathcal{P}"] = "P", ["T_{mid,p}"] = "T_mid,p",
    ["\\gamma_\\Sigma"] = "γ_Σ", ["M_{p2}"] = "M_p2", ["\\varpi"] = "ϖ", ["\\ell_{arr}"] = "ℓ_arr", ["\\mathrm{res}_{gap,arr}"] = "res_gap,arr",
  }
  for symbol, want in pairs(rows) do t.equal(equation.plain_symbol(symbol), want, symbol) end
  t.raises(function() equation.plain_symbol("[distance]") end, "can't have the name %[distance%]")
end)

t.test("what is outside the subset is refused, with its position", function()
  local rows = { -- equation, position, pattern
    { [=[x = \foo y]=], 5, "\\foo is out of place" }, { [=[x = ]=], 5, "the end is out of place" }, { [=[\frac{x}]=], 9, "'{' was expected" },
    { [=[\left(x]=], 8, "'\\right' was expected" }, { [=[\left(x\right] ]=], 14, "'%)' was expected" }, { [=[x^10]=], 3, "braces" },
    { [=[x^2^3]=], 4, "second %^" }, { [=[x_a_b]=], 4, "second _" }, { [=[1e-3 x]=], 1, "1\\times" }, { [=[\cos x y]=], 8, "argument of \\cos in brackets" },
    { [=[exp(x)]=], 1, "write \\exp" }, { [=[x = "y"]=], 5, "not understood" }, { [=[[two words] = x]=], 1, "name in square brackets" },
    { [=[x y)]=], 4, "out of place" }, { [=[\cos]=], 5, "argument of \\cos" }, { [=[x + µ]=], 5, "'µ' is not understood" }, { "x \xff", 3, "not understood" },
    { [=[\ln\left(x\right)^2 y]=], 18, "power of \\ln" }, { [=[\mathrm{x^2}]=], 1, "plain letters" }, { [=[x_{a/b}]=], 5, "subscript" }, { [=[\sqrt[3]{x}]=], 6, "name in square brackets" }, { "", 1, "the end" },
  }
  for _, row in ipairs(rows) do
    t.raises(function() equation.parse(row[1]) end, "position " .. row[2] .. ": ", row[1])
    t.raises(function() equation.parse(row[1]) end, row[3], row[1])
  end
  t.raises(function() tex "[no_such_name]" end, "no symbol for no_such_name")
end)

-- Random trees of sums, products, fractions and powers, written as TeX with every bracket in place; the value of the plain text,
-- read as Lua, must be the value that was meant.
t.test("brackets in plain text keep the meaning", function()
  math.randomseed(20250101, 0)
  local letters = { x = 1.7, y = 0.6, z = 2.3 }
  local function random_tree(depth)
    local choice = depth == 0 and 1 or math.random(1, 6)
    if choice == 1 then
      local name = ({ "x", "y", "z" })[math.random(3)]
      return name, letters[name]
    end
    local left, a = random_tree(depth - 1)
    local right, b = random_tree(depth - 1)
    left, right = "\\left(" .. left .. "\\right)", "\\left(" .. right .. "\\right)"
    if choice == 2 then return left .. " + " .. right, a + b end
    if choice == 3 then return left .. " - " .. right, a - b end
    if choice == 4 then return left .. " " .. right, a * b end
    if choice == 5 then return "\\frac{" .. left .. "}{" .. right .. "}", a / b end
    return left .. "^{2}", a * a
  end
  for round = 1, 5000 do
    local text, want = random_tree(4)
    local shown = equation.plain(text, error)
    local code = shown:gsub("²", "^2"):gsub("([%wxyz)]) ?%f[(xyz]([(xyz])", "%1*%2"):gsub("([%wxyz)]) ?%f[(xyz]([(xyz])", "%1*%2")
    local got = assert(load("return " .. code, code, "t", letters), shown)()
    if not (got == want or got ~= got and want ~= want) then -- the same operations in the same order: equal to the last bit
      error(("round %d: %s shown as %s: want %.17g, got %.17g"):format(round, text, shown, want, got))
    end
  end
end)

t.test("values put in: numbers side by side are set apart, powers of values are bracketed", function()
  local written = "4 \\pi [distance]^2 [flux]"
  local tex = { distance = "156\\,\\mathrm{pc}", flux = "2.4\\times10^{-11}" }
  t.equal(equation.tex(written, function(name) return tex[name] end), "4 \\cdot \\pi \\cdot \\left(156\\,\\mathrm{pc}\\right)^2 \\cdot 2.4\\times10^{-11}")
  local mathml = equation.mathml("2 [baseline]", function() return nil, "<mrow><mn>92</mn><mtext>m</mtext></mrow>" end)
  t.equal(mathml:find("<mn>2</mn><mo>·</mo><mrow><mn>92</mn><mtext>m</mtext></mrow>", 1, true) ~= nil, true, mathml)
end)

t.finish()
