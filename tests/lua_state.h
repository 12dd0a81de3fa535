/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Lua states for C tests of the binding. */
#ifndef LACUNA_TESTS_LUA_STATE_H
#define LACUNA_TESTS_LUA_STATE_H

#include "check.h"

#include <lauxlib.h>
#include <lua.h>
#include <lualib.h>
#include <stdio.h>
#include <string.h>

#include "binding.h"

/* Opens Lua's libraries and the module, which becomes the global lac. */
static inline void open_module(lua_State *L) {
  luaL_openlibs(L);
  luaL_requiref(L, "lacuna", luaopen_lacuna, 0);
  lua_setglobal(L, "lac");
}

static inline lua_State *new_state(void) {
  lua_State *L = luaL_newstate();
  assert_non_null(L);
  open_module(L);
  return L;
}

/* Runs code, which must not fail, and returns its result as a text (of the caller's buffer). */
static inline const char *run(lua_State *L, const char *code, char *buffer, size_t size) {
  if (luaL_dostring(L, code) != LUA_OK) fail_msg("%s", lua_tostring(L, -1));
  snprintf(buffer, size, "%s", luaL_tolstring(L, -1, NULL));
  lua_settop(L, 0);
  return buffer;
}

#endif
