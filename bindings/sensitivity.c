/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The variance shares of a quantity along the axis draw, for sensitivity.lua. */
#include <string.h>

#include "binding.h"
#include "lacuna/sensitivity.h"

/* The draws of the quantity at index, stored; it must have the axis draw alone. */
static const double *draws_at(lua_State *L, int index, size_t *count) {
  lac_quantity *quantity = lac_check_bound(L, index, "shares");
  if (quantity->value == NULL || lac_value_axes(quantity->value) != 1 || strcmp(lac_value_axis(quantity->value, 0)->name, "draw") != 0)
    lac_error(L, "shares wants draws alone; got %s", lac_shown(L, index));
  lac_store(L, quantity);
  const size_t length = lac_value_size(quantity->value);
  if (*count != 0 && *count != length) lac_error(L, "%s", lac_status_words(LAC_AXES_DIFFER));
  *count = length;
  return lac_value_data(quantity->value);
}

static lac_distribution distribution_at(lua_State *L, int index) {
  static const char *const kinds[] = {"normal", "uniform", "any", NULL};
  static const lac_distribution distributions[] = {LAC_STANDARD_NORMAL, LAC_STANDARD_UNIFORM, LAC_ANY_DISTRIBUTION};
  return distributions[luaL_checkoption(L, index, NULL, kinds)];
}

/* first_order_shares(y, {quantities}, {"normal", "uniform" or "any", ...}): a list of shares, a list of their errors, the number of defined
   draws; nil where these are too few. */
static int first_order_shares(lua_State *L) {
  luaL_checktype(L, 2, LUA_TTABLE);
  luaL_checktype(L, 3, LUA_TTABLE);
  lua_settop(L, 3);
  const size_t inputs = lua_rawlen(L, 2);
  size_t count = 0;
  const double *y = draws_at(L, 1, &count);
  lac_share_input *x = lua_newuserdatauv(L, (inputs + 1) * sizeof *x, 0);
  lac_share *shares = lua_newuserdatauv(L, (inputs + 1) * sizeof *shares, 0);
  for (size_t i = 0; i < inputs; i++) { /* the quantities stay in the table at 2, and with them their draws */
    lua_rawgeti(L, 2, (lua_Integer)i + 1);
    lua_rawgeti(L, 3, (lua_Integer)i + 1);
    x[i] = (lac_share_input){draws_at(L, -2, &count), distribution_at(L, -1)};
    lua_pop(L, 2);
  }
  lac_check_room(L, count * (inputs + 1));
  size_t defined = 0;
  lac_state *state = lac_state_begin(L);
  const lac_status status = lac_first_order_shares(&state->work, count, y, inputs, x, shares, &defined);
  if (status == LAC_TOO_MANY) return 0;
  lac_state_end(L, status);
  lua_createtable(L, (int)inputs, 0);
  lua_createtable(L, (int)inputs, 0);
  for (size_t i = 0; i < inputs; i++) {
    lua_pushnumber(L, shares[i].share), lua_rawseti(L, -3, (lua_Integer)i + 1);
    lua_pushnumber(L, shares[i].error), lua_rawseti(L, -2, (lua_Integer)i + 1);
  }
  lua_pushinteger(L, (lua_Integer)defined);
  return 3;
}

void lac_open_sensitivity(lua_State *L) {
  lua_pushcfunction(L, first_order_shares);
  lua_setfield(L, -2, "first_order_shares");
}
