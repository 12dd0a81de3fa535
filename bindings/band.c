/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Bands in Lua: built-in ones by name, the user's from their numbers; their fields, and magnitudes to flux densities and back by the
   rows of the catalogue. */
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "binding.h"
#include "lacuna/photometry.h"

static const char metatable_key = 0; /* registry key */

static void drop(const void *band) { lac_band_drop(band); }

/* A built-in band. */
static void push_band(lua_State *L, const lac_band *band) { lac_object_take(L, lac_push_object(L, "band", &metatable_key), band, drop); }

static const lac_band *check_band(lua_State *L, int index) { return lac_check_object(L, index, "band", "band"); }

/* band_named(text) */
static int band_named(lua_State *L) {
  enum { MOST = 3 };
  const char *word = luaL_checkstring(L, 1), *near[MOST];
  const lac_band *band = lac_band_named(word);
  if (band != NULL) {
    push_band(L, band);
    return 1;
  }
  if (strcmp(word, "AB") == 0) return lac_error(L, "AB is a system of many bands: write band{wavelength = ..., system = \"AB\"}");
  const int count = lac_band_nearest(word, near, MOST);
  luaL_Buffer list;
  luaL_buffinit(L, &list);
  for (int i = 0; i < count; i++) {
    luaL_addstring(&list, i > 0 ? ", \"" : "; nearest are \"");
    luaL_addstring(&list, near[i]);
    luaL_addstring(&list, "\"");
  }
  luaL_pushresult(&list);
  return lac_error(L, "unknown band \"%s\"%s; help \"band\" lists them", word, lua_tostring(L, -1));
}

static lac_dimension dimension_of(lua_State *L, const char *name) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  return lac_catalogue_unit(catalogue, lac_catalogue_find(catalogue, name)).dimension;
}

/* A field of the table at 1, in SI; NaN where it is left out. like: the glossary's name of such a quantity. */
static double number_field(lua_State *L, const char *field, const char *like) {
  char what[40], words[80];
  snprintf(what, sizeof what, "band: %s", field);
  const lac_dimension wanted = dimension_of(L, like);
  if (lua_getfield(L, 1, field) == LUA_TNIL) return (double)NAN;
  const lac_quantity *quantity = lac_check_quantity(L, -1, what);
  if (!lac_dimension_equal(quantity->dimension, wanted))
    lac_error(L, "%s wants %s; got %s", what, lac_a_dimension(wanted, words, sizeof words), luaL_tolstring(L, -1, NULL));
  if (quantity->value != NULL || quantity->unbound != NULL)
    lac_error(L, "%s wants one number, no spread and no sweep: a band has no axes", what);
  if (!(quantity->number > 0 && isfinite(quantity->number)))
    lac_error(L, "%s wants a number > 0; got %s", what, luaL_tolstring(L, -1, NULL));
  return quantity->number;
}

/* A field of the table at 1, left on the stack. */
static const char *text_field(lua_State *L, const char *field) {
  const int type = lua_getfield(L, 1, field);
  if (type != LUA_TNIL && type != LUA_TSTRING) lac_error(L, "band: %s wants a text; got %s", field, lac_shown(L, -1));
  return lua_tostring(L, -1);
}

static void check_fields(lua_State *L) {
  static const char *const fields[] = {"name", "wavelength", "width", "zero_point", "system", NULL};
  for (lua_pushnil(L); lua_next(L, 1); lua_pop(L, 1)) {
    int known = 0;
    for (int i = 0; fields[i] != NULL && lua_type(L, -2) == LUA_TSTRING; i++) known |= strcmp(lua_tostring(L, -2), fields[i]) == 0;
    if (!known) lac_error(L, "band: unknown field %s; it has name, wavelength, width, zero_point, system", lac_shown(L, -2));
  }
}

/* band{wavelength =, width =, zero_point =, system =, name =} or band "H" */
static int band_new(lua_State *L) {
  lua_settop(L, 1);
  if (lac_to_object(L, 1) != NULL) return check_band(L, 1), 1;
  if (lua_type(L, 1) == LUA_TSTRING) return band_named(L);
  if (lua_type(L, 1) != LUA_TTABLE)
    return lac_error(L, "band wants a name like \"H\", or a table like {wavelength = \"2.2 um\", zero_point = \"640 Jy\"}; got %s",
                     lac_shown(L, 1));
  check_fields(L);
  const double wavelength = number_field(L, "wavelength", "wavelength"), width = number_field(L, "width", "bandwidth");
  const double zero_point = number_field(L, "zero_point", "zero_point_flux");
  const char *name = text_field(L, "name"), *system = text_field(L, "system");
  const bool ab = system != NULL && strcmp(system, "AB") == 0;
  if (isnan(wavelength)) return lac_error(L, "band wants its wavelength, like band{wavelength = \"2.2 um\", zero_point = \"640 Jy\"}");
  if (ab && !isnan(zero_point)) return lac_error(L, "band: the system AB has its own zero point; leave zero_point out");
  if (!ab && isnan(zero_point)) return lac_error(L, "band wants its zero_point, like \"640 Jy\", or system = \"AB\"");
  lac_object *object = lac_push_object(L, "band", &metatable_key);
  lac_band *band;
  const lac_status status = lac_band_new(name, system != NULL ? system : "own", wavelength, width, zero_point, &band);
  if (status != LAC_OK) return lac_error(L, "band: %s", lac_status_words(status));
  lac_object_take(L, object, band, drop);
  return 1;
}

/* band_at(i): the built-in band number i, from 1; nothing past the last. */
static int band_at(lua_State *L) {
  const lac_band *band = lac_band_at((size_t)luaL_checkinteger(L, 1) - 1);
  if (band == NULL) return 0;
  push_band(L, band);
  return 1;
}

/* band_facts(band): aliases (or nil), the id of the zero point's source (or nil). */
static int band_facts(lua_State *L) {
  const lac_band *band = check_band(L, 1);
  lua_pushstring(L, band->aliases);
  lua_pushstring(L, band->source);
  return 2;
}

/* The row gives/by at (quantity at 2, zero point of the band at 1). */
static int by_row(lua_State *L, const char *what, const char *gives, const char *by, const char *from) {
  const lac_band *band = check_band(L, 1);
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int id = lac_catalogue_find(catalogue, gives);
  const lac_relation *row = lac_catalogue_row(catalogue, lac_catalogue_find_row(catalogue, id, by));
  const lac_dimension wanted = dimension_of(L, from), dimension = dimension_of(L, gives);
  const char *unit = lac_catalogue_name(catalogue, id)->unit;
  char words[80];
  lua_settop(L, 2);
  const lac_quantity *quantity = lac_check_bound(L, 2, what);
  if (!lac_dimension_equal(quantity->dimension, wanted))
    return lac_error(L, "%s wants %s; got %s", what, lac_a_dimension(wanted, words, sizeof words), luaL_tolstring(L, 2, NULL));
  lac_push_number(L, band->zero_point, dimension_of(L, "zero_point_flux"), NULL, -1);
  if (quantity->value == NULL) {
    const double result = lac_relation_value(row, (const double[]){quantity->number, band->zero_point});
    if (isnan(result)) return lac_error(L, "%s is undefined for %s", what, luaL_tolstring(L, 2, NULL));
    lac_push_number(L, result, dimension, unit, -1);
  } else lac_push_computed(L, row->block, 2, (const int[]){2, 3}, dimension, unit);
  return 1;
}

static int band_flux(lua_State *L) { return by_row(L, "band:flux", "flux_density", "from_magnitude", "magnitude"); }
static int band_magnitude(lua_State *L) { return by_row(L, "band:magnitude", "magnitude", "from_flux_density", "flux_density"); }

static int push_field(lua_State *L, double value, const char *like) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int id = lac_catalogue_find(catalogue, like);
  if (isnan(value)) return 0;
  lac_push_number(L, value, lac_catalogue_unit(catalogue, id).dimension, lac_catalogue_name(catalogue, id)->unit, -1);
  return 1;
}

static int band_index(lua_State *L) {
  const lac_band *band = check_band(L, 1);
  const char *word = lua_type(L, 2) == LUA_TSTRING ? lua_tostring(L, 2) : "";
  if (strcmp(word, "flux") == 0) lua_pushcfunction(L, band_flux);
  else if (strcmp(word, "magnitude") == 0) lua_pushcfunction(L, band_magnitude);
  else if (strcmp(word, "name") == 0) lua_pushstring(L, band->name);
  else if (strcmp(word, "system") == 0) lua_pushstring(L, band->system);
  else if (strcmp(word, "wavelength") == 0) return push_field(L, band->wavelength, "wavelength");
  else if (strcmp(word, "width") == 0) return push_field(L, band->width, "bandwidth");
  else if (strcmp(word, "zero_point") == 0) return push_field(L, band->zero_point, "zero_point_flux");
  else
    return lac_error(L, "a band has no %s; it has name, system, wavelength, width, zero_point, flux(magnitude), magnitude(flux)",
                     lac_shown(L, 2));
  return 1;
}

static int band_text(lua_State *L) {
  const lac_band *band = check_band(L, 1);
  char micrometres[32];
  snprintf(micrometres, sizeof micrometres, "%.6g", 1e6 * band->wavelength);
  lua_pushfstring(L, "%s (%s um)", band->name, micrometres);
  return 1;
}

void lac_open_band(lua_State *L) {
  static const luaL_Reg functions[] = {
      {"band", band_new}, {"band_named", band_named}, {"band_at", band_at}, {"band_facts", band_facts}, {NULL, NULL}};
  luaL_setfuncs(L, functions, 0);
  lua_newtable(L);
  lua_pushcfunction(L, band_index), lua_setfield(L, -2, "__index");
  lua_pushcfunction(L, band_text), lua_setfield(L, -2, "__tostring");
  lua_pushliteral(L, "band"), lua_setfield(L, -2, "__name");
  lua_pushliteral(L, "band"), lua_setfield(L, -2, "__metatable");
  lua_rawsetp(L, LUA_REGISTRYINDEX, &metatable_key);
}
