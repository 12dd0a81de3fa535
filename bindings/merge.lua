-- SPDX-License-Identifier: GPL-3.0-or-later
-- lacuna merge DIR... --out DIR: the parts of a shared job, or of one, put together. The study file that they hold is run again, on the
-- records instead of the targets' computation, so that the result is that of one run.
local core = ...
local command = core.part "lacuna.command"
local file = core.part "lacuna.records_file"

local function read_part(folder)
  local head, texts = file.read(folder .. "/records")
  if not head then error(("merge: %s"):format(texts), 0) end
  return head, texts
end

local function without_shard(head)
  local copy = {}
  for key, value in pairs(head) do copy[key] = value end
  copy.shard = nil
  return copy
end

local function add_records(texts, folder, from)
  for _, text in ipairs(texts) do
    local record = file.decode(text)
    local before = from[record.name]
    if before then error(('merge: both %s and %s hold "%s"'):format(before, folder, record.name), 0) end
    from[record.name], command.records[record.name] = folder, record
  end
end

-- Takes the command line's place: what the parts' heads say. Returned: the head.
local function prepare(folders)
  if #folders == 0 then error("merge wants the parts' folders: lacuna merge DIR... --out DIR", 0) end
  if not command.out then error("merge wants --out DIR, a folder for the whole", 0) end
  if command.shard or #command.set > 0 or #command.only > 0 then error("merge: --shard, --set and --only are the parts' own; leave them out", 0) end
  local head, from = nil, {}
  command.records, command.parts = {}, folders[1]
  for _, folder in ipairs(folders) do
    local there, texts = read_part(folder)
    there = without_shard(there)
    local difference = head and file.difference(head, there)
    if difference then
      local between = difference:gsub(" there, is ", " in the first, is "):gsub(" here$", " in the other")
      error(("merge: %s and %s don't belong together: %s"):format(folders[1], folder, between), 0)
    end
    head = head or there
    add_records(texts, folder, from)
  end
  command.parts_head = head
  for _, text in ipairs(head.set) do command.take("--set", text) end
  for _, text in ipairs(head.only) do command.take("--only", text) end
  for _, input in ipairs(head.inputs) do command.inputs[input.name] = input.text end
  core.settings { seed = head.seed, draws = head.draws }
  command.script, command.arguments = head.script, head.arguments
  return head
end

-- merge.run(folder, ...): runs the study that the folders are parts of.
local function run(...)
  local head = prepare { ... }
  local chunk, trouble = load((head.script.text:gsub("^#[^\n]*", "", 1)), "@" .. head.script.name, "t")
  if not chunk then error(trouble, 0) end
  arg = { [0] = head.script.name, table.unpack(head.arguments) }
  return chunk(table.unpack(head.arguments))
end

return { run = run }
