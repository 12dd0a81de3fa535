-- SPDX-License-Identifier: GPL-3.0-or-later
-- Documents with sessions in them: blocks fenced as ```lacuna, in which lines that start with "> " are typed, those that start with ">> " go
-- on with what was typed, and the others are the answer. Each document is one session that starts anew.
--
--   documents.check(file)     a list of { line =, got =, shown = }
--   documents.rewrite(file)   puts the present answers in, for a change that is meant: to be read before it is kept
local session = require "session"
local documents = {}

local function read(file)
  local handle = assert(io.open(file))
  local text = handle:read "a"
  handle:close()
  return text
end

-- The pieces of a document in order: { text = as it stands }, and of a typed line also line = what is typed, shown = { lines of the answer }.
local function pieces_of(document)
  local pieces, inside = {}, false
  for line in document:gmatch "([^\n]*)\n" do
    local fence = line:match "^```(%w*)"
    if fence then inside = fence == "lacuna" end
    if inside and line:find "^> " then pieces[#pieces + 1] = { text = line, line = line:sub(3), shown = {} }
    elseif inside and line:find "^>> " then
      local piece = pieces[#pieces]
      piece.text, piece.line = piece.text .. "\n" .. line, piece.line .. "\n" .. line:sub(4)
    elseif inside and not fence then table.insert(pieces[#pieces].shown, line)
    else pieces[#pieces + 1] = { text = line } end
  end
  return pieces
end

local function run(file)
  local pieces, lines, typed = pieces_of(read(file)), {}, {}
  for _, piece in ipairs(pieces) do
    if piece.line then
      typed[#typed + 1] = piece
      lines[#lines + 1] = piece.line
    end
  end
  for i, answer in ipairs(#lines > 0 and session.fresh(lines) or {}) do typed[i].got = answer end
  return pieces, typed
end

function documents.check(file)
  local _, typed = run(file)
  for _, piece in ipairs(typed) do piece.shown = table.concat(piece.shown, "\n") end
  return typed
end

function documents.rewrite(file)
  local out = {}
  for _, piece in ipairs((run(file))) do
    out[#out + 1] = piece.text
    if piece.got and piece.got ~= "" then out[#out + 1] = piece.got end
  end
  local handle = assert(io.open(file .. ".new", "w"))
  handle:write(table.concat(out, "\n"), "\n")
  handle:close()
  assert(os.rename(file .. ".new", file))
end

return documents
