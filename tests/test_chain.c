/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The chain against its rule: a plain transcription of the rule, slow and obvious, over random sets of givens; and what must
   hold of any chain. */
#include "check.h"

#include <limits.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#include "lacuna/chain.h"

enum { MOST_NAMES = 512, SETS = 3000, SETS_BY_RULE = 600, MOST_SETS = 8 };

static lac_catalogue *catalogue;
static int names;

static int set_up(void **state) {
  (void)state;
  char error[200];
  if (lac_catalogue_new(&catalogue, error, sizeof error) != LAC_OK) return print_error("# %s\n", error), -1;
  names = lac_catalogue_names(catalogue);
  return names <= MOST_NAMES - 16 ? 0 : -1;
}

static int tear_down(void **state) {
  (void)state;
  lac_catalogue_free(catalogue);
  return 0;
}

static int id_of(const char *name) {
  const int id = lac_catalogue_find(catalogue, name);
  if (id < 0) print_error("# no name %s\n", name);
  assert_true(id >= 0);
  return id;
}

static const char *name_of(int id) { return lac_catalogue_name(catalogue, id)->name; }

static int row_of(const char *gives, const char *by) {
  const int row = lac_catalogue_find_row(catalogue, id_of(gives), by);
  if (row < 0) print_error("# no row %s/%s\n", gives, by);
  assert_true(row >= 0);
  return row;
}

/* The rule, transcribed. allowed[row] says which rows there are. */

static bool is_live(int row, const bool *had) {
  int count;
  const int *from = lac_catalogue_from(catalogue, row, &count);
  for (int i = 0; i < count; i++)
    if (!had[from[i]]) return false;
  return true;
}

static int plain_closure(const bool *given, const bool *allowed, bool *had) {
  memcpy(had, given, (size_t)names * sizeof *had);
  for (bool grown = true; grown;) {
    grown = false;
    for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
      const int gives = lac_catalogue_gives(catalogue, row);
      if (!allowed[row] || had[gives] || !is_live(row, had)) continue;
      had[gives] = grown = true;
    }
  }
  int count = 0;
  for (int id = 0; id < names; id++) count += had[id];
  return count;
}

static void allow_only(int id, int only, bool *allowed) {
  int count;
  const int *rows = lac_catalogue_rows_of(catalogue, id, &count);
  for (int i = 0; i < count; i++) allowed[rows[i]] = allowed[rows[i]] && rows[i] == only;
}

static bool *allow_all(void) {
  bool *allowed = malloc((size_t)lac_catalogue_rows(catalogue) * sizeof *allowed);
  assert_non_null(allowed);
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) allowed[row] = true;
  return allowed;
}

static bool *copy_of(const bool *allowed) {
  bool *copy = allow_all();
  memcpy(copy, allowed, (size_t)lac_catalogue_rows(catalogue) * sizeof *copy);
  return copy;
}

/* The first of a name's allowed and live rows from the n-th on. */
static int next_live(int id, int *n, const bool *allowed, const bool *had) {
  int count;
  const int *rows = lac_catalogue_rows_of(catalogue, id, &count);
  for (; *n < count; ++*n)
    if (allowed[rows[*n]] && is_live(rows[*n], had)) return rows[(*n)++];
  return LAC_NO_ROW;
}

static void settle_step_4(const bool *given, const bool *allowed, const bool *had, int had_count, const bool *reached, int *chosen) {
  bool *settled = copy_of(allowed), closed[MOST_NAMES];
  for (int id = 0; id < names; id++)
    if (!given[id] && reached[id]) allow_only(id, chosen[id], settled);
  for (int id = 0; id < names; id++) {
    if (!had[id] || reached[id]) continue;
    for (int n = 0;;) {
      chosen[id] = next_live(id, &n, allowed, had);
      assert_true(chosen[id] >= 0);
      bool *trial = copy_of(settled);
      allow_only(id, chosen[id], trial);
      const bool fine = plain_closure(given, trial, closed) == had_count;
      free(trial);
      if (fine) break;
    }
    allow_only(id, chosen[id], settled);
  }
  free(settled);
}

/* chosen[id] by the rule. Returned: what lac_chain_settle should. */
static lac_status settle_by_rule(const bool *given, const int *only, int *chosen, bool *at_once) {
  bool *allowed = allow_all(), had[MOST_NAMES], reached[MOST_NAMES];
  lac_status status = LAC_OK;
  for (int id = 0; id < names; id++) {
    if (given[id]) allow_only(id, LAC_NO_ROW, allowed);
    if (only && only[id] >= 0) allow_only(id, only[id], allowed);
    if (only && only[id] >= 0 && given[id]) status = LAC_DUPLICATE;
  }
  const int had_count = plain_closure(given, allowed, had);
  for (int id = 0; id < names; id++) {
    int n = 0;
    chosen[id] = given[id] ? LAC_GIVEN : had[id] ? next_live(id, &n, allowed, had) : LAC_NO_ROW;
    if (only && only[id] >= 0 && !had[id] && status == LAC_OK) status = LAC_NOT_HAD;
  }
  bool *first = copy_of(allowed);
  for (int id = 0; id < names; id++)
    if (chosen[id] >= 0) allow_only(id, chosen[id], first);
  *at_once = plain_closure(given, first, reached) == had_count;
  if (!*at_once) settle_step_4(given, allowed, had, had_count, reached, chosen);
  free(first);
  free(allowed);
  return status;
}

/* Random givens. */

/* Whether a missing name is sought through the row. */
static bool is_forward(int row) {
  const lac_relation *relation = lac_catalogue_row(catalogue, row);
  return !relation->inverse_of && !relation->aside;
}

static bool has_forward_row(int id) {
  int count;
  const int *rows = lac_catalogue_rows_of(catalogue, id, &count);
  for (int i = 0; i < count; i++)
    if (is_forward(rows[i]) && lac_catalogue_row(catalogue, rows[i])->kind != LAC_ASSUMED) return true;
  return false;
}

static bool chance(uint64_t *seed, double share) { return check_uniform(seed, 0, 1) < share; }

/* Mostly what people give: what nothing leads to, many of it; and some of the rest, from none to a third. */
static void draw_givens(uint64_t *seed, bool *given) {
  const double of_first = check_uniform(seed, 0, 1), of_rest = chance(seed, 0.3) ? 0 : check_uniform(seed, 0, 0.3);
  for (int id = 0; id < names; id++) given[id] = chance(seed, has_forward_row(id) ? of_rest : of_first);
}

static lac_chain *settle(const bool *given, const int *only) {
  lac_chain *chain = NULL;
  int culprit = -1;
  assert_int_equal(lac_chain_settle(catalogue, given, only, &chain, &culprit), LAC_OK);
  assert_non_null(chain);
  return chain;
}

static void print_givens(const bool *given) {
  print_error("# givens:");
  for (int id = 0; id < names; id++)
    if (given[id]) print_error(" %s", name_of(id));
  print_error("\n");
}

static void same_rows(const lac_chain *chain, const int *chosen, const bool *given) {
  for (int id = 0; id < names; id++) {
    if (lac_chain_row(chain, id) == chosen[id]) continue;
    print_error("# %s: want row %d, got %d\n", name_of(id), chosen[id], lac_chain_row(chain, id));
    print_givens(given);
    fail();
  }
}

static void follows_the_rule(void **state) {
  (void)state;
  uint64_t seed = 11;
  int at_once_count = 0;
  for (int k = 0; k < SETS_BY_RULE; k++) {
    bool given[MOST_NAMES], at_once;
    int chosen[MOST_NAMES];
    draw_givens(&seed, given);
    assert_int_equal(settle_by_rule(given, NULL, chosen, &at_once), LAC_OK);
    lac_chain *chain = settle(given, NULL);
    same_rows(chain, chosen, given);
    assert_int_equal(lac_chain_settled_at_once(chain), at_once);
    at_once_count += at_once;
    lac_chain_free(chain);
  }
  print_message("# step 3 sufficed for %d of %d sets\n", at_once_count, SETS_BY_RULE);
  assert_true(at_once_count > 0 && at_once_count < SETS_BY_RULE); /* both ways are tried */
}

/* Some names restricted to one of their rows, live or not, given or not. */
static void follows_the_rule_with_restrictions(void **state) {
  (void)state;
  uint64_t seed = 12;
  int by_status[3] = {0, 0, 0};
  for (int k = 0; k < SETS_BY_RULE; k++) {
    bool given[MOST_NAMES], at_once;
    int chosen[MOST_NAMES], only[MOST_NAMES];
    draw_givens(&seed, given);
    for (int id = 0; id < names; id++) only[id] = -1;
    for (int n = (int)check_uniform(&seed, 1, 4); n > 0; n--) {
      const int row = (int)check_uniform(&seed, 0, lac_catalogue_rows(catalogue));
      const int id = lac_catalogue_gives(catalogue, row);
      if (!given[id] || chance(&seed, 0.05)) only[id] = row;
    }
    const lac_status want = settle_by_rule(given, only, chosen, &at_once);
    lac_chain *chain = NULL;
    int culprit = -1;
    const lac_status got = lac_chain_settle(catalogue, given, only, &chain, &culprit);
    assert_int_equal(got, want);
    if (got == LAC_OK) {
      same_rows(chain, chosen, given);
    } else {
      assert_null(chain);
      assert_true(culprit >= 0 && only[culprit] >= 0);
      assert_true(got == LAC_DUPLICATE ? given[culprit] : !given[culprit] && chosen[culprit] == LAC_NO_ROW);
    }
    by_status[got == LAC_OK ? 0 : got == LAC_NOT_HAD ? 1 : 2]++;
    lac_chain_free(chain);
  }
  print_message("# %d settled, %d not had, %d given\n", by_status[0], by_status[1], by_status[2]);
  assert_true(by_status[0] > 0 && by_status[1] > 0 && by_status[2] > 0);
}

/* Each step after all it follows from, none twice, none for nothing, the asked name last. */
static void check_steps(const lac_chain *chain, int id) {
  int steps[MOST_NAMES], place[MOST_NAMES], uses[MOST_NAMES] = {0};
  const int count = lac_chain_steps(chain, id, steps);
  if (lac_chain_row(chain, id) == LAC_NO_ROW) {
    assert_int_equal(count, 0);
    return;
  }
  assert_true(count > 0 && steps[count - 1] == id);
  for (int k = 0; k < names; k++) place[k] = -1;
  for (int k = 0; k < count; k++) {
    int inputs = 0;
    const int row = lac_chain_row(chain, steps[k]);
    assert_true(row != LAC_NO_ROW && place[steps[k]] < 0);
    place[steps[k]] = k;
    const int *from = row >= 0 ? lac_catalogue_from(catalogue, row, &inputs) : NULL;
    for (int i = 0; i < inputs; i++) {
      assert_true(place[from[i]] >= 0);
      uses[from[i]]++;
    }
  }
  for (int k = 0; k + 1 < count; k++) assert_true(uses[steps[k]] > 0);
}

static void steps_are_in_order(void **state) {
  (void)state;
  uint64_t seed = 13;
  for (int k = 0; k < SETS; k++) {
    bool given[MOST_NAMES], had[MOST_NAMES];
    draw_givens(&seed, given);
    lac_chain *chain = settle(given, NULL);
    bool *allowed = allow_all();
    plain_closure(given, allowed, had);
    free(allowed);
    for (int id = 0; id < names; id++) {
      assert_int_equal(lac_chain_row(chain, id) != LAC_NO_ROW, had[id]);
      assert_int_equal(lac_chain_row(chain, id) == LAC_GIVEN, given[id]);
      if (k % 10 == 0) check_steps(chain, id);
    }
    lac_chain_free(chain);
  }
}

/* Asking in any order changes nothing, nor does settling again. */
static void same_forwards_and_backwards(void **state) {
  (void)state;
  uint64_t seed = 14;
  for (int k = 0; k < SETS; k++) {
    bool given[MOST_NAMES];
    int forwards[MOST_NAMES], steps[MOST_NAMES];
    draw_givens(&seed, given);
    lac_chain *a = settle(given, NULL), *b = settle(given, NULL);
    for (int id = 0; id < names; id++) {
      lac_chain_steps(a, id, steps);
      forwards[id] = lac_chain_row(a, id);
    }
    for (int id = names - 1; id >= 0; id--) {
      lac_chain_steps(b, id, steps);
      assert_int_equal(lac_chain_row(b, id), forwards[id]);
    }
    lac_chain_free(a);
    lac_chain_free(b);
  }
}

/* A name of one letter and a number, for tables that mean nothing. */
static int add_plain_name(char letter, int number) {
  char text[20];
  int id = -1;
  snprintf(text, sizeof text, "%c_%d", letter, number);
  const lac_name name = {.name = text, .unit = "1", .range = "any", .symbol = "x", .meaning = "nothing", .subject = "disc"};
  assert_int_equal(lac_catalogue_add_name(catalogue, &name, &id), LAC_OK);
  names = lac_catalogue_names(catalogue);
  return id;
}

/* A row that may close circles, as only inverse ones may. */
static int add_plain_row(int gives, int number, int inputs, const int *from) {
  char by[20];
  int row = -1;
  snprintf(by, sizeof by, "row_%d", number);
  lac_relation r = {.gives = name_of(gives), .by = by, .inverse_of = "nothing/at_all"};
  for (int i = 0; i < inputs; i++) r.from[i] = name_of(from[i]);
  assert_int_equal(lac_catalogue_add_relation(catalogue, &r, &row), LAC_OK);
  return row;
}

/* Random tables full of circles, which the built-in ones are not. */
static void follows_the_rule_in_any_table(void **state) {
  (void)state;
  enum { NAMES = 30, ROWS = 90, TABLES = 20, SETS_OF_EACH = 20 };
  uint64_t seed = 17;
  int at_once_count = 0;
  for (int table = 0; table < TABLES; table++) {
    int ids[NAMES];
    for (int i = 0; i < NAMES; i++) ids[i] = add_plain_name('n', i);
    for (int i = 0; i < ROWS; i++) {
      int from[3];
      const int inputs = (int)check_uniform(&seed, 1, 4);
      for (int k = 0; k < inputs; k++) from[k] = ids[(int)check_uniform(&seed, 0, NAMES)];
      add_plain_row(ids[(int)check_uniform(&seed, 0, NAMES)], i, inputs, from);
    }
    for (int k = 0; k < SETS_OF_EACH; k++) {
      bool given[MOST_NAMES] = {false}, at_once;
      int chosen[MOST_NAMES];
      for (int i = 0; i < NAMES; i++) given[ids[i]] = chance(&seed, 0.2);
      assert_int_equal(settle_by_rule(given, NULL, chosen, &at_once), LAC_OK);
      lac_chain *chain = settle(given, NULL);
      same_rows(chain, chosen, given);
      assert_int_equal(lac_chain_settled_at_once(chain), at_once);
      for (int i = 0; i < NAMES; i++) check_steps(chain, ids[i]);
      at_once_count += at_once;
      lac_chain_free(chain);
    }
    tear_down(NULL);
    assert_int_equal(set_up(NULL), 0);
  }
  print_message("# step 3 sufficed for %d of %d sets\n", at_once_count, TABLES * SETS_OF_EACH);
  assert_true(at_once_count < TABLES * SETS_OF_EACH / 2);
}

/* Of two names that give each other, either of which could follow from the given, the first in the glossary takes its first row. */
static void glossary_order_settles_ties(void **state) {
  (void)state;
  const int given_id = add_plain_name('g', 0), first = add_plain_name('t', 1), second = add_plain_name('t', 2);
  const int second_from_first = add_plain_row(second, 0, 1, &first), first_from_second = add_plain_row(first, 1, 1, &second);
  add_plain_row(first, 2, 1, &given_id);
  const int second_from_given = add_plain_row(second, 3, 1, &given_id);
  bool given[MOST_NAMES] = {false};
  given[given_id] = true;
  lac_chain *chain = settle(given, NULL);
  assert_false(lac_chain_settled_at_once(chain));
  assert_int_equal(lac_chain_row(chain, first), first_from_second);
  assert_int_equal(lac_chain_row(chain, second), second_from_given);
  assert_int_not_equal(lac_chain_row(chain, second), second_from_first);
  lac_chain_free(chain);
}

/* What is missing. */

typedef struct {
  bool set[MOST_NAMES];
  int size;
  bool found;
} need;

/* The rule of lac_chain_missing, transcribed. */
static const need *plain_need(const lac_chain *chain, int id, need *needs);

static need need_of_inputs(const lac_chain *chain, int row, need *needs) {
  int count;
  const int *from = lac_catalogue_from(catalogue, row, &count);
  need all = {.size = 0};
  for (int i = 0; i < count; i++) {
    const need *input = plain_need(chain, from[i], needs);
    for (int k = 0; k < names; k++) all.set[k] |= input->set[k];
  }
  for (int k = 0; k < names; k++) all.size += all.set[k];
  return all;
}

static const need *plain_need(const lac_chain *chain, int id, need *needs) {
  need *own = &needs[id];
  if (own->found) return own;
  own->found = true;
  if (lac_chain_row(chain, id) != LAC_NO_ROW) return own;
  int count;
  const int *rows = lac_catalogue_rows_of(catalogue, id, &count);
  own->size = INT_MAX;
  for (int i = 0; i < count; i++) {
    if (!is_forward(rows[i])) continue;
    const need trial = need_of_inputs(chain, rows[i], needs);
    if (trial.size < own->size) *own = trial;
    own->found = true;
  }
  if (own->size < INT_MAX) return own;
  own->size = 1;
  own->set[id] = true;
  return own;
}

/* Whether the name is had when these are given besides. */
static bool suffices(const bool *given, const bool *besides, int id) {
  bool both[MOST_NAMES];
  for (int k = 0; k < names; k++) both[k] = given[k] || besides[k];
  lac_chain *chain = settle(both, NULL);
  const bool had = lac_chain_row(chain, id) != LAC_NO_ROW;
  lac_chain_free(chain);
  return had;
}

static void check_missing(const lac_chain *chain, const bool *given, int id, need *needs, int *sets, int *least) {
  static bool needed[MOST_SETS * MOST_NAMES];
  int rows[MOST_SETS];
  const int count = lac_chain_missing(chain, id, needed, MOST_SETS, rows);
  assert_int_equal(count > 0, lac_chain_row(chain, id) == LAC_NO_ROW);
  int last = 0;
  for (int s = 0; s < count; s++) {
    bool *set = needed + s * names;
    const need want = rows[s] >= 0 ? need_of_inputs(chain, rows[s], needs) : *plain_need(chain, id, needs);
    assert_memory_equal(set, want.set, (size_t)names);
    assert_true(want.size >= last && want.size > 0);
    if (s == 0) assert_int_equal(want.size, plain_need(chain, id, needs)->size);
    last = want.size;
    assert_true(suffices(given, set, id));
    bool smaller = false;
    for (int k = 0; k < names; k++) {
      if (!set[k]) continue;
      set[k] = false;
      smaller |= suffices(given, set, id);
      set[k] = true;
    }
    ++*sets;
    *least += !smaller;
  }
}

static void missing_sets_suffice(void **state) {
  (void)state;
  uint64_t seed = 15;
  int sets = 0, least = 0;
  need *needs = malloc(MOST_NAMES * sizeof *needs);
  assert_non_null(needs);
  for (int k = 0; k < 60; k++) {
    bool given[MOST_NAMES];
    draw_givens(&seed, given);
    lac_chain *chain = settle(given, NULL);
    memset(needs, 0, MOST_NAMES * sizeof *needs);
    for (int id = 0; id < names; id++) check_missing(chain, given, id, needs, &sets, &least);
    lac_chain_free(chain);
  }
  free(needs);
  print_message("# %d sets, from %d of which nothing can be left out\n", sets, least);
}

/* Cases that a person can follow. */

static void give(bool *given, const char *const *list) {
  memset(given, 0, MOST_NAMES);
  for (; *list; list++) given[id_of(*list)] = true;
}

#define GIVE(given, ...) give(given, (const char *const[]){__VA_ARGS__, NULL})
#define USUAL                                                                                                                              \
  "distance", "bolometric_flux", "stellar_mass", "planet_mass", "planet_semi_major_axis", "viscosity_alpha", "wavelength",                 \
      "projected_baseline", "shortest_baseline"

static void comes_by(const lac_chain *chain, const char *name, const char *by) {
  const int row = lac_chain_row(chain, id_of(name));
  const char *got = row == LAC_GIVEN ? "given" : row == LAC_NO_ROW ? "not had" : lac_catalogue_row(catalogue, row)->by;
  if (strcmp(got, by) != 0) print_error("# %s comes by %s, not by %s\n", name, got, by);
  assert_string_equal(got, by);
}

static void a_usual_case(void **state) {
  (void)state;
  bool given[MOST_NAMES];
  GIVE(given, USUAL);
  lac_chain *chain = settle(given, NULL);
  comes_by(chain, "distance", "given");
  comes_by(chain, "sublimation_radius", "grey_grains");
  assert_int_equal(lac_catalogue_row(catalogue, lac_chain_row(chain, id_of("sublimation_temperature")))->kind, LAC_ASSUMED);
  comes_by(chain, "rim_radius", "at_sublimation_radius");
  comes_by(chain, "array_resolution", "half_fringe");
  comes_by(chain, "planet_star_mass_ratio", "definition");
  comes_by(chain, "gap_width", "kanagawa_2016");
  comes_by(chain, "gap_resolved_by_array", "field_unlimited");
  comes_by(chain, "telescope_diameter", "not had");
  comes_by(chain, "gap_resolved_by_mirror", "not had");
  comes_by(chain, "rim_gas_density", "not had");
  lac_chain_free(chain);
  GIVE(given, USUAL, "element_diameter");
  chain = settle(given, NULL);
  assert_string_not_equal(lac_catalogue_row(catalogue, lac_chain_row(chain, id_of("gap_resolved_by_array")))->by, "field_unlimited");
  lac_chain_free(chain);
}

/* A given that is exact takes the place of a recipe; without it the recipe stands, and the definition follows the other way. */
static void definitions_go_both_ways(void **state) {
  (void)state;
  bool given[MOST_NAMES];
  GIVE(given, USUAL);
  lac_chain *chain = settle(given, NULL);
  const int scale_height = id_of("planet_scale_height"), aspect_ratio = id_of("planet_aspect_ratio");
  int steps[MOST_NAMES];
  const int count = lac_chain_steps(chain, aspect_ratio, steps);
  bool rests_on_scale_height = false;
  for (int i = 0; i < count; i++) rests_on_scale_height |= steps[i] == scale_height;
  assert_true(rests_on_scale_height);
  lac_chain_free(chain);
  GIVE(given, USUAL, "planet_aspect_ratio");
  chain = settle(given, NULL);
  int inputs;
  const int row = lac_chain_row(chain, scale_height);
  assert_true(row >= 0);
  const int *from = lac_catalogue_from(catalogue, row, &inputs);
  bool takes_aspect_ratio = false;
  for (int i = 0; i < inputs; i++) takes_aspect_ratio |= from[i] == aspect_ratio;
  assert_true(takes_aspect_ratio);
  lac_chain_free(chain);
}

/* An angle that is given leads to the length, before any recipe does. */
static void angles_lead_to_lengths(void **state) {
  (void)state;
  bool given[MOST_NAMES];
  GIVE(given, USUAL, "rim_radius_angle");
  lac_chain *chain = settle(given, NULL);
  const lac_relation *r = lac_catalogue_row(catalogue, lac_chain_row(chain, id_of("rim_radius")));
  assert_string_equal(r->from[0], "rim_radius_angle");
  lac_chain_free(chain);
}

/* Values of a chain are those of its rows, called one after the other. */
static void values_follow_the_chain(void **state) {
  (void)state;
  bool given[MOST_NAMES];
  double values[MOST_NAMES];
  GIVE(given, "stellar_mass", "planet_mass", "planet_semi_major_axis");
  for (int id = 0; id < names; id++) values[id] = 1e300;
  values[id_of("stellar_mass")] = 2e30, values[id_of("planet_mass")] = 6e27, values[id_of("planet_semi_major_axis")] = 8e11;
  lac_chain *chain = settle(given, NULL);
  lac_chain_values(chain, values);
  check_within(3e-3, values[id_of("planet_star_mass_ratio")], DBL_EPSILON, "mass ratio");
  check_within(8e10, values[id_of("hill_radius")], 4 * DBL_EPSILON, "a tenth: the ratio is three thousandths");
  check_undefined(values[id_of("distance")], "what is not had");
  lac_chain_free(chain);
}

static void restricted_names_take_their_row(void **state) {
  (void)state;
  bool given[MOST_NAMES];
  int only[MOST_NAMES], culprit = -1;
  GIVE(given, USUAL);
  for (int id = 0; id < names; id++) only[id] = -1;
  only[id_of("array_resolution")] = row_of("array_resolution", "fringe");
  lac_chain *chain = settle(given, only);
  comes_by(chain, "array_resolution", "fringe");
  comes_by(chain, "sublimation_radius", "grey_grains");
  lac_chain_free(chain);
  only[id_of("sublimation_radius")] = row_of("sublimation_radius", "kama_2009"); /* its inputs are not given */
  assert_int_equal(lac_chain_settle(catalogue, given, only, &chain, &culprit), LAC_NOT_HAD);
  assert_int_equal(culprit, id_of("sublimation_radius"));
  only[culprit] = -1;
  only[id_of("distance")] = row_of("distance", "parallax");
  assert_int_equal(lac_chain_settle(catalogue, given, only, &chain, &culprit), LAC_DUPLICATE);
  assert_int_equal(culprit, id_of("distance"));
  assert_null(chain);
}

/* A user's row stands after the built-in recipes: it gives what they can't, and all when they are not live. */
static void users_rows_join_the_chain(void **state) {
  (void)state;
  bool given[MOST_NAMES] = {false}, at_once;
  int chosen[MOST_NAMES], id;
  const lac_name name = {.name = "knot_radius",
                         .unit = "au",
                         .range = "> 0",
                         .symbol = "r_k",
                         .meaning = "an invented length",
                         .subject = "disc",
                         .on_sky = true};
  assert_int_equal(lac_catalogue_add_name(catalogue, &name, &id), LAC_OK);
  names = lac_catalogue_names(catalogue);
  const lac_relation knot = {.gives = "knot_radius", .by = "mine", .from = {"rim_radius", "inclination"}};
  const lac_relation cavity = {.gives = "cavity_radius", .by = "mine", .from = {"knot_radius"}};
  const lac_relation rim = {.gives = "sublimation_radius", .by = "mine", .from = {"stellar_radius"}};
  assert_int_equal(lac_catalogue_add_relation(catalogue, &knot, NULL), LAC_OK);
  assert_int_equal(lac_catalogue_add_relation(catalogue, &cavity, NULL), LAC_OK);
  assert_int_equal(lac_catalogue_add_relation(catalogue, &rim, NULL), LAC_OK);
  GIVE(given, USUAL, "inclination", "stellar_radius");
  lac_chain *chain = settle(given, NULL);
  comes_by(chain, "sublimation_radius", "grey_grains");
  comes_by(chain, "knot_radius_angle", "definition");
  comes_by(chain, "cavity_radius", "mine");
  assert_int_equal(settle_by_rule(given, NULL, chosen, &at_once), LAC_OK);
  same_rows(chain, chosen, given);
  double values[MOST_NAMES];
  for (int k = 0; k < names; k++) values[k] = given[k] ? lac_catalogue_unit(catalogue, k).factor : 0;
  lac_chain_values(chain, values);
  check_undefined(values[id], "a user's row is called elsewhere");
  lac_chain_free(chain);
  GIVE(given, "stellar_radius");
  chain = settle(given, NULL);
  comes_by(chain, "sublimation_radius", "mine");
  comes_by(chain, "rim_radius", "at_sublimation_radius");
  lac_chain_free(chain);
}

static void says_what_is_missing(void **state) {
  (void)state;
  static bool needed[MOST_SETS * MOST_NAMES];
  bool given[MOST_NAMES];
  int rows[MOST_SETS];
  GIVE(given, "stellar_mass", "planet_semi_major_axis");
  lac_chain *chain = settle(given, NULL);
  assert_int_equal(lac_chain_missing(chain, id_of("stellar_mass"), needed, MOST_SETS, rows), 0);
  assert_int_equal(lac_chain_missing(chain, id_of("hill_radius"), needed, MOST_SETS, rows), 1);
  for (int id = 0; id < names; id++) assert_int_equal(needed[id], id == id_of("planet_mass"));
  assert_int_equal(rows[0], row_of("hill_radius", "hill"));
  /* What no row leads to has to be given itself. */
  assert_int_equal(lac_chain_missing(chain, id_of("wavelength"), needed, 1, rows), 1);
  assert_int_equal(lac_chain_missing(chain, id_of("observed_gap_depth"), needed, MOST_SETS, rows), 1);
  for (int id = 0; id < names; id++) assert_int_equal(needed[id], id == id_of("observed_gap_depth"));
  assert_int_equal(rows[0], LAC_NO_ROW);
  assert_int_equal(lac_chain_missing(chain, id_of("sublimation_radius"), needed, 2, rows), 2); /* of its rows, the two that want least */
  lac_chain_free(chain);
}

static double seconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_MONOTONIC, &now);
  return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static void settling_is_quick(void **state) {
  (void)state;
  uint64_t seed = 16;
  double sum = 0, longest = 0;
  for (int k = 0; k < SETS; k++) {
    bool given[MOST_NAMES];
    double best = INFINITY;
    draw_givens(&seed, given);
    for (int again = 0; again < 3; again++) {
      const double start = seconds();
      lac_chain_free(settle(given, NULL));
      best = fmin(best, seconds() - start);
    }
    sum += best;
    longest = fmax(longest, best);
  }
  print_message("# all names settled in %.1f microseconds on average, %.1f at most\n", 1e6 * sum / SETS, 1e6 * longest);
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
#define FRESH(test) cmocka_unit_test_setup_teardown(test, set_up, tear_down)
  const struct CMUnitTest tests[] = {
      FRESH(follows_the_rule),
      FRESH(follows_the_rule_with_restrictions),
      FRESH(follows_the_rule_in_any_table),
      FRESH(glossary_order_settles_ties),
      FRESH(steps_are_in_order),
      FRESH(same_forwards_and_backwards),
      FRESH(missing_sets_suffice),
      FRESH(a_usual_case),
      FRESH(definitions_go_both_ways),
      FRESH(angles_lead_to_lengths),
      FRESH(values_follow_the_chain),
      FRESH(restricted_names_take_their_row),
      FRESH(users_rows_join_the_chain),
      FRESH(says_what_is_missing),
      FRESH(settling_is_quick),
  };
  return cmocka_run_group_tests(tests, NULL, NULL);
}
