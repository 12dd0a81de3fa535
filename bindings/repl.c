/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The conversation at a terminal, on readline. Its callback interface with ppoll, and SIGINT blocked but there, is the one way in which
   neither a Ctrl-C nor what is typed after it gets lost. Whether an input is complete is judged by the parser. */
#define _GNU_SOURCE
#include <errno.h>
#include <fcntl.h>
#include <poll.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <time.h>
#include <unistd.h>

#include <readline/history.h>
#include <readline/readline.h>

#include <lauxlib.h>

#include "program.h"

static const char banner[] = "Lacuna " LAC_VERSION ": help() for help, Ctrl-D to leave.\n"
                             "It estimates what is feasible; the observatory's own documents and staff decide.\n";

enum { MOST_OF_PATH = 4096 };

/* readline's callbacks have no context. */
static char *typed;
static bool finished;
static volatile sig_atomic_t continued;

static void take_line(char *line) {
  typed = line;
  finished = true;
  rl_callback_handler_remove();
}

static void on_continue(int number) {
  (void)number;
  continued = 1;
}

/* After Ctrl-Z and fg the terminal has the shell's settings. */
static void take_terminal_back(void) {
  continued = 0;
  rl_deprep_terminal();
  rl_prep_terminal(1);
  rl_forced_update_display();
}

static void cancel_line(void) {
  rl_callback_sigcleanup();
  rl_callback_handler_remove();
  fputs("^C\n", rl_outstream);
}

typedef enum { LINE, END, CANCELLED } reply;

/* A ppoll that finds input doesn't let a waiting signal in, and what is typed after a Ctrl-C must not be read before it. */
static void let_interruption_in(const sigset_t *open) {
  sigset_t waiting, mask;
  sigpending(&waiting);
  if (!sigismember(&waiting, SIGINT)) return;
  sigprocmask(SIG_SETMASK, open, &mask);
  sigprocmask(SIG_SETMASK, &mask, NULL);
}

/* Reads one line into *line (malloc's). SIGINT is blocked, and let in while there is nothing to read. */
static reply read_line(const char *prompt, char **line) {
  sigset_t open;
  sigprocmask(SIG_SETMASK, NULL, &open);
  sigdelset(&open, SIGINT);
  typed = NULL;
  finished = false;
  rl_callback_handler_install(prompt, take_line);
  while (!finished) {
    struct pollfd input = {.fd = STDIN_FILENO, .events = POLLIN};
    int ready = ppoll(&input, 1, NULL, &open);
    if (ready > 0) let_interruption_in(&open);
    if (program_was_interrupted()) return cancel_line(), CANCELLED;
    if (ready > 0) rl_callback_read_char();
    else if (continued) take_terminal_back();
    else if (errno != EINTR) return rl_callback_handler_remove(), END;
  }
  *line = typed;
  return typed ? LINE : END;
}

/* Makes the directories that lead to a path's last part, for the user alone. */
static bool make_directories(char *path) {
  for (char *slash = strchr(path + 1, '/'); slash; slash = strchr(slash + 1, '/')) {
    *slash = 0;
    bool there = mkdir(path, 0700) == 0 || errno == EEXIST;
    *slash = '/';
    if (!there) return false;
  }
  return true;
}

/* The history's file, in the XDG state folder. Where there is none there is no history, in silence: the folder may be read-only. */
static bool find_history(char *path) {
  const char *state = getenv("XDG_STATE_HOME"), *home = getenv("HOME");
  int length;
  if (state && *state == '/') length = snprintf(path, MOST_OF_PATH, "%s/lacuna/history", state);
  else if (home && *home == '/') length = snprintf(path, MOST_OF_PATH, "%s/.local/state/lacuna/history", home);
  else return false;
  return length < MOST_OF_PATH && make_directories(path);
}

/* Adds an input to the history. To the file it goes at once, in one write, so that neither a second session nor a crash spoils it; the
   time line before it is what lets readline keep an input of several lines together. */
static void remember(const char *path, const char *input) {
  HIST_ENTRY *last = history_length ? history_get(history_base + history_length - 1) : NULL;
  if (last && strcmp(last->line, input) == 0) return;
  add_history(input);
  if (*path == 0) return;
  char *entry;
  int length = asprintf(&entry, "#%lld\n%s\n", (long long)time(NULL), input);
  if (length < 0) return;
  int file = open(path, O_WRONLY | O_APPEND | O_CREAT | O_CLOEXEC, 0600);
  if (file >= 0) {
    if (write(file, entry, (size_t)length) != length) rl_ding();
    close(file);
  }
  free(entry);
}

/* Reads until the parser has a whole chunk, or sees that it can't become one. The input so far is on the stack's top, then what it was
   loaded to: a function or a message. */
static reply read_input(lua_State *L, int *status) {
  char *line;
  reply answer = read_line("> ", &line);
  if (answer != LINE) return answer;
  lua_pushstring(L, line);
  free(line);
  while ((*status = program_load(L, lua_tostring(L, -1), "=prompt")) != LUA_OK && program_is_beginning(L)) {
    lua_pop(L, 1);
    answer = read_line(">> ", &line);
    if (answer != LINE) return answer;
    lua_pushfstring(L, "%s\n%s", lua_tostring(L, -1), line);
    free(line);
    lua_remove(L, -2);
  }
  return LINE;
}

/* In a line by itself the position of a mistake is no news: cuts it off the message on top. */
static void drop_position(lua_State *L) {
  static const char position[] = "prompt:1: ";
  const char *message = lua_tostring(L, -1);
  if (message == NULL || strncmp(message, position, sizeof position - 1) != 0) return;
  lua_pushstring(L, message + sizeof position - 1);
  lua_replace(L, -2);
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
  int base = lua_gettop(L);
  sigprocmask(SIG_UNBLOCK, interruption, NULL);
  int status = program_call(L, 0, LUA_MULTRET);
  if (status == LUA_OK) status = program_show(L, base, true);
  sigprocmask(SIG_BLOCK, interruption, NULL);
  return status;
}

static void start_readline(char *history) {
  struct sigaction on_resume = {.sa_handler = on_continue};
  sigemptyset(&on_resume.sa_mask);
  sigaction(SIGCONT, &on_resume, NULL);
  rl_readline_name = "lacuna";
  rl_catch_signals = 0;
  rl_outstream = isatty(STDOUT_FILENO) ? stdout : stderr;
  rl_bind_key('\t', rl_insert);
  using_history();
  history_comment_char = '#';
  history_write_timestamps = 1;
  if (find_history(history)) read_history(history);
  else *history = 0;
}

void program_repl(lua_State *L) {
  char history[MOST_OF_PATH];
  sigset_t interruption;
  sigemptyset(&interruption);
  sigaddset(&interruption, SIGINT);
  sigprocmask(SIG_BLOCK, &interruption, NULL);
  start_readline(history);
  if (isatty(STDOUT_FILENO)) fputs(banner, stdout);
  for (;;) {
    int status = LUA_OK;
    lua_settop(L, 0);
    reply answer = read_input(L, &status);
    if (answer == END || (answer != CANCELLED && is_farewell(lua_tostring(L, 1)))) break;
    program_forget_interruption();
    if (answer == CANCELLED || is_blank(lua_tostring(L, 1))) continue;
    remember(history, lua_tostring(L, 1));
    if (status == LUA_OK) status = answer_input(L, &interruption);
    if (status != LUA_OK) {
      drop_position(L);
      program_report(L, program_was_interrupted() ? "\n" : ""); /* the terminal has shown ^C */
    }
    fflush(stdout);
    program_forget_interruption();
  }
  fputc('\n', rl_outstream);
}
