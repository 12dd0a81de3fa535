-- SPDX-License-Identifier: GPL-3.0-or-later
-- Plain English of names and lists, for captions, notes, reports and drafts.
--
--   words_of(name)          "planet_semi_major_axis" as "planet semi-major axis"
--   in_words(sentence)      the same of all names in it; symbols like M_p keep theirs
--   list(items, most)       "A", "A and B", "A, B and C", "A, B and 9 others"; 8 where no other number is asked for
--   capital(sentence)       with a capital letter at its beginning
--   plural(count, one, many)   "target" or "targets"; many where it isn't one + s
--   span(low, high)         two numbers as written: "2", or "2 to 3"
--   WHO_DECIDES             what every document says
local english = {}

english.WHO_DECIDES = "The observatory's own documents and staff decide."

function english.words_of(name) return (name:gsub("semi_major", "semi-major"):gsub("_", " ")) end

function english.in_words(sentence)
  return (sentence:gsub("%f[%w]%a%a%w*_[%w_]+", english.words_of):gsub("…_", "… "):gsub("%f[%w]%l%l%w*_[%w_]+", english.words_of))
end

function english.list(items, most)
  most = most or 8
  if #items <= 1 then return items[1] or "" end
  if #items > most + 1 then return table.concat(items, ", ", 1, most) .. " and " .. #items - most .. " others" end
  return table.concat(items, ", ", 1, #items - 1) .. " and " .. items[#items]
end

function english.capital(sentence) return (sentence:gsub("^%l", string.upper)) end

function english.plural(count, one, many) return count == 1 and one or many or one .. "s" end

function english.span(low, high) return low == high and low or low .. " to " .. high end

return english
