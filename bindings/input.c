/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The inputs of a conversation on their way to the parts lacuna.session, which lets them share their locals and notes them, and
   lacuna.notebook, which reads files as such inputs. */
#include "binding.h"
#include "program.h"

/* Pushes a function of a part. */
static void push_word(lua_State *L, const char *part, const char *word) {
  lac_push_part(L, part);
  lua_getfield(L, -1, word);
  lua_remove(L, -2);
}

/* Arguments: the text and the chunk's name. Results: the function, or nil and the message. */
static int compile_input(lua_State *L) {
  push_word(L, "lacuna.session", "compile");
  lua_insert(L, 1);
  lua_call(L, 2, 2);
  return 2;
}

int program_compile_input(lua_State *L, const char *text, const char *chunk_name) {
  lua_pushcfunction(L, compile_input);
  lua_pushstring(L, text);
  lua_pushstring(L, chunk_name);
  const int status = lua_pcall(L, 2, 2, 0);
  if (status != LUA_OK) return status;
  const bool good = !lua_isnil(L, -2);
  if (good) lua_pop(L, 1);
  else lua_remove(L, -2);
  return good ? LUA_OK : LUA_ERRSYNTAX;
}

/* A local of an earlier input is an upvalue to Lua; to who typed it, it is a local. Of the error on the stack's top, if it is a text. */
static int in_plain_words(lua_State *L, int status) {
  if (status == LUA_OK || lua_type(L, -1) != LUA_TSTRING) return status;
  luaL_gsub(L, lua_tostring(L, -1), "(upvalue '", "(local '");
  lua_remove(L, -2);
  return status;
}

/* Arguments: the text, whether it went well, how many values were shown. */
static int tell_session(lua_State *L) {
  push_word(L, "lacuna.session", "ran");
  lua_insert(L, 1);
  lua_call(L, 3, 0);
  return 0;
}

int program_answer_input(lua_State *L, const char *text) {
  const int base = lua_gettop(L);
  int status = program_call(L, 0, LUA_MULTRET);
  const int results = lua_gettop(L) - base + 1;
  if (status == LUA_OK) status = program_show(L, base, true);
  lua_pushcfunction(L, tell_session);
  lua_pushstring(L, text);
  lua_pushboolean(L, status == LUA_OK);
  lua_pushinteger(L, results);
  const int told = lua_pcall(L, 3, 0, 0);
  if (told == LUA_OK) return in_plain_words(L, status);
  if (status == LUA_OK) return told;
  lua_pop(L, 1); /* of two errors the first is told */
  return status;
}

/* Argument: the file of --start, or nothing. */
static int run_file(lua_State *L) {
  const bool named = lua_gettop(L) > 0;
  push_word(L, "lacuna.notebook", named ? "start" : "start_up");
  lua_insert(L, 1);
  lua_call(L, named, 0);
  return 0;
}

int program_start_up(lua_State *L) {
  lua_pushcfunction(L, run_file);
  return in_plain_words(L, program_call(L, 0, 0));
}

int program_start(lua_State *L, const char *path) {
  if (path == NULL) return LUA_OK;
  lua_pushcfunction(L, run_file);
  lua_pushstring(L, path);
  return in_plain_words(L, program_call(L, 1, 0));
}
