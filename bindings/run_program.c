/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Running another program: no shell in between, its standard input and output as texts. The child belongs to a userdata, so that whatever
   is raised meanwhile (Ctrl-C, lack of memory) ends it, and leaves no zombie. */
#include <errno.h>
#include <fcntl.h>
#include <poll.h>
#include <signal.h>
#include <spawn.h>
#include <stdlib.h>
#include <string.h>
#include <sys/socket.h>
#include <sys/wait.h>
#include <unistd.h>

#include "binding.h"

enum { INPUT, OUTPUT, ERRORS, STREAMS };

typedef struct {
  pid_t child;        /* 0: none */
  int ours[STREAMS];  /* our ends; -1: closed */
  char errors[1000];  /* the first of what it complains about */
  size_t errors_length;
} running;

static void shut(int *file) {
  if (*file >= 0) close(*file);
  *file = -1;
}

static int running_finalise(lua_State *L) {
  running *r = lua_touserdata(L, 1);
  for (int i = 0; i < STREAMS; i++) shut(&r->ours[i]);
  if (r->child > 0) {
    kill(r->child, SIGKILL);
    while (waitpid(r->child, NULL, 0) < 0 && errno == EINTR) continue;
  }
  r->child = 0;
  return 0;
}

/* The holder at the stack's top, closed when the C function ends. */
static running *push_running(lua_State *L) {
  running *r = lua_newuserdatauv(L, sizeof *r, 0);
  *r = (running){.ours = {-1, -1, -1}};
  lua_createtable(L, 0, 2);
  lua_pushcfunction(L, running_finalise), lua_setfield(L, -2, "__gc");
  lua_pushcfunction(L, running_finalise), lua_setfield(L, -2, "__close");
  lua_setmetatable(L, -2);
  lua_toclose(L, lua_gettop(L));
  return r;
}

/* A list of texts as the null-ended array that exec wants; both stay on the stack, the texts anchored in their list. */
static char **push_texts(lua_State *L, int index, const char *what) {
  luaL_checktype(L, index, LUA_TTABLE);
  const size_t count = lua_rawlen(L, index);
  char **texts = lua_newuserdatauv(L, (count + 1) * sizeof *texts, 0);
  for (size_t i = 0; i < count; i++) {
    if (lua_rawgeti(L, index, (lua_Integer)i + 1) != LUA_TSTRING) lac_error(L, "run_program: %s wants texts", what);
    texts[i] = (char *)lua_tostring(L, -1); /* exec doesn't write to them */
    lua_pop(L, 1);
  }
  texts[count] = NULL;
  return texts;
}

/* Sockets, because a write to a child that has gone can then fail without a signal to the host. An errno, or 0. */
static int start(running *r, char **arguments, char **environment) {
  int theirs[STREAMS] = {-1, -1, -1}, trouble = 0;
  posix_spawn_file_actions_t actions;
  posix_spawnattr_t attributes;
  for (int i = 0; i < STREAMS && trouble == 0; i++) {
    int pair[2];
    if (socketpair(AF_UNIX, SOCK_STREAM | SOCK_CLOEXEC, 0, pair) != 0) trouble = errno;
    else r->ours[i] = pair[0], theirs[i] = pair[1];
  }
  if (trouble == 0) trouble = posix_spawn_file_actions_init(&actions);
  if (trouble == 0) {
    sigset_t none;
    sigemptyset(&none);
    posix_spawnattr_init(&attributes);
    posix_spawnattr_setsigmask(&attributes, &none);
    posix_spawnattr_setflags(&attributes, POSIX_SPAWN_SETSIGMASK);
    for (int i = 0; i < STREAMS && trouble == 0; i++) trouble = posix_spawn_file_actions_adddup2(&actions, theirs[i], i);
    if (trouble == 0) trouble = posix_spawnp(&r->child, arguments[0], &actions, &attributes, arguments, environment);
    if (trouble != 0) r->child = 0;
    posix_spawnattr_destroy(&attributes);
    posix_spawn_file_actions_destroy(&actions);
  }
  for (int i = 0; i < STREAMS; i++) shut(&theirs[i]);
  return trouble;
}

static void check_interrupted(lua_State *L, const lac_state *state) {
  if (state->work.poll(state->work.context)) lac_state_end(L, LAC_INTERRUPTED);
}

/* Sends what the child takes now; the end of the input where all is sent or it wants no more. */
static void send_some(running *r, const char **input, size_t *left) {
  const ssize_t sent = *left == 0 ? 0 : send(r->ours[INPUT], *input, *left, MSG_NOSIGNAL | MSG_DONTWAIT);
  if (sent > 0) *input += sent, *left -= (size_t)sent;
  if (*left == 0 || (sent < 0 && errno != EAGAIN && errno != EINTR)) shut(&r->ours[INPUT]);
}

static void receive_errors(running *r) {
  char piece[1000];
  const ssize_t got = recv(r->ours[ERRORS], piece, sizeof piece, MSG_DONTWAIT);
  if (got == 0 || (got < 0 && errno != EAGAIN && errno != EINTR)) shut(&r->ours[ERRORS]);
  const size_t room = sizeof r->errors - r->errors_length, kept = got < 0 ? 0 : (size_t)got < room ? (size_t)got : room;
  memcpy(r->errors + r->errors_length, piece, kept);
  r->errors_length += kept;
}

static void receive_output(running *r, luaL_Buffer *output) {
  char *room = luaL_prepbuffer(output);
  const ssize_t got = recv(r->ours[OUTPUT], room, LUAL_BUFFERSIZE, MSG_DONTWAIT);
  if (got > 0) luaL_addsize(output, (size_t)got);
  else if (got == 0 || (errno != EAGAIN && errno != EINTR)) shut(&r->ours[OUTPUT]);
}

/* Feeds the child and collects what it writes until it closes its ends; pushes its output. */
static void converse(lua_State *L, running *r, const lac_state *state, const char *input, size_t left) {
  luaL_Buffer output;
  luaL_buffinit(L, &output);
  while (r->ours[OUTPUT] >= 0 || r->ours[ERRORS] >= 0) {
    struct pollfd files[STREAMS] = {{r->ours[INPUT], POLLOUT, 0}, {r->ours[OUTPUT], POLLIN, 0}, {r->ours[ERRORS], POLLIN, 0}};
    const int ready = poll(files, STREAMS, 100);
    check_interrupted(L, state);
    if (ready <= 0) continue;
    if (files[INPUT].revents) send_some(r, &input, &left);
    if (files[OUTPUT].revents) receive_output(r, &output);
    if (files[ERRORS].revents) receive_errors(r);
  }
  luaL_pushresult(&output);
}

/* The exit status, or 128 and the signal. */
static int wait_for(lua_State *L, running *r, const lac_state *state) {
  int status = 0;
  pid_t ended;
  while ((ended = waitpid(r->child, &status, WNOHANG)) == 0 || (ended < 0 && errno == EINTR)) {
    check_interrupted(L, state);
    poll(NULL, 0, 5);
  }
  r->child = 0;
  if (ended < 0) return -1; /* a host that ignores SIGCHLD */
  return WIFEXITED(status) ? WEXITSTATUS(status) : 128 + WTERMSIG(status);
}

/* run_program({name, argument, ...}, input, {"KEY=value", ...}): what it wrote to standard output, its status, the first of what it wrote to
   standard error; nil and the reason where it can't be started. */
static int run_program(lua_State *L) {
  size_t left;
  const char *input = luaL_checklstring(L, 2, &left);
  lua_settop(L, 3);
  char **arguments = push_texts(L, 1, "arguments"), **environment = push_texts(L, 3, "environment");
  if (arguments[0] == NULL) return lac_error(L, "run_program wants a program");
  lac_check_decimal_point(L, arguments[0]);
  running *r = push_running(L);
  const lac_state *state = lac_state_begin(L);
  const int trouble = start(r, arguments, environment);
  if (trouble != 0) {
    lua_pushnil(L);
    lua_pushstring(L, strerror(trouble));
    return 2;
  }
  converse(L, r, state, input, left);
  lua_pushinteger(L, wait_for(L, r, state));
  lua_pushlstring(L, r->errors, r->errors_length);
  return 3;
}

void lac_open_run_program(lua_State *L) {
  static const luaL_Reg functions[] = {{"run_program", run_program}, {NULL, NULL}};
  luaL_setfuncs(L, functions, 0);
}
