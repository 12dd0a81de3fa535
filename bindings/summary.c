/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Summaries along an axis (draw, unless another is named): the other axes stay. */
#include <math.h>
#include <string.h>

#include "binding.h"

static bool has_axis(const lac_quantity *quantity, const char *axis) {
  for (size_t i = 0; quantity->value != NULL && i < lac_value_axes(quantity->value); i++)
    if (strcmp(lac_value_axis(quantity->value, i)->name, axis) == 0) return true;
  return false;
}

/* Turns a value without axes into the single number that it is. */
static void as_single_number(lac_quantity *quantity) {
  if (lac_value_axes(quantity->value) > 0) return;
  quantity->number = lac_value_as_number(quantity->value);
  lac_value_drop(quantity->value);
  quantity->value = NULL;
}

/* What a fold of one number is: of itself. */
static double fold_of_one(lac_fold fold, double number) {
  switch (fold) {
  case LAC_FOLD_SHARE: return isnan(number) ? 0 : number != 0;
  case LAC_FOLD_UNDEFINED: return isnan(number);
  case LAC_FOLD_DEVIATION: return 0;
  default: return number;
  }
}

static bool is_verdict(lua_State *L, int name) { return name >= 0 && lac_catalogue_name(lac_catalogue_of(L), name)->kind == LAC_VERDICT; }

static int fold(lua_State *L, const char *what, lac_fold kind) {
  lac_quantity *quantity = lac_check_bound(L, 1, what);
  const char *axis = luaL_optstring(L, 2, "draw");
  const bool count = kind == LAC_FOLD_SHARE || kind == LAC_FOLD_UNDEFINED;
  const int name = count || is_verdict(L, quantity->name) ? -1 : quantity->name; /* the mean of a verdict is none */
  const lac_dimension dimension = count ? LAC_DIMENSIONLESS : quantity->dimension;
  const char *unit = count ? NULL : quantity->unit;
  if (kind == LAC_FOLD_SHARE && !lac_dimension_equal(quantity->dimension, LAC_DIMENSIONLESS))
    lac_error(L, "chance wants a verdict, like chance(above(a, b)); got %s", luaL_tolstring(L, 1, NULL));
  if (!has_axis(quantity, axis)) {
    if (quantity->value == NULL) {
      lac_push_number(L, fold_of_one(kind, quantity->number), dimension, unit, name);
      return 1;
    }
    if (!count) return lua_settop(L, 1), 1;
  }
  lac_quantity *result = lac_push_empty(L, dimension, unit, name);
  lac_state *state = lac_state_begin(L);
  if (has_axis(quantity, axis)) lac_state_end(L, lac_plan_fold(&state->work, quantity->value, axis, kind, &result->value));
  else lac_error(L, "%s wants a quantity with the axis %s", what, axis);
  as_single_number(result);
  return 1;
}

static int summary_mean(lua_State *L) { return fold(L, "mean", LAC_FOLD_MEAN); }
static int summary_deviation(lua_State *L) { return fold(L, "deviation", LAC_FOLD_DEVIATION); }
static int summary_chance(lua_State *L) { return fold(L, "chance", LAC_FOLD_SHARE); }
static int summary_undefined(lua_State *L) { return fold(L, "undefined", LAC_FOLD_UNDEFINED); }
static int summary_least(lua_State *L) { return fold(L, "lowest", LAC_FOLD_LEAST); }
static int summary_greatest(lua_State *L) { return fold(L, "highest", LAC_FOLD_GREATEST); }

/* Pushes the quantiles at p[0 .. count-1] along an axis. */
static int quantiles(lua_State *L, const char *what, const char *axis, int count, const double *p) {
  lac_quantity *quantity = lac_check_bound(L, 1, what);
  luaL_checkstack(L, count, "too many quantiles");
  if (!has_axis(quantity, axis)) {
    for (int i = 0; i < count; i++) lua_pushvalue(L, 1);
    return count;
  }
  lac_quantity *results[8];
  for (int i = 0; i < count; i++) results[i] = lac_push_empty(L, quantity->dimension, quantity->unit, quantity->name);
  lac_value *values[8] = {NULL};
  lac_state *state = lac_state_begin(L);
  lac_status status = lac_plan_quantiles(&state->work, quantity->value, axis, (size_t)count, p, values);
  for (int i = 0; i < count; i++) results[i]->value = values[i];
  lac_state_end(L, status);
  for (int i = 0; i < count; i++) as_single_number(results[i]);
  return count;
}

static int summary_median(lua_State *L) { return quantiles(L, "median", luaL_optstring(L, 2, "draw"), 1, (const double[]){0.5}); }

#define ONE_SIGMA 0.682689492137086 /* of a normal distribution within one standard deviation */

static double share_argument(lua_State *L, int index, const char *what) {
  double share = luaL_optnumber(L, index, ONE_SIGMA);
  if (!(share > 0 && share < 1)) lac_error(L, "%s wants a share between 0 and 1; got %f", what, share);
  return share;
}

/* interval(q, share, axis): the lower and the upper end of the central share (68 % by default). */
static int summary_interval(lua_State *L) {
  const double share = share_argument(L, 2, "interval");
  return quantiles(L, "interval", luaL_optstring(L, 3, "draw"), 2, (const double[]){(1 - share) / 2, (1 + share) / 2});
}

/* spread_of(q): lower end, median, upper end of the central 68 % at once; for printing. */
static int summary_spread(lua_State *L) {
  const double share = share_argument(L, 2, "spread_of");
  return quantiles(L, "spread_of", "draw", 3, (const double[]){(1 - share) / 2, 0.5, (1 + share) / 2});
}

/* five_of(q): the ends of the central 95 % and 68 % with the median between, from low to high. */
static int summary_five(lua_State *L) {
  return quantiles(L, "five_of", "draw", 5, (const double[]){0.025, (1 - ONE_SIGMA) / 2, 0.5, (1 + ONE_SIGMA) / 2, 0.975});
}

static int summary_quantile(lua_State *L) {
  const double p = luaL_checknumber(L, 2);
  if (!(p >= 0 && p <= 1)) lac_error(L, "quantile wants a share between 0 and 1; got %f", p);
  return quantiles(L, "quantile", luaL_optstring(L, 3, "draw"), 1, &p);
}

void lac_open_summary(lua_State *L) {
  static const luaL_Reg functions[] = {
      {"mean", summary_mean}, {"deviation", summary_deviation}, {"median", summary_median}, {"interval", summary_interval},
      {"quantile", summary_quantile}, {"chance", summary_chance}, {"undefined", summary_undefined}, {"lowest", summary_least},
      {"highest", summary_greatest}, {"spread_of", summary_spread}, {"five_of", summary_five}, {NULL, NULL},
  };
  luaL_setfuncs(L, functions, 0);
}
