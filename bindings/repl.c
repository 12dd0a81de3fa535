/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The conversation at a terminal. Whether an input is complete is judged by the parser. */
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include <readline/readline.h>

#include <lauxlib.h>

#include "binding.h"
#include "program.h"
#include "prompt.h"

static const char banner[] = "Lacuna " LAC_VERSION ": help() for help, Ctrl-D to leave.\n"
                             "It estimates what is feasible; the observatory's own documents and staff decide.\n";

/* Reads until the parser has a whole chunk, or sees that it can't become one. The input so far is on the stack's top, then what it was
   loaded to: a function or a message. */
static reply read_input(lua_State *L, int *status) {
  char *line;
  reply answer = prompt_read_line("> ", NULL, &line);
  if (answer != LINE) return answer;
  lua_pushstring(L, line);
  free(line);
  while ((*status = program_compile_input(L, lua_tostring(L, -1), "=prompt")) != LUA_OK && program_is_beginning(L)) {
    lua_pop(L, 1);
    answer = prompt_read_line(">> ", lua_tostring(L, -1), &line);
    if (answer != LINE) return answer;
    lua_pushfstring(L, "%s\n%s", lua_tostring(L, -1), line);
    free(line);
    lua_remove(L, -2);
  }
  return LINE;
}

/* In an input of one line the position of a mistake is no news: cuts it off the message on top. */
static void drop_position(lua_State *L, const char *input) {
  static const char position[] = "prompt:1: ";
  const char *message = lua_tostring(L, -1);
  if (message == NULL || strchr(input, '\n') || strncmp(message, position, sizeof position - 1) != 0) return;
  lua_pushstring(L, message + sizeof position - 1);
  lua_replace(L, -2);
}

/* Folds the message on top at the terminal's width, between words. If that fails it stays as it is. */
static int fold(lua_State *L) {
  lac_push_part(L, "lacuna.show");
  lua_getfield(L, -1, "page");
  lua_createtable(L, 1, 0);
  lua_pushvalue(L, 1);
  lua_rawseti(L, -2, 1);
  lua_call(L, 1, 1);
  return 1;
}

static void fold_message(lua_State *L) {
  if (!lua_isstring(L, -1) || program_was_interrupted()) return;
  lua_pushcfunction(L, fold);
  lua_pushvalue(L, -2);
  if (lua_pcall(L, 1, 1, 0) == LUA_OK && lua_isstring(L, -1)) lua_replace(L, -2);
  else lua_pop(L, 1);
}

static bool is_blank(const char *text) { return text[strspn(text, " \t\r\n")] == 0; }

/* What people type to leave, as Ctrl-D does. */
static bool is_farewell(const char *text) {
  static const char *const words[] = {"exit", "quit", "exit()", "quit()"};
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++)
    if (strcmp(text, words[i]) == 0) return true;
  return false;
}

/* Calls the function on the stack's top and shows what it returns; SIGINT comes through meanwhile. */
static int answer_input(lua_State *L, const sigset_t *interruption) {
  sigprocmask(SIG_UNBLOCK, interruption, NULL);
  int status = program_answer_input(L, lua_tostring(L, 1));
  sigprocmask(SIG_BLOCK, interruption, NULL);
  return status;
}

/* What failed is told of, and the conversation goes on. */
static void finish_answer(lua_State *L, int status, const char *input) {
  if (status != LUA_OK) {
    drop_position(L, input);
    fold_message(L);
    program_report(L, program_was_interrupted() ? "\n" : ""); /* the terminal has shown ^C */
  }
  fflush(stdout);
  program_forget_interruption();
}

/* The personal start-up file and the one that was asked for, as if they were typed. */
static void read_start(lua_State *L, const char *start, const sigset_t *interruption) {
  sigprocmask(SIG_UNBLOCK, interruption, NULL);
  finish_answer(L, program_start_up(L), "");
  finish_answer(L, program_start(L, start), "");
  sigprocmask(SIG_BLOCK, interruption, NULL);
}

void program_repl(lua_State *L, const char *start) {
  sigset_t interruption;
  sigemptyset(&interruption);
  sigaddset(&interruption, SIGINT);
  prompt_start();
  lines_start();
  history_start();
  completion_start(L);
  if (isatty(STDOUT_FILENO)) fputs(banner, stdout);
  read_start(L, start, &interruption);
  for (;;) {
    int status = LUA_OK;
    lua_settop(L, 0);
    reply answer = read_input(L, &status);
    if (answer == END || (answer != CANCELLED && is_farewell(lua_tostring(L, 1)))) break;
    program_forget_interruption();
    if (answer == CANCELLED || is_blank(lua_tostring(L, 1))) continue;
    history_remember(lua_tostring(L, 1));
    if (status == LUA_OK) status = answer_input(L, &interruption);
    finish_answer(L, status, lua_tostring(L, 1));
  }
  fputc('\n', rl_outstream);
}
