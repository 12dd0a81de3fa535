/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The program: a script, a line of code, or a conversation at a terminal. Exit status 0, 1 for a failed script, 2 for wrong usage. */
#include <errno.h>
#include <lauxlib.h>
#include <lualib.h>
#include <malloc.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "binding.h"
#include "options.h"
#include "program.h"

void program_report(lua_State *L, const char *prefix) {
  const char *message = program_was_interrupted() ? "interrupted" : lua_tostring(L, -1);
  fflush(stdout);
  fprintf(stderr, "%s%s\n", prefix, message ? message : "an error without words");
  lua_pop(L, 1);
}

bool program_is_beginning(lua_State *L) {
  static const char mark[] = "<eof>";
  size_t length;
  const char *message = lua_tolstring(L, -1, &length);
  return message && length >= sizeof mark - 1 && strcmp(message + length - (sizeof mark - 1), mark) == 0;
}

int program_load(lua_State *L, const char *text, const char *chunk_name) {
  const char *expression = lua_pushfstring(L, "return %s", text);
  int status = luaL_loadbufferx(L, expression, strlen(expression), chunk_name, "t");
  if (status != LUA_OK && !program_is_beginning(L)) {
    lua_pop(L, 1);
    status = luaL_loadbufferx(L, text, strlen(text), chunk_name, "t");
  }
  lua_remove(L, -2);
  return status;
}

/* Writes the values at its arguments' places as the module's show does. */
static int show_values(lua_State *L) {
  lua_getfield(L, LUA_REGISTRYINDEX, LUA_LOADED_TABLE);
  lua_getfield(L, -1, "lacuna");
  lua_getfield(L, -1, "show");
  lua_replace(L, -3);
  lua_pop(L, 1);
  lua_insert(L, 1);
  lua_call(L, lua_gettop(L) - 1, 1);
  puts(luaL_tolstring(L, -1, NULL));
  return 0;
}

int program_show(lua_State *L, int from) {
  int count = lua_gettop(L) - from + 1;
  if (count == 0) return LUA_OK;
  luaL_checkstack(L, 8, "too many results");
  lua_pushcfunction(L, show_values);
  lua_insert(L, from);
  return program_call(L, count, 0);
}

/* What a script finds under _G: the standard libraries, and the module's words, units and names. */
static int open_libraries(lua_State *L) {
  lua_gc(L, LUA_GCSTOP);
  luaL_openlibs(L);
  luaL_requiref(L, "lacuna", luaopen_lacuna, 0);
  lua_getfield(L, -1, "globals");
  lua_pushglobaltable(L);
  lua_call(L, 1, 0);
  lua_gc(L, LUA_GCRESTART);
  return 0;
}

/* Makes one setting, as the module's settings{name = text} does, which also says what is right. */
static int make_setting(lua_State *L) {
  lua_getfield(L, LUA_REGISTRYINDEX, LUA_LOADED_TABLE);
  lua_getfield(L, -1, "lacuna");
  lua_getfield(L, -1, "settings");
  lua_createtable(L, 0, 1);
  lua_pushvalue(L, 2);
  lua_setfield(L, -2, lua_tostring(L, 1));
  lua_call(L, 1, 0);
  return 0;
}

/* Makes the settings among the options given. Returned: 0, or the exit status. */
static int make_settings(lua_State *L, const command_line *line) {
  static const char subject[] = "settings: ";
  for (int i = 0; i < line->given_count; i++) {
    const given_option *given = &line->given[i];
    if (given->option->kind != OPTION_SETTING) continue;
    lua_pushcfunction(L, make_setting);
    lua_pushstring(L, given->option->name + 2);
    lua_pushstring(L, given->text);
    if (lua_pcall(L, 2, 0, 0) == LUA_OK) continue;
    const char *message = lua_tostring(L, -1), *found = message ? strstr(message, subject) : NULL;
    if (found) fprintf(stderr, "lacuna: --%s\n", found + strlen(subject));
    else fprintf(stderr, "lacuna: %s: %s\n", given->option->name, message ? message : "refused");
    return WRONG_USAGE;
  }
  return 0;
}

/* The command line of a study (command.lua). */

/* Pushes that table's function, a field of it. */
static void push_command(lua_State *L, const char *field) {
  lac_push_part(L, "lacuna.command");
  lua_getfield(L, -1, field);
  lua_remove(L, -2);
}

static const char *base_name(const char *path) {
  const char *slash = strrchr(path, '/');
  return slash ? slash + 1 : path;
}

/* Fills it, from the line at place 1. Raises where an option isn't right. */
static int fill_command(lua_State *L) {
  const command_line *line = lua_touserdata(L, 1);
  lac_push_part(L, "lacuna.command");
  program_open_workers(L);
  lua_pushboolean(L, true), lua_setfield(L, -2, "program");
  lua_pushliteral(L, LAC_VERSION), lua_setfield(L, -2, "version");
  lua_createtable(L, 0, 2);
  if (!line->code && line->count && strcmp(line->rest[0], "-") != 0) {
    lua_pushstring(L, base_name(line->rest[0])), lua_setfield(L, -2, "name");
    lua_pushstring(L, line->rest[0]), lua_setfield(L, -2, "path");
  }
  lua_setfield(L, -2, "script");
  lua_newtable(L);
  for (int i = 1; i < line->count; i++) lua_pushstring(L, line->rest[i]), lua_rawseti(L, -2, i);
  lua_setfield(L, -2, "arguments");
  for (int i = 0; i < line->given_count; i++) {
    if (line->given[i].option->kind != OPTION_STUDY) continue;
    push_command(L, "take");
    lua_pushstring(L, line->given[i].option->name);
    lua_pushstring(L, line->given[i].text);
    lua_call(L, 2, 0);
  }
  push_command(L, "check");
  lua_call(L, 0, 0);
  return 0;
}

static int read_command(lua_State *L, command_line *line) {
  lua_pushcfunction(L, fill_command);
  lua_pushlightuserdata(L, line);
  if (lua_pcall(L, 1, 0, 0) == LUA_OK) return 0;
  program_report(L, "lacuna: ");
  return WRONG_USAGE;
}

/* The exit status after a script that went well: a study may have had something to say that is no error of the script's. */
static int close_command(lua_State *L) {
  push_command(L, "close");
  if (lua_pcall(L, 0, 2, 0) != LUA_OK) return program_report(L, "lacuna: "), FAILED;
  const int status = (int)lua_tointeger(L, -2);
  if (status != 0) program_report(L, "lacuna: ");
  else lua_pop(L, 1);
  lua_pop(L, 1);
  return status;
}

static bool is_merge(const command_line *line) { return !line->code && line->count > 0 && strcmp(line->rest[0], "merge") == 0; }

/* Its arguments are the folders of merge. */
static int run_merge(lua_State *L) {
  lac_push_part(L, "lacuna.merge");
  lua_getfield(L, -1, "run");
  lua_replace(L, -2);
  lua_insert(L, 1);
  lua_call(L, lua_gettop(L) - 1, 0);
  return 0;
}

/* The table `arg`: the script's name at 0, its arguments from 1. */
static void set_arguments(lua_State *L, const command_line *line) {
  int shift = line->code ? 1 : 0;
  lua_createtable(L, line->count, 1);
  if (line->code) {
    lua_pushliteral(L, "-e");
    lua_rawseti(L, -2, 0);
  }
  for (int i = 0; i < line->count; i++) {
    lua_pushstring(L, line->rest[i]);
    lua_rawseti(L, -2, i + shift);
  }
  lua_setglobal(L, "arg");
}

/* Loads what the command line names and calls it. Returned: a status of Lua's. */
static int run(lua_State *L, const command_line *line) {
  int status, first = line->code ? 0 : 1;
  if (line->code) status = program_load(L, line->code, "=-e");
  else if (is_merge(line)) status = (lua_pushcfunction(L, run_merge), LUA_OK);
  else status = luaL_loadfile(L, line->count && strcmp(line->rest[0], "-") != 0 ? line->rest[0] : NULL);
  if (status != LUA_OK) return status;
  int base = lua_gettop(L);
  luaL_checkstack(L, line->count, "too many arguments");
  for (int i = first; i < line->count; i++) lua_pushstring(L, line->rest[i]);
  status = program_call(L, lua_gettop(L) - base, line->code ? LUA_MULTRET : 0);
  return status == LUA_OK && line->code ? program_show(L, base) : status;
}

/* A failed script's exit status. One stopped by Ctrl-C ends by that signal, so that a loop of the shell's around it ends too. */
static int failed(lua_State *L) {
  program_report(L, "lacuna: ");
  if (program_was_interrupted()) {
    lua_close(L);
    signal(SIGINT, SIG_DFL);
    raise(SIGINT);
  }
  return FAILED;
}

/* The exit status, once all that was written has left. */
static int finished(int status) {
  if (fflush(stdout) == 0 && !ferror(stdout)) return status;
  fprintf(stderr, "lacuna: cannot write to standard output: %s\n", strerror(errno));
  return FAILED;
}

static int run_program(command_line *line) {
  lua_State *L = luaL_newstate();
  if (L == NULL) return fputs("lacuna: out of memory\n", stderr), FAILED;
  lua_pushcfunction(L, open_libraries);
  if (lua_pcall(L, 0, 0, 0) != LUA_OK) return failed(L);
  int status = make_settings(L, line);
  if (status == 0) status = read_command(L, line);
  if (status != 0) return lua_close(L), status;
  bool conversation = line->code == NULL && line->count == 0 && isatty(STDIN_FILENO);
  program_catch_interrupts(L, conversation);
  set_arguments(L, line);
  if (conversation) program_repl(L);
  else if (run(L, line) != LUA_OK) status = failed(L);
  else status = close_command(L);
  lua_close(L);
  return status;
}

int main(int count, char **arguments) {
  mallopt(M_TRIM_THRESHOLD, 64 << 20); /* memory that is given back to the system is touched anew for the next ensemble, which costs more than it */
  mallopt(M_MMAP_THRESHOLD, 4 << 20);
  mallopt(M_TOP_PAD, 1 << 20);
  command_line line = {.code = NULL};
  int status = count > 0 ? command_line_read(&line, arguments + 1) : WRONG_USAGE;
  if (status < 0) status = run_program(&line);
  command_line_drop(&line);
  return finished(status);
}
