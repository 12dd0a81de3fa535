/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What a quantity holds, for the Lua side: its elements, axes, name and units, whole or at some points. */
#include <math.h>
#include <stdint.h>
#include <string.h>

#include "binding.h"

static lac_unit unit_argument(lua_State *L, int index, const lac_quantity *quantity, const char *what) {
  lac_unit unit;
  if (lac_to_quantity(L, index) != NULL) { /* a unit's global: q:value(au) */
    const lac_quantity *given = lac_to_quantity(L, index);
    if (!(given->number > 0) || !isfinite(given->number)) lac_error(L, "%s wants a unit; got %s", what, lac_shown(L, index));
    unit = (lac_unit){given->number, given->dimension};
  } else {
    size_t length;
    if (lua_type(L, index) != LUA_TSTRING) lac_error(L, "%s wants a unit, like \"km\"; got %s", what, lac_shown(L, index));
    const char *text = lua_tolstring(L, index, &length);
    if (lac_unit_read(text, length, false, &unit, NULL) > LAC_UNIT_SHORT_FORM) lac_error(L, "%s: unknown unit '%s'", what, text);
  }
  if (!lac_dimension_equal(unit.dimension, quantity->dimension)) {
    char words[80];
    lac_error(L, "%s wants a unit of %s; got %s", what, lac_dimension_words(quantity->dimension, words, sizeof words), lac_shown(L, index));
  }
  return unit;
}

/* q:as(unit): the same quantity with another display unit. */
static int quantity_as(lua_State *L) {
  const lac_quantity *quantity = lac_check_bound(L, 1, "as");
  unit_argument(L, 2, quantity, "as");
  const lac_quantity *given = lac_to_quantity(L, 2);
  const char *unit = given != NULL ? given->unit : lac_unit_anchor(L, lua_tostring(L, 2));
  if (unit == NULL) lac_error(L, "as wants a unit that has a name, like au or \"km/s\"; got %s", lac_shown(L, 2));
  if (quantity->value == NULL) {
    lac_push_number(L, quantity->number, quantity->dimension, unit, quantity->name);
    return 1;
  }
  lac_quantity *copy = lac_push_empty(L, quantity->dimension, unit, quantity->name);
  copy->value = lac_value_keep(quantity->value);
  return 1;
}

/* Nested lists of a stored value's elements, one level an axis. */
static size_t push_list(lua_State *L, const lac_value *value, size_t axis, const double *data, double factor) {
  if (axis == lac_value_axes(value)) {
    lua_pushnumber(L, *data / factor);
    return 1;
  }
  size_t length = lac_value_axis(value, axis)->length, taken = 0;
  luaL_checkstack(L, 4, "too many axes");
  lua_createtable(L, (int)(length < 1u << 30 ? length : 1u << 30), 0);
  for (size_t i = 0; i < length; i++) {
    taken += push_list(L, value, axis + 1, data + taken, factor);
    lua_rawseti(L, -2, (lua_Integer)i + 1);
  }
  return taken;
}

/* q:value(unit): the plain number, or lists of them, one level an axis in the order of q:axes(). */
static int quantity_value(lua_State *L) {
  lac_quantity *quantity = lac_check_bound(L, 1, "value");
  double factor = 1;
  if (!lua_isnoneornil(L, 2)) factor = unit_argument(L, 2, quantity, "value").factor;
  else if (!lac_dimension_equal(quantity->dimension, LAC_DIMENSIONLESS)) lac_error(L, "value wants a unit, like q:value \"%s\"", quantity->unit ? quantity->unit : "au");
  if (quantity->value == NULL) {
    lua_pushnumber(L, quantity->number / factor);
    return 1;
  }
  lac_store(L, quantity);
  push_list(L, quantity->value, 0, lac_value_data(quantity->value), factor);
  return 1;
}

/* elements(q): all elements as one flat list, SI; for the Lua side. */
static int quantity_elements(lua_State *L) {
  lac_quantity *quantity = lac_check_bound(L, 1, "elements");
  lac_store(L, quantity);
  const size_t count = quantity->value == NULL ? 1 : lac_value_size(quantity->value);
  const double *data = quantity->value == NULL ? &quantity->number : lac_value_data(quantity->value);
  lua_createtable(L, (int)(count < 1u << 30 ? count : 1u << 30), 0);
  for (size_t i = 0; i < count; i++) lua_pushnumber(L, data[i]), lua_rawseti(L, -2, (lua_Integer)i + 1);
  return 1;
}

/* Copies the elements of a stored value at fixed points of some axes (fixed[i] != SIZE_MAX), the others in full, in storage order. */
static void slice(const lac_value *value, const size_t *fixed, size_t axis, const double *data, double **into) {
  if (axis == lac_value_axes(value)) {
    *(*into)++ = *data;
    return;
  }
  size_t length = lac_value_axis(value, axis)->length, stride = 1;
  for (size_t i = axis + 1; i < lac_value_axes(value); i++) stride *= lac_value_axis(value, i)->length;
  for (size_t i = 0; i < length; i++)
    if (fixed[axis] == SIZE_MAX || fixed[axis] == i) slice(value, fixed, axis + 1, data + i * stride, into);
}

/* The quantity at place 1 with its axes fixed where fixed[i] != SIZE_MAX: pushed. */
static void push_slice(lua_State *L, lac_quantity *quantity, const size_t *fixed) {
  lac_store(L, quantity);
  const lac_value *value = quantity->value;
  lac_axis *kept[LAC_MAX_AXES];
  size_t axes = 0, size = 1;
  for (size_t i = 0; i < lac_value_axes(value); i++)
    if (fixed[i] == SIZE_MAX) kept[axes++] = lac_value_axis(value, i), size *= lac_value_axis(value, i)->length;
  lac_check_room(L, 2 * size);
  double *elements = lua_newuserdatauv(L, size * sizeof *elements, 0), *into = elements;
  slice(value, fixed, 0, lac_value_data(value), &into);
  lac_quantity *result = lac_push_empty(L, quantity->dimension, quantity->unit, quantity->name);
  lac_state_end(L, lac_value_array(axes, kept, elements, &result->value));
}

/* store(q): the same quantity with its elements kept, for one that is going to be read several times; for the Lua side. */
static int quantity_store(lua_State *L) {
  lac_store(L, lac_check_bound(L, 1, "store"));
  lua_settop(L, 1);
  return 1;
}

/* detached(q): the same quantity; what is stored for it is not stored for q, and goes with it. For the Lua side. */
static int quantity_detached(lua_State *L) {
  const lac_quantity *quantity = lac_check_bound(L, 1, "detached");
  lua_settop(L, 1);
  if (quantity->value == NULL) return 1;
  lac_quantity *copy = lac_push_empty(L, quantity->dimension, quantity->unit, quantity->name);
  const lac_range all = {-INFINITY, INFINITY, true, true};
  const lac_status status = lac_value_clipped(quantity->value, all, &copy->value);
  if (status == LAC_TOO_MANY) lua_settop(L, 1); /* an expression as deep as may be: stored for both */
  else lac_state_end(L, status);
  return 1;
}

/* q:at{axis = index, ...}: the quantity at those points (from 1) of its axes; axes not named stay. */
static int quantity_at(lua_State *L) {
  lac_quantity *quantity = lac_check_bound(L, 1, "at");
  luaL_checktype(L, 2, LUA_TTABLE);
  size_t fixed[LAC_MAX_AXES], free_axes = 0;
  if (quantity->value == NULL) {
    lua_settop(L, 1);
    return 1;
  }
  for (size_t i = 0; i < lac_value_axes(quantity->value); i++) {
    const lac_axis *axis = lac_value_axis(quantity->value, i);
    const bool named = lua_getfield(L, 2, axis->name) != LUA_TNIL;
    const lua_Integer wanted = lua_tointeger(L, -1);
    if (named && (wanted < 1 || (size_t)wanted > axis->length))
      lac_error(L, "at: %s wants a point from 1 to %I; got %s", axis->name, (lua_Integer)axis->length, lac_shown(L, -1));
    fixed[i] = named ? (size_t)wanted - 1 : SIZE_MAX;
    free_axes += !named;
    lua_pop(L, 1);
  }
  if (free_axes == lac_value_axes(quantity->value)) { /* nothing fixed */
    lua_settop(L, 1);
    return 1;
  }
  if (free_axes > 0) {
    push_slice(L, quantity, fixed);
    return 1;
  }
  double element = (double)NAN;
  lac_state *state = lac_state_begin(L);
  lac_state_end(L, lac_plan_element(&state->work, quantity->value, fixed, &element));
  lac_push_number(L, element, quantity->dimension, quantity->unit, quantity->name);
  return 1;
}

/* q:stored(): the quantity itself, its elements computed now and kept, so that what follows only reads them. */
static int quantity_stored(lua_State *L) {
  lac_store(L, lac_check_bound(L, 1, "stored"));
  lua_settop(L, 1);
  return 1;
}

/* like(q, number): a single quantity of q's dimension and display unit, from SI. */
static int quantity_like(lua_State *L) {
  const lac_quantity *quantity = lac_check_quantity(L, 1, "like");
  lac_push_number(L, luaL_checknumber(L, 2), quantity->dimension, quantity->unit, quantity->name);
  return 1;
}

/* along_axes(shape, like, elements): a quantity like another, with the axes of shape and the elements of a flat list (SI). */
static int quantity_along_axes(lua_State *L) {
  const lac_quantity *shape = lac_check_bound(L, 1, "along_axes"), *like = lac_check_quantity(L, 2, "along_axes");
  luaL_checktype(L, 3, LUA_TTABLE);
  if (shape->value == NULL || lua_rawlen(L, 3) != lac_value_size(shape->value)) return lac_error(L, "along_axes wants as many elements as the shape has");
  const size_t size = lac_value_size(shape->value);
  double *elements = lua_newuserdatauv(L, size * sizeof *elements, 0);
  for (size_t i = 0; i < size; i++) lua_rawgeti(L, 3, (lua_Integer)i + 1), elements[i] = lua_tonumber(L, -1), lua_pop(L, 1);
  lac_axis *axes[LAC_MAX_AXES];
  for (size_t i = 0; i < lac_value_axes(shape->value); i++) axes[i] = lac_value_axis(shape->value, i);
  lac_quantity *result = lac_push_empty(L, like->dimension, like->unit, like->name);
  lac_state_end(L, lac_value_array(lac_value_axes(shape->value), axes, elements, &result->value));
  return 1;
}

/* q:axes(): a list of {name =, length =, values = list or nil, dimension as of the SI numbers}. */
static int quantity_axes(lua_State *L) {
  const lac_quantity *quantity = lac_check_bound(L, 1, "axes");
  const size_t count = quantity->value == NULL ? 0 : lac_value_axes(quantity->value);
  lua_createtable(L, (int)count, 0);
  for (size_t i = 0; i < count; i++) {
    const lac_axis *axis = lac_value_axis(quantity->value, i);
    lua_createtable(L, 0, 3);
    lua_pushstring(L, axis->name), lua_setfield(L, -2, "name");
    lua_pushinteger(L, (lua_Integer)axis->length), lua_setfield(L, -2, "length");
    if (axis->coordinates != NULL) {
      lua_createtable(L, (int)axis->length, 0);
      for (size_t j = 0; j < axis->length; j++) lua_pushnumber(L, axis->coordinates[j]), lua_rawseti(L, -2, (lua_Integer)j + 1);
      lua_setfield(L, -2, "values");
    }
    lua_rawseti(L, -2, (lua_Integer)i + 1);
  }
  return 1;
}

/* facts(q): name or nil, display unit or nil, its factor, SI number (NaN where it has axes), number of elements, unbound or not.
   Nothing for what is no quantity. For the Lua side's printing. */
static int quantity_facts(lua_State *L) {
  const lac_quantity *quantity = lac_to_quantity(L, 1);
  if (quantity == NULL) return 0;
  if (quantity->name >= 0) lua_pushstring(L, lac_catalogue_name(lac_catalogue_of(L), quantity->name)->name);
  else lua_pushnil(L);
  lac_unit unit = {1, quantity->dimension};
  if (quantity->unit != NULL && lac_unit_read(quantity->unit, strlen(quantity->unit), false, &unit, NULL) > LAC_UNIT_SHORT_FORM) unit.factor = 1;
  lua_pushstring(L, quantity->unit);
  lua_pushnumber(L, unit.factor);
  lua_pushnumber(L, quantity->value == NULL ? quantity->number : (double)NAN);
  lua_pushinteger(L, quantity->value == NULL ? 1 : (lua_Integer)lac_value_size(quantity->value));
  lua_pushboolean(L, quantity->unbound != NULL);
  return 6;
}

/* dimension(q) in words, its SI unit in VOUnits, and whether it is a plain number. */
static int quantity_dimension(lua_State *L) {
  const lac_quantity *quantity = lac_check_quantity(L, 1, "dimension");
  char words[120], unit[120];
  lua_pushstring(L, lac_dimension_words(quantity->dimension, words, sizeof words));
  lua_pushstring(L, lac_dimension_unit(quantity->dimension, unit, sizeof unit));
  lua_pushboolean(L, lac_dimension_equal(quantity->dimension, LAC_DIMENSIONLESS));
  return 3;
}

/* unit_facts(text): factor, TeX, plain text, SI unit of its dimension; nil where it can't be read. */
static int unit_facts(lua_State *L) {
  size_t length;
  const char *text = luaL_checklstring(L, 1, &length);
  lac_unit unit;
  char buffer[200];
  if (lac_unit_read(text, length, false, &unit, NULL) > LAC_UNIT_SHORT_FORM) return 0;
  lua_pushnumber(L, unit.factor);
  lua_pushstring(L, lac_unit_tex(text, buffer, sizeof buffer));
  lua_pushstring(L, lac_unit_plain(text, buffer, sizeof buffer));
  lua_pushstring(L, lac_dimension_unit(unit.dimension, buffer, sizeof buffer));
  return 4;
}

/* The unit globals: a quantity of one unit, or nil where the word is no unit. */
static int unit_named(lua_State *L) {
  size_t length;
  const char *text = luaL_checklstring(L, 1, &length);
  lac_unit unit;
  lac_unit_kind kind = lac_unit_read(text, length, false, &unit, NULL);
  if (kind > LAC_UNIT_SHORT_FORM) return 0;
  lac_push_number(L, unit.factor, unit.dimension, lac_unit_anchor(L, text), -1);
  return 1;
}

void lac_open_elements(lua_State *L) {
  static const luaL_Reg functions[] = {
      {"as", quantity_as}, {"value", quantity_value}, {"at", quantity_at}, {"axes", quantity_axes}, {"elements", quantity_elements},
      {"store", quantity_store}, {"detached", quantity_detached}, {"stored", quantity_stored}, {"like", quantity_like}, {"along_axes", quantity_along_axes},
      {"facts", quantity_facts}, {"dimension", quantity_dimension}, {"unit_facts", unit_facts}, {"unit", unit_named}, {NULL, NULL},
  };
  luaL_setfuncs(L, functions, 0);
}
