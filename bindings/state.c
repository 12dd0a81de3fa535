/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What a Lua state's calculations share, kept in its registry: memory, threads, seed, tables; and how a long computation is
   interrupted. In a host that is not ours no signal handler is installed: between blocks the calling thread looks whether the
   host has set a hook since the call began (as hosts do on Ctrl-C), leaves the computation, and lets that hook raise. */
#include <gsl/gsl_errno.h>
#include <limits.h>
#include <locale.h>
#include <pthread.h>
#include <stdarg.h>
#include <string.h>
#include <unistd.h>

#include "binding.h"

static const char state_key = 0, error_key = 0; /* their addresses are the keys */

/* A forked child has none of the parent's threads: it computes on one. Set by the handler below, never cleared. */
static volatile sig_atomic_t forked = 0;
static void after_fork(void) { forked = 1; }
static pthread_once_t watch_forks = PTHREAD_ONCE_INIT;
static void start_watching(void) {
  pthread_atfork(NULL, NULL, after_fork);
  gsl_set_error_handler_off(); /* process-wide in GSL; its default would abort the host */
}

/* The position of the nearest caller that is not one of the binding's own sources: where the user's mistake is. */
static void push_position(lua_State *L) {
  lua_Debug activation;
  for (int level = 1; lua_getstack(L, level, &activation); level++) {
    lua_getinfo(L, "Sl", &activation);
    if (activation.currentline < 1 || strncmp(activation.source, "=lacuna.", 8) == 0) continue;
    lua_pushfstring(L, "%s:%d: ", activation.short_src, activation.currentline);
    return;
  }
  lua_pushliteral(L, "");
}

int lac_error(lua_State *L, const char *format, ...) {
  va_list arguments;
  va_start(arguments, format);
  push_position(L);
  const char *message = lua_pushvfstring(L, format, arguments);
  va_end(arguments);
  if (strchr(message, '\n') != NULL) { /* of a text that is quoted: the message is one line */
    luaL_gsub(L, message, "\n", " ");
    lua_remove(L, -2);
  }
  lua_concat(L, 2);
  return lua_error(L);
}

const char *lac_shown(lua_State *L, int index) {
  switch (lua_type(L, index)) {
  case LUA_TNONE:
  case LUA_TNIL: lua_pushliteral(L, "nothing"); break;
  case LUA_TSTRING: lua_pushfstring(L, "\"%s\"", lua_tostring(L, index)); break;
  case LUA_TTABLE:
  case LUA_TFUNCTION:
  case LUA_TTHREAD: lua_pushfstring(L, "a %s", luaL_typename(L, index)); break;
  default: luaL_tolstring(L, index, NULL); break;
  }
  return lua_tostring(L, -1);
}

/* raise(message): the same for the sources in Lua. */
static int raise_message(lua_State *L) { return lac_error(L, "%s", luaL_checkstring(L, 1)); }

/* shown(value): as lac_shown, for the sources in Lua. */
static int show_value(lua_State *L) {
  lac_shown(L, 1);
  return 1;
}

void lac_check_decimal_point(lua_State *L, const char *what) {
  const char *point = localeconv()->decimal_point;
  if (strcmp(point, ".") != 0)
    lac_error(L, "%s: the locale that is set would write numbers with \"%s\" for the decimal point; os.setlocale(\"C\", \"numeric\") sets the point", what, point);
}

/* On Ctrl-C a host arms the thread that it knows: mostly the main one, even while a coroutine runs. */
static int poll_hook(void *context) {
  const lac_state *state = context;
  return lua_gethook(state->caller) != state->hook || lua_gethook(state->main) != state->main_hook;
}

static void collect_garbage(void *context) {
  const lac_state *state = context;
  lua_gc(state->caller, LUA_GCCOLLECT, 0);
  lua_gc(state->caller, LUA_GCCOLLECT, 0); /* what finalisers of the first round let go */
}

static int state_finalise(lua_State *L) {
  lac_state *state = lua_touserdata(L, 1);
  lac_axis_drop(state->draw);
  state->draw = NULL;
  lac_catalogue_free(state->catalogue);
  state->catalogue = NULL;
  lac_work_end(&state->work); /* the state was made before any quantity, so it is finalised after all of them */
  return 0;
}

static int processors(void) {
  long count = sysconf(_SC_NPROCESSORS_ONLN);
  return count < 1 ? 1 : count > 256 ? 256 : (int)count;
}

lac_state *lac_state_of(lua_State *L) {
  if (lua_rawgetp(L, LUA_REGISTRYINDEX, &state_key) == LUA_TUSERDATA) {
    lac_state *state = lua_touserdata(L, -1);
    lua_pop(L, 1);
    return state;
  }
  lua_pop(L, 1);
  pthread_once(&watch_forks, start_watching);
  lac_state *state = lua_newuserdatauv(L, sizeof *state, 0);
  *state = (lac_state){.draws = 10000};
  lua_createtable(L, 0, 1);
  lua_pushcfunction(L, state_finalise);
  lua_setfield(L, -2, "__gc");
  lua_setmetatable(L, -2);
  lac_work_start(&state->work, processors(), (size_t)2 << 30);
  state->work.poll = poll_hook;
  state->work.collect = collect_garbage;
  state->work.context = state;
  lua_rawsetp(L, LUA_REGISTRYINDEX, &state_key);
  return state;
}

lac_catalogue *lac_catalogue_of(lua_State *L) {
  lac_state *state = lac_state_of(L);
  if (state->catalogue == NULL) {
    char defect[200] = "";
    lac_status status = lac_catalogue_new(&state->catalogue, defect, sizeof defect);
    if (status != LAC_OK) lac_error(L, "the catalogue: %s (%s)", lac_status_words(status), defect);
  }
  return state->catalogue;
}

lac_state *lac_state_begin(lua_State *L) {
  lac_state *state = lac_state_of(L);
  lua_rawgeti(L, LUA_REGISTRYINDEX, LUA_RIDX_MAINTHREAD);
  state->main = lua_tothread(L, -1);
  lua_pop(L, 1);
  state->caller = L;
  state->hook = lua_gethook(L);
  state->main_hook = lua_gethook(state->main);
  if (forked) state->work.threads = 1;
  return state;
}

void lac_state_keep_error(lua_State *L) { lua_rawsetp(L, LUA_REGISTRYINDEX, &error_key); }

static void raise_interrupted(lua_State *L, lac_state *state) {
  state->work.stop = 0;
  lua_Hook hook = lua_gethook(L);
  if (hook == state->hook) hook = lua_gethook(state->main) != state->main_hook ? lua_gethook(state->main) : NULL;
  if (hook != NULL) {
    lua_Debug activation = {.event = LUA_HOOKCOUNT};
    hook(L, &activation); /* the host's own way to stop; it raises */
  }
  lac_error(L, "interrupted");
}

static double mebibytes(size_t bytes) { return (double)bytes / 1048576.0; }

static int mebibytes_up(size_t bytes) { return bytes >> 20 < INT_MAX ? (int)((bytes + 1048575) >> 20) : INT_MAX; }

void lac_state_end(lua_State *L, lac_status status) {
  lac_state *state = lac_state_of(L);
  switch (status) {
  case LAC_OK: return;
  case LAC_INTERRUPTED: raise_interrupted(L, state); return;
  case LAC_CALLBACK_FAILED:
    lua_rawgetp(L, LUA_REGISTRYINDEX, &error_key);
    lua_pushboolean(L, 0);
    lua_rawsetp(L, LUA_REGISTRYINDEX, &error_key);
    if (!lua_toboolean(L, -1)) lac_error(L, "%s", lac_status_words(status));
    lua_error(L);
    return;
  case LAC_OVER_CAP:
    lac_error(L, "this would take %d MiB, and %d MiB of the %d MiB allowed are in use: use fewer points or draws, or settings{memory = ...}",
              mebibytes_up(state->work.wanted), mebibytes_up(state->work.used), mebibytes_up(state->work.cap));
    return;
  default: lac_error(L, "%s", lac_status_words(status));
  }
}

void lac_check_room(lua_State *L, size_t elements) {
  const lac_work *work = &lac_state_of(L)->work;
  const size_t bytes = elements < SIZE_MAX / sizeof(double) ? elements * sizeof(double) : SIZE_MAX;
  if (bytes < 1 << 20) return;
  if (work->used > work->cap || bytes > work->cap - work->used) lua_gc(L, LUA_GCCOLLECT, 0);
  if (work->used <= work->cap && bytes <= work->cap - work->used) return;
  lac_state_of(L)->work.wanted = bytes;
  lac_state_end(L, LAC_OVER_CAP);
}

static lua_Integer whole_number(lua_State *L, const char *key, lua_Integer low, lua_Integer high) {
  int exact = 0;
  lua_Integer number = lua_tointegerx(L, -1, &exact);
  if (!exact || number < low || number > high)
    lac_error(L, "settings: %s wants a whole number from %I to %I; got %s", key, low, high, lac_shown(L, -1));
  return number;
}

static size_t bytes_of(lua_State *L) {
  lua_Number mib = lua_tonumber(L, -1);
  if (!lua_isnumber(L, -1) || !(mib >= 1) || mib > 1e9) lac_error(L, "settings: memory wants a number of MiB of at least 1; got %s", lac_shown(L, -1));
  return (size_t)(mib * 1048576.0);
}

/* What is wanted, until all of it has been found good. */
typedef struct {
  uint64_t seed;
  int threads;
  size_t memory, draws; /* draws: 0 where none are asked for */
} wanted_settings;

/* One setting: its key and value on top of the stack, which stay there. */
static void read_setting(lua_State *L, wanted_settings *wanted) {
  const char *key = lua_type(L, -2) == LUA_TSTRING ? lua_tostring(L, -2) : "";
  if (strcmp(key, "seed") == 0) wanted->seed = (uint64_t)whole_number(L, key, 0, LUA_MAXINTEGER);
  else if (strcmp(key, "threads") == 0) wanted->threads = (int)whole_number(L, key, 1, 256);
  else if (strcmp(key, "memory") == 0) wanted->memory = bytes_of(L);
  else if (strcmp(key, "draws") == 0) wanted->draws = (size_t)whole_number(L, key, 1, (lua_Integer)1 << 40);
  else lac_error(L, "settings: unknown setting '%s'; there are seed, draws, threads, memory", key);
}

static void make_settings(lac_state *state, const wanted_settings *wanted) {
  state->seed = wanted->seed;
  state->work.threads = wanted->threads;
  state->work.cap = wanted->memory;
  if (wanted->draws == 0) return;
  state->draws = wanted->draws;
  lac_axis_drop(state->draw);
  state->draw = NULL;
}

/* settings{seed =, draws =, threads =, memory =}: sets those named, all or none; returns all as a table. */
static int state_settings(lua_State *L) {
  lac_state *state = lac_state_of(L);
  if (!lua_isnoneornil(L, 1)) {
    luaL_checktype(L, 1, LUA_TTABLE);
    wanted_settings wanted = {.seed = state->seed, .threads = state->work.threads, .memory = state->work.cap};
    for (lua_pushnil(L); lua_next(L, 1); lua_pop(L, 1)) read_setting(L, &wanted);
    make_settings(state, &wanted);
  }
  lua_createtable(L, 0, 4);
  lua_pushinteger(L, (lua_Integer)state->seed), lua_setfield(L, -2, "seed");
  lua_pushinteger(L, (lua_Integer)state->draws), lua_setfield(L, -2, "draws");
  lua_pushinteger(L, state->work.threads), lua_setfield(L, -2, "threads");
  lua_pushnumber(L, mebibytes(state->work.cap)), lua_setfield(L, -2, "memory");
  return 1;
}

/* in_use(): KiB that values hold, which Lua's collector doesn't see. */
static int state_in_use(lua_State *L) {
  lua_pushnumber(L, (lua_Number)lac_state_of(L)->work.used / 1024);
  return 1;
}

void lac_open_state(lua_State *L) {
  lua_pushboolean(L, 0); /* the key stays in the registry, so that keeping an error there never needs memory */
  lua_rawsetp(L, LUA_REGISTRYINDEX, &error_key);
  lua_pushcfunction(L, state_settings);
  lua_setfield(L, -2, "settings");
  lua_pushcfunction(L, state_in_use);
  lua_setfield(L, -2, "in_use");
  lua_pushcfunction(L, raise_message);
  lua_setfield(L, -2, "raise");
  lua_pushcfunction(L, show_value);
  lua_setfield(L, -2, "shown");
  lua_pushliteral(L, LAC_VERSION);
  lua_setfield(L, -2, "version");
}
