-- SPDX-License-Identifier: GPL-3.0-or-later
-- All targets of a study: which of them, on how many cores, what is there already, and where the records go. A record is made from one
-- target alone, so that the order in which they come, a stop between, and the parts of a shared job leave the same bytes.
local core = ...
local command = core.part "lacuna.command"
local file = core.part "lacuna.records_file"
local progress = core.part "lacuna.progress"
local read_file = core.part "lacuna.read_file"
local records = core.part "lacuna.record"

local run = {}
local FEW = 4 -- targets, for which no processes are started

-- Which targets -----------------------------------------------------------------------------------------------------------------------

local function unknown_target(word, list)
  local names = {}
  for i, target in ipairs(list) do names[i] = { name = target.name, edits = core.edits(word:lower(), target.name:lower()), place = i } end
  table.sort(names, function(a, b) return a.edits < b.edits or a.edits == b.edits and a.place < b.place end)
  local near = {}
  for i = 1, math.min(3, #names) do near[i] = names[i].name end
  error(("--only: there is no target '%s'; the nearest are %s"):format(word, table.concat(near, ", ")), 0)
end

local function named_ones(list)
  command.used.only = true
  if #command.only == 0 then return list end
  local wanted, by_name, found = {}, {}, {}
  for _, target in ipairs(list) do by_name[target.name] = target end
  for _, word in ipairs(command.only) do
    if not by_name[word] then unknown_target(word, list) end
    wanted[word] = true
  end
  for _, target in ipairs(list) do if wanted[target.name] then found[#found + 1] = target end end
  return found
end

-- Those of --only, and of them each N-th from the K-th on for --shard K/N.
local function chosen(list)
  local all, shard = named_ones(list), command.shard
  if not shard then return all end
  local part = {}
  for i = shard.number, #all, shard.of do part[#part + 1] = all[i] end
  return part
end

-- The folder --------------------------------------------------------------------------------------------------------------------------

local function text_of(path)
  local text, trouble = read_file(path)
  if not text then error(trouble, 0) end
  return text
end

local function set_texts()
  local texts = {}
  for i, one in ipairs(command.set) do texts[i] = one.text end
  return texts
end

-- What was asked, in full: the study, what it reads, what was set. Runs with the same head make the same records.
local function head_of(list)
  local settings, script = core.settings(), command.script
  if not script.text and not script.path then error("--out wants a study in a file; its text is kept with the results", 0) end
  script.text = script.text or text_of(script.path)
  local inputs = {}
  if list.input then
    list.input.text = list.input.text or text_of(list.input.path)
    inputs[1] = { name = list.input.name, text = list.input.text }
  end
  return {
    version = command.version, script = { name = script.name, text = script.text }, arguments = command.arguments, inputs = inputs,
    seed = settings.seed, draws = settings.draws, set = set_texts(), only = command.only,
    shard = command.shard and ("%d/%d"):format(command.shard.number, command.shard.of),
  }
end

local function refuse_difference(where, there, here)
  local difference = file.difference(there, here)
  if difference then error(("%s was made otherwise: %s"):format(where, difference), 0) end
end

-- The records' texts in a folder that a stopped run has left; none in an empty one.
local function left_there(path, head, entries)
  local there, texts = file.read(path)
  if there then
    refuse_difference(command.out, there, head)
    return texts
  end
  if #entries > 0 then error(("--resume finds nothing to go on with: %s"):format(texts), 0) end
  return {}
end

-- Makes the folder ready: what is there already, as texts, and a file to append to.
local function open_folder(list)
  if command.used.out then error("study: --out holds one study, and this is a second one", 0) end
  command.used.out = true
  local head, path = head_of(list), command.out .. "/records"
  local made, trouble = pcall(core.make_folder, command.out)
  if not made then error(records.bare(trouble), 0) end
  local entries = core.folder_entries(command.out)
  if #entries > 0 and not (command.resume or command.force) then
    error(("%s exists and is not empty; --resume goes on with a run that was stopped, --force starts anew"):format(command.out), 0)
  end
  core.part "lacuna.leftovers".remove(command.out)
  local texts = command.resume and left_there(path, head, entries) or {}
  local ok, why = pcall(core.write_file, path, file.whole(head, texts))
  if not ok then error(records.bare(why), 0) end
  local handle
  handle, trouble = file.append_to(path)
  if not handle then error("cannot write " .. trouble, 0) end
  return { head = head, path = path, texts = texts, handle = handle }
end

-- Of parts that are put together each target must have its record: that is looked at before a folder is begun.
local function check_parts(targets, list)
  refuse_difference(command.parts, command.parts_head, head_of(list))
  local missing = {}
  for _, target in ipairs(targets) do if not command.records[target.name] then missing[#missing + 1] = target.name end end
  if #missing > 0 then
    error(('%s: there is no record of "%s"%s; run the part that is to hold it again, with --resume'):format(command.parts, missing[1],
      #missing > 1 and (" and %d more"):format(#missing - 1) or ""), 0)
  end
end

-- The records that are there: of a run that goes on, or of parts that are put together.
local function known_records(folder)
  if command.records then return command.records end
  local known = {}
  for _, text in ipairs(folder and folder.texts or {}) do
    local record = file.decode(text)
    known[record.name] = record
  end
  return known
end

-- Working out -------------------------------------------------------------------------------------------------------------------------

local ENOUGH = 16384 -- KiB
-- Lua's collector doesn't see the ensembles behind dead cases, so it is called where these weigh enough; in its generational mode, as all
-- that a target has left is young, and what the study holds need not be gone through.
local function collector()
  local before = core.in_use()
  return function()
    if core.in_use() > before + ENOUGH then
      collectgarbage "step"
      before = math.min(before, core.in_use())
    end
  end
end

-- One after the other in this process.
local function serially(plan, targets, todo, take)
  local collect = collector()
  for _, place in ipairs(todo) do
    local record = records.of(plan, targets[place])
    take(place, record)
    collect()
  end
  return 0
end

-- In processes of their own, which hand back texts. Returned: the memory that these took at most, in MB.
local function in_processes(plan, targets, todo, take, bar)
  local collect = collector()
  local function work(i)
    collect()
    return file.encode(records.of(plan, targets[todo[i]]))
  end
  local function taken(i, text) take(todo[i], file.decode(text), text) end
  return command.workers(math.min(command.threads, #todo), #todo, work, taken, function() bar:draw() end)
end

local function work_out(plan, targets, todo, take, bar)
  local mode = collectgarbage "generational"
  local clearing <close> = setmetatable({}, { __close = function()
    collectgarbage(mode)
    bar:clear()
  end })
  if command.workers and command.threads > 1 and #todo >= FEW then return in_processes(plan, targets, todo, take, bar) end
  return serially(plan, targets, todo, take)
end

-- All chosen targets of a study's list with their records, in the list's order.
function run.all(plan, list)
  local targets = chosen(list)
  if command.records then check_parts(targets, list) end
  local folder = command.out and open_folder(list) or nil
  local known, made, todo = known_records(folder), {}, {}
  for i, target in ipairs(targets) do
    made[i] = known[target.name]
    if not made[i] then todo[#todo + 1] = i end
  end
  local bar = progress.new(#targets, #targets - #todo)
  local children = work_out(plan, targets, todo, function(place, record, text)
    made[place] = record
    if folder then folder.handle:append(text or file.encode(record)) end
    bar:step()
  end, bar)
  return { records = made, targets = targets, folder = folder, bar = bar, children = children, input = list.input }
end

-- Closing -----------------------------------------------------------------------------------------------------------------------------

-- Calls f; what goes wrong when all targets are done leaves their records, and the message says so.
local function keeping_records(f, ...)
  local ok, result = pcall(f, ...)
  if ok then return result end
  local why = records.bare(result)
  error(why:find "interrupted!?$" and why or why .. "; what is done is kept there, and --resume goes on", 0)
end

-- The records in the targets' order, so that every complete run leaves the same file.
local function put_in_order(result)
  local texts = {}
  for i, record in ipairs(result.records) do texts[i] = file.encode(record) end
  result.folder.handle:close()
  keeping_records(core.write_file, result.folder.path, file.whole(result.folder.head, texts))
end

-- What the report tells of the run. Where a host made the study, or a line of code, there is no file of it.
function run.facts(result)
  local script, input, settings = command.script or {}, result.input, core.settings()
  local study_file = script.path or script.text and script.name
  local facts = {
    study_file = study_file, inputs = {}, texts = { [study_file or ""] = script.text },
    command = { set = set_texts(), only = command.only, arguments = command.arguments }, settings = { seed = settings.seed, draws = settings.draws },
    version = command.version, elapsed = result.bar.elapsed, peak_memory = result.bar.peak,
  }
  if input then facts.inputs[1], facts.texts[input.path] = input.path, input.text end
  return facts
end

local function count_failed(result)
  local failed = 0
  for _, record in ipairs(result.records) do if record.failed then failed = failed + 1 end end
  command.failed = command.failed + failed
end

local function summary(result)
  local count, shard = #result.records, command.shard
  local words = ("%d target%s"):format(count, count == 1 and "" or "s")
  return shard and ("part %d of %d: %s"):format(shard.number, shard.of, words) or words
end

-- Writes what is to be kept, and prints the table; of a part, none.
function run.close(study, result)
  count_failed(result)
  result.bar:close(summary(result), result.children)
  if result.folder then put_in_order(result) end
  if command.shard then return end
  local report = result.folder and keeping_records(core.part "lacuna.report".write, study, command.out, run.facts(result))
  core.part "lacuna.show".print(study:table())
  if report then io.stderr:write(tostring(report), "\n") end
end

return run
