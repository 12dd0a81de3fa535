/* SPDX-License-Identifier: GPL-3.0-or-later */
/* require "lacuna": the functions in C go into one private table, the sources in Lua are loaded from the binary on demand, and
   bindings/lacuna.lua builds the module's table from both. No global is written. */
#include <string.h>

#include "binding.h"

static const char loaded_key = 0; /* registry keys: the module's own sources by name, */
static const char part_key = 0;   /* and load_part */

static const lac_embedded *find_part(const char *name) {
  const lac_embedded *part = lac_embedded_modules;
  while (part->name != NULL && strcmp(part->name, name) != 0) part++;
  return part->name != NULL ? part : NULL;
}

/* load_part(name): what the embedded source of that name returns, run once for each Lua state with the private table as its argument. */
static int load_part(lua_State *L) {
  const char *name = luaL_checkstring(L, 1);
  lua_rawgetp(L, LUA_REGISTRYINDEX, &loaded_key);
  if (lua_getfield(L, -1, name) != LUA_TNIL) return 1;
  const lac_embedded *part = find_part(name);
  if (part == NULL) return lac_error(L, "no part '%s'", name);
  if (luaL_loadbufferx(L, (const char *)part->code, part->size, part->name, NULL) != LUA_OK) return lua_error(L);
  lua_pushvalue(L, lua_upvalueindex(1));
  lua_call(L, 1, 1);
  lua_pushvalue(L, -1);
  lua_setfield(L, 2, name);
  return 1;
}

void lac_push_part(lua_State *L, const char *name) {
  lua_rawgetp(L, LUA_REGISTRYINDEX, &part_key);
  lua_pushstring(L, name);
  lua_call(L, 1, 1);
}

int luaopen_lacuna(lua_State *L) {
  lac_state_of(L);
  lua_newtable(L);
  lua_rawsetp(L, LUA_REGISTRYINDEX, &loaded_key);
  lua_newtable(L);
  lac_open_state(L);
  lac_open_quantity(L);
  lac_open_elements(L);
  lac_open_spread(L);
  lac_open_summary(L);
  lac_open_catalogue(L);
  lac_open_object(L);
  lac_open_band(L);
  lac_open_dust(L);
  lac_open_case(L);
  lac_open_solve(L);
  lac_open_sensitivity(L);
  lac_open_csv(L);
  lac_open_output(L);
  lac_open_digest(L);
  lac_open_fits(L);
  lac_open_run_program(L);
  lua_pushvalue(L, -1);
  lua_pushcclosure(L, load_part, 1);
  lua_pushvalue(L, -1);
  lua_setfield(L, -3, "part");
  lua_pushvalue(L, -1);
  lua_rawsetp(L, LUA_REGISTRYINDEX, &part_key);
  lua_pushliteral(L, "lacuna.lacuna");
  lua_call(L, 1, 1);
  return 1;
}
