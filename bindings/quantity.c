/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The quantity userdata: a number with a dimension, or a value with axes. Arithmetic checks dimensions at each step.
   There are two metatables, alike but for the finaliser: a single number has nothing to give back, and goes without one,
   which makes a checked operation several times cheaper. Both are upvalues of every function that makes quantities. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "binding.h"

#define QUANTITY_TAG UINT64_C(0x4c61637551756e74)
static const char number_key = 0, value_key = 0, units_key = 0; /* registry keys, by address */

lac_quantity *lac_to_quantity(lua_State *L, int index) {
  if (lua_type(L, index) != LUA_TUSERDATA || lua_rawlen(L, index) != sizeof(lac_quantity)) return NULL;
  lac_quantity *quantity = lua_touserdata(L, index);
  return quantity->tag == QUANTITY_TAG ? quantity : NULL;
}

const char *lac_a_dimension(lac_dimension dimension, char *buffer, size_t size) {
  char words[60];
  lac_dimension_words(dimension, words, sizeof words);
  const char *article = strncmp(words, "a ", 2) == 0 ? "" : strchr("aeiou", words[0]) != NULL ? "an " : strncmp(words, "per ", 4) == 0 ? "something " : "a ";
  snprintf(buffer, size, "%s%s", article, words);
  return buffer;
}

static lac_quantity *push_blank(lua_State *L, const void *metatable) {
  lac_quantity *quantity = lua_newuserdatauv(L, sizeof *quantity, 0);
  quantity->tag = QUANTITY_TAG;
  quantity->value = NULL;
  quantity->unbound = NULL;
  lua_rawgetp(L, LUA_REGISTRYINDEX, metatable);
  lua_setmetatable(L, -2);
  return quantity;
}

static lac_quantity *fill(lac_quantity *quantity, double number, lac_dimension dimension, const char *unit, int name) {
  quantity->number = number;
  quantity->dimension = dimension;
  quantity->unit = unit;
  quantity->name = name;
  return quantity;
}

lac_quantity *lac_push_number(lua_State *L, double number, lac_dimension dimension, const char *unit, int name) {
  return fill(push_blank(L, &number_key), number, dimension, unit, name);
}

lac_quantity *lac_push_empty(lua_State *L, lac_dimension dimension, const char *unit, int name) {
  return fill(push_blank(L, &value_key), (double)NAN, dimension, unit, name);
}

/* __gc and __close: idempotent. */
static int quantity_finalise(lua_State *L) {
  lac_quantity *quantity = lac_to_quantity(L, 1);
  if (quantity == NULL) return 0;
  lac_value_drop(quantity->value);
  quantity->value = NULL;
  lac_unbound_drop(quantity->unbound);
  quantity->unbound = NULL;
  return 0;
}

const char *lac_unit_anchor(lua_State *L, const char *unit) {
  if (unit == NULL) return NULL;
  if (lua_rawgetp(L, LUA_REGISTRYINDEX, &units_key) != LUA_TTABLE) {
    lua_pop(L, 1);
    lua_newtable(L);
    lua_pushvalue(L, -1);
    lua_rawsetp(L, LUA_REGISTRYINDEX, &units_key);
  }
  if (lua_getfield(L, -1, unit) != LUA_TSTRING) { /* its own key and value: it stays, and its bytes stay where they are */
    lua_pop(L, 1);
    lua_pushstring(L, unit);
    lua_pushvalue(L, -1);
    lua_setfield(L, -3, unit);
  }
  const char *anchored = lua_tostring(L, -1);
  lua_pop(L, 2);
  return anchored;
}

/* Reads a string into a new quantity on the stack. */
static void push_reading(lua_State *L, const char *text, size_t length, const char *what) {
  lac_reading reading;
  size_t where = 0;
  switch (lac_reading_read(text, length, &reading, &where)) {
  case LAC_OK: break;
  case LAC_UNKNOWN_UNIT: lac_error(L, "%s: unknown unit '%s' in \"%s\"", what, text + (where < length ? where : 0), text); return;
  case LAC_OUT_OF_RANGE: lac_error(L, "%s: \"%s\" wants finite numbers and errors that are not negative", what, text); return;
  default: lac_error(L, "%s: can't read \"%s\" (at \"%s\"); write a number with its unit, like \"156 pc\" or \"156 ± 3 pc\"", what, text, text + (where < length ? where : length)); return;
  }
  const char *unit = NULL;
  if (reading.unit_length > 0) {
    lua_pushlstring(L, text + reading.unit_at, reading.unit_length);
    unit = lac_unit_anchor(L, lua_tostring(L, -1));
    lua_pop(L, 1);
  }
  const double factor = reading.unit.factor;
  if (!reading.has_error) {
    lac_push_number(L, reading.value * factor, reading.unit.dimension, unit, -1);
    return;
  }
  lac_quantity *quantity = lac_push_empty(L, reading.unit.dimension, unit, -1);
  quantity->unbound = malloc(sizeof *quantity->unbound);
  if (quantity->unbound == NULL) lac_error(L, "%s", lac_status_words(LAC_NO_MEMORY));
  *quantity->unbound = (lac_unbound){.ordinal = 0}; /* numbered where it is made by itself: a given's text takes no number */
  quantity->unbound->spread = (lac_spread){.kind = reading.upper == reading.lower ? LAC_NORMAL : LAC_LOPSIDED,
                                           .a = reading.value * factor, .b = reading.upper * factor, .c = reading.lower * factor};
}

lac_quantity *lac_check_quantity(lua_State *L, int index, const char *what) {
  index = lua_absindex(L, index);
  lac_quantity *quantity = lac_to_quantity(L, index);
  if (quantity != NULL) return quantity;
  if (lua_type(L, index) == LUA_TNUMBER) {
    lac_push_number(L, lua_tonumber(L, index), LAC_DIMENSIONLESS, NULL, -1);
  } else if (lua_type(L, index) == LUA_TSTRING) {
    size_t length;
    const char *text = lua_tolstring(L, index, &length);
    push_reading(L, text, length, what);
  } else if (lua_type(L, index) == LUA_TBOOLEAN) {
    lac_push_number(L, lua_toboolean(L, index), LAC_DIMENSIONLESS, NULL, -1);
  } else {
    lac_error(L, "%s wants a quantity; got %s", what, lac_shown(L, index));
  }
  lua_replace(L, index);
  return lac_to_quantity(L, index);
}

lac_quantity *lac_check_bound(lua_State *L, int index, const char *what) {
  lac_quantity *quantity = lac_check_quantity(L, index, what);
  if (quantity->unbound != NULL) lac_bind(L, quantity, NULL, NULL);
  return quantity;
}

lac_status lac_value_of(const lac_quantity *quantity, lac_value **value) {
  if (quantity->value == NULL) return lac_value_number(quantity->number, value);
  *value = lac_value_keep(quantity->value);
  return LAC_OK;
}

void lac_store(lua_State *L, lac_quantity *quantity) {
  if (quantity->value == NULL) return;
  lac_state *state = lac_state_begin(L);
  lac_state_end(L, lac_plan_store(&state->work, quantity->value));
}

/* A computed node from quantities; all nodes made on the way are given back. */
static lac_status computed(lac_block_function *block, int count, lac_quantity *const *quantities, lac_value **result) {
  lac_value *arguments[LAC_MAX_ARGUMENTS] = {NULL};
  lac_status status = LAC_OK;
  for (int i = 0; i < count && status == LAC_OK; i++) status = lac_value_of(quantities[i], &arguments[i]);
  if (status == LAC_OK) status = lac_value_computed(block, (size_t)count, arguments, result);
  for (int i = 0; i < count; i++) lac_value_drop(arguments[i]);
  return status;
}

static void raise_axes_differ(lua_State *L, const lac_quantity *a, const lac_quantity *b) {
  for (size_t i = 0; a->value != NULL && i < lac_value_axes(a->value); i++)
    for (size_t j = 0; b->value != NULL && j < lac_value_axes(b->value); j++) {
      const lac_axis *one = lac_value_axis(a->value, i), *other = lac_value_axis(b->value, j);
      if (strcmp(one->name, other->name) != 0 || lac_axis_same(one, other)) continue;
      if (one->length != other->length)
        lac_error(L, "the axis %s has %I points in one quantity and %I in the other", one->name, (lua_Integer)one->length, (lua_Integer)other->length);
      lac_error(L, "the axis %s has other values in one quantity than in the other", one->name);
    }
}

void lac_push_computed(lua_State *L, lac_block_function *block, int count, const int *places, lac_dimension dimension, const char *unit) {
  lac_quantity *arguments[LAC_MAX_ARGUMENTS];
  for (int i = 0; i < count; i++) arguments[i] = lac_to_quantity(L, places[i]);
  lac_quantity *result = lac_push_empty(L, dimension, unit, -1);
  lac_status status = computed(block, count, arguments, &result->value);
  if (status == LAC_TOO_MANY) { /* the pending expression is too deep: store what it rests on, and build on that */
    for (int i = 0; i < count; i++) lac_store(L, arguments[i]);
    status = computed(block, count, arguments, &result->value);
  }
  if (status == LAC_TOO_MANY) lac_error(L, "the result would have more than %d axes", LAC_MAX_AXES);
  if (status == LAC_AXES_DIFFER)
    for (int i = 0; i < count; i++)
      for (int j = i + 1; j < count; j++) raise_axes_differ(L, arguments[i], arguments[j]);
  if (status != LAC_OK) lac_state_end(L, status);
}

/* Arithmetic. */

typedef enum { ADD, SUBTRACT, MULTIPLY, DIVIDE } operation;

static double apply(operation op, double a, double b) {
  switch (op) {
  case ADD: return a + b;
  case SUBTRACT: return a - b;
  case MULTIPLY: return a * b;
  case DIVIDE: return a / b;
  }
  return (double)NAN;
}

static lac_dimension result_dimension(lua_State *L, operation op, const lac_quantity *a, const lac_quantity *b) {
  static const char *const verbs[] = {"add", "subtract"};
  lac_dimension result = a->dimension;
  if (op <= SUBTRACT) {
    if (!lac_dimension_equal(a->dimension, b->dimension)) {
      char one[80], other[80];
      lac_error(L, "can't %s %s (%s) and %s (%s)", verbs[op], lac_a_dimension(a->dimension, one, sizeof one), luaL_tolstring(L, 1, NULL),
                 lac_a_dimension(b->dimension, other, sizeof other), luaL_tolstring(L, 2, NULL));
    }
    return result;
  }
  lac_status status = op == MULTIPLY ? lac_dimension_product(a->dimension, b->dimension, &result)
                                     : lac_dimension_quotient(a->dimension, b->dimension, &result);
  if (status != LAC_OK) lac_error(L, "the exponents of the result's unit are too large");
  return result;
}

static bool is_plain(const lac_quantity *quantity) {
  return quantity->unit == NULL && lac_dimension_equal(quantity->dimension, LAC_DIMENSIONLESS);
}

/* The display unit of a result: of the sum's first term, or of the one factor that has a dimension. */
static const char *result_unit(operation op, const lac_quantity *a, const lac_quantity *b) {
  if (op <= SUBTRACT) return a->unit;
  if (is_plain(b)) return a->unit;
  return op == MULTIPLY && is_plain(a) ? b->unit : NULL;
}

static int arithmetic(lua_State *L, operation op, lac_block_function *block) {
  lac_quantity *a = lac_check_bound(L, 1, "the left side"), *b = lac_check_bound(L, 2, "the right side");
  const lac_dimension dimension = result_dimension(L, op, a, b);
  const char *unit = result_unit(op, a, b);
  if (a->value == NULL && b->value == NULL) lac_push_number(L, apply(op, a->number, b->number), dimension, unit, -1);
  else lac_push_computed(L, block, 2, (const int[]){1, 2}, dimension, unit);
  return 1;
}

/* The quick way for two single numbers with whole exponents: one userdata, no call but Lua's own. */
static bool multiply_quickly(lua_State *L, int sign) {
  const lac_quantity *a = lac_to_quantity(L, 1), *b = lac_to_quantity(L, 2);
  if (a == NULL || b == NULL || a->value != NULL || b->value != NULL || a->unbound != NULL || b->unbound != NULL) return false;
  if (a->dimension.denominator != 1 || b->dimension.denominator != 1) return false;
  lac_quantity *result = lua_newuserdatauv(L, sizeof *result, 0);
  result->tag = QUANTITY_TAG;
  result->value = NULL;
  result->unbound = NULL;
  result->number = sign > 0 ? a->number * b->number : a->number / b->number;
  result->unit = result_unit(sign > 0 ? MULTIPLY : DIVIDE, a, b);
  result->name = -1;
  result->dimension = LAC_DIMENSIONLESS;
  for (int i = 0; i < LAC_BASE_DIMENSIONS; i++) {
    int exponent = a->dimension.numerator[i] + sign * b->dimension.numerator[i];
    if (exponent != (int16_t)exponent) lac_error(L, "the exponents of the result's unit are too large");
    result->dimension.numerator[i] = (int16_t)exponent;
  }
  lua_pushvalue(L, lua_upvalueindex(1));
  lua_setmetatable(L, -2);
  return true;
}

static int quantity_add(lua_State *L) { return arithmetic(L, ADD, lac_block_add); }
static int quantity_subtract(lua_State *L) { return arithmetic(L, SUBTRACT, lac_block_subtract); }
static int quantity_multiply(lua_State *L) { return multiply_quickly(L, 1) ? 1 : arithmetic(L, MULTIPLY, lac_block_multiply); }
static int quantity_divide(lua_State *L) { return multiply_quickly(L, -1) ? 1 : arithmetic(L, DIVIDE, lac_block_divide); }

static int quantity_negate(lua_State *L) {
  const lac_quantity *a = lac_check_bound(L, 1, "the minus sign");
  if (a->value == NULL) lac_push_number(L, -a->number, a->dimension, a->unit, -1);
  else lac_push_computed(L, lac_block_negate, 1, (const int[]){1}, a->dimension, a->unit);
  return 1;
}

/* An exponent as a ratio of small whole numbers: needed where the base has a dimension. */
static bool as_ratio(double exponent, int *numerator, int *denominator) {
  for (int d = 1; d <= 60; d++) {
    double n = exponent * d;
    if (fabs(n) < 1000 && fabs(n - round(n)) <= 1e-12 * fmax(1, fabs(n))) {
      *numerator = (int)round(n);
      *denominator = d;
      return true;
    }
  }
  return false;
}

static int quantity_power(lua_State *L) {
  const lac_quantity *base = lac_check_bound(L, 1, "the base"), *exponent = lac_check_bound(L, 2, "the exponent");
  if (!lac_dimension_equal(exponent->dimension, LAC_DIMENSIONLESS)) lac_error(L, "an exponent wants a plain number; got %s", luaL_tolstring(L, 2, NULL));
  lac_dimension dimension = base->dimension;
  if (!lac_dimension_equal(base->dimension, LAC_DIMENSIONLESS)) {
    int numerator = 0, denominator = 1;
    if (exponent->value != NULL || !as_ratio(exponent->number, &numerator, &denominator))
      lac_error(L, "an exponent of a quantity with a unit wants one ratio of whole numbers; got %s", luaL_tolstring(L, 2, NULL));
    if (lac_dimension_power(base->dimension, numerator, denominator, &dimension) != LAC_OK) lac_error(L, "the exponents of the result's unit are too large");
  }
  if (base->value == NULL && exponent->value == NULL) lac_push_number(L, pow(base->number, exponent->number), dimension, NULL, -1);
  else lac_push_computed(L, lac_block_power, 2, (const int[]){1, 2}, dimension, NULL);
  return 1;
}

/* Comparison. */

static int compare(lua_State *L, bool (*holds)(double, double)) {
  const lac_quantity *a = lac_check_bound(L, 1, "a comparison"), *b = lac_check_bound(L, 2, "a comparison");
  if (!lac_dimension_equal(a->dimension, b->dimension)) lac_error(L, "can't compare %s with %s", luaL_tolstring(L, 1, NULL), luaL_tolstring(L, 2, NULL));
  if (a->value != NULL || b->value != NULL)
    lac_error(L, "a comparison with < or > wants single numbers; for ensembles and sweeps write above(a, b) or below(a, b), and chance(...) of that");
  lua_pushboolean(L, holds(a->number, b->number));
  return 1;
}
static bool less(double a, double b) { return a < b; }
static bool at_most(double a, double b) { return a <= b; }
static int quantity_less(lua_State *L) { return compare(L, less); }
static int quantity_at_most(lua_State *L) { return compare(L, at_most); }

static int quantity_equal(lua_State *L) {
  const lac_quantity *a = lac_to_quantity(L, 1), *b = lac_to_quantity(L, 2);
  lua_pushboolean(L, a != NULL && b != NULL && a->value == NULL && b->value == NULL && a->unbound == NULL && b->unbound == NULL &&
                         lac_dimension_equal(a->dimension, b->dimension) && a->number == b->number);
  return 1;
}

/* Functions of one argument: those of plain numbers, those of angles, and those that keep or change the dimension. */

static int of_one(lua_State *L, const char *what, double (*function)(double), lac_block_function *block, lac_dimension wanted, bool any, int denominator) {
  const lac_quantity *a = lac_check_bound(L, 1, what);
  lac_dimension dimension = LAC_DIMENSIONLESS;
  if (any) {
    if (lac_dimension_power(a->dimension, 1, denominator, &dimension) != LAC_OK) lac_error(L, "the exponents of the result's unit are too large");
  } else if (!lac_dimension_equal(a->dimension, wanted) && !lac_dimension_equal(a->dimension, LAC_DIMENSIONLESS)) {
    char words[80];
    lac_error(L, "%s wants %s; got %s", what, lac_a_dimension(wanted, words, sizeof words), luaL_tolstring(L, 1, NULL));
  }
  if (a->value == NULL) lac_push_number(L, function(a->number), dimension, any && denominator == 1 ? a->unit : NULL, -1);
  else lac_push_computed(L, block, 1, (const int[]){1}, dimension, any && denominator == 1 ? a->unit : NULL);
  return 1;
}

#define AN_ANGLE ((lac_dimension){{0, 0, 0, 0, 1, 0}, 1, 0})
static int function_sqrt(lua_State *L) { return of_one(L, "sqrt", sqrt, lac_block_root, LAC_DIMENSIONLESS, true, 2); }
static int function_abs(lua_State *L) { return of_one(L, "abs", fabs, lac_block_absolute, LAC_DIMENSIONLESS, true, 1); }
static int function_exp(lua_State *L) { return of_one(L, "exp", exp, lac_block_exp, LAC_DIMENSIONLESS, false, 1); }
static int function_log(lua_State *L) { return of_one(L, "log", log, lac_block_log, LAC_DIMENSIONLESS, false, 1); }
static int function_log10(lua_State *L) { return of_one(L, "log10", log10, lac_block_log10, LAC_DIMENSIONLESS, false, 1); }
static int function_sin(lua_State *L) { return of_one(L, "sin", sin, lac_block_sin, AN_ANGLE, false, 1); }
static int function_cos(lua_State *L) { return of_one(L, "cos", cos, lac_block_cos, AN_ANGLE, false, 1); }
static int function_tan(lua_State *L) { return of_one(L, "tan", tan, lac_block_tan, AN_ANGLE, false, 1); }

/* Functions of two quantities of one dimension. */
static int of_two(lua_State *L, const char *what, lac_block_function *block, bool verdict) {
  const lac_quantity *a = lac_check_bound(L, 1, what), *b = lac_check_bound(L, 2, what);
  if (!lac_dimension_equal(a->dimension, b->dimension))
    lac_error(L, "%s wants two quantities of one dimension; got %s and %s", what, luaL_tolstring(L, 1, NULL), luaL_tolstring(L, 2, NULL));
  const lac_dimension dimension = verdict ? LAC_DIMENSIONLESS : a->dimension;
  const char *unit = verdict ? NULL : a->unit;
  if (a->value == NULL && b->value == NULL) {
    const double *in[] = {&a->number, &b->number};
    double result;
    block(1, &result, in);
    lac_push_number(L, result, dimension, unit, -1);
  } else lac_push_computed(L, block, 2, (const int[]){1, 2}, dimension, unit);
  return 1;
}
static int function_above(lua_State *L) { return of_two(L, "above", lac_block_above, true); }
static int function_below(lua_State *L) { return of_two(L, "below", lac_block_below, true); }
static int function_least(lua_State *L) { return of_two(L, "least", lac_block_minimum, false); }
static int function_greatest(lua_State *L) { return of_two(L, "greatest", lac_block_maximum, false); }
static int function_both(lua_State *L) { return of_two(L, "both", lac_block_and, true); }
static int function_either(lua_State *L) { return of_two(L, "either", lac_block_or, true); }

/* Making. */

static int make_quantity(lua_State *L) {
  if (lua_gettop(L) == 2) { /* quantity(5, "au") */
    if (lua_type(L, 1) != LUA_TNUMBER) lac_error(L, "quantity wants a number before its unit; got %s", lac_shown(L, 1));
    if (lua_type(L, 2) != LUA_TSTRING) lac_error(L, "quantity wants a unit after the number, like \"au\"; got %s", lac_shown(L, 2));
    const lua_Number number = lua_tonumber(L, 1);
    size_t length;
    const char *text = lua_tolstring(L, 2, &length);
    lac_unit unit;
    lac_unit_kind kind = lac_unit_read(text, length, false, &unit, NULL);
    if (kind > LAC_UNIT_SHORT_FORM) lac_error(L, "quantity: unknown unit '%s'", text);
    lac_push_number(L, number * unit.factor, unit.dimension, lac_unit_anchor(L, text), -1);
    return 1;
  }
  const bool fresh = lac_to_quantity(L, 1) == NULL;
  lac_quantity *quantity = lac_check_quantity(L, 1, "quantity");
  if (fresh && quantity->unbound != NULL) quantity->unbound->ordinal = ++lac_state_of(L)->unbound_made;
  lua_settop(L, 1);
  return 1;
}

/* reading(text, what): a text as a quantity that takes no number: for showing it. */
static int quantity_reading(lua_State *L) {
  lac_check_quantity(L, 1, luaL_checkstring(L, 2));
  lua_settop(L, 1);
  return 1;
}

static const luaL_Reg metamethods[] = {
    {"__add", quantity_add}, {"__sub", quantity_subtract}, {"__mul", quantity_multiply}, {"__div", quantity_divide},
    {"__pow", quantity_power}, {"__unm", quantity_negate}, {"__lt", quantity_less}, {"__le", quantity_at_most},
    {"__eq", quantity_equal}, {NULL, NULL},
};

static const luaL_Reg functions[] = {
    {"quantity", make_quantity}, {"reading", quantity_reading},
    {"sqrt", function_sqrt}, {"abs", function_abs}, {"exp", function_exp}, {"log", function_log}, {"log10", function_log10},
    {"sin", function_sin}, {"cos", function_cos}, {"tan", function_tan}, {"above", function_above}, {"below", function_below},
    {"least", function_least}, {"greatest", function_greatest}, {"both", function_both}, {"either", function_either}, {NULL, NULL},
};

/* The metatable at key, with the number metatable as every metamethod's first upvalue. */
static void make_metatable(lua_State *L, const void *key, const char *field, bool finalised) {
  lua_newtable(L);
  lua_pushvalue(L, -1);
  lua_rawsetp(L, LUA_REGISTRYINDEX, key);
  lua_rawgetp(L, LUA_REGISTRYINDEX, &number_key);
  luaL_setfuncs(L, metamethods, 1);
  lua_pushliteral(L, "quantity");
  lua_setfield(L, -2, "__name");
  if (finalised) {
    lua_pushcfunction(L, quantity_finalise), lua_setfield(L, -2, "__gc");
    lua_pushcfunction(L, quantity_finalise), lua_setfield(L, -2, "__close");
  }
  lua_setfield(L, -2, field); /* for the Lua side, which adds methods and __tostring */
}

void lac_open_quantity(lua_State *L) {
  make_metatable(L, &number_key, "number_metatable", false);
  make_metatable(L, &value_key, "value_metatable", true);
  luaL_setfuncs(L, functions, 0);
}
