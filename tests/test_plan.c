/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Plans: seeded random expressions over random axes against naive loops over every element; any number of threads; single elements;
   interruption, the cap, users' functions, failing memory; and a chain asked. */
#include <stdbool.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "check.h"
#include "lacuna/orbit.h"
#include "lacuna/plan.h"

static const size_t plenty = (size_t)1 << 30;

/* ---- random expressions ---- */

enum { AXES = 4, NODES = 24 };

/* The expression once more, for the naive loops. Operations are exact or correctly rounded, so that results are equal bit by bit. */
typedef enum { NUMBER, ARRAY, DRAWN, CLIPPED, ADD, SUBTRACT, MULTIPLY, DIVIDE, MINIMUM, ABOVE, ROOT, SCALED, OPERATIONS } operation;
typedef struct {
  operation operation;
  size_t left, right; /* earlier nodes */
  double number, *data;
  bool has[AXES]; /* of an array */
  lac_spread spread;
  lac_value *value;
} recipe;

typedef struct {
  lac_axis *axis[AXES];
  recipe node[NODES];
  size_t count;
  uint64_t seed;
} expression;

static size_t pick(expression *e, size_t count) { return (size_t)check_uniform(&e->seed, 0, (double)count); }

static void make_axes(expression *e, size_t longest) {
  const char *names[AXES] = {"alpha", "draw", "mass", "baseline"};
  const size_t lengths[] = {1, 2, 3, 4, 5, 6};
  const size_t longer = pick(e, AXES);
  for (size_t i = 0; i < AXES; i++) {
    const size_t length = i == longer ? longest / 2 + pick(e, longest / 2) : lengths[pick(e, 6)];
    assert_int_equal(lac_axis_new(names[i], length, NULL, &e->axis[i]), LAC_OK);
  }
}

static void make_array(expression *e, recipe *node) {
  lac_axis *axes[AXES];
  size_t count = 0, size = 1;
  for (size_t i = 0; i < AXES; i++) {
    node->has[i] = pick(e, 2) == 1;
    if (node->has[i]) size *= (axes[count++] = e->axis[i])->length;
  }
  node->data = malloc(size * sizeof(double));
  for (size_t i = 0; i < size; i++) node->data[i] = check_uniform(&e->seed, -3, 5);
  assert_int_equal(lac_value_array(count, axes, node->data, &node->value), LAC_OK);
}

static const lac_range clip = {-2, 3, true, false};

static void make_node(expression *e, recipe *node) {
  static lac_block_function *const blocks[OPERATIONS] = {
      [ADD] = lac_block_add,         [SUBTRACT] = lac_block_subtract, [MULTIPLY] = lac_block_multiply, [DIVIDE] = lac_block_divide,
      [MINIMUM] = lac_block_minimum, [ABOVE] = lac_block_above,       [ROOT] = lac_block_root};
  const size_t before = (size_t)(node - e->node);
  node->operation = (operation)(before < 5 ? pick(e, 3) : pick(e, OPERATIONS));
  if (before > 0) node->left = before - 1 - pick(e, before < 5 ? before : 5), node->right = pick(e, before);
  lac_value *arguments[] = {e->node[node->left].value, e->node[node->right].value};
  switch (node->operation) {
  case NUMBER:
    node->number = check_uniform(&e->seed, -1, 2);
    assert_int_equal(lac_value_number(node->number, &node->value), LAC_OK);
    return;
  case ARRAY: make_array(e, node); return;
  case DRAWN:
    node->spread = (lac_spread){.kind = LAC_NORMAL, .a = 1, .b = 0.5, .key = before + 1000};
    assert_int_equal(lac_value_drawn(e->axis[1], &node->spread, &node->value), LAC_OK);
    return;
  case CLIPPED: assert_int_equal(lac_value_clipped(arguments[0], clip, &node->value), LAC_OK); return;
  case SCALED: assert_int_equal(lac_value_scaled(lac_block_root, 2, arguments, &node->value), LAC_OK); return;
  default: assert_int_equal(lac_value_computed(blocks[node->operation], node->operation == ROOT ? 1 : 2, arguments, &node->value), LAC_OK);
  }
}

/* The same expression for the same seed. */
static void make_expression(expression *e, uint64_t seed, size_t longest) {
  memset(e, 0, sizeof *e);
  e->seed = seed;
  make_axes(e, longest);
  e->count = 6 + pick(e, NODES - 6);
  for (size_t i = 0; i < e->count; i++) make_node(e, &e->node[i]);
}

static void drop_expression(expression *e) {
  for (size_t i = 0; i < e->count; i++) {
    lac_value_drop(e->node[i].value);
    free(e->node[i].data);
  }
  for (size_t i = 0; i < AXES; i++) lac_axis_drop(e->axis[i]);
}

static double naive_node(const expression *e, const recipe *node, const double *found, const size_t *index) {
  const double a = found[node->left], b = found[node->right];
  double draw;
  size_t at = 0;
  switch (node->operation) {
  case NUMBER: return node->number;
  case ARRAY:
    for (size_t i = 0; i < AXES; i++)
      if (node->has[i]) at = at * e->axis[i]->length + index[i];
    return node->data[at];
  case DRAWN: lac_draws(&node->spread, index[1], 1, &draw); return draw;
  case CLIPPED: return a >= -2 && a < 3 ? a : (double)NAN;
  case ADD: return a + b;
  case SUBTRACT: return a - b;
  case MULTIPLY: return a * b;
  case DIVIDE: return a / b;
  case MINIMUM: return isnan(a) || isnan(b) ? (double)NAN : a < b ? a : b;
  case ABOVE: return isnan(a) || isnan(b) ? (double)NAN : a > b;
  case ROOT: return sqrt(a);
  case SCALED: return a > 0 ? a * sqrt(b) : (double)NAN;
  default: return NAN;
  }
}

/* The element of the last node at one point of all axes. */
static double naive(const expression *e, const size_t *index) {
  double found[NODES] = {0};
  for (size_t i = 0; i < e->count; i++) found[i] = naive_node(e, &e->node[i], found, index);
  return found[e->count - 1];
}

static bool same_bits(double a, double b) { return memcmp(&a, &b, sizeof a) == 0 || (isnan(a) && isnan(b)); }

/* Where a value's element stands among all axes: those it doesn't have stay 0. */
static void point_of(const expression *e, const lac_value *value, size_t at, size_t *index, size_t *own) {
  memset(index, 0, AXES * sizeof *index);
  for (size_t k = lac_value_axes(value); k-- > 0;) {
    const lac_axis *axis = lac_value_axis(value, k);
    own[k] = at % axis->length;
    at /= axis->length;
    for (size_t i = 0; i < AXES; i++)
      if (e->axis[i] == axis) index[i] = own[k];
  }
}

static void compare_all(lac_work *work, const expression *e, lac_value *value) {
  const double *data = lac_value_data(value);
  const size_t size = lac_value_size(value);
  for (size_t at = 0; at < size; at++) {
    size_t index[AXES], own[LAC_MAX_AXES];
    double one;
    point_of(e, value, at, index, own);
    const double want = naive(e, index), got = data ? data[at] : lac_value_as_number(value);
    if (same_bits(want, got)) continue;
    lac_plan_element(work, value, own, &one);
    print_error("# element %zu of %zu: want %.17g, got %.17g, alone %.17g\n", at, size, want, got, one);
    fail();
  }
}

static void some_elements_alone(lac_work *work, expression *e, lac_value *value) {
  for (int i = 0; i < 5; i++) {
    size_t index[AXES], own[LAC_MAX_AXES];
    double got;
    point_of(e, value, pick(e, lac_value_size(value)), index, own);
    assert_int_equal(lac_plan_element(work, value, own, &got), LAC_OK);
    assert_true(same_bits(naive(e, index), got));
  }
}

static void random_expressions_are_what_naive_loops_give(void **state) {
  (void)state;
  const int threads[] = {1, 2, 7};
  for (uint64_t seed = 1; seed <= 120; seed++) {
    double *first = NULL;
    for (int t = 0; t < 3; t++) {
      lac_work work;
      expression e;
      lac_work_start(&work, threads[t], plenty);
      make_expression(&e, seed, seed % 10 == 0 ? 9000 : seed % 3 == 0 ? 40 : 2500);
      lac_value *value = e.node[e.count - 1].value;
      if (t == 0) some_elements_alone(&work, &e, value);
      assert_int_equal(lac_plan_store(&work, value), LAC_OK);
      const size_t bytes = lac_value_size(value) * sizeof(double);
      if (t == 0) compare_all(&work, &e, value);
      if (t == 0 && lac_value_data(value)) memcpy(first = malloc(bytes), lac_value_data(value), bytes);
      else if (first) assert_memory_equal(first, lac_value_data(value), bytes);
      drop_expression(&e);
      assert_int_equal(work.used, 0);
      lac_work_end(&work);
    }
    free(first);
  }
}

/* ---- library functions: an element's bits depend on its arguments alone ---- */

static lac_axis *axis(const char *name, size_t length) {
  lac_axis *made;
  assert_int_equal(lac_axis_new(name, length, NULL, &made), LAC_OK);
  return made;
}

static lac_value *drawn(lac_axis *along, uint64_t key) {
  const lac_spread spread = {.kind = LAC_NORMAL, .a = 3, .b = 0.5, .key = key};
  lac_value *made;
  assert_int_equal(lac_value_drawn(along, &spread, &made), LAC_OK);
  return made;
}

/* A function of as many values; gives its arguments away. */
static lac_value *apply(lac_block_function *block, lac_value *a, lac_value *b) {
  lac_value *made, *arguments[] = {a, b};
  assert_int_equal(lac_value_computed(block, b ? 2 : 1, arguments, &made), LAC_OK);
  lac_value_drop(a), lac_value_drop(b);
  return made;
}

static lac_value *transcendental(lac_axis *a, lac_axis *b) {
  lac_value *x = apply(lac_block_power, drawn(a, 1), drawn(b, 2));
  lac_value *y = apply(lac_block_multiply, apply(lac_block_exp, drawn(b, 3), NULL), apply(lac_block_log, drawn(a, 4), NULL));
  return apply(lac_block_add, apply(lac_block_sin, x, NULL), apply(lac_block_log10, y, NULL));
}

static void an_elements_bits_do_not_depend_on_its_place(void **state) {
  (void)state;
  lac_work work;
  lac_work_start(&work, 2, plenty);
  const size_t lengths[][2] = {{7, 1029}, {1, 5}, {33, 33}, {3, 16}};
  for (size_t k = 0; k < 4; k++) {
    lac_axis *a = axis("a", lengths[k][0]), *b = axis("b", lengths[k][1]);
    lac_value *stored = transcendental(a, b), *pending = transcendental(a, b);
    assert_int_equal(lac_plan_store(&work, stored), LAC_OK);
    for (size_t i = 0; i < a->length; i++)
      for (size_t j = 0; j < b->length; j++) {
        double alone;
        assert_int_equal(lac_plan_element(&work, pending, (size_t[]){i, j}, &alone), LAC_OK);
        assert_true(same_bits(alone, lac_value_data(stored)[i * b->length + j]));
      }
    assert_int_equal(lac_plan_element(&work, pending, (size_t[]){a->length, 0}, &(double){0}), LAC_OUT_OF_RANGE);
    lac_value_drop(stored), lac_value_drop(pending), lac_axis_drop(a), lac_axis_drop(b);
  }
  lac_work_end(&work);
}

/* ---- interruption, memory ---- */

typedef struct {
  int calls, last;
  lac_work *work;
  lac_value **victim;
} event_log;

static int poll_until(void *context) {
  event_log *events = context;
  return ++events->calls > events->last;
}

static int poll_stops(void *context) {
  event_log *events = context;
  if (++events->calls > events->last) events->work->stop = 1;
  return 0;
}

static void interrupted_work_can_be_done_again(void **state) {
  (void)state;
  for (int threads = 1; threads <= 2; threads++)
    for (int way = 0; way < 2; way++) {
      lac_work work;
      lac_work_start(&work, threads, plenty);
      event_log events = {.last = 20, .work = &work};
      lac_axis *a = axis("draw", 100000);
      lac_value *value = apply(lac_block_multiply, drawn(a, 1), drawn(a, 2)), *mean;
      work.poll = way ? poll_stops : poll_until;
      work.context = &events;
      assert_int_equal(lac_plan_store(&work, value), LAC_INTERRUPTED);
      assert_int_equal(events.calls, 21);
      assert_null(lac_value_data(value));
      assert_int_equal(work.used, 0);
      assert_int_equal(lac_plan_fold(&work, value, "draw", LAC_FOLD_MEAN, &mean), LAC_INTERRUPTED);
      assert_null(mean);
      work.stop = 0;
      work.poll = NULL;
      assert_int_equal(lac_plan_store(&work, value), LAC_OK);
      double first;
      lac_value *again = apply(lac_block_multiply, drawn(a, 1), drawn(a, 2));
      assert_int_equal(lac_plan_element(&work, again, (size_t[]){99999}, &first), LAC_OK);
      assert_true(same_bits(lac_value_data(value)[99999], first));
      lac_value_drop(value), lac_value_drop(again), lac_axis_drop(a);
      lac_work_end(&work);
    }
}

static void collect_victim(void *context) {
  event_log *events = context;
  events->calls++;
  if (events->victim) lac_value_drop(*events->victim);
  events->victim = NULL;
}

static void the_cap_holds_after_collecting(void **state) {
  (void)state;
  lac_work work;
  const size_t cap = 5 << 20;
  lac_work_start(&work, 2, cap);
  event_log events = {0};
  work.collect = collect_victim;
  work.context = &events;
  lac_axis *a = axis("draw", 400000); /* 3.2 MB */
  lac_value *one = drawn(a, 1), *two = drawn(a, 2);
  assert_int_equal(lac_plan_store(&work, one), LAC_OK);
  assert_in_range(work.used, 3200000, cap);
  assert_int_equal(lac_plan_store(&work, two), LAC_OVER_CAP);
  assert_int_equal(events.calls, 1);
  assert_in_range(work.wanted, 3200000, cap);
  assert_null(lac_value_data(two));
  events.victim = &one;
  assert_int_equal(lac_plan_store(&work, two), LAC_OK);
  assert_int_equal(events.calls, 2);
  lac_value_drop(two), lac_axis_drop(a);
  assert_int_equal(work.used, 0);
  lac_work_end(&work);
}

/* ---- users' functions ---- */

typedef struct {
  size_t calls, elements, fail_at;
  lac_work *work;
  lac_value *store;
} user_log;

static int users_sum(void *context, size_t n, double *out, const double *const *in) {
  user_log *users = context;
  assert_in_range(n, 1, LAC_PIECE);
  users->elements += n;
  if (++users->calls == users->fail_at) return 1;
  lac_value *store = users->store;
  users->store = NULL;
  if (store) assert_int_equal(lac_plan_store(users->work, store), LAC_OK);
  for (size_t i = 0; i < n; i++) out[i] = in[0][i] + 10 * in[1][i];
  return 0;
}

static lac_value *called(user_log *users, lac_value *a, lac_value *b) {
  lac_value *made;
  assert_int_equal(lac_value_called(users_sum, users, 2, (lac_value *[]){a, b}, &made), LAC_OK);
  return made;
}

static void users_functions_get_pieces(void **state) {
  (void)state;
  lac_work work;
  lac_work_start(&work, 2, plenty);
  user_log users = {.fail_at = 2};
  lac_axis *a = axis("a", 3), *b = axis("b", 50000);
  lac_value *x = drawn(a, 1), *y = drawn(b, 2), *sum = called(&users, x, y);
  lac_value *outer = apply(lac_block_multiply, lac_value_keep(sum), lac_value_keep(sum));
  double alone;
  assert_int_equal(lac_plan_element(&work, outer, (size_t[]){2, 49999}, &alone), LAC_OK);
  assert_int_equal(users.elements, 1);
  assert_int_equal(lac_plan_store(&work, outer), LAC_CALLBACK_FAILED);
  assert_null(lac_value_data(outer));
  users = (user_log){0};
  assert_int_equal(lac_plan_store(&work, outer), LAC_OK);
  assert_int_equal(users.elements, 150000);
  assert_int_equal(users.calls, 3);
  assert_non_null(lac_value_data(sum));
  for (size_t i = 0; i < 3; i++)
    for (size_t j = 0; j < 50000; j++) {
      const double want = lac_value_data(x)[i] + 10 * lac_value_data(y)[j];
      assert_true(lac_value_data(outer)[i * 50000 + j] == want * want);
    }
  assert_true(alone == lac_value_data(outer)[149999]);
  lac_value_drop(x), lac_value_drop(y), lac_value_drop(sum), lac_value_drop(outer), lac_axis_drop(a), lac_axis_drop(b);
  assert_int_equal(work.used, 0);
  lac_work_end(&work);
}

/* A user's function that has values stored which the interrupted plan still needs. */
static void users_functions_may_store_values(void **state) {
  (void)state;
  for (int way = 0; way < 2; way++) {
    lac_work work;
    lac_work_start(&work, 1, plenty);
    user_log plain = {0}, storing = {.work = &work};
    lac_axis *a = axis("a", 100);
    lac_value *x = drawn(a, 1), *first = called(&storing, x, x);
    lac_value *second = called(&plain, first, first);
    lac_value *root = apply(lac_block_add, apply(lac_block_negate, lac_value_keep(second), NULL), lac_value_keep(first));
    lac_value *other = apply(lac_block_negate, drawn(a, 9), NULL);
    storing.store = other;
    lac_value *top = apply(lac_block_add, root, lac_value_keep(other));
    double alone;
    if (way == 0) assert_int_equal(lac_plan_store(&work, top), LAC_OK);
    else assert_int_equal(lac_plan_element(&work, top, (size_t[]){7}, &alone), LAC_OK);
    assert_non_null(lac_value_data(other));
    if (way == 1) {
      assert_int_equal(lac_plan_store(&work, top), LAC_OK);
      assert_true(same_bits(alone, lac_value_data(top)[7]));
    }
    assert_true(same_bits(lac_value_data(top)[3], -(11 * lac_value_data(first)[3]) + lac_value_data(first)[3] + lac_value_data(other)[3]));
    lac_value_drop(top), lac_value_drop(other), lac_value_drop(second), lac_value_drop(first), lac_value_drop(x), lac_axis_drop(a);
    lac_work_end(&work);
  }
}

/* A user's function that has its own value stored while that is being stored, in several pieces, from arguments that nothing else holds. */
static void a_users_function_may_store_its_own_value(void **state) {
  (void)state;
  lac_work work;
  lac_work_start(&work, 1, plenty);
  user_log storing = {.work = &work};
  lac_axis *a = axis("a", LAC_PIECE + 100);
  lac_value *x = apply(lac_block_negate, drawn(a, 1), NULL), *y = apply(lac_block_negate, drawn(a, 2), NULL);
  lac_value *sum = called(&storing, x, y);
  lac_value_drop(x), lac_value_drop(y);
  storing.store = sum;
  assert_int_equal(lac_plan_store(&work, sum), LAC_OK);
  x = apply(lac_block_negate, drawn(a, 1), NULL), y = apply(lac_block_negate, drawn(a, 2), NULL);
  assert_int_equal(lac_plan_store(&work, x), LAC_OK);
  assert_int_equal(lac_plan_store(&work, y), LAC_OK);
  for (size_t i = 0; i < LAC_PIECE + 100; i++) assert_true(lac_value_data(sum)[i] == lac_value_data(x)[i] + 10 * lac_value_data(y)[i]);
  lac_value_drop(x), lac_value_drop(y), lac_value_drop(sum), lac_axis_drop(a);
  assert_int_equal(work.used, 0);
  lac_work_end(&work);
}

/* ---- chains ---- */

static int id_of(const lac_catalogue *catalogue, const char *name) {
  const int id = lac_catalogue_find(catalogue, name);
  assert_true(id >= 0);
  return id;
}

static void a_chain_is_asked(void **state) {
  (void)state;
  lac_catalogue *catalogue;
  lac_chain *chain;
  char error[200];
  int culprit;
  assert_int_equal(lac_catalogue_new(&catalogue, error, sizeof error), LAC_OK);
  const size_t names = (size_t)lac_catalogue_names(catalogue);
  bool *given = calloc(names, sizeof *given);
  lac_value **values = calloc(names, sizeof *values);
  const int planet = id_of(catalogue, "planet_mass"), star = id_of(catalogue, "stellar_mass"),
            axis_id = id_of(catalogue, "planet_semi_major_axis"), hill = id_of(catalogue, "hill_radius");
  given[planet] = given[star] = given[axis_id] = true;
  assert_int_equal(lac_chain_settle(catalogue, given, NULL, &chain, &culprit), LAC_OK);

  lac_work work;
  lac_work_start(&work, 2, plenty);
  const double masses[] = {1e27, 2e27, -1, 4e27, 5e27}, axes[] = {1e11, 2e11, 3e11};
  lac_axis *mass_axis = axis("planet_mass", 5), *radius_axis = axis("planet_semi_major_axis", 3);
  assert_int_equal(lac_value_array(1, &mass_axis, masses, &values[planet]), LAC_OK);
  assert_int_equal(lac_value_array(1, &radius_axis, axes, &values[axis_id]), LAC_OK);
  assert_int_equal(lac_value_number(2e30, &values[star]), LAC_OK);
  assert_int_equal(lac_plan_ask(chain, values, hill), LAC_OK);
  assert_int_equal(lac_plan_ask(chain, values, hill), LAC_OK);
  assert_int_equal(lac_plan_store(&work, values[hill]), LAC_OK);
  for (size_t i = 0; i < 3; i++)
    for (size_t j = 0; j < 5; j++) {
      const double want = lac_hill_radius(axes[i], lac_planet_star_mass_ratio(masses[j], 2e30));
      const double got = lac_value_data(values[hill])[i * 5 + j];
      if (j == 2) check_undefined(got, "a negative mass");
      else check_within(want, got, 5 * DBL_EPSILON, "Hill radius"); /* glibc's vector cbrt: at most 4 units */
    }
  assert_int_equal(lac_plan_ask(chain, values, id_of(catalogue, "visibility_error")), LAC_NOT_HAD);
  for (size_t i = 0; i < names; i++) lac_value_drop(values[i]);

  memset(values, 0, names * sizeof *values);
  assert_int_equal(lac_value_number(1e27, &values[planet]), LAC_OK);
  assert_int_equal(lac_value_number(1e11, &values[axis_id]), LAC_OK);
  assert_int_equal(lac_value_number(2e30, &values[star]), LAC_OK);
  assert_int_equal(lac_plan_ask(chain, values, hill), LAC_OK);
  assert_true(lac_value_as_number(values[hill]) == lac_hill_radius(1e11, lac_planet_star_mass_ratio(1e27, 2e30)));
  for (size_t i = 0; i < names; i++) lac_value_drop(values[i]);
  lac_axis_drop(mass_axis), lac_axis_drop(radius_axis);
  lac_work_end(&work);
  lac_chain_free(chain);
  free(given), free(values);
  lac_catalogue_free(catalogue);
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(random_expressions_are_what_naive_loops_give),
      cmocka_unit_test(an_elements_bits_do_not_depend_on_its_place),
      cmocka_unit_test(interrupted_work_can_be_done_again),
      cmocka_unit_test(the_cap_holds_after_collecting),
      cmocka_unit_test(users_functions_get_pieces),
      cmocka_unit_test(users_functions_may_store_values),
      cmocka_unit_test(a_users_function_may_store_its_own_value),
      cmocka_unit_test(a_chain_is_asked),
  };
  return cmocka_run_group_tests(tests, NULL, NULL);
}
