/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A FITS file with one binary table, as the bytes of a text. CFITSIO writes it, in memory; its shared library is opened when the first
   table is asked for, since it would make each start of the program several times slower. Without the library: nil and why.
   Header and checksums after the FITS standard 4.0 (Pence et al. 2010, A&A 524, A42, and its later edition): CONTINUE for long texts,
   the same bytes each time, so no time of writing stands in it.
   Library, file and buffer belong to a userdata, so that an error raised between loses none of them. */
#include <dlfcn.h>
#include <fitsio.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "binding.h"

#define TEXT_OF(x) #x
#define VERSIONED(version) "libcfitsio.so." TEXT_OF(version)
static const char library_name[] = VERSIONED(CFITSIO_SONAME); /* the one whose header this was compiled with */

#define CALLS(X)                                                                                                                    \
  X(ffimem) X(ffcrtb) X(fficol) X(ffpkls) X(ffpcom) X(ffpcld) X(ffpcls) X(ffpkys) X(ffmkys) X(ffrdef) X(ffgcks) X(ffesum) X(ffflus) \
  X(ffghadll) X(ffclos) X(ffgerr) X(ffcmsg)

typedef struct {
  void *library;
#define POINTER(call) __typeof__(&call) call;
  CALLS(POINTER)
  fitsfile *file;
  void *bytes;
  size_t size;
  int status;
} writer;

static int writer_finalise(lua_State *L) {
  writer *w = lua_touserdata(L, 1);
  int status = 0;
  if (w->file != NULL) w->ffclos(w->file, &status);
  w->file = NULL;
  free(w->bytes);
  w->bytes = NULL;
  if (w->library != NULL) dlclose(w->library);
  w->library = NULL;
  return 0;
}

static writer *push_writer(lua_State *L) {
  writer *w = lua_newuserdatauv(L, sizeof *w, 0);
  *w = (writer){.library = NULL};
  lua_createtable(L, 0, 1);
  lua_pushcfunction(L, writer_finalise), lua_setfield(L, -2, "__gc");
  lua_setmetatable(L, -2);
  return w;
}

/* Whether the library and all its calls are there. It stays loaded: what it loads itself is not made to be unloaded. */
static bool find_library(writer *w) {
  w->library = dlopen(library_name, RTLD_NOW | RTLD_LOCAL | RTLD_NODELETE);
  if (w->library == NULL) return false;
  bool whole = true;
#define FIND(call) whole = (*(void **)&w->call = dlsym(w->library, #call)) != NULL && whole;
  CALLS(FIND)
  return whole;
}

/* Raises the library's complaint, if it has one. */
static void check(lua_State *L, writer *w) {
  if (w->status == 0) return;
  char words[FLEN_ERRMSG] = "";
  w->ffgerr(w->status, words);
  w->ffcmsg();
  lac_error(L, "FITS table: %s", words);
}

/* A text field of the table on top of the stack, or NULL; it stays anchored there as long as the table has it. */
static const char *text_of(lua_State *L, const char *field) {
  lua_getfield(L, -1, field);
  const char *text = lua_tostring(L, -1);
  lua_pop(L, 1);
  return text;
}

/* The values of a column, a list on top of the stack. */
static void write_numbers(lua_State *L, writer *w, int column, lua_Integer rows) {
  double *numbers = lua_newuserdatauv(L, (size_t)rows * sizeof *numbers + 1, 0);
  for (lua_Integer i = 0; i < rows; i++) {
    lua_rawgeti(L, -2, i + 1);
    numbers[i] = lua_tonumber(L, -1);
    lua_pop(L, 1);
  }
  w->ffpcld(w->file, column, 1, 1, rows, numbers, &w->status);
  lua_pop(L, 1);
}

static void write_texts(lua_State *L, writer *w, int column, lua_Integer rows) {
  for (lua_Integer i = 0; i < rows; i++) {
    lua_rawgeti(L, -1, i + 1);
    char *text = (char *)lua_tostring(L, -1); /* which the library only reads */
    w->ffpcls(w->file, column, i + 1, 1, 1, &text, &w->status);
    lua_pop(L, 1);
  }
}

static size_t longest_text(lua_State *L, lua_Integer rows) {
  size_t longest = 1;
  for (lua_Integer i = 0; i < rows; i++) {
    lua_rawgeti(L, -1, i + 1);
    const size_t length = lua_rawlen(L, -1);
    if (length > longest) longest = length;
    lua_pop(L, 1);
  }
  return longest;
}

static void put_key(writer *w, const char *name, int column, const char *value, const char *comment) {
  char key[16];
  snprintf(key, sizeof key, "%s%d", name, column);
  if (value != NULL) w->ffpkls(w->file, key, value, comment, &w->status);
}

/* The header of one column, {name =, unit =, description =, texts = true of texts, values...}, on top of the stack. */
static void add_column(lua_State *L, writer *w, int column, lua_Integer rows) {
  char form[32] = "D", name[FLEN_VALUE];
  lua_getfield(L, -1, "texts");
  if (lua_toboolean(L, -1)) lua_pop(L, 1), snprintf(form, sizeof form, "%zuA", longest_text(L, rows));
  else lua_pop(L, 1);
  snprintf(name, sizeof name, "%s", text_of(L, "name"));
  w->fficol(w->file, column, name, form, &w->status);
  put_key(w, "TUNIT", column, text_of(L, "unit"), "unit of the column");
  put_key(w, "TCOMM", column, text_of(L, "description"), NULL);
  check(L, w);
}

static void write_column(lua_State *L, writer *w, int column, lua_Integer rows) {
  lua_getfield(L, -1, "texts");
  const bool texts = lua_toboolean(L, -1);
  lua_pop(L, 1);
  if (texts) write_texts(L, w, column, rows);
  else write_numbers(L, w, column, rows);
  check(L, w);
}

/* CHECKSUM and DATASUM of the table; the library's own routine would put the time of writing beside them. */
static void add_checksums(writer *w) {
  unsigned long data = 0, all = 0;
  char sum[24];
  w->ffpkys(w->file, "CHECKSUM", "0000000000000000", "of the whole extension", &w->status);
  w->ffpkys(w->file, "DATASUM", "0", "of its data", &w->status);
  w->ffrdef(w->file, &w->status);
  w->ffgcks(w->file, &data, &all, &w->status);
  snprintf(sum, sizeof sum, "%lu", data);
  w->ffmkys(w->file, "DATASUM", sum, "&", &w->status);
  w->ffgcks(w->file, &data, &all, &w->status);
  w->ffesum(all, 1, sum);
  w->ffmkys(w->file, "CHECKSUM", sum, "&", &w->status);
}

/* Calls add for each column of the list at place 2. */
static void for_columns(lua_State *L, writer *w, lua_Integer rows, void (*add)(lua_State *, writer *, int, lua_Integer)) {
  const int columns = (int)lua_rawlen(L, 2);
  for (int i = 1; i <= columns; i++) {
    lua_rawgeti(L, 2, i);
    add(L, w, i, rows);
    lua_pop(L, 1);
  }
}

/* What is said of the table as a whole, {extname =, date = or nil, comments...}, at place 1. */
static void add_head(lua_State *L, writer *w) {
  lua_settop(L, 4); /* arguments and the writer */
  lua_pushvalue(L, 1);
  const char *date = text_of(L, "date");
  w->ffcrtb(w->file, BINARY_TBL, 0, 0, NULL, NULL, NULL, text_of(L, "extname"), &w->status);
  if (date != NULL) w->ffpkys(w->file, "DATE", date, "of the report", &w->status);
  for (lua_Integer i = 1; lua_rawgeti(L, 1, i) == LUA_TSTRING; i++) {
    w->ffpcom(w->file, lua_tostring(L, -1), &w->status);
    lua_pop(L, 1);
  }
  lua_settop(L, 4);
  check(L, w);
}

/* fits_table(about, columns, rows): the file's bytes; or nil and why not, where the library is missing. All texts are ASCII. */
static int fits_table(lua_State *L) {
  enum { MOST_COLUMNS = 999 }; /* of the standard */
  luaL_checktype(L, 1, LUA_TTABLE), luaL_checktype(L, 2, LUA_TTABLE);
  const lua_Integer rows = luaL_checkinteger(L, 3);
  lua_settop(L, 3);
  writer *w = push_writer(L);
  if (!find_library(w)) {
    lua_pushnil(L);
    lua_pushfstring(L, "%s is missing (CFITSIO)", library_name);
    return 2;
  }
  if (lua_rawlen(L, 2) > MOST_COLUMNS) return lac_error(L, "a FITS table has at most %d columns", MOST_COLUMNS);
  w->size = 4 * 2880;
  w->bytes = malloc(w->size);
  if (w->bytes == NULL) return lac_error(L, "%s", lac_status_words(LAC_NO_MEMORY));
  w->ffimem(&w->file, &w->bytes, &w->size, 16 * 2880, realloc, &w->status);
  add_head(L, w);
  for_columns(L, w, rows, add_column);
  for_columns(L, w, rows, write_column);
  add_checksums(w);
  LONGLONG end = 0;
  w->ffflus(w->file, &w->status);
  w->ffghadll(w->file, NULL, NULL, &end, &w->status);
  check(L, w);
  lua_pushlstring(L, w->bytes, (size_t)end);
  return 1;
}

void lac_open_fits(lua_State *L) {
  lua_pushcfunction(L, fits_table);
  lua_setfield(L, -2, "fits_table");
}
