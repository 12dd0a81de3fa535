/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Cases: immutable sets of givens, from which any other quantity can be asked. What is written in Lua (with, why, check ...) stands in
   case.lua; here are the checks of a given, the settling of chains (shared by cases with the same given names), and the asking. */
#include "case.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#define CASE_TAG UINT64_C(0x4c61634361736521)
static const char chains_key = 0, case_key = 0, handlers_key = 0, asked_of_key = 0; /* registry keys, by address */

/* Chains. */

static int chain_finalise(lua_State *L) {
  lac_chain **chain = lua_touserdata(L, 1);
  lac_chain_free(*chain);
  *chain = NULL;
  return 0;
}

/* The registry's table at key, made with the mode for weak entries at first use; pushed. */
static void push_registry_table(lua_State *L, const void *key, const char *mode) {
  if (lua_rawgetp(L, LUA_REGISTRYINDEX, key) == LUA_TTABLE) return;
  lua_pop(L, 1);
  lua_newtable(L);
  if (mode != NULL) {
    lua_createtable(L, 0, 1);
    lua_pushstring(L, mode), lua_setfield(L, -2, "__mode");
    lua_setmetatable(L, -2);
  }
  lua_pushvalue(L, -1);
  lua_rawsetp(L, LUA_REGISTRYINDEX, key);
}

/* Pushes a new empty chain holder, finalised by Lua. */
static lac_chain **push_chain_holder(lua_State *L) {
  lac_chain **holder = lua_newuserdatauv(L, sizeof *holder, 0);
  *holder = NULL;
  lua_createtable(L, 0, 1);
  lua_pushcfunction(L, chain_finalise), lua_setfield(L, -2, "__gc");
  lua_setmetatable(L, -2);
  return holder;
}

static void raise_unsettled(lua_State *L, lac_status status, int culprit, const int *only) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  if (status == LAC_DUPLICATE) lac_error(L, "%s is given: it can't come by a recipe too", lac_catalogue_name(catalogue, culprit)->name);
  if (status == LAC_NOT_HAD) {
    const lac_relation *row = lac_catalogue_row(catalogue, only[culprit]);
    luaL_Buffer inputs;
    luaL_buffinit(L, &inputs);
    for (int i = 0; i < LAC_MAX_ARGUMENTS && row->from[i] != NULL; i++) luaL_addstring(&inputs, i > 0 ? ", " : ""), luaL_addstring(&inputs, row->from[i]);
    luaL_pushresult(&inputs);
    lac_error(L, "%s can't be had by '%s' from what is given; that recipe wants %s", row->gives, row->by, lua_tostring(L, -1));
  }
  lac_error(L, "%s", lac_status_words(status));
}

/* Pushes what a chain hangs on, as one text. */
static void push_chain_key(lua_State *L, const lac_case *object, int rows, const int *only) {
  const size_t names = (size_t)object->names, size = sizeof rows + names * (sizeof *object->given + sizeof *only);
  luaL_Buffer key;
  char *at = luaL_buffinitsize(L, &key, size);
  at = (char *)memcpy(at, &rows, sizeof rows) + sizeof rows;
  at = (char *)memcpy(at, object->given, names * sizeof *object->given) + names * sizeof *object->given;
  memcpy(at, only, names * sizeof *only);
  luaL_pushresultsize(&key, size);
}

/* Pushes the holder of the chain for a set of givens and restrictions, from the cache or settled now.
   Where a restriction can't be had: an error, or NULL with nil pushed if that is only tried. */
static const lac_chain *push_chain(lua_State *L, const lac_case *object, int rows, const int *only, bool trying) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int names = object->names;
  push_registry_table(L, &chains_key, "v");
  push_chain_key(L, object, rows, only);
  lua_pushvalue(L, -1);
  if (lua_rawget(L, -3) != LUA_TUSERDATA) {
    lua_pop(L, 1);
    lac_chain **holder = push_chain_holder(L);
    int culprit = -1;
    if (names != lac_catalogue_names(catalogue) || rows != lac_catalogue_rows(catalogue)) /* by a finaliser, as anything is allocated */
      lac_error(L, "a quantity or a relation was added while a chain was being settled: ask again");
    lac_status status = lac_chain_settle(catalogue, object->given, only, holder, &culprit);
    if (trying && (status == LAC_NOT_HAD || status == LAC_DUPLICATE)) return lua_pushnil(L), NULL;
    if (status != LAC_OK) raise_unsettled(L, status, culprit, only);
    lua_pushvalue(L, -2);
    lua_pushvalue(L, -2);
    lua_rawset(L, -5);
  }
  lua_replace(L, -3);
  lua_pop(L, 1);
  return *(lac_chain **)lua_touserdata(L, -1);
}

/* Givens. */

static void raise_out_of_range(lua_State *L, int id, int place) {
  const lac_name *name = lac_catalogue_name(lac_catalogue_of(L), id);
  lac_error(L, "%s must be %s; got %s", name->name, name->range, luaL_tolstring(L, place, NULL));
}

/* An unbound spread's median or a sweep's every point must be in range. */
static void check_unbound(lua_State *L, int id, const lac_unbound *unbound, int place) {
  const lac_range range = lac_catalogue_range(lac_catalogue_of(L), id);
  if (!unbound->sweep) {
    if (!lac_range_holds(range, lac_spread_median(&unbound->spread))) raise_out_of_range(L, id, place);
    return;
  }
  const lac_quantity *sweep = lac_to_quantity(L, place);
  for (size_t i = 0; i < unbound->count; i++)
    if (!lac_range_holds(range, unbound->elements[i])) {
      lac_push_number(L, unbound->elements[i], sweep->dimension, sweep->unit, -1);
      raise_out_of_range(L, id, lua_gettop(L));
    }
}

/* The median over the draws of a bound ensemble must be in range. */
static void check_ensemble(lua_State *L, int id, const lac_quantity *quantity, int place) {
  if (lac_value_axes(quantity->value) != 1 || strcmp(lac_value_axis(quantity->value, 0)->name, "draw") != 0) return;
  lac_quantity *holder = lac_push_empty(L, quantity->dimension, NULL, -1);
  lac_state *state = lac_state_begin(L);
  lac_state_end(L, lac_plan_quantiles(&state->work, quantity->value, "draw", 1, (const double[]){0.5}, &holder->value));
  if (!lac_range_holds(lac_catalogue_range(lac_catalogue_of(L), id), lac_value_as_number(holder->value))) raise_out_of_range(L, id, place);
  lua_pop(L, 1);
}

static void check_dimension(lua_State *L, int id, const lac_quantity *quantity, int place) {
  const lac_name *name = lac_catalogue_name(lac_catalogue_of(L), id);
  const lac_dimension wanted = lac_catalogue_unit(lac_catalogue_of(L), id).dimension;
  if (lac_dimension_equal(quantity->dimension, wanted)) return;
  char words[80];
  lac_a_dimension(wanted, words, sizeof words);
  if (lac_dimension_equal(wanted, LAC_DIMENSIONLESS)) lac_error(L, "%s wants %s; got %s", name->name, words, luaL_tolstring(L, place, NULL));
  lac_error(L, "%s wants %s (in %s); got %s", name->name, words, name->unit, luaL_tolstring(L, place, NULL));
}

/* given(name, value, target): the value as that name's quantity, checked, bound to the name and the target, draws out of range undefined. */
static int case_given(lua_State *L) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const char *word = luaL_checkstring(L, 1);
  const int id = lac_catalogue_find(catalogue, word);
  if (id < 0) return lac_error(L, "unknown name '%s'", word);
  const char *target = luaL_optstring(L, 3, NULL), *unit = lac_catalogue_name(catalogue, id)->unit;
  lua_settop(L, 3);
  lac_quantity *quantity = lac_check_quantity(L, 2, word);
  check_dimension(L, id, quantity, 2);
  const lac_range range = lac_catalogue_range(catalogue, id);
  if (quantity->unbound != NULL) {
    const bool in_range = quantity->unbound->sweep; /* else refused just below */
    check_unbound(L, id, quantity->unbound, 2);
    lac_bind(L, quantity, word, target);
    if (in_range) {
      lac_push_empty(L, quantity->dimension, unit, id)->value = lac_value_keep(quantity->value);
      return 1;
    }
  } else if (quantity->value != NULL) check_ensemble(L, id, quantity, 2);
  else {
    if (!isfinite(quantity->number)) lac_error(L, "%s wants a finite number; got %s", word, luaL_tolstring(L, 2, NULL));
    if (!lac_range_holds(range, quantity->number)) raise_out_of_range(L, id, 2);
    lac_push_number(L, quantity->number, quantity->dimension, unit, id);
    return 1;
  }
  lac_quantity *result = lac_push_empty(L, quantity->dimension, unit, id);
  lac_status status = lac_value_clipped(quantity->value, range, &result->value);
  if (status == LAC_TOO_MANY) {
    lac_store(L, quantity);
    status = lac_value_clipped(quantity->value, range, &result->value);
  }
  lac_state_end(L, status);
  return 1;
}

/* Cases. */

static int case_finalise(lua_State *L) {
  lac_case *object = lua_touserdata(L, 1);
  for (int i = 0; object->values != NULL && i < object->names; i++) lac_value_drop(object->values[i]);
  free(object->values);
  object->values = NULL;
  free(object->given), free(object->asked);
  object->given = object->asked = NULL;
  object->chain = NULL;
  return 0;
}

/* Room for the catalogue's present names; what stands there already stays. */
static void make_room(lua_State *L, lac_case *object) {
  const int names = lac_catalogue_names(lac_catalogue_of(L));
  lac_value **values = realloc(object->values, (size_t)names * sizeof *values);
  if (values != NULL) object->values = values;
  bool *given = values == NULL ? NULL : realloc(object->given, (size_t)names * sizeof *given);
  if (given != NULL) object->given = given;
  bool *asked = given == NULL ? NULL : realloc(object->asked, (size_t)names * sizeof *asked);
  if (asked != NULL) object->asked = asked;
  if (asked == NULL) lac_error(L, "%s", lac_status_words(LAC_NO_MEMORY));
  for (int i = object->names; i < names; i++) object->values[i] = NULL, object->given[i] = object->asked[i] = false;
  object->names = names;
}

static void raise_no_recipe(lua_State *L, const char *word, int id, const char *by) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  luaL_Buffer recipes;
  luaL_buffinit(L, &recipes);
  int count = 0;
  const int *rows = lac_catalogue_rows_of(catalogue, id, &count);
  for (int i = 0; i < count; i++) luaL_addstring(&recipes, i > 0 ? ", " : ""), luaL_addstring(&recipes, lac_catalogue_row(catalogue, rows[i])->by);
  luaL_pushresult(&recipes);
  lac_error(L, "using: %s has no recipe '%s'; it has %s", word, by, count > 0 ? lua_tostring(L, -1) : "none");
}

/* The restrictions {name = by} on top of the stack as the only row of each name, -1: any. */
static void read_restrictions(lua_State *L, int names, int *only) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  for (lua_pushnil(L); lua_next(L, -2); lua_pop(L, 1)) {
    const char *word = luaL_checkstring(L, -2), *by = luaL_checkstring(L, -1);
    const int id = lac_catalogue_find(catalogue, word);
    if (id < 0 || id >= names) lac_error(L, "using: unknown name '%s'", word);
    only[id] = lac_catalogue_find_row(catalogue, id, by);
    if (only[id] < 0) raise_no_recipe(L, word, id, by);
  }
}

/* Settles the chain of the case at place: from its givens, and the restrictions {name = by} kept as user value 2. Where one can't be had:
   an error, or false if that is only tried. */
static bool settle(lua_State *L, int place, bool trying) {
  lac_case *object = lua_touserdata(L, place);
  make_room(L, object);
  const int rows = lac_catalogue_rows(lac_catalogue_of(L));
  object->rows = -1; /* no chain yet that fits the names: should anything be raised, it is settled anew */
  int *only = lua_newuserdatauv(L, (size_t)object->names * sizeof *only, 0);
  for (int i = 0; i < object->names; i++) only[i] = -1;
  if (lua_getiuservalue(L, place, 2) == LUA_TTABLE) read_restrictions(L, object->names, only);
  lua_pop(L, 1);
  const lac_chain *chain = push_chain(L, object, rows, only, trying);
  if (chain == NULL) return false;
  object->chain = chain;
  lua_setiuservalue(L, place, 1);
  lua_pop(L, 1);
  for (int i = 0; i < object->names; i++) /* what was derived by the former chain may come otherwise now */
    if (!object->given[i]) lac_value_drop(object->values[i]), object->values[i] = NULL;
  object->rows = rows;
  return true;
}

lac_case *lac_check_case(lua_State *L, int index) {
  lac_case *object = lua_touserdata(L, index);
  if (object == NULL || lua_rawlen(L, index) != sizeof *object || object->tag != CASE_TAG) lac_error(L, "a case is wanted here; got %s", luaL_typename(L, index));
  if (object->given == NULL) lac_error(L, "this case is closed: it can't be asked any more"); /* by <close>, or another's finaliser holds it */
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  if (object->names != lac_catalogue_names(catalogue) || object->rows != lac_catalogue_rows(catalogue)) settle(L, lua_absindex(L, index), false);
  return object;
}

/* The objects {name = object} among the info at place 3. */
static void take_objects(lua_State *L, lac_case *object) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  if (lua_type(L, 3) != LUA_TTABLE || lua_getfield(L, 3, "objects") != LUA_TTABLE) return;
  for (lua_pushnil(L); lua_next(L, -2); lua_pop(L, 1)) {
    const int id = lac_catalogue_find(catalogue, luaL_checkstring(L, -2));
    if (id < 0) lac_error(L, "new_case wants checked objects");
    const lac_object *given = lac_to_object(L, -1);
    if (given == NULL || strcmp(given->type, lac_catalogue_name(catalogue, id)->name) != 0) lac_error(L, "new_case wants checked objects");
    object->given[id] = true;
    object->values[id] = lac_value_keep(given->value);
  }
}

/* new_case(givens, using, info, try): a case of checked givens {name = quantity}, restrictions {name = by} and a table of the Lua side's.
   Where a restriction can't be had: an error, or nil with try. */
static int case_new(lua_State *L) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  luaL_checktype(L, 1, LUA_TTABLE);
  const bool trying = lua_toboolean(L, 4);
  lua_settop(L, 3);
  lac_case *object = lua_newuserdatauv(L, sizeof *object, 3);
  *object = (lac_case){.tag = CASE_TAG};
  lua_rawgetp(L, LUA_REGISTRYINDEX, &case_key);
  lua_setmetatable(L, 4);
  lua_pushvalue(L, 2), lua_setiuservalue(L, 4, 2);
  lua_pushvalue(L, 3), lua_setiuservalue(L, 4, 3);
  make_room(L, object);
  for (lua_pushnil(L); lua_next(L, 1); lua_pop(L, 1)) {
    const int id = lac_catalogue_find(catalogue, luaL_checkstring(L, -2));
    const lac_quantity *quantity = lac_to_quantity(L, -1);
    if (id < 0 || quantity == NULL || quantity->unbound != NULL) return lac_error(L, "new_case wants checked givens");
    object->given[id] = true;
    lac_status status = lac_value_of(quantity, &object->values[id]);
    if (status != LAC_OK) return lac_error(L, "%s", lac_status_words(status));
  }
  take_objects(L, object);
  if (!settle(L, 4, trying)) return 0;
  lua_settop(L, 4);
  return 1;
}

/* What the Lua side's handler for a trouble answers to (case, word): mostly it raises a clear error. */
static int handle(lua_State *L, const char *trouble, int object, int word) {
  push_registry_table(L, &handlers_key, NULL);
  lua_getfield(L, -1, trouble);
  lua_pushvalue(L, object);
  lua_pushvalue(L, word);
  lua_call(L, 2, 1);
  return 1;
}

static void store_givens(lua_State *L, const lac_case *object) {
  lac_state *state = lac_state_begin(L);
  for (int i = 0; i < object->names; i++)
    if (object->given[i] && object->values[i] != NULL) lac_state_end(L, lac_plan_store(&state->work, object->values[i]));
}

static void raise_axes_of_case(lua_State *L, const lac_case *object) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  for (int i = 0; i < object->names; i++)
    for (int j = i + 1; j < object->names; j++) {
      if (!object->given[i] || !object->given[j]) continue;
      const lac_value *a = object->values[i], *b = object->values[j];
      for (size_t k = 0; k < lac_value_axes(a); k++)
        for (size_t l = 0; l < lac_value_axes(b); l++) {
          const lac_axis *one = lac_value_axis(a, k), *other = lac_value_axis(b, l);
          if (strcmp(one->name, other->name) == 0 && !lac_axis_same(one, other))
            lac_error(L, "%s and %s both have the axis %s, but not the same one (%I and %I points)", lac_catalogue_name(catalogue, i)->name,
                       lac_catalogue_name(catalogue, j)->name, one->name, (lua_Integer)one->length, (lua_Integer)other->length);
        }
    }
}

/* The quantity on top of the stack remembers its case (as long as both live): a verdict can say why when it is printed, a length its angle. */
static void remember_case(lua_State *L, int object) {
  push_registry_table(L, &asked_of_key, "k");
  lua_pushvalue(L, -2);
  lua_pushvalue(L, object);
  lua_rawset(L, -3);
  lua_pop(L, 1);
}

/* remember_answers(case): from now on all its answers know their case. */
static int remember_answers(lua_State *L) {
  lac_check_case(L, 1)->remembers = true;
  return 0;
}

/* case_of(quantity): the case that a verdict, a length or a remembered answer was asked of, or nil. */
static int case_of(lua_State *L) {
  push_registry_table(L, &asked_of_key, "k");
  lua_pushvalue(L, 1);
  lua_rawget(L, -2);
  return 1;
}

/* Derives a name that can be had: into object->values. */
static void derive(lua_State *L, lac_case *object, int id) {
  lac_state_begin(L);
  lac_status status = lac_plan_ask(object->chain, object->values, id);
  if (status == LAC_TOO_MANY) {
    store_givens(L, object);
    status = lac_plan_ask(object->chain, object->values, id);
  }
  if (status == LAC_TOO_MANY) lac_error(L, "%s would have more than %d axes", lac_catalogue_name(lac_catalogue_of(L), id)->name, LAC_MAX_AXES);
  if (status == LAC_AXES_DIFFER) raise_axes_of_case(L, object);
  lac_state_end(L, status);
}

/* ask(case, name): the name's quantity. */
static int ask(lua_State *L, lac_case *object, int id, int object_place, int word_place) {
  if (lac_chain_row(object->chain, id) == LAC_NO_ROW) return handle(L, "not_had", object_place, word_place);
  derive(L, object, id);
  object->asked[id] = true;
  const lac_name *name = lac_catalogue_name(lac_catalogue_of(L), id);
  const lac_dimension dimension = lac_catalogue_unit(lac_catalogue_of(L), id).dimension;
  lac_value *value = object->values[id];
  if (lac_value_axes(value) == 0) {
    const double number = lac_value_as_number(value);
    if (isnan(number)) return handle(L, "undefined", object_place, word_place);
    lac_push_number(L, number, dimension, name->unit, id);
  } else lac_push_empty(L, dimension, name->unit, id)->value = lac_value_keep(value);
  if (object->remembers || name->kind == LAC_VERDICT || name->on_sky) remember_case(L, object_place);
  return 1;
}

/* __index: a name's quantity, or a method (upvalue 1 is their table), or an object. */
static int case_index(lua_State *L) {
  lac_case *object = lac_check_case(L, 1);
  const char *word = lua_type(L, 2) == LUA_TSTRING ? lua_tostring(L, 2) : NULL;
  int id = word == NULL ? -1 : lac_catalogue_find(lac_catalogue_of(L), word);
  if (word != NULL && id < 0) id = lac_catalogue_find_synonym(lac_catalogue_of(L), word); /* may be asked, though not given */
  if (id >= 0 && lac_catalogue_name(lac_catalogue_of(L), id)->kind != LAC_OBJECT) return ask(L, object, id, 1, 2);
  lua_pushvalue(L, 2);
  if (lua_rawget(L, lua_upvalueindex(1)) != LUA_TNIL) return 1;
  return handle(L, "unknown", 1, 2);
}

/* raw(case, name): as ask, but NaN instead of an error for what is undefined, nil for what can't be had; and objects too. */
static int case_raw(lua_State *L) {
  lac_case *object = lac_check_case(L, 1);
  const int id = lac_catalogue_find(lac_catalogue_of(L), luaL_checkstring(L, 2));
  if (id < 0 || lac_chain_row(object->chain, id) == LAC_NO_ROW) return 0;
  if (lac_catalogue_name(lac_catalogue_of(L), id)->kind == LAC_OBJECT) {
    lua_getiuservalue(L, 1, 3);
    lua_getfield(L, -1, "objects");
    lua_getfield(L, -1, lua_tostring(L, 2));
    return 1;
  }
  const lac_dimension dimension = lac_catalogue_unit(lac_catalogue_of(L), id).dimension;
  const lac_name *name = lac_catalogue_name(lac_catalogue_of(L), id);
  derive(L, object, id);
  lac_value *value = object->values[id];
  if (lac_value_axes(value) == 0) lac_push_number(L, lac_value_as_number(value), dimension, name->unit, id);
  else lac_push_empty(L, dimension, name->unit, id)->value = lac_value_keep(value);
  return 1;
}

/* Sharing: a case that differs in one recipe has much in common with the one it was made from. */

typedef enum { NOT_SEEN, ALIKE, UNLIKE } likeness;

/* Whether two cases have a name in the same way: the same given, or by the same row from inputs that they have in the same way. */
static bool is_alike(const lac_catalogue *catalogue, const lac_case *a, const lac_case *b, int id, likeness *seen) {
  if (seen[id] != NOT_SEEN) return seen[id] == ALIKE;
  const int row = lac_chain_row(a->chain, id);
  bool alike = row == lac_chain_row(b->chain, id) && row != LAC_NO_ROW;
  if (alike && row == LAC_GIVEN) alike = a->values[id] == b->values[id];
  if (alike && row >= 0) {
    const lac_relation *relation = lac_catalogue_row(catalogue, row);
    for (int i = 0; i < LAC_MAX_ARGUMENTS && relation->from[i] != NULL && alike; i++)
      alike = is_alike(catalogue, a, b, lac_catalogue_find(catalogue, relation->from[i]), seen);
  }
  seen[id] = alike ? ALIKE : UNLIKE;
  return alike;
}

/* share(case, other): the case takes from the other what that has derived, and it would derive in the same way. */
static int case_share(lua_State *L) {
  lac_case *object = lac_check_case(L, 1), *other = lac_check_case(L, 2);
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  likeness *seen = lua_newuserdatauv(L, (size_t)object->names * sizeof *seen, 0);
  memset(seen, 0, (size_t)object->names * sizeof *seen);
  for (int i = 0; i < object->names; i++)
    if (object->values[i] == NULL && other->values[i] != NULL && is_alike(catalogue, object, other, i, seen)) object->values[i] = lac_value_keep(other->values[i]);
  return 0;
}

/* info(case): the Lua side's table. */
static int case_info(lua_State *L) {
  lac_check_case(L, 1);
  lua_getiuservalue(L, 1, 3);
  return 1;
}

/* steps(case, name): a list of {name =, row = number or nil for a given}, the name itself last; empty if it can't be had. */
static int case_steps(lua_State *L) {
  const lac_case *object = lac_check_case(L, 1);
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int id = lac_catalogue_find(catalogue, luaL_checkstring(L, 2));
  lua_newtable(L);
  if (id < 0) return 1;
  int *ids = lua_newuserdatauv(L, (size_t)object->names * sizeof *ids, 0);
  const int count = lac_chain_steps(object->chain, id, ids);
  for (int i = 0; i < count; i++) {
    lua_createtable(L, 0, 2);
    lua_pushstring(L, lac_catalogue_name(catalogue, ids[i])->name), lua_setfield(L, -2, "name");
    const int row = lac_chain_row(object->chain, ids[i]);
    if (row >= 0) lua_pushinteger(L, row), lua_setfield(L, -2, "row");
    lua_rawseti(L, 3, i + 1);
  }
  lua_settop(L, 3);
  return 1;
}

/* row_of(case, name): the number of the row that gives the name; false for a given; nil if it can't be had. */
static int case_row_of(lua_State *L) {
  const lac_case *object = lac_check_case(L, 1);
  const int id = lac_catalogue_find(lac_catalogue_of(L), luaL_checkstring(L, 2));
  const int row = id < 0 ? LAC_NO_ROW : lac_chain_row(object->chain, id);
  if (row == LAC_NO_ROW) return 0;
  if (row == LAC_GIVEN) lua_pushboolean(L, 0);
  else lua_pushinteger(L, row);
  return 1;
}

/* asked(case): what was asked of it so far besides its givens, a list of names in the order of the glossary. */
static int case_asked(lua_State *L) {
  const lac_case *object = lac_check_case(L, 1);
  lua_newtable(L);
  for (int i = 0, count = 0; i < object->names; i++) {
    if (!object->asked[i] || lac_chain_row(object->chain, i) < 0) continue;
    lua_pushstring(L, lac_catalogue_name(lac_catalogue_of(L), i)->name);
    lua_rawseti(L, 2, ++count);
  }
  return 1;
}

/* same_chain(a, b): whether two cases have one chain, as cases with the same given names and restrictions do. */
static int case_same_chain(lua_State *L) {
  const lac_chain *chain = lac_check_case(L, 1)->chain;
  lua_pushboolean(L, chain == lac_check_case(L, 2)->chain);
  return 1;
}

/* missing_sets(case, name): a list of {row =, names = {...}}, the smallest first; empty if the name is had. */
static int case_missing_sets(lua_State *L) {
  enum { MOST = 5 };
  const lac_case *object = lac_check_case(L, 1);
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int id = lac_catalogue_find(catalogue, luaL_checkstring(L, 2));
  lua_newtable(L);
  if (id < 0) return 1;
  bool *needed = lua_newuserdatauv(L, MOST * (size_t)object->names * sizeof *needed, 0);
  int rows[MOST];
  const int sets = lac_chain_missing(object->chain, id, needed, MOST, rows);
  for (int i = 0; i < sets; i++) {
    lua_createtable(L, 0, 2);
    lua_newtable(L);
    for (int j = 0, count = 0; j < object->names; j++)
      if (needed[i * object->names + j]) lua_pushstring(L, lac_catalogue_name(catalogue, j)->name), lua_rawseti(L, -2, ++count);
    lua_setfield(L, -2, "names");
    if (rows[i] >= 0) lua_pushinteger(L, rows[i]), lua_setfield(L, -2, "row");
    lua_rawseti(L, 3, i + 1);
  }
  lua_settop(L, 3);
  return 1;
}

/* is_case(anything) */
static int is_case(lua_State *L) {
  const lac_case *object = lua_touserdata(L, 1);
  lua_pushboolean(L, lua_type(L, 1) == LUA_TUSERDATA && lua_rawlen(L, 1) == sizeof *object && object->tag == CASE_TAG);
  return 1;
}

/* set_handlers{not_had =, undefined =, unknown =}: functions of (case, word) that raise a clear error. */
static int set_handlers(lua_State *L) {
  lua_settop(L, 1);
  lua_rawsetp(L, LUA_REGISTRYINDEX, &handlers_key);
  return 0;
}

void lac_open_case(lua_State *L) {
  static const luaL_Reg functions[] = {
      {"given", case_given}, {"new_case", case_new}, {"raw", case_raw}, {"info", case_info}, {"steps", case_steps}, {"row_of", case_row_of}, {"asked", case_asked}, {"same_chain", case_same_chain}, {"share", case_share},
      {"missing_sets", case_missing_sets}, {"is_case", is_case}, {"case_of", case_of}, {"remember_answers", remember_answers}, {"set_handlers", set_handlers}, {NULL, NULL},
  };
  luaL_setfuncs(L, functions, 0);
  lua_newtable(L); /* the metatable */
  lua_newtable(L); /* the methods, filled by the Lua side */
  lua_pushvalue(L, -1);
  lua_setfield(L, -4, "case_methods");
  lua_pushcclosure(L, case_index, 1);
  lua_setfield(L, -2, "__index");
  lua_pushcfunction(L, case_finalise), lua_setfield(L, -2, "__gc");
  lua_pushcfunction(L, case_finalise), lua_setfield(L, -2, "__close");
  lua_pushliteral(L, "case"), lua_setfield(L, -2, "__name");
  lua_pushvalue(L, -1);
  lua_rawsetp(L, LUA_REGISTRYINDEX, &case_key);
  lua_setfield(L, -2, "case_metatable");
}
