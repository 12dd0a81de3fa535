/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Materials and dust for dust.lua, which reads what a user writes: here everything is in SI and checked by the core. */
#include "lacuna/dust.h"

#include <math.h>
#include <string.h>

#include "binding.h"

static const char dust_key = 0, material_key = 0; /* registry keys of the metatables */

static void drop_dust(const void *dust) { lac_dust_drop(dust); }
static void drop_material(const void *material) { lac_material_drop((lac_material *)(uintptr_t)material); }

static lac_object *push_material(lua_State *L) { return lac_push_object(L, "material", &material_key); }

static const lac_material *check_material(lua_State *L, int index) { return lac_check_object(L, index, "material", "dust: a material"); }
static const lac_dust *check_dust(lua_State *L, int index) { return lac_check_object(L, index, "dust", "dust"); }

/* dust_number(value, like, what): one number of the dimension of the glossary's name `like`, in SI. */
static int dust_number(lua_State *L) {
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const char *what = luaL_checkstring(L, 3);
  const lac_dimension wanted = lac_catalogue_unit(catalogue, lac_catalogue_find(catalogue, luaL_checkstring(L, 2))).dimension;
  const lac_quantity *quantity = lac_check_quantity(L, 1, what);
  char words[80];
  if (!lac_dimension_equal(quantity->dimension, wanted))
    return lac_error(L, "%s wants %s; got %s", what, lac_a_dimension(wanted, words, sizeof words), luaL_tolstring(L, 1, NULL));
  if (quantity->value != NULL || quantity->unbound != NULL) return lac_error(L, "%s wants one number, no spread and no sweep", what);
  if (!isfinite(quantity->number)) return lac_error(L, "%s wants a finite number; got %s", what, luaL_tolstring(L, 1, NULL));
  lua_pushnumber(L, quantity->number);
  return 1;
}

/* ---- materials ---- */

/* material_at(i): the built-in one number i, from 1; nothing past the last. */
static int material_at(lua_State *L) {
  const lac_material *material = lac_material_at((size_t)luaL_checkinteger(L, 1) - 1);
  if (material == NULL) return 0;
  lac_object_take(L, push_material(L), material, drop_material);
  return 1;
}

static int material_facts(lua_State *L) {
  const lac_material_facts facts = lac_material_about(check_material(L, 1));
  lua_createtable(L, 0, 7);
  lua_pushstring(L, facts.name), lua_setfield(L, -2, "name");
  lua_pushstring(L, facts.what), lua_setfield(L, -2, "what");
  lua_pushstring(L, facts.validity), lua_setfield(L, -2, "validity");
  lua_pushstring(L, facts.source), lua_setfield(L, -2, "source");
  lua_pushnumber(L, facts.density), lua_setfield(L, -2, "density");
  lua_pushnumber(L, facts.shortest), lua_setfield(L, -2, "shortest");
  lua_pushnumber(L, facts.longest), lua_setfield(L, -2, "longest");
  return 1;
}

/* material_table(name, density, {wavelength}, {n}, {k}): the material, or the number of the first bad row. */
static int material_table(lua_State *L) {
  const char *name = luaL_checkstring(L, 1);
  const double density = luaL_checknumber(L, 2);
  const size_t count = (size_t)lua_rawlen(L, 3);
  double *column = lua_newuserdatauv(L, (3 * count + 1) * sizeof *column, 0);
  for (int c = 0; c < 3; c++)
    for (size_t i = 0; i < count; i++) {
      lua_rawgeti(L, 3 + c, (lua_Integer)i + 1);
      column[(size_t)c * count + i] = luaL_checknumber(L, -1);
      lua_pop(L, 1);
    }
  lac_object *object = push_material(L);
  lac_material *material;
  size_t where;
  const lac_status status = lac_material_table(name, density, count, column, column + count, column + 2 * count, &material, &where);
  if (status == LAC_NO_MEMORY) return lac_error(L, "%s", lac_status_words(status));
  if (status == LAC_OK) lac_object_take(L, object, material, drop_material);
  else lua_pushinteger(L, (lua_Integer)where + 1);
  return 1;
}

/* ---- dust ---- */

static double field(lua_State *L, const char *name) {
  lua_getfield(L, 1, name);
  const double value = lua_isnil(L, -1) ? (double)NAN : luaL_checknumber(L, -1);
  lua_pop(L, 1);
  return value;
}

/* dust_new{materials = {...}, fractions = {...}, mixing =, porosity =, sizes =, ...}: the dust, or a complaint. */
static int dust_new(lua_State *L) {
  static const char *const kinds[] = {"power", "log_normal", "single", NULL}, *const rules[] = {"bruggeman", "maxwell_garnett", NULL};
  lac_dust_recipe recipe = {.porosity = field(L, "porosity"),
                            .smallest = field(L, "smallest"),
                            .largest = field(L, "largest"),
                            .index = field(L, "index"),
                            .median = field(L, "median"),
                            .width = field(L, "width"),
                            .temperature = field(L, "temperature")};
  lua_getfield(L, 1, "sizes");
  recipe.sizes = (lac_size_kind)luaL_checkoption(L, -1, NULL, kinds);
  lua_getfield(L, 1, "mixing");
  recipe.mixing = (lac_mixing_rule)luaL_checkoption(L, -1, NULL, rules);
  lua_getfield(L, 1, "extrapolate");
  recipe.extrapolate = lua_toboolean(L, -1);
  lua_getfield(L, 1, "materials");
  lua_getfield(L, 1, "fractions");
  const int materials = lua_gettop(L) - 1;
  recipe.components = (size_t)lua_rawlen(L, materials);
  for (size_t i = 0; i < recipe.components && i < LAC_MAX_COMPONENTS; i++) {
    lua_rawgeti(L, materials, (lua_Integer)i + 1);
    lua_rawgeti(L, materials + 1, (lua_Integer)i + 1);
    recipe.material[i] = check_material(L, -2);
    recipe.mass_fraction[i] = luaL_checknumber(L, -1);
    lua_pop(L, 2);
  }
  char words[200];
  lac_dust *dust;
  lac_object *object = lac_push_object(L, "dust", &dust_key);
  lac_state *state = lac_state_begin(L);
  const lac_status status = lac_dust_new(&state->work, &recipe, &dust, words, sizeof words);
  if (status == LAC_OUT_OF_RANGE) {
    lac_state_end(L, LAC_OK);
    lua_pushstring(L, words);
    return 1;
  }
  lac_state_end(L, status);
  lac_object_take(L, object, dust, drop_dust);
  return 1;
}

/* dust_facts(dust): density, the wavelengths it holds for. */
static int dust_facts(lua_State *L) {
  const lac_dust *dust = check_dust(L, 1);
  double shortest, longest;
  lac_dust_holds(dust, &shortest, &longest);
  lua_pushnumber(L, lac_dust_density(dust));
  lua_pushnumber(L, shortest);
  lua_pushnumber(L, longest);
  return 3;
}

/* Each function of wavelength: the word, its block function, and the name in the glossary whose unit it has. */
typedef struct {
  const char *word;
  lac_object_function *function;
  const char *like;
} of_wavelength;

static const of_wavelength functions_of_wavelength[] = {
    {"absorption", lac_opacity_of_dust, "dust_opacity"},
    {"scattering", lac_scattering_of_dust, "dust_opacity"},
    {"extinction", lac_extinction_of_dust, "dust_opacity"},
    {"albedo", lac_albedo_of_dust, "dust_albedo"},
    {"asymmetry", lac_asymmetry_of_dust, "dust_asymmetry"},
    {"effective_albedo", lac_effective_albedo_of_dust, "dust_effective_albedo"},
    {NULL, NULL, NULL},
};

static lac_status apply(const of_wavelength *entry, const lac_object *object, const lac_quantity *wavelength, lac_value **value) {
  lac_value *argument;
  lac_status status = lac_value_of(wavelength, &argument);
  if (status != LAC_OK) return status;
  status = lac_value_of_object(entry->function, object->value, 1, &argument, value);
  lac_value_drop(argument);
  return status;
}

/* dust_at(dust, word, wavelength) */
static int dust_at(lua_State *L) {
  const lac_dust *dust = check_dust(L, 1);
  const char *word = luaL_checkstring(L, 2);
  const of_wavelength *entry = functions_of_wavelength;
  while (entry->word != NULL && strcmp(entry->word, word) != 0) entry++;
  if (entry->word == NULL) return lac_error(L, "dust has no '%s'", word);
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const lac_quantity *wavelength = lac_check_bound(L, 3, "a wavelength");
  const lac_dimension wanted = lac_catalogue_unit(catalogue, lac_catalogue_find(catalogue, "wavelength")).dimension;
  if (!lac_dimension_equal(wavelength->dimension, wanted))
    return lac_error(L, "dust:%s wants a wavelength; got %s", word, luaL_tolstring(L, 3, NULL));
  const int like = lac_catalogue_find(catalogue, entry->like);
  const lac_dimension dimension = lac_catalogue_unit(catalogue, like).dimension;
  const char *unit = lac_catalogue_name(catalogue, like)->unit;
  if (wavelength->value == NULL) {
    double value;
    const double at = wavelength->number, *in[] = {&at};
    entry->function(dust, 1, &value, in);
    if (isnan(value)) {
      double shortest, longest;
      lac_dust_holds(dust, &shortest, &longest);
      return lac_error(L, "dust:%s at %s: its materials hold from %f um to %f um; extrapolate = true goes from 0.1 um to 1 cm", word,
                       luaL_tolstring(L, 3, NULL), 1e6 * shortest, 1e6 * longest);
    }
    lac_push_number(L, value, dimension, unit, -1);
    return 1;
  }
  lac_quantity *result = lac_push_empty(L, dimension, unit, -1);
  lac_status status = apply(entry, lac_to_object(L, 1), wavelength, &result->value);
  if (status == LAC_TOO_MANY) {
    lac_store(L, lac_to_quantity(L, 3));
    status = apply(entry, lac_to_object(L, 1), wavelength, &result->value);
  }
  if (status != LAC_OK) return lac_error(L, "dust:%s: %s", word, lac_status_words(status));
  return 1;
}

/* dust_mean(dust, "planck" or "rosseland", temperature in K): the mean opacity and its relative error; nothing where it is undefined. */
static int dust_mean(lua_State *L) {
  const lac_dust *dust = check_dust(L, 1);
  const bool planck = strcmp(luaL_checkstring(L, 2), "planck") == 0;
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  const int like = lac_catalogue_find(catalogue, "dust_opacity");
  double mean, error;
  const lac_status status = (planck ? lac_dust_planck_mean : lac_dust_rosseland_mean)(dust, luaL_checknumber(L, 3), &mean, &error);
  if (status != LAC_OK && status != LAC_DOUBTFUL) return 0;
  lac_push_number(L, mean, lac_catalogue_unit(catalogue, like).dimension, lac_catalogue_name(catalogue, like)->unit, -1);
  lua_pushnumber(L, error);
  return 2;
}

/* dust_grain_temperature(dust, grain size, luminosity, effective temperature, radius), all in SI. */
static int dust_grain_temperature(lua_State *L) {
  const double kelvin = lac_dust_grain_temperature(check_dust(L, 1), luaL_checknumber(L, 2), luaL_checknumber(L, 3), luaL_checknumber(L, 4),
                                                   luaL_checknumber(L, 5));
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  if (isnan(kelvin)) return 0;
  lac_push_number(L, kelvin, lac_catalogue_unit(catalogue, lac_catalogue_find(catalogue, "effective_temperature")).dimension, "K", -1);
  return 1;
}

static void new_metatable(lua_State *L, const char *name, const char *field_name, const void *key) {
  lua_createtable(L, 0, 5);
  lua_pushstring(L, name), lua_setfield(L, -2, "__name");
  lua_pushvalue(L, -1), lua_setfield(L, -3, field_name);
  lua_rawsetp(L, LUA_REGISTRYINDEX, key);
}

void lac_open_dust(lua_State *L) {
  static const luaL_Reg functions[] = {
      {"dust_number", dust_number},
      {"material_at", material_at},
      {"material_facts", material_facts},
      {"material_table", material_table},
      {"dust_new", dust_new},
      {"dust_facts", dust_facts},
      {"dust_at", dust_at},
      {"dust_mean", dust_mean},
      {"dust_grain_temperature", dust_grain_temperature},
      {NULL, NULL},
  };
  luaL_setfuncs(L, functions, 0);
  new_metatable(L, "dust", "dust_metatable", &dust_key);
  new_metatable(L, "material", "material_metatable", &material_key);
}
