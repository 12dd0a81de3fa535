/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Ctrl-C. A hook that stands all the time would double the time of tight loops, so the signal handler arms one on demand. Hooks belong to
   a coroutine: the running one is tracked by our own resume, wrap and close. A loop of the core has no hook; it looks at its stop flag.
   pcall would swallow the interruption and let the loop around it go on, so pcall and xpcall raise it again. */
#define _GNU_SOURCE
#include <lauxlib.h>
#include <pthread.h>
#include <signal.h>
#include <stdlib.h>
#include <string.h>

#include "binding.h"
#include "program.h"

static lua_State *volatile running; /* the coroutine to arm; NULL between calls */
static lac_state *state;            /* whose computations to stop */
static volatile sig_atomic_t interrupted;
static bool second_kills; /* a script that doesn't answer ends by the second Ctrl-C */
static pthread_t main_thread;

static int raise_interruption(lua_State *L) { return luaL_error(L, "interrupted"); }

static void interruption_hook(lua_State *L, lua_Debug *activation) {
  (void)activation;
  lua_sethook(L, NULL, 0, 0);
  raise_interruption(L);
}

/* The signal may reach a worker of a parallel region; Lua belongs to the main thread. */
static void on_interrupt(int number) {
  if (!pthread_equal(pthread_self(), main_thread)) {
    pthread_kill(main_thread, number);
    return;
  }
  if (second_kills) signal(number, SIG_DFL);
  interrupted = 1;
  if (running == NULL) return;
  state->work.stop = 1;
  lua_sethook(running, interruption_hook, LUA_MASKCALL | LUA_MASKRET | LUA_MASKLINE | LUA_MASKCOUNT, 1);
}

bool program_was_interrupted(void) { return interrupted; }
void program_forget_interruption(void) { interrupted = 0; }

/* Stack of L: arguments above index `first`. Returned: number of results on L's stack, or -1 and the error there. */
static int resume(lua_State *L, lua_State *coroutine, int arguments) {
  if (!lua_checkstack(coroutine, arguments)) {
    lua_pushliteral(L, "too many arguments to resume");
    return -1;
  }
  int results;
  lua_xmove(L, coroutine, arguments);
  running = coroutine;
  int status = lua_resume(coroutine, L, arguments, &results);
  running = L;
  if (interrupted) return lua_sethook(coroutine, NULL, 0, 0), raise_interruption(L);
  if (status != LUA_OK && status != LUA_YIELD) {
    lua_xmove(coroutine, L, 1);
    return -1;
  }
  if (!lua_checkstack(L, results + 1)) {
    lua_pop(coroutine, results);
    lua_pushliteral(L, "too many results to resume");
    return -1;
  }
  lua_xmove(coroutine, L, results);
  return results;
}

static lua_State *check_coroutine(lua_State *L) {
  lua_State *coroutine = lua_tothread(L, 1);
  luaL_argexpected(L, coroutine, 1, "coroutine");
  return coroutine;
}

static int coroutine_resume(lua_State *L) {
  int results = resume(L, check_coroutine(L), lua_gettop(L) - 1);
  lua_pushboolean(L, results >= 0);
  int returned = results < 0 ? 2 : results + 1;
  lua_insert(L, -returned);
  return returned;
}

/* As the standard library's: a failed coroutine is closed, and a text that says why gets the caller's position. */
static int call_wrapped(lua_State *L) {
  lua_State *coroutine = lua_tothread(L, lua_upvalueindex(1));
  int results = resume(L, coroutine, lua_gettop(L));
  if (results >= 0) return results;
  int status = lua_status(coroutine);
  if (status != LUA_OK && status != LUA_YIELD) {
    lua_xmove(L, coroutine, 1);
    lua_resetthread(coroutine);
    lua_xmove(coroutine, L, 1);
  }
  if (status != LUA_ERRMEM && lua_type(L, -1) == LUA_TSTRING) {
    luaL_where(L, 1);
    lua_insert(L, -2);
    lua_concat(L, 2);
  }
  return lua_error(L);
}

static int coroutine_wrap(lua_State *L) {
  luaL_checktype(L, 1, LUA_TFUNCTION);
  lua_State *coroutine = lua_newthread(L);
  lua_pushvalue(L, 1);
  lua_xmove(L, coroutine, 1);
  lua_pushcclosure(L, call_wrapped, 1);
  return 1;
}

/* The standard close, upvalue 1, which runs the coroutine's pending __close functions. */
static int coroutine_close(lua_State *L) {
  lua_State *coroutine = check_coroutine(L);
  lua_pushvalue(L, lua_upvalueindex(1));
  lua_insert(L, 1);
  running = coroutine;
  int status = lua_pcall(L, lua_gettop(L) - 1, LUA_MULTRET, 0);
  running = L;
  if (interrupted) return raise_interruption(L);
  return status == LUA_OK ? lua_gettop(L) : lua_error(L);
}

static int after_protected(lua_State *L, int status, lua_KContext context) {
  (void)status, (void)context;
  return interrupted ? raise_interruption(L) : lua_gettop(L);
}

/* The standard pcall or xpcall, upvalue 1. */
static int protected_call(lua_State *L) {
  lua_pushvalue(L, lua_upvalueindex(1));
  lua_insert(L, 1);
  lua_callk(L, lua_gettop(L) - 1, LUA_MULTRET, 0, after_protected);
  return after_protected(L, LUA_OK, 0);
}

/* Replaces the function in field `name` of the table on the top of the stack by one that has the old one as upvalue 1. */
static void replace(lua_State *L, const char *name, lua_CFunction function) {
  lua_getfield(L, -1, name);
  lua_pushcclosure(L, function, 1);
  lua_setfield(L, -2, name);
}

void program_catch_interrupts(lua_State *L, bool conversation) {
  second_kills = !conversation;
  state = lac_state_of(L);
  main_thread = pthread_self();
  lua_pushglobaltable(L);
  replace(L, "pcall", protected_call);
  replace(L, "xpcall", protected_call);
  lua_getfield(L, -1, "coroutine");
  replace(L, "resume", coroutine_resume);
  replace(L, "wrap", coroutine_wrap);
  replace(L, "close", coroutine_close);
  lua_pop(L, 2);
  struct sigaction action = {.sa_handler = on_interrupt};
  sigemptyset(&action.sa_mask);
  sigaction(SIGINT, &action, NULL);
}

static int add_traceback(lua_State *L) {
  const char *wanted = getenv("LACUNA_TRACEBACK");
  if (lua_isstring(L, 1) || luaL_getmetafield(L, 1, "__tostring") != LUA_TNIL) luaL_tolstring(L, 1, NULL);
  else lua_pushfstring(L, "the script failed with a %s as its error, which says nothing", luaL_typename(L, 1));
  if (wanted && strcmp(wanted, "1") == 0) luaL_traceback(L, L, lua_tostring(L, -1), 1);
  return 1;
}

int program_call(lua_State *L, int arguments, int results) {
  int base = lua_gettop(L) - arguments;
  lua_pushcfunction(L, add_traceback);
  lua_insert(L, base);
  interrupted = 0;
  state->work.stop = 0;
  running = L;
  int status = lua_pcall(L, arguments, results, base);
  running = NULL;
  if (interrupted) lua_sethook(L, NULL, 0, 0);
  lua_remove(L, base);
  return status;
}
