/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Tab. What can stand at the cursor is found in Lua (complete.lua), from the whole input so far; here it is handed to readline, which
   completes words by its own habits and the user's settings of it. The second Tab lists, further ones turn the page. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <readline/readline.h>

#include <lauxlib.h>

#include "binding.h"
#include "prompt.h"

static lua_State *state; /* readline's hooks have no context */
static const char *earlier;
static const char candidates_key = 0; /* registry key: the list last found */

/* What was last asked, and found. */
static struct {
  int start;       /* of the word, in readline's line; -1: none */
  bool files;      /* it names a file */
  char quote;      /* in this quotation mark */
  bool stuck;      /* several candidates, and nothing that all of them add to the word */
  int listed;      /* candidates of the present list that were shown */
  int point;       /* where the cursor was when they were */
} found;

void completion_set_context(const char *lines) { earlier = lines; }

/* Calls a function of the part with the arguments on the stack's top. Never raises; no hook and no finaliser of the user's runs. */
static bool call_quietly(lua_State *L, lua_CFunction function, void *argument, int results) {
  lua_Hook hook = lua_gethook(L);
  int mask = lua_gethookmask(L), count = lua_gethookcount(L);
  const bool collecting = lua_gc(L, LUA_GCISRUNNING);
  if (!lua_checkstack(L, LUA_MINSTACK)) return false;
  lua_sethook(L, NULL, 0, 0);
  lua_gc(L, LUA_GCSTOP);
  lua_pushcfunction(L, function);
  lua_pushlightuserdata(L, argument);
  const bool good = lua_pcall(L, 1, results, 0) == LUA_OK;
  if (!good) lua_pop(L, 1);
  if (collecting) lua_gc(L, LUA_GCRESTART);
  lua_sethook(L, hook, mask, count);
  return good;
}

static void push_function(lua_State *L, const char *name) {
  lac_push_part(L, "lacuna.complete");
  lua_getfield(L, -1, name);
  lua_remove(L, -2);
}

/* at(input, cursor): leaves its results on the stack, and what all candidates have in common. */
static int ask(lua_State *L) {
  push_function(L, "at");
  lua_pushfstring(L, "%s%s%s", earlier ? earlier : "", earlier ? "\n" : "", rl_line_buffer);
  lua_pushinteger(L, (lua_Integer)(earlier ? strlen(earlier) + 1 : 0) + rl_point);
  lua_call(L, 2, 3);
  lua_pushvalue(L, -2);
  lua_rawsetp(L, LUA_REGISTRYINDEX, &candidates_key);
  lua_getfield(L, -2, "common");
  return 4;
}

/* readline asks with which characters a word ends: then the cursor's context is looked at. The one character before our word does. */
static char *find_word(void) {
  static char breaks[2];
  const int shift = earlier ? (int)strlen(earlier) + 1 : 0;
  found.start = -1;
  breaks[0] = ' ';
  if (!call_quietly(state, ask, NULL, 4)) return breaks;
  const int start = (int)lua_tointeger(state, -4) - 1 - shift;
  found.files = lua_toboolean(state, -2);
  found.stuck = lua_rawlen(state, -3) > 1 && lua_rawlen(state, -1) == (size_t)(rl_point - start);
  lua_pop(state, 4);
  if (start < 0 || start > rl_point || (start > 0 && (unsigned char)rl_line_buffer[start - 1] >= 0x80)) return breaks;
  found.start = start;
  found.quote = start > 0 ? rl_line_buffer[start - 1] : 0;
  breaks[0] = found.quote;
  return breaks;
}

static char *copy(const char *one, const char *other) {
  char *text = malloc(strlen(one) + strlen(other) + 1);
  if (text) strcpy(stpcpy(text, one), other);
  return text;
}

/* The matches as readline wants them: what all have in common, then each. One alone comes with what follows it. malloc's; NULL: none. */
static int make_matches(lua_State *L) {
  char ***matches = lua_touserdata(L, 1);
  lua_rawgetp(L, LUA_REGISTRYINDEX, &candidates_key);
  const lua_Integer count = lua_istable(L, 2) ? (lua_Integer)lua_rawlen(L, 2) : 0;
  if (count == 0) return 0;
  lua_getfield(L, 2, "common");
  *matches = calloc((size_t)count + 2, sizeof **matches);
  if (*matches == NULL) return 0;
  for (lua_Integer i = 1; i <= count; i++) {
    lua_rawgeti(L, 2, i);
    lua_getfield(L, -1, "text");
    lua_getfield(L, -2, "append");
    if (count == 1) (*matches)[0] = copy(lua_tostring(L, -2), lua_tostring(L, -1));
    else (*matches)[i] = copy(lua_tostring(L, -2), "");
    lua_pop(L, 3);
  }
  if (count > 1) (*matches)[0] = copy(lua_tostring(L, 3), "");
  return 0;
}

static char **complete_file(const char *text) {
  rl_completion_append_character = rl_line_buffer[rl_point] == found.quote ? 0 : found.quote;
  return *text == '~' ? NULL : rl_completion_matches(text, rl_filename_completion_function); /* Lua opens no ~ */
}

static char **complete_word(const char *text, int start, int end) {
  char **matches = NULL;
  if (end == 0) find_word(); /* readline doesn't ask where nothing stands before the cursor */
  rl_attempted_completion_over = 1;
  rl_sort_completion_matches = 0;
  if (rl_completion_type != '?' || rl_point != found.point) found.listed = 0;
  if (start != found.start) return NULL;
  if (found.files) return rl_sort_completion_matches = 1, complete_file(text);
  rl_completion_suppress_append = 1;
  return call_quietly(state, make_matches, &matches, 0) ? matches : NULL;
}

/* listing(candidates, from, columns, lines): the page's text, and how many of them have been shown by then. */
static int list_page(lua_State *L) {
  int lines, columns;
  rl_get_screen_size(&lines, &columns);
  lines -= rl_end / (columns > 0 ? columns : 80); /* the input comes again below it */
  push_function(L, "listing");
  lua_rawgetp(L, LUA_REGISTRYINDEX, &candidates_key);
  lua_pushinteger(L, found.listed + 1);
  lua_pushinteger(L, columns);
  lua_pushinteger(L, lines);
  lua_call(L, 4, 2);
  fputc('\n', rl_outstream);
  fputs(lua_tostring(L, -2), rl_outstream);
  found.listed = (int)lua_tointeger(L, -1);
  found.point = rl_point;
  return 0;
}

/* As many file names as there is room for. */
static void list_files(char **matches, int count, int longest) {
  int lines, columns;
  rl_get_screen_size(&lines, &columns);
  const int per_line = columns > longest + 2 ? columns / (longest + 2) : 1, room = per_line * (lines > 5 ? lines - 3 : 2);
  fputc('\n', rl_outstream);
  rl_display_match_list(matches, count < room ? count : room, longest);
  if (count > room) fprintf(rl_outstream, "and %d more\n", count - room);
}

static void list_matches(char **matches, int count, int longest) {
  if (found.files) list_files(matches, count, longest);
  else call_quietly(state, list_page, NULL, 0);
  rl_forced_update_display();
}

/* In an input's later line, Tab before the first word sets it in. */
static int complete_or_indent(int count, int key) {
  (void)count;
  const size_t blanks = strspn(rl_line_buffer, " \t");
  if (earlier && (size_t)rl_point <= blanks) return rl_insert_text("  "), 0;
  (void)key;
  int mode = rl_completion_mode(complete_or_indent);
  if (mode == '\t' && rl_last_func == complete_or_indent && find_word() && found.stuck) mode = '?'; /* the Tab before got this far */
  return rl_complete_internal(mode);
}

void completion_start(lua_State *L) {
  state = L;
  lac_push_part(L, "lacuna.complete"); /* now: before anybody can change what it is made with */
  lua_pop(L, 1);
  rl_completion_word_break_hook = find_word;
  rl_attempted_completion_function = complete_word;
  rl_completion_display_matches_hook = list_matches;
  rl_completer_quote_characters = NULL;
  rl_basic_quote_characters = "";
  rl_add_defun("complete-or-indent", complete_or_indent, '\t');
}
