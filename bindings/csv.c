/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Comma-separated values from a file, by libcsv in its strict mode, as Lua tables. The text is fed line by line, so that each row
   knows the line it starts on and a defect its line and column. What the fields mean is settled in targets.lua.
   File and parser belong to a userdata, so that an error raised between (out of memory, say) loses neither. */
#include <csv.h>
#include <errno.h>
#include <stdio.h>
#include <string.h>

#include "binding.h"

typedef struct {
  FILE *file;
  struct csv_parser parser;
  bool parsing; /* the parser holds memory */
  lua_State *L;
  int list;             /* the place of the list of rows on its stack; the open row is right above */
  lua_Integer line;     /* being fed */
  lua_Integer row_line; /* where the open row started */
  lua_Integer rows, fields;
} reader;

static int reader_finalise(lua_State *L) {
  reader *r = lua_touserdata(L, 1);
  if (r->file != NULL) fclose(r->file);
  r->file = NULL;
  if (r->parsing) csv_free(&r->parser);
  r->parsing = false;
  return 0;
}

static reader *push_reader(lua_State *L) {
  reader *r = lua_newuserdatauv(L, sizeof *r, 0);
  *r = (reader){.file = NULL};
  lua_createtable(L, 0, 1);
  lua_pushcfunction(L, reader_finalise), lua_setfield(L, -2, "__gc");
  lua_setmetatable(L, -2);
  return r;
}

/* Pushes the file's whole text. */
static void push_text(lua_State *L, reader *r, const char *path, const char *name) {
  r->file = fopen(path, "rb");
  if (r->file == NULL) lac_error(L, "cannot open %s: %s", name, strerror(errno));
  luaL_Buffer text;
  luaL_buffinit(L, &text);
  for (size_t got = 1; got > 0;) {
    char *room = luaL_prepbuffer(&text);
    got = fread(room, 1, LUAL_BUFFERSIZE, r->file);
    luaL_addsize(&text, got);
  }
  if (ferror(r->file)) lac_error(L, "cannot read %s: %s", name, strerror(errno));
  luaL_pushresult(&text);
  fclose(r->file);
  r->file = NULL;
}

static void end_field(void *field, size_t length, void *context) {
  reader *r = context;
  if (r->fields == 0) {
    lua_newtable(r->L);
    lua_pushinteger(r->L, r->row_line), lua_setfield(r->L, -2, "line");
  }
  lua_pushlstring(r->L, field, length);
  lua_rawseti(r->L, r->list + 1, ++r->fields);
}

static void end_row(int terminator, void *context) {
  (void)terminator;
  reader *r = context;
  if (r->fields > 0) lua_rawseti(r->L, r->list, ++r->rows);
  r->fields = 0;
}

/* The length of the line at text, its end included: \n, \r or both. */
static size_t line_length(const char *text, size_t length) {
  size_t end = 0;
  while (end < length && text[end] != '\n' && text[end] != '\r') end++;
  if (end < length && text[end] == '\r' && end + 1 < length && text[end + 1] == '\n') end++;
  return end < length ? end + 1 : length;
}

/* How many characters the UTF-8 bytes are. */
static lua_Integer characters(const char *text, size_t length) {
  lua_Integer count = 0;
  for (size_t i = 0; i < length; i++) count += ((unsigned char)text[i] & 0xC0) != 0x80;
  return count;
}

static void parse(lua_State *L, reader *r, const char *name, const char *text, size_t length) {
  bool inside = false; /* a row is open at the end of the line before: a quoted field goes on */
  for (size_t at = 0, step; at < length; at += step) {
    step = line_length(text + at, length - at);
    r->line++;
    if (!inside) r->row_line = r->line;
    const lua_Integer rows = r->rows;
    const size_t taken = csv_parse(&r->parser, text + at, step, end_field, end_row, r);
    if (taken < step && csv_error(&r->parser) == CSV_EPARSE)
      lac_error(
          L,
          "%s:%I:%I: malformed CSV: a quotation mark out of place; a quoted field stands in \" \" as a whole, with \"\" for each inside it",
          name, r->line, characters(text + at, taken) + 1);
    if (taken < step) lac_error(L, "%s:%I: %s", name, r->line, csv_strerror(csv_error(&r->parser)));
    inside = r->rows == rows && (inside || step > strspn(text + at, " \t\r\n"));
  }
  if (csv_fini(&r->parser, end_field, end_row, r) != 0)
    lac_error(L, "%s:%I: malformed CSV: a quoted field of the row that starts here is never closed", name, r->row_line);
}

/* read_csv(path, name, text): a list of rows, each a list of texts with `line` = where it starts. Errors call the file by name. The text, if
   it is given, stands for the file's. */
static int read_csv(lua_State *L) {
  enum { READER = 3, TEXT, ROWS };           /* places on the stack; the open row, while there is one, is above them */
  static const char mark[] = "\xEF\xBB\xBF"; /* of UTF-8; some programs write it */
  const char *path = luaL_checkstring(L, 1), *name = luaL_optstring(L, 2, path);
  lua_settop(L, 3);
  reader *r = push_reader(L);
  r->L = L;
  lua_insert(L, READER);
  if (!lua_isstring(L, TEXT)) lua_pop(L, 1), push_text(L, r, path, name);
  lua_newtable(L);
  r->list = ROWS;
  size_t length;
  const char *text = lua_tolstring(L, TEXT, &length);
  const size_t skipped = strncmp(text, mark, sizeof mark - 1) == 0 ? sizeof mark - 1 : 0;
  if (csv_init(&r->parser, CSV_STRICT | CSV_STRICT_FINI) != 0) lac_error(L, "%s", lac_status_words(LAC_NO_MEMORY));
  r->parsing = true;
  parse(L, r, name, text + skipped, length - skipped);
  lua_settop(L, ROWS);
  return 1;
}

void lac_open_csv(lua_State *L) {
  lua_pushcfunction(L, read_csv);
  lua_setfield(L, -2, "read_csv");
}
