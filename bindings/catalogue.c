/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The glossary and the relations as Lua sees them, and rows that a user adds. */
#include <math.h>
#include <string.h>

#include "binding.h"
#include "nearest.h"

static void set_string(lua_State *L, const char *key, const char *text) {
  if (text == NULL) return;
  lua_pushstring(L, text);
  lua_setfield(L, -2, key);
}

static int id_argument(lua_State *L, int index) {
  const char *word = luaL_checkstring(L, index);
  const int id = lac_catalogue_find(lac_catalogue_of(L), word);
  if (id < 0) lac_error(L, "unknown name '%s'", word);
  return id;
}

/* find(word): the name that a name or synonym stands for, or nil. Second: whether it was a synonym. */
static int catalogue_find(lua_State *L) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const char *word = luaL_checkstring(L, 1);
  int id = lac_catalogue_find(catalogue, word);
  const bool synonym = id < 0;
  if (synonym) id = lac_catalogue_find_synonym(catalogue, word);
  if (id < 0) return 0;
  lua_pushstring(L, lac_catalogue_name(catalogue, id)->name);
  lua_pushboolean(L, synonym);
  return 2;
}

/* nearest(word): a list of the nearest known names. */
static int catalogue_nearest(lua_State *L) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  int ids[5];
  const int count = lac_catalogue_nearest(catalogue, luaL_checkstring(L, 1), ids, 5);
  lua_createtable(L, count, 0);
  for (int i = 0; i < count; i++) lua_pushstring(L, lac_catalogue_name(catalogue, ids[i])->name), lua_rawseti(L, -2, i + 1);
  return 1;
}

/* names(): all names in glossary order. */
static int catalogue_names(lua_State *L) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int count = lac_catalogue_names(catalogue);
  lua_createtable(L, count, 0);
  for (int i = 0; i < count; i++) lua_pushstring(L, lac_catalogue_name(catalogue, i)->name), lua_rawseti(L, -2, i + 1);
  return 1;
}

/* entry(name): its row of the glossary as a table, with rows = its relations' numbers in order. */
static int catalogue_entry(lua_State *L) {
  static const char *const kinds[] = {"quantity", "verdict", "object"};
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int id = id_argument(L, 1);
  const lac_name *name = lac_catalogue_name(catalogue, id);
  lua_createtable(L, 0, 12);
  set_string(L, "name", name->name), set_string(L, "synonyms", name->synonyms), set_string(L, "unit", name->unit);
  set_string(L, "range", name->range), set_string(L, "symbol", name->symbol), set_string(L, "meaning", name->meaning);
  set_string(L, "subject", name->subject), set_string(L, "hint", name->hint), set_string(L, "kind", kinds[name->kind]);
  lua_pushboolean(L, name->on_sky), lua_setfield(L, -2, "on_sky");
  lua_pushnumber(L, lac_catalogue_unit(catalogue, id).factor), lua_setfield(L, -2, "factor");
  int count = 0;
  const int *rows = lac_catalogue_rows_of(catalogue, id, &count);
  lua_createtable(L, count, 0);
  for (int i = 0; i < count; i++) lua_pushinteger(L, rows[i]), lua_rawseti(L, -2, i + 1);
  lua_setfield(L, -2, "rows");
  return 1;
}

/* bounds(name): the ends of its range, SI. */
static int catalogue_bounds(lua_State *L) {
  const lac_range range = lac_catalogue_range(lac_catalogue_of(L), id_argument(L, 1));
  lua_pushnumber(L, range.low);
  lua_pushnumber(L, range.high);
  return 2;
}

/* given_like(name): one of the name's SI unit as its quantity, to make others like it. */
static int catalogue_given_like(lua_State *L) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int id = id_argument(L, 1);
  lac_push_number(L, 1, lac_catalogue_unit(catalogue, id).dimension, lac_catalogue_name(catalogue, id)->unit, id);
  return 1;
}

static void push_inputs(lua_State *L, const lac_relation *row) {
  lua_newtable(L);
  for (int i = 0; i < LAC_MAX_ARGUMENTS && row->from[i] != NULL; i++) lua_pushstring(L, row->from[i]), lua_rawseti(L, -2, i + 1);
  lua_setfield(L, -2, "from");
}

static void push_bounds(lua_State *L, const lac_relation *row) {
  lua_newtable(L);
  for (int i = 0; i < LAC_MAX_BOUNDS && row->holds[i].name != NULL; i++) {
    lua_createtable(L, 0, 3);
    set_string(L, "name", row->holds[i].name);
    lua_pushnumber(L, row->holds[i].low), lua_setfield(L, -2, "low");
    lua_pushnumber(L, row->holds[i].high), lua_setfield(L, -2, "high");
    lua_rawseti(L, -2, i + 1);
  }
  lua_setfield(L, -2, "holds");
}

/* row(number): a relation as a table. */
static int catalogue_row(lua_State *L) {
  static const char *const kinds[] = {"definition", "recipe", "user", "assumed"};
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const lua_Integer number = luaL_checkinteger(L, 1);
  luaL_argcheck(L, number >= 0 && number < lac_catalogue_rows(catalogue), 1, "no such row");
  const lac_relation *row = lac_catalogue_row(catalogue, (int)number);
  lua_createtable(L, 0, 16);
  lua_pushinteger(L, number), lua_setfield(L, -2, "number");
  set_string(L, "gives", row->gives), set_string(L, "by", row->by), set_string(L, "assumes", row->assumes);
  set_string(L, "function_name", row->function_name), set_string(L, "source", row->source), set_string(L, "place", row->place_in_source);
  set_string(L, "equation", row->equation), set_string(L, "supposes", row->supposes), set_string(L, "unchecked", row->unchecked);
  set_string(L, "inverse_of", row->inverse_of), set_string(L, "kind", kinds[row->kind]);
  lua_pushboolean(L, row->from_memory), lua_setfield(L, -2, "from_memory");
  push_inputs(L, row);
  push_bounds(L, row);
  lua_newtable(L);
  for (int i = 0; i < LAC_MAX_CONDITIONS && row->conditions[i] != NULL; i++) lua_pushstring(L, row->conditions[i]), lua_rawseti(L, -2, i + 1);
  lua_setfield(L, -2, "conditions");
  return 1;
}

/* source(id): a published source as a table; nil if there is none (a user's own words). */
static int catalogue_source(lua_State *L) {
  const lac_source *source = lac_source_find(luaL_checkstring(L, 1));
  if (source == NULL) return 0;
  lua_createtable(L, 0, 7);
  set_string(L, "id", source->id), set_string(L, "authors", source->authors), set_string(L, "year", source->year);
  set_string(L, "title", source->title), set_string(L, "journal", source->journal), set_string(L, "volume", source->volume);
  set_string(L, "page", source->page);
  return 1;
}

/* Text field of the table at 1, or its default (NULL: it is wanted). */
static const char *text_field(lua_State *L, const char *what, const char *key, const char *otherwise) {
  if (lua_getfield(L, 1, key) == LUA_TSTRING) return lua_tostring(L, -1); /* stays on the stack: anchored */
  if (!lua_isnil(L, -1)) lac_error(L, "%s: %s wants a text; got %s", what, key, luaL_typename(L, -1));
  if (otherwise == NULL) lac_error(L, "%s wants %s", what, key);
  return otherwise;
}

/* Whether the table at 1 has fields besides these (NULL past the last) and those numbered: an error. */
static void check_fields(lua_State *L, const char *what, const char *const *fields) {
  for (lua_pushnil(L); lua_next(L, 1); lua_pop(L, 1)) {
    if (lua_type(L, -2) != LUA_TSTRING) continue;
    int i = 0;
    while (fields[i] != NULL && strcmp(fields[i], lua_tostring(L, -2)) != 0) i++;
    if (fields[i] != NULL) continue;
    luaL_Buffer known;
    lua_pop(L, 1);
    luaL_buffinit(L, &known);
    for (i = 0; fields[i] != NULL; i++) luaL_addstring(&known, i > 0 ? ", " : ""), luaL_addstring(&known, fields[i]);
    luaL_pushresult(&known);
    lac_error(L, "%s: unknown field '%s'; there are %s", what, lua_tostring(L, -2), lua_tostring(L, -1));
  }
}

/* The tables must not grow under a computation. */
static void check_idle(lua_State *L, const char *what) {
  if (lac_state_of(L)->calls > 0) lac_error(L, "%s: nothing can be added while a relation of yours is computed", what);
}

/* add_name{name, unit, meaning, range, symbol, on_sky}. */
static int catalogue_add_name(lua_State *L) {
  static const char *const fields[] = {"name", "unit", "meaning", "range", "symbol", "on_sky", NULL};
  luaL_checktype(L, 1, LUA_TTABLE);
  check_fields(L, "quantity", fields);
  check_idle(L, "quantity");
  lac_name name = {.subject = "yours"};
  name.name = text_field(L, "quantity", "name", NULL);
  name.unit = text_field(L, "quantity", "unit", NULL);
  name.meaning = text_field(L, "quantity", "meaning", NULL);
  name.range = text_field(L, "quantity", "range", "any");
  name.symbol = text_field(L, "quantity", "symbol", name.name);
  lua_getfield(L, 1, "on_sky");
  name.on_sky = lua_toboolean(L, -1);
  lac_status status = lac_catalogue_add_name(lac_catalogue_of(L), &name, NULL);
  switch (status) {
  case LAC_OK: return 0;
  case LAC_DUPLICATE: return lac_error(L, "quantity: there is a quantity '%s' already", name.name);
  case LAC_UNKNOWN_UNIT: return lac_error(L, "quantity '%s': unknown unit '%s'", name.name, name.unit);
  case LAC_BAD_SYNTAX:
    if (!lac_catalogue_fit_name(name.name))
      return lac_error(L, "quantity '%s': a name is made of letters, digits and _, no digit first, at most %d in all", name.name, LAC_MAX_NAME);
    return lac_error(L, "quantity '%s': can't read the range \"%s\"; write \"> 0\", \">= 0\", \"0 .. 1\" or \"any\"", name.name, name.range);
  case LAC_WRONG_DIMENSION: return lac_error(L, "quantity '%s': only a length is seen on the sky; %s is none", name.name, name.unit);
  default: return lac_error(L, "quantity '%s': %s", name.name, lac_status_words(status));
  }
}

static const char elements_axis[] = "element"; /* along which a user's function gets its inputs */

/* What a user's function gave for n elements: into out, undefined where it is out of the name's range. */
static int take_result(lua_State *L, const lac_users_row *users, const lac_relation *row, size_t n, double *out) {
  const lac_catalogue *catalogue = users->state->catalogue;
  const int id = lac_catalogue_find(catalogue, row->gives);
  char words[80];
  const lac_dimension wanted = lac_catalogue_unit(catalogue, id).dimension;
  const lac_quantity *given = lac_to_quantity(L, -1);
  if (given == NULL && lua_type(L, -1) != LUA_TNUMBER)
    return lac_error(L, "the relation for %s by '%s' returned %s; wanted is %s", row->gives, row->by, lac_shown(L, -1), lac_a_dimension(wanted, words, sizeof words));
  lac_quantity *result = lac_check_bound(L, -1, row->gives);
  if (!lac_dimension_equal(result->dimension, wanted))
    return lac_error(L, "the relation for %s by '%s' returned %s; wanted is %s", row->gives, row->by, luaL_tolstring(L, -1, NULL), lac_a_dimension(wanted, words, sizeof words));
  const lac_range range = lac_catalogue_range(catalogue, id);
  if (result->value == NULL) {
    for (size_t i = 0; i < n; i++) out[i] = lac_range_holds(range, result->number) ? result->number : NAN;
    return 0;
  }
  if (lac_value_size(result->value) != n || lac_value_axes(result->value) != 1 || strcmp(lac_value_axis(result->value, 0)->name, elements_axis) != 0)
    return lac_error(L, "the relation for %s by '%s' returned another axis than its arguments'; it is to be elementwise", row->gives, row->by);
  lac_status status = lac_plan_store(&users->state->work, result->value);
  if (status != LAC_OK) return lac_error(L, "%s", lac_status_words(status));
  const double *elements = lac_value_data(result->value);
  for (size_t i = 0; i < n; i++) out[i] = lac_range_holds(range, elements[i]) ? elements[i] : NAN;
  return 0;
}

typedef struct {
  const lac_users_row *users;
  size_t n;
  double *out;
  const double *const *in;
} users_call;

/* One argument as a quantity: a number, or n elements along an axis of its own. */
static void push_argument(lua_State *L, const lac_unit unit, const char *symbol, size_t n, const double *elements) {
  if (n == 1) {
    lac_push_number(L, *elements, unit.dimension, symbol, -1);
    return;
  }
  lac_quantity *quantity = lac_push_empty(L, unit.dimension, symbol, -1);
  lac_axis *axis = NULL;
  lac_status status = lac_axis_new(elements_axis, n, NULL, &axis);
  if (status == LAC_OK) status = lac_value_array(1, &axis, elements, &quantity->value);
  lac_axis_drop(axis);
  if (status != LAC_OK) lac_error(L, "%s", lac_status_words(status));
}

static int call_protected(lua_State *L) {
  const users_call *call = lua_touserdata(L, 1);
  const lac_catalogue *catalogue = call->users->state->catalogue;
  const lac_relation *row = lac_catalogue_row(catalogue, call->users->row);
  lua_rawgeti(L, LUA_REGISTRYINDEX, call->users->function);
  int count = 0;
  const int *from = lac_catalogue_from(catalogue, call->users->row, &count);
  luaL_checkstack(L, count + 4, "too many inputs");
  for (int i = 0; i < count; i++) push_argument(L, lac_catalogue_unit(catalogue, from[i]), lac_catalogue_name(catalogue, from[i])->unit, call->n, call->in[i]);
  lua_call(L, count, 1);
  return take_result(L, call->users, row, call->n, call->out);
}

/* The function may begin computations of its own, in a coroutine of its own even: whose call this is, is put back after it. */
int lac_call_users_row(void *context, size_t n, double *out, const double *const *in) {
  const lac_users_row *users = context;
  lac_state *state = users->state;
  lua_State *L = state->caller;
  const lua_Hook hook = state->hook, main_hook = state->main_hook;
  const users_call call = {users, n, out, in};
  if (!lua_checkstack(L, 4)) return 1;
  lua_pushcfunction(L, call_protected);
  lua_pushlightuserdata(L, (void *)&call);
  state->calls++;
  const bool failed = lua_pcall(L, 1, 0, 0) != LUA_OK;
  state->calls--;
  state->caller = L, state->hook = hook, state->main_hook = main_hook;
  if (failed) lac_state_keep_error(L);
  return failed;
}

static int raise_from_adding(lua_State *L, lac_status status, const lac_relation *row) {
  switch (status) {
  case LAC_DUPLICATE: return lac_error(L, "relation: %s has a recipe '%s' already", row->gives, row->by);
  case LAC_CIRCLE: return lac_error(L, "relation for %s by '%s': with it, relations would form a circle", row->gives, row->by);
  default: return lac_error(L, "relation for %s by '%s': %s", row->gives, row->by, lac_status_words(status));
  }
}

static void check_known(lua_State *L, const char *name, const char *gives) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  if (lac_catalogue_find(catalogue, name) >= 0) return;
  int nearest = -1;
  const char *meant = lac_catalogue_nearest(catalogue, name, &nearest, 1) > 0 ? lac_catalogue_name(catalogue, nearest)->name : NULL;
  if (meant != NULL) lac_error(L, "relation for %s: unknown name '%s'; did you mean %s?", gives, name, meant);
  lac_error(L, "relation for %s: unknown name '%s'; make it known with quantity{name = \"%s\", unit = ..., meaning = ...}", gives, name, name);
}

/* add_relation{gives, by, from = {names}, call = function, source, equation, supposes}. */
static int catalogue_add_relation(lua_State *L) {
  static const char *const fields[] = {"gives", "by", "from", "call", "source", "equation", "supposes", NULL};
  luaL_checktype(L, 1, LUA_TTABLE);
  check_fields(L, "relation", fields);
  check_idle(L, "relation");
  luaL_checkstack(L, LAC_MAX_ARGUMENTS + 20, NULL);
  lac_relation row = {.kind = LAC_USERS, .call = lac_call_users_row};
  row.gives = text_field(L, "relation", "gives", NULL);
  row.by = text_field(L, "relation", "by", "yours");
  row.source = text_field(L, "relation", "source", "the user's own");
  row.equation = text_field(L, "relation", "equation", "");
  row.supposes = text_field(L, "relation", "supposes", "");
  if (*row.supposes == '\0') row.supposes = NULL;
  check_known(L, row.gives, row.gives);
  if (lua_getfield(L, 1, "from") != LUA_TTABLE) return lac_error(L, "relation for %s wants from = {names}", row.gives);
  const lua_Unsigned count = lua_rawlen(L, -1);
  if (count == 0 || count > LAC_MAX_ARGUMENTS) return lac_error(L, "relation for %s wants 1 to %d names in from; got %I", row.gives, LAC_MAX_ARGUMENTS, (lua_Integer)count);
  const int list = lua_gettop(L);
  for (lua_Unsigned i = 0; i < count; i++) {
    if (lua_rawgeti(L, list, (lua_Integer)i + 1) != LUA_TSTRING) return lac_error(L, "relation for %s: from wants names; got %s", row.gives, luaL_typename(L, -1));
    row.from[i] = lua_tostring(L, -1);
    check_known(L, row.from[i], row.gives);
  }
  if (lua_getfield(L, 1, "call") != LUA_TFUNCTION) return lac_error(L, "relation for %s wants a function of its inputs; got %s", row.gives, lac_shown(L, -1));
  lac_users_row *users = lua_newuserdatauv(L, sizeof *users, 0);
  lua_insert(L, -2);
  *users = (lac_users_row){.state = lac_state_of(L), .function = luaL_ref(L, LUA_REGISTRYINDEX)};
  luaL_ref(L, LUA_REGISTRYINDEX); /* both live as long as the state, as the row does */
  row.context = users;
  lac_status status = lac_catalogue_add_relation(lac_catalogue_of(L), &row, &users->row);
  return status == LAC_OK ? 0 : raise_from_adding(L, status, &row);
}

/* edits(a, b): how many slips of the finger make one word of the other. */
static int word_edits(lua_State *L) {
  lua_pushinteger(L, lac_edits(luaL_checkstring(L, 1), luaL_checkstring(L, 2)));
  return 1;
}

void lac_open_catalogue(lua_State *L) {
  static const luaL_Reg functions[] = {
      {"find", catalogue_find}, {"edits", word_edits}, {"nearest", catalogue_nearest}, {"names", catalogue_names}, {"entry", catalogue_entry}, {"row", catalogue_row}, {"bounds", catalogue_bounds}, {"given_like", catalogue_given_like},
      {"source", catalogue_source}, {"add_name", catalogue_add_name}, {"add_relation", catalogue_add_relation}, {NULL, NULL},
  };
  luaL_setfuncs(L, functions, 0);
}
