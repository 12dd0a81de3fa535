/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Spreads (quantities known with an error bar) and sweeps (quantities that take a range of values). Both are made without a name: the
   first given that takes one names it (its draws are keyed by seed, target and name; its axis bears the name), and where it is used
   before that, the order of its making does. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "binding.h"

static lac_axis *draw_axis(lua_State *L) {
  lac_state *state = lac_state_of(L);
  if (state->draw == NULL) {
    lac_status status = lac_axis_new("draw", state->draws, NULL, &state->draw);
    if (status != LAC_OK) lac_error(L, "%s", lac_status_words(status));
  }
  return state->draw;
}

static lac_status bind_sweep(const lac_unbound *sweep, const char *name, lac_value **value) {
  lac_axis *axis = NULL;
  lac_status status = lac_axis_new(name, sweep->count, sweep->elements, &axis);
  if (status == LAC_OK) status = lac_value_swept(axis, value);
  lac_axis_drop(axis);
  return status;
}

void lac_unbound_drop(lac_unbound *unbound) {
  if (unbound != NULL && unbound->further-- == 0) free(unbound);
}

void lac_bind(lua_State *L, lac_quantity *quantity, const char *name, const char *target) {
  lac_unbound *unbound = quantity->unbound;
  if (unbound == NULL) return;
  char own_name[40];
  if (name == NULL) {
    if (unbound->ordinal == 0) unbound->ordinal = ++lac_state_of(L)->unbound_made;
    snprintf(own_name, sizeof own_name, "%s_%llu", unbound->sweep ? "sweep" : "spread", (unsigned long long)unbound->ordinal);
    name = own_name;
  }
  lac_status status;
  if (unbound->sweep) status = bind_sweep(unbound, name, &quantity->value);
  else {
    lac_axis *draw = draw_axis(L);
    unbound->spread.key = lac_draws_key(lac_state_of(L)->seed, target, name);
    status = lac_value_drawn(draw, &unbound->spread, &quantity->value);
  }
  if (status != LAC_OK) lac_error(L, "%s: %s", name, lac_status_words(status));
  quantity->unbound = NULL;
  lac_unbound_drop(unbound);
}

/* A blank unbound quantity on the stack with room for count elements. */
static lac_unbound *push_unbound(lua_State *L, const lac_quantity *like, size_t count) {
  lac_check_room(L, count);
  lac_work *work = &lac_state_of(L)->work;
  work->wanted = count * sizeof(double);
  if (work->used > work->cap || work->wanted > work->cap - work->used) lac_state_end(L, LAC_OVER_CAP);
  lac_quantity *quantity = lac_push_empty(L, like->dimension, like->unit, -1);
  quantity->unbound = malloc(sizeof *quantity->unbound + count * sizeof(double));
  if (quantity->unbound == NULL) lac_error(L, "%s", lac_status_words(LAC_NO_MEMORY));
  *quantity->unbound = (lac_unbound){.count = count, .ordinal = ++lac_state_of(L)->unbound_made};
  return quantity->unbound;
}

/* The argument at index: one finite number of the dimension of `like` (NULL: any). */
static const lac_quantity *single_argument(lua_State *L, int index, const lac_quantity *like, const char *what) {
  const lac_quantity *quantity = lac_check_quantity(L, index, what);
  if (quantity->value != NULL || quantity->unbound != NULL) lac_error(L, "%s wants single numbers; got %s", what, luaL_tolstring(L, index, NULL));
  if (!isfinite(quantity->number)) lac_error(L, "%s wants finite numbers; got %s", what, luaL_tolstring(L, index, NULL));
  if (like != NULL && !lac_dimension_equal(like->dimension, quantity->dimension)) {
    char words[80];
    lac_error(L, "%s wants %s throughout; got %s", what, lac_a_dimension(like->dimension, words, sizeof words), luaL_tolstring(L, index, NULL));
  }
  return quantity;
}

/* A spread of two or three parameters; the last may be wanted without a dimension. */
static int make_spread(lua_State *L, const char *what, lac_spread_kind kind, int parameters, bool last_is_plain, const char *wanted) {
  double values[3] = {0};
  const lac_quantity *first = single_argument(L, 1, NULL, what);
  static const lac_quantity plain = {.dimension = {{0}, 1, 0}};
  for (int i = 0; i < parameters; i++) values[i] = single_argument(L, i + 1, last_is_plain && i == parameters - 1 ? &plain : first, what)->number;
  first = lac_to_quantity(L, 1);
  const lac_spread spread = {.kind = kind, .a = values[0], .b = values[1], .c = values[2]};
  if (lac_spread_check(&spread) != LAC_OK) lac_error(L, "%s wants %s", what, wanted);
  push_unbound(L, first, 0)->spread = spread;
  return 1;
}

static int spread_normal(lua_State *L) { return make_spread(L, "spread.normal", LAC_NORMAL, 2, false, "a median and a standard deviation >= 0"); }
static int spread_lopsided(lua_State *L) { return make_spread(L, "spread.lopsided", LAC_LOPSIDED, 3, false, "a median, an upper and a lower deviation >= 0"); }
static int spread_uniform(lua_State *L) { return make_spread(L, "spread.uniform", LAC_UNIFORM, 2, false, "a lower and a higher bound"); }
static int spread_log_uniform(lua_State *L) { return make_spread(L, "spread.log_uniform", LAC_LOG_UNIFORM, 2, false, "a lower and a higher bound, both > 0"); }
static int spread_log_normal(lua_State *L) {
  return make_spread(L, "spread.log_normal", LAC_LOG_NORMAL, 2, true, "a median > 0 and the standard deviation of the natural logarithm, a number >= 0");
}

/* The list at index into elements in SI; the first's dimension and unit count. */
static void read_list(lua_State *L, int index, size_t count, double *elements, const char *what) {
  lua_rawgeti(L, index, 1);
  const int first = lua_gettop(L);
  lac_check_quantity(L, first, what);
  for (size_t i = 0; i < count; i++) {
    lua_rawgeti(L, index, (lua_Integer)i + 1);
    elements[i] = single_argument(L, lua_gettop(L), lac_to_quantity(L, first), what)->number;
    lua_pop(L, 1);
  }
  lua_pop(L, 1);
}

/* A list's unbound quantity: pushed first, so that an error while reading loses nothing. */
static lac_unbound *push_list_of(lua_State *L, int index, const char *what) {
  luaL_checktype(L, index, LUA_TTABLE);
  const size_t count = (size_t)lua_rawlen(L, index);
  if (count == 0) lac_error(L, "%s wants a list that is not empty", what);
  lua_rawgeti(L, index, 1);
  const lac_quantity *first = lac_check_quantity(L, -1, what);
  lac_unbound *unbound = push_unbound(L, first, count);
  read_list(L, index, count, unbound->elements, what);
  return unbound;
}

/* spread.samples{...}: each draw is one of the samples, each as likely. */
static int spread_samples(lua_State *L) {
  if (!lua_isnoneornil(L, 2)) lac_error(L, "spread.samples wants one list; its samples have their units themselves: {1*au, 2*au}");
  lac_unbound *unbound = push_list_of(L, 1, "spread.samples");
  unbound->spread = (lac_spread){.kind = LAC_SAMPLES, .samples = unbound->elements, .count = unbound->count};
  return 1;
}

/* sweep{...} of a list, or sweep(from, to, count), evenly; sweep.log in equal ratios. */
static int make_sweep(lua_State *L, bool logarithmic) {
  const char *what = logarithmic ? "sweep.log" : "sweep";
  if (lua_type(L, 1) == LUA_TTABLE) {
    push_list_of(L, 1, what)->sweep = true;
    return 1;
  }
  const lac_quantity *from = single_argument(L, 1, NULL, what), *to = single_argument(L, 2, from, what);
  int whole = 0;
  const lua_Integer count = lua_tointegerx(L, 3, &whole);
  if (!whole || count < 2 || count > (lua_Integer)1 << 31) lac_error(L, "%s wants how many points as its third argument, a whole number from 2 to 2147483648; got %s", what, lac_shown(L, 3));
  if (logarithmic && !(from->number > 0 && to->number > 0)) lac_error(L, "%s wants bounds > 0", what);
  lac_unbound *sweep = push_unbound(L, from, (size_t)count);
  sweep->sweep = true;
  const double a = logarithmic ? log(from->number) : from->number, b = logarithmic ? log(to->number) : to->number;
  for (lua_Integer i = 0; i < count; i++) {
    const double at = a + (b - a) * ((double)i / (double)(count - 1));
    sweep->elements[i] = logarithmic ? exp(at) : at;
  }
  sweep->elements[0] = from->number;
  sweep->elements[count - 1] = to->number;
  return 1;
}
static int sweep_even(lua_State *L) { return make_sweep(L, false); }
static int sweep_log(lua_State *L) { return make_sweep(L, true); }

/* along(axis, {...}): a list of values along a named axis, to combine with others along the same. */
static int make_along(lua_State *L) {
  const char *name = luaL_checkstring(L, 1);
  lac_unbound *list = push_list_of(L, 2, "along");
  lac_quantity *quantity = lac_to_quantity(L, -1);
  lac_axis *axis = NULL;
  lac_status status = lac_axis_new(name, list->count, NULL, &axis);
  if (status == LAC_OK) status = lac_value_array(1, &axis, list->elements, &quantity->value);
  lac_axis_drop(axis);
  if (status == LAC_OUT_OF_RANGE) lac_error(L, "along wants a name of at most 63 letters for its axis; got \"%s\"", name);
  if (status != LAC_OK) lac_error(L, "along: %s", lac_status_words(status));
  quantity->unbound = NULL;
  free(list);
  return 1;
}

/* Of an unbound spread: its kind, its median (exact) and its parameters; of a sweep: "sweep", how many points, the first and the last.
   Nothing for anything else. */
static int unbound_facts(lua_State *L) {
  const lac_quantity *quantity = lac_to_quantity(L, 1);
  if (quantity == NULL || quantity->unbound == NULL) return 0;
  static const char *const kinds[] = {"normal", "lopsided", "uniform", "log_uniform", "log_normal", "samples"};
  if (quantity->unbound->sweep) {
    lua_pushliteral(L, "sweep");
    lua_pushinteger(L, (lua_Integer)quantity->unbound->count);
    lua_pushnumber(L, quantity->unbound->elements[0]);
    lua_pushnumber(L, quantity->unbound->elements[quantity->unbound->count - 1]);
    return 4;
  }
  const lac_spread *spread = &quantity->unbound->spread;
  lua_pushstring(L, kinds[spread->kind]);
  lua_pushnumber(L, lac_spread_median(spread));
  lua_pushnumber(L, spread->a);
  lua_pushnumber(L, spread->b);
  lua_pushnumber(L, spread->c);
  return 5;
}

/* unbound_hold(q): of a quantity that is still unbound, what unbound_restore(q, held) needs to make it so again; nothing for anything else. */
static int unbound_hold(lua_State *L) {
  const lac_quantity *quantity = lac_to_quantity(L, 1);
  if (quantity == NULL || quantity->unbound == NULL) return 0;
  lac_quantity *held = lac_push_empty(L, quantity->dimension, quantity->unit, quantity->name);
  held->unbound = quantity->unbound; /* read anew: a finaliser may have used the quantity as room was made */
  if (held->unbound != NULL) held->unbound->further++;
  return held->unbound != NULL;
}

static int unbound_restore(lua_State *L) {
  lac_quantity *quantity = lac_to_quantity(L, 1);
  const lac_quantity *held = lac_to_quantity(L, 2);
  if (quantity == NULL || held == NULL || held->unbound == NULL || quantity->unbound != NULL) return 0;
  lac_value_drop(quantity->value);
  quantity->value = NULL;
  quantity->unbound = held->unbound;
  quantity->unbound->further++;
  return 0;
}

/* unbound_made(): how many spreads and sweeps have been numbered. unbound_made(n) goes back to n: the next has the number n + 1. */
static int unbound_made(lua_State *L) {
  lac_state *state = lac_state_of(L);
  if (!lua_isnoneornil(L, 1)) state->unbound_made = (uint64_t)luaL_checkinteger(L, 1);
  lua_pushinteger(L, (lua_Integer)state->unbound_made);
  return 1;
}

void lac_open_spread(lua_State *L) {
  static const luaL_Reg functions[] = {
      {"spread_normal", spread_normal}, {"spread_lopsided", spread_lopsided}, {"spread_uniform", spread_uniform},
      {"spread_log_uniform", spread_log_uniform}, {"spread_log_normal", spread_log_normal}, {"spread_samples", spread_samples},
      {"sweep", sweep_even}, {"sweep_log", sweep_log}, {"along", make_along}, {"unbound_facts", unbound_facts}, {"unbound_hold", unbound_hold},
      {"unbound_restore", unbound_restore}, {"unbound_made", unbound_made}, {NULL, NULL},
  };
  luaL_setfuncs(L, functions, 0);
}
