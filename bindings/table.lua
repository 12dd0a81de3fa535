-- SPDX-License-Identifier: GPL-3.0-or-later
-- Tables of results as aligned text (table_files.lua and table_tex.lua: as CSV, Markdown and LaTeX). A table is
--
--   { title = text or nil, texts = { headers of the texts carried along }, columns = {...}, rows = {...}, notes = {...} }
--
-- with columns { name (or heading = a text as it stands), entry = row of the glossary, verdict, group = heading over it or nil, unit (VOUnits), unit_text, unit_tex,
-- left = true for texts that begin below each other }. A column belongs to the group of its left neighbour where the name is the same.
--
-- Rows { name, texts, cells, rule = true for a rule above it }; cells { share } of a verdict or { value, upper, lower } in the column's unit (no
-- errors: a single number) or { missing = true } or { text }, or along sweeps as in record.lua (then the table has sweeps = { { name, unit,
-- values } }); besides, word = true where a text has no place below the numbers, tail = a word behind a number, mark = "*" where one is to stand
-- behind all. Notes { heading, lines (texts, or lists whose first text heads the others) }.
local core = ...
local english = core.part "lacuna.english"
local format = core.part "lacuna.format"

local tables = { WIDTH = 100 } -- of a table where no terminal says otherwise
local GAP, MISSING = "  ", "—"
local NO_BREAK = "\u{a0}"

-- Lines of text -------------------------------------------------------------------------------------------------------------------

-- A name or text from a file may have line breaks.
local function on_one_line(text) return (text:gsub("%s*[\n\r\t\v\f]%s*", " ")) end
tables.on_one_line = on_one_line

local function lowest_and_highest(list)
  local low, high = math.huge, -math.huge
  for _, value in ipairs(list) do
    if value == value then low, high = math.min(low, value), math.max(high, value) end
  end
  return low, high
end

-- Along a sweep a cell is written from its lowest to its highest value, each by `write` as a cell of its own.
local function range_of(cell, write, between)
  local what = cell.shares and "share" or "value"
  local low, high = lowest_and_highest(cell.shares or cell.values)
  low, high = write { [what] = low }, write { [what] = high }
  return low == high and low or low .. between .. high
end
tables.range_of = range_of

tables.lowest_and_highest = lowest_and_highest

local cell_text
function cell_text(cell)
  if cell.text then return cell.text end
  if cell.missing then return MISSING end
  if cell.axes then return range_of(cell, cell_text, " … ") end
  if cell.share then return cell.share == 1 and "yes" or cell.share == 0 and "no" or format.percent(cell.share) end
  return cell.upper and format.with_error(cell.value, cell.upper, cell.lower) or format.number(cell.value)
end
tables.cell_text = cell_text

-- A cell's text in two parts, which meet where the error bar begins: so the values of a column stand below each other.
local function parts(text)
  local at = text:find " [±+]"
  if at then return text:sub(1, at - 1), text:sub(at) end
  return text, ""
end

-- The texts of a column's cells, all of one width; words flush right, or all flush left where asked for.
local function aligned(cells, flush_left)
  local left, right, words, marks, lefts, rights = 0, 0, 0, 0, {}, {}
  for i, cell in ipairs(cells) do
    lefts[i], rights[i] = cell_text(cell), ""
    if flush_left or cell.word then words = math.max(words, format.width(lefts[i]))
    else
      lefts[i], rights[i] = parts(lefts[i])
      rights[i] = rights[i] .. (cell.tail or "")
      left, right = math.max(left, format.width(lefts[i])), math.max(right, format.width(rights[i]))
    end
    if cell.mark then marks = math.max(marks, 1 + format.width(cell.mark)) end
  end
  local width, texts = math.max(left + right, words), {}
  for i, cell in ipairs(cells) do
    if not flush_left then lefts[i] = format.pad_left(lefts[i], cell.word and width or width - right) end
    texts[i] = format.pad_right(lefts[i] .. rights[i] .. (cell.mark and " " .. cell.mark or ""), width + marks)
  end
  return texts, width + marks
end

-- A column laid out: its heading's lines, its cells' texts, its width.
local function laid_out(column, cells)
  local texts, width = aligned(cells, column.left)
  local name = column.heading or english.words_of(column.name):gsub(" by ", " by" .. NO_BREAK)
  for word in name:gmatch "%S+" do width = math.max(width, format.width(word)) end
  width = math.max(width, format.width(column.unit_text or ""))
  local heading = format.wrapped(name, width)
  for i, line in ipairs(heading) do heading[i] = line:gsub(NO_BREAK, " ") end
  return { heading = heading, unit = column.unit_text or "", texts = texts, width = width, left = column.left }
end
tables.laid_out = laid_out

-- Neighbouring columns of one group, each laid out.
local function blocks_of(whole)
  local blocks = {}
  for i, column in ipairs(whole.columns) do
    local block = blocks[#blocks]
    if not block or block.group ~= column.group then
      block = { group = column.group, width = 0 }
      blocks[#blocks + 1] = block
    end
    local cells = {}
    for j, row in ipairs(whole.rows) do cells[j] = row.cells[i] end
    local column_laid_out = laid_out(column, cells)
    block[#block + 1] = column_laid_out
    block.width = block.width + #GAP + column_laid_out.width
  end
  return blocks
end

-- Blocks side by side while they fit; a block too wide for one table is cut between its columns.
local function pages_of(blocks, names_width, columns)
  local pages, page, room = {}, nil, 0
  local function put(block)
    if not page or block.width > room then
      page, room = {}, columns - names_width
      pages[#pages + 1] = page
    end
    page[#page + 1] = block
    room = room - block.width
  end
  for _, block in ipairs(blocks) do
    if block.width <= columns - names_width then put(block)
    else
      local piece
      for _, column in ipairs(block) do
        if piece and piece.width + #GAP + column.width > columns - names_width then
          put(piece)
          piece = nil
        end
        piece = piece or { group = block.group, width = 0 }
        piece[#piece + 1] = column
        piece.width = piece.width + #GAP + column.width
      end
      put(piece)
    end
  end
  return pages
end

-- "─── 5 au ───" over a block's columns.
local function ruled(text, columns)
  local space = columns - format.width(text) - 2
  if space < 2 then return format.pad_right(text, columns) end
  return ("─"):rep(space // 2) .. " " .. text .. " " .. ("─"):rep(space - space // 2)
end

local function trimmed(line) return (line:gsub("%s+$", "")) end

local function add_page(lines, page, rows, names_width)
  local deepest, grouped, in_units = 0, false, false
  for _, block in ipairs(page) do
    grouped = grouped or block.group
    for _, column in ipairs(block) do deepest, in_units = math.max(deepest, #column.heading), in_units or column.unit ~= "" end
  end
  local blank = (" "):rep(names_width)
  if grouped then
    local line = blank
    for _, block in ipairs(page) do
      local columns = block.width - #GAP
      line = line .. GAP .. (block.group and ruled(block.group, columns) or (" "):rep(columns))
    end
    lines[#lines + 1] = trimmed(line)
  end
  local function add(first, text_of)
    local line = format.pad_right(first, names_width)
    for _, block in ipairs(page) do
      for _, column in ipairs(block) do line = line .. GAP .. (column.left and format.pad_right or format.pad_left)(text_of(column), column.width) end
    end
    lines[#lines + 1] = trimmed(line)
    return format.width(line)
  end
  local width = 0
  for i = 1, deepest do width = math.max(width, add("", function(column) return column.heading[i - deepest + #column.heading] or "" end)) end
  if in_units then width = math.max(width, add("", function(column) return column.unit end)) end
  lines[#lines + 1] = ("─"):rep(width)
  for i, row in ipairs(rows) do
    if row.rule then lines[#lines + 1] = ("─"):rep(width) end
    add(on_one_line(row.name), function(column) return column.texts[i] end)
  end
end

-- Notes: each with its heading, wrapped, the lines' further parts set in. A line may be a list: what its first text heads.
local function add_notes(lines, notes, columns)
  local function add(text, indent)
    for i, line in ipairs(format.wrapped(text, columns - indent - 2)) do lines[#lines + 1] = (" "):rep(i == 1 and indent or indent + 2) .. line end
  end
  for _, note in ipairs(notes) do
    lines[#lines + 1] = ""
    add(note.heading, 0)
    for _, text in ipairs(note.lines) do
      if type(text) == "string" then add(text, 2)
      else
        for i, part in ipairs(text) do add(part, i == 1 and 2 or 4) end
      end
    end
  end
end

-- The table as text, no wider than so many columns where that can be; as wide as the terminal where nothing is said.
function tables.text(whole, columns)
  columns = columns or core.terminal_width() or tables.WIDTH
  local names_width, lines = 0, {}
  for _, row in ipairs(whole.rows) do names_width = math.max(names_width, format.width(on_one_line(row.name))) end
  if whole.title then lines = format.wrapped(whole.title, columns) end
  for _, page in ipairs(pages_of(blocks_of(whole), names_width, columns)) do
    if #lines > 0 then lines[#lines + 1] = "" end
    add_page(lines, page, whole.rows, names_width)
  end
  add_notes(lines, whole.notes, columns)
  return table.concat(lines, "\n")
end

return tables
