/* SPDX-License-Identifier: GPL-3.0-or-later */
/* For which value of a given does a derived quantity reach a goal? The chain stays fixed; each element of the case's axes is solved by
   itself: a scan over the range finds the brackets, GSL's Brent solver closes the one nearest to the given's present value. */
#include <gsl/gsl_errno.h>
#include <gsl/gsl_math.h>
#include <gsl/gsl_roots.h>
#include <math.h>
#include <string.h>

#include "case.h"

enum { SCAN_POINTS = 97, ITERATIONS = 200 };

typedef struct {
  const lac_catalogue *catalogue;
  const lac_chain *chain;
  lac_value *const *values; /* of the case, for its objects */
  const int *steps;
  int count, varied, target;
  double *numbers; /* by id, SI */
  double goal;
  bool logarithmic; /* the variable is ln x */
  bool verdict;     /* the target jumps from 0 to 1, and the place wanted is the first where it is 1 */
  bool failed;      /* a user's row failed: its error is kept */
} problem;

/* The target less the goal, at x. */
static double miss(double x, void *context) {
  problem *p = context;
  if (p->failed) return (double)NAN;
  p->numbers[p->varied] = p->logarithmic ? exp(x) : x;
  for (int i = 0; i < p->count; i++) {
    const int id = p->steps[i], row = lac_chain_row(p->chain, id);
    if (row < 0) continue;
    const lac_relation *relation = lac_catalogue_row(p->catalogue, row);
    int inputs = 0;
    const int *from = lac_catalogue_from(p->catalogue, row, &inputs);
    double arguments[LAC_MAX_ARGUMENTS];
    const double *in[LAC_MAX_ARGUMENTS];
    for (int j = 0; j < inputs; j++) arguments[j] = p->numbers[from[j]], in[j] = &arguments[j];
    if (relation->of_object != NULL) relation->of_object(lac_value_object_pointer(p->values[from[0]]), 1, &p->numbers[id], in + 1);
    else if (relation->call != NULL) {
      if (relation->call(relation->context, 1, &p->numbers[id], in) != 0) return p->failed = true, (double)NAN;
    } else if (relation->assumes != NULL) p->numbers[id] = lac_catalogue_assumed(p->catalogue, row);
    else p->numbers[id] = lac_relation_value(relation, arguments);
  }
  return p->numbers[p->target] - p->goal;
}

/* Closes a bracket. Where the target goes from one sign to the other through a pole, or is undefined, there is no solution: NaN. */
static double close_in(gsl_root_fsolver *solver, problem *p, double low, double high) {
  gsl_function function = {.function = miss, .params = p};
  if (gsl_root_fsolver_set(solver, &function, low, high) != GSL_SUCCESS) return (double)NAN;
  const double farthest = fmax(fabs(miss(low, p)), fabs(miss(high, p)));
  for (int i = 0; i < ITERATIONS; i++) {
    if (gsl_root_fsolver_iterate(solver) != GSL_SUCCESS || p->failed) break;
    const double a = gsl_root_fsolver_x_lower(solver), b = gsl_root_fsolver_x_upper(solver);
    if (gsl_root_test_interval(a, b, 1e-15, 4e-16) == GSL_SUCCESS) break;
  }
  const double root = gsl_root_fsolver_root(solver), lower = gsl_root_fsolver_x_lower(solver), upper = gsl_root_fsolver_x_upper(solver);
  if (p->verdict) return miss(root, p) > 0 ? root : miss(lower, p) > 0 ? lower : upper;
  return fabs(miss(root, p)) <= farthest ? root : (double)NAN;
}

typedef struct {
  double root, least, greatest; /* least and greatest value of the target over the scan */
  int roots;
} outcome;

/* Scans [low, high] (in the variable), closes the bracket nearest to start. */
static outcome solve_one(gsl_root_fsolver *solver, problem *p, double low, double high, double start) {
  outcome o = {.root = (double)NAN, .least = INFINITY, .greatest = -INFINITY};
  double before = (double)NAN, at_before = low, nearest = INFINITY, left = 0, right = 0;
  for (int i = 0; i < SCAN_POINTS && !p->failed; i++) {
    const double x = low + (high - low) * i / (SCAN_POINTS - 1), f = miss(x, p);
    if (f + p->goal < o.least) o.least = f + p->goal;
    if (f + p->goal > o.greatest) o.greatest = f + p->goal;
    if ((before < 0 && f > 0) || (before > 0 && f < 0) || (f == 0 && before != 0)) {
      const double distance = fabs((at_before + x) / 2 - start);
      o.roots++;
      if (distance < nearest) nearest = distance, left = f == 0 ? x : at_before, right = x;
    }
    before = f;
    at_before = x;
  }
  if (o.roots > 0 && !p->failed) o.root = left == right ? right : close_in(solver, p, left, right);
  return o;
}

static int solver_finalise(lua_State *L) {
  gsl_root_fsolver **solver = lua_touserdata(L, 1);
  if (*solver != NULL) gsl_root_fsolver_free(*solver);
  *solver = NULL;
  return 0;
}

static gsl_root_fsolver *push_solver(lua_State *L) {
  gsl_root_fsolver **solver = lua_newuserdatauv(L, sizeof *solver, 0);
  *solver = NULL;
  lua_createtable(L, 0, 1);
  lua_pushcfunction(L, solver_finalise), lua_setfield(L, -2, "__gc");
  lua_setmetatable(L, -2);
  *solver = gsl_root_fsolver_alloc(gsl_root_fsolver_brent);
  if (*solver == NULL) lac_error(L, "%s", lac_status_words(LAC_NO_MEMORY));
  return *solver;
}

/* A given or goal with axes, and its place at each element of the result. */
typedef struct {
  const lac_value *value;
  double *into;
} stream;

/* The offset in a value's data of the element at index of the result's axes. */
static size_t offset_of(const lac_value *value, const lac_value *result, const size_t *index) {
  size_t offset = 0;
  for (size_t i = 0; i < lac_value_axes(value); i++) {
    const lac_axis *axis = lac_value_axis(value, i);
    size_t j = 0;
    while (strcmp(lac_value_axis(result, j)->name, axis->name) != 0) j++;
    offset = offset * axis->length + index[j];
  }
  return offset;
}

static void step_index(const lac_value *result, size_t *index) {
  for (size_t i = lac_value_axes(result); i-- > 0;) {
    if (++index[i] < lac_value_axis(result, i)->length) return;
    index[i] = 0;
  }
}

/* Adds the quantity on top to the streams (stored, kept on the stack), and joins its axes to the quantity at `joined`. */
static void join(lua_State *L, int joined, stream *streams, int *count, double *into) {
  lac_quantity *quantity = lac_to_quantity(L, -1);
  lac_store(L, quantity);
  streams[(*count)++] = (stream){quantity->value, into};
  if (lac_to_quantity(L, joined)->value == NULL) lua_pushvalue(L, -1);
  else lac_push_computed(L, lac_block_add, 2, (const int[]){joined, lua_gettop(L)}, LAC_DIMENSIONLESS, NULL);
  lua_replace(L, joined);
}

/* Reads the givens that the target follows from: single numbers into the problem, others as streams. */
static void join_givens(lua_State *L, int joined, const lac_case *object, problem *p, stream *streams, int *count) {
  for (int i = 0; i < p->count; i++) {
    const int id = p->steps[i];
    if (!object->given[id] || id == p->varied) continue;
    lac_value *value = object->values[id];
    if (lac_value_axes(value) == 0) {
      p->numbers[id] = lac_value_as_number(value);
      continue;
    }
    lac_push_empty(L, LAC_DIMENSIONLESS, NULL, -1)->value = lac_value_keep(value);
    join(L, joined, streams, count, &p->numbers[id]);
  }
}

/* The roots as a quantity of the given that was solved for, with the axes of shape (NULL: one number). */
static void push_roots(lua_State *L, const problem *p, const lac_value *shape, const double *roots) {
  const char *unit = lac_catalogue_name(p->catalogue, p->varied)->unit;
  const lac_dimension dimension = lac_catalogue_unit(p->catalogue, p->varied).dimension;
  if (shape == NULL) {
    lac_push_number(L, roots[0], dimension, unit, p->varied);
    return;
  }
  lac_quantity *result = lac_push_empty(L, dimension, unit, p->varied);
  lac_axis *axes[LAC_MAX_AXES];
  for (size_t i = 0; i < lac_value_axes(shape); i++) axes[i] = lac_value_axis(shape, i);
  lac_state_end(L, lac_value_array(lac_value_axes(shape), axes, roots, &result->value));
}

/* solve(case, given, target, goal, low, high, logarithmic, start): bounds and start in SI, single numbers.
   Returns the solution (with the axes of what it depends on), the least and the greatest value of the target over the scans (SI), the most brackets found, at how many elements it is defined. */
static int case_solve(lua_State *L) {
  enum { CASE = 1, GOAL = 4, JOINED = 10 };
  lac_case *object = lac_check_case(L, CASE);
  const lac_catalogue *catalogue = lac_catalogue_of(L);
  problem p = {.catalogue = catalogue, .chain = object->chain, .values = object->values, .varied = lac_catalogue_find(catalogue, luaL_checkstring(L, 2)),
               .target = lac_catalogue_find(catalogue, luaL_checkstring(L, 3))};
  luaL_argcheck(L, p.varied >= 0 && p.target >= 0, 2, "unknown name");
  lac_quantity *goal = lac_check_bound(L, GOAL, "the goal");
  p.logarithmic = lua_toboolean(L, 7);
  double low = luaL_checknumber(L, 5), high = luaL_checknumber(L, 6), start = luaL_checknumber(L, 8);
  p.verdict = lac_catalogue_name(catalogue, p.target)->kind == LAC_VERDICT;
  if (p.logarithmic) low = log(low), high = log(high), start = log(start);
  lua_settop(L, 8);
  int *steps = lua_newuserdatauv(L, (size_t)object->names * (sizeof *steps + sizeof(double) + sizeof(stream)) + 64, 0); /* place 9 */
  double *numbers = (double *)((char *)steps + ((size_t)object->names * sizeof *steps + 15) / 16 * 16);
  stream *streams = (stream *)(numbers + object->names);
  p.steps = steps, p.numbers = numbers;
  p.count = lac_chain_steps(object->chain, p.target, steps);
  lac_push_empty(L, LAC_DIMENSIONLESS, NULL, -1); /* place 10: joins the axes */
  int with_axes = 0;
  p.goal = goal->number;
  luaL_checkstack(L, p.count + 20, "too many givens");
  if (goal->value != NULL) lua_pushvalue(L, GOAL), join(L, JOINED, streams, &with_axes, &p.goal);
  join_givens(L, JOINED, object, &p, streams, &with_axes);
  const lac_value *shape = lac_to_quantity(L, JOINED)->value;
  const size_t size = shape == NULL ? 1 : lac_value_size(shape);
  if (size > ((size_t)1 << 28)) return lac_error(L, "solve: %I elements are too many; use fewer points or draws", (lua_Integer)size);
  lac_check_room(L, 2 * size);
  double *roots = lua_newuserdatauv(L, size * sizeof *roots, 0);
  gsl_root_fsolver *solver = push_solver(L);
  lac_state *state = lac_state_begin(L);
  double least = INFINITY, greatest = -INFINITY;
  int most = 0;
  size_t defined = 0;
  size_t index[LAC_MAX_AXES] = {0};
  for (size_t e = 0; e < size && !p.failed; e++) {
    for (int s = 0; s < with_axes; s++) *streams[s].into = lac_value_data(streams[s].value)[offset_of(streams[s].value, shape, index)];
    const outcome o = solve_one(solver, &p, low, high, start);
    roots[e] = p.logarithmic ? exp(o.root) : o.root;
    if (!isnan(o.root)) defined++;
    least = fmin(least, o.least), greatest = fmax(greatest, o.greatest);
    if (o.roots > most) most = o.roots;
    if (shape != NULL) step_index(shape, index);
    if (state->work.stop || state->work.poll(state->work.context)) lac_state_end(L, LAC_INTERRUPTED);
  }
  if (p.failed) lac_state_end(L, LAC_CALLBACK_FAILED);
  push_roots(L, &p, shape, roots);
  lua_pushnumber(L, least);
  lua_pushnumber(L, greatest);
  lua_pushinteger(L, most);
  lua_pushinteger(L, (lua_Integer)defined);
  return 5;
}

void lac_open_solve(lua_State *L) {
  lua_pushcfunction(L, case_solve);
  lua_setfield(L, -2, "solve");
}
