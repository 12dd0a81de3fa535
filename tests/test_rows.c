/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Every relation's function does what its row says: over blocks as for single numbers, undefined outside the ranges of the glossary,
   in the units of the glossary, and for verdicts by the printed conditions. What is random is seeded, and printed where it fails. */
#include "check.h"

#include <ctype.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "walk.h"

enum { DRAWS = 200 };

/* What a name's values are compared with: its display unit; for a temperature 1000 K, as black bodies of some kelvin give no light. */
static double usual_size(int id) {
  static const lac_dimension temperature = {.numerator = {[LAC_TEMPERATURE] = 1}, .denominator = 1};
  const lac_unit unit = lac_catalogue_unit(catalogue, id);
  return lac_dimension_equal(unit.dimension, temperature) ? 1000 * unit.factor : unit.factor;
}

/* A value in a name's range, within a factor of ten of its usual size where the range is open. */
static double draw_value(int id, uint64_t *seed) {
  const lac_range range = lac_catalogue_range(catalogue, id);
  const double unit = usual_size(id);
  if (isfinite(range.low) && isfinite(range.high)) return check_uniform(seed, range.low, range.high);
  if (isfinite(range.low)) return range.low + check_log_uniform(seed, 0.1 * unit, 10 * unit);
  return check_uniform(seed, -2 * unit, 2 * unit);
}

/* Labels of those too many rows have: inputs, then what the function gives. */
static void print_inputs(int row, const double *inputs) {
  const lac_relation *r = lac_catalogue_row(catalogue, row);
  for (int i = 0; i < LAC_MAX_ARGUMENTS && r->from[i]; i++) print_error("#   %s = %.17g\n", r->from[i], inputs[i]);
}

static bool same(double a, double b, double tolerance) { return (isnan(a) && isnan(b)) || a == b || fabs(a - b) <= tolerance * fabs(a); }

/* glibc's manual and its libmvec allow vector functions 4 units in the last place, its scalar ones err by about 1: a result of two
   of them may differ by 8 epsilon. Where a step is fed by such a one (exp of pow), its error grows as that of the inputs would. */
static const double block_tolerance = 8 * DBL_EPSILON;

/* How far the result moves when each input moves by the tolerance. */
static double sensitivity(const lac_relation *r, const double *inputs, double value) {
  double sum = 0, moved[LAC_MAX_ARGUMENTS];
  for (int i = 0; i < LAC_MAX_ARGUMENTS && r->from[i]; i++) {
    memcpy(moved, inputs, sizeof moved);
    moved[i] *= 1 - block_tolerance;
    const double change = fabs(lac_relation_value(r, moved) - value);
    if (change > 0) sum += change;
  }
  return sum;
}

static void check_block(int row, uint64_t *seed) {
  const lac_relation *r = lac_catalogue_row(catalogue, row);
  int count;
  const int *from = lac_catalogue_from(catalogue, row, &count);
  double inputs[LAC_MAX_ARGUMENTS][DRAWS], block[DRAWS], shape[DRAWS];
  const double *in[LAC_MAX_ARGUMENTS];
  for (int i = 0; i < count; i++) {
    in[i] = inputs[i];
    for (int k = 0; k < DRAWS; k++) inputs[i][k] = draw_value(from[i], seed);
  }
  r->block(DRAWS, block, in);
  if (r->shape) r->shape(DRAWS, shape, in + 1);
  int defined = 0;
  for (int k = 0; k < DRAWS; k++) {
    double one[LAC_MAX_ARGUMENTS] = {0};
    for (int i = 0; i < count; i++) one[i] = inputs[i][k];
    const double scalar = lac_relation_value(r, one);
    defined += !isnan(scalar);
    const double tolerance = block_tolerance + sensitivity(r, one, scalar) / fabs(scalar);
    const bool agree = same(scalar, block[k], tolerance) && (!r->shape || same(scalar, one[0] * shape[k], tolerance));
    expect_row(agree, row, "block or shape and scalar differ");
    if (agree) continue;
    print_error("#   scalar %.17g, block %.17g, shape times first %.17g\n", scalar, block[k], r->shape ? one[0] * shape[k] : (double)NAN);
    print_inputs(row, one);
    break;
  }
  expect_row(defined > 0, row, "is undefined for all draws in range");
}

static void blocks_equal_functions(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++)
    if (lac_catalogue_row(catalogue, row)->function) check_block(row, &seed);
  end_walk();
}

/* What lies out of a range: just past each end and far from it, and NaN. Returned: how many. */
static int outside_values(int id, double *values) {
  const lac_range range = lac_catalogue_range(catalogue, id);
  int count = 0;
  values[count++] = (double)NAN;
  if (isfinite(range.low)) {
    values[count++] = range.low_included ? nextafter(range.low, -INFINITY) : range.low;
    values[count++] = range.low - 1e3 * lac_catalogue_unit(catalogue, id).factor;
  }
  if (isfinite(range.high)) {
    values[count++] = range.high_included ? nextafter(range.high, INFINITY) : range.high;
    values[count++] = range.high + 1e3 * lac_catalogue_unit(catalogue, id).factor;
  }
  return count;
}

static void check_outside(int row, const double *inputs, int input, double value) {
  const lac_relation *r = lac_catalogue_row(catalogue, row);
  double one[LAC_MAX_ARGUMENTS], block = 0;
  const double *in[LAC_MAX_ARGUMENTS];
  memcpy(one, inputs, sizeof one);
  one[input] = value;
  for (int i = 0; i < LAC_MAX_ARGUMENTS; i++) in[i] = one + i;
  const double scalar = lac_relation_value(r, one);
  r->block(1, &block, in);
  if (isnan(scalar) && isnan(block)) return;
  char what[200];
  snprintf(what, sizeof what, "gives %g (block %g) for %s = %.17g, which is out of range", scalar, block, r->from[input], value);
  expect_row(false, row, what);
}

static void undefined_out_of_range(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
    if (!lac_catalogue_row(catalogue, row)->function) continue;
    int count;
    const int *from = lac_catalogue_from(catalogue, row, &count);
    double inputs[LAC_MAX_ARGUMENTS] = {0}, values[8];
    for (int i = 0; i < count; i++) inputs[i] = draw_value(from[i], &seed);
    for (int i = 0; i < count; i++)
      for (int k = outside_values(from[i], values) - 1; k >= 0; k--) check_outside(row, inputs, i, values[k]);
  }
  end_walk();
}

/* What a function gives lies in the range of its name, or is rounded to an end of it. */
static void values_lie_in_range(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
    const lac_relation *r = lac_catalogue_row(catalogue, row);
    if (!r->function) continue;
    int count;
    const int *from = lac_catalogue_from(catalogue, row, &count);
    for (int k = 0; k < DRAWS; k++) {
      double inputs[LAC_MAX_ARGUMENTS];
      for (int i = 0; i < count; i++) inputs[i] = draw_value(from[i], &seed);
      const double value = lac_relation_value(r, inputs);
      const lac_range range = lac_catalogue_range(catalogue, lac_catalogue_gives(catalogue, row));
      const bool fine = isnan(value) || lac_range_holds(range, value) || value == range.low || value == range.high;
      expect_row(fine, row, "gives a value out of its name's range");
      if (fine) continue;
      print_error("#   %.17g\n", value);
      print_inputs(row, inputs);
      break;
    }
  }
  end_walk();
}

/* A product of numbers and names, "2 [a]" or "[a] / 2", with the values of a row's inputs. */
static double product(const char *text, size_t length, const lac_relation *r, const double *inputs) {
  double value = 1;
  bool divide = false;
  for (const char *end = text + length; text < end;) {
    double factor = (double)NAN;
    char *after = NULL;
    if (*text == ' ') {
      text++;
      continue;
    }
    if (*text == '/') {
      divide = true;
      text++;
      continue;
    }
    if (*text == '[') {
      const size_t size = strcspn(++text, "]");
      for (int i = 0; i < LAC_MAX_ARGUMENTS && r->from[i]; i++)
        if (strlen(r->from[i]) == size && strncmp(text, r->from[i], size) == 0) factor = inputs[i];
      text += size + 1;
    } else {
      factor = strtod(text, &after);
      if (after == text) return (double)NAN;
      text = after;
    }
    value = divide ? value / factor : value * factor;
    divide = false;
  }
  return value;
}

/* 1 or 0; -1 where a condition can't be read. */
static int condition_holds(const char *text, const lac_relation *r, const double *inputs) {
  const char *sign = strpbrk(text, "<>");
  if (!sign) return -1;
  const bool equal = sign[1] == '=';
  const char *right_side = sign + 1 + equal;
  const double left = product(text, (size_t)(sign - text), r, inputs), right = product(right_side, strlen(right_side), r, inputs);
  if (isnan(left) || isnan(right)) return -1;
  if (*sign == '<') return equal ? left <= right : left < right;
  return equal ? left >= right : left > right;
}

static int conditions_hold(const lac_relation *r, const double *inputs) {
  int all = 1;
  for (int i = 0; i < LAC_MAX_CONDITIONS && r->conditions[i]; i++) {
    const int holds = condition_holds(r->conditions[i], r, inputs);
    if (holds < 0) return -1;
    all &= holds;
  }
  return all;
}

static void verdicts_follow_their_conditions(void **state) {
  (void)state;
  uint64_t seed = 4;
  int verdicts = 0;
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
    const lac_relation *r = lac_catalogue_row(catalogue, row);
    if (!r->conditions[0]) continue;
    verdicts++;
    int count, seen[2] = {0, 0};
    const int *from = lac_catalogue_from(catalogue, row, &count);
    for (int k = 0; k < 10 * DRAWS; k++) {
      double inputs[LAC_MAX_ARGUMENTS];
      for (int i = 0; i < count; i++) inputs[i] = draw_value(from[i], &seed);
      const double value = lac_relation_value(r, inputs);
      const int holds = conditions_hold(r, inputs);
      if (value == holds) {
        seen[holds]++;
        continue;
      }
      expect_row(false, row, "is not what its conditions say");
      print_inputs(row, inputs);
      break;
    }
    expect_row(seen[0] > 0 && seen[1] > 0, row, "is always the same");
  }
  assert_true(verdicts > 0);
  end_walk();
}

/* Whether an equation holds constants of nature: a letter that is neither in a name nor part of a command that is no symbol. */
static bool has_constants(const char *equation) {
  static const char *const plain[] = {"frac", "left", "right", "sqrt", "pi", "min", "max", "cos",  "sin",  "exp",    "ln",
                                      "log",  "cdot", "times", "le",   "ge", "lt",  "gt",  "text", "quad", "lbrace", "rbrace"};
  for (const char *p = equation; *p; p++) {
    if (*p == '[') p += strcspn(p, "]");
    else if (*p == '\\' && isalpha((unsigned char)p[1])) {
      size_t length = 0;
      while (isalpha((unsigned char)p[1 + length])) length++;
      bool known = false;
      for (size_t i = 0; i < sizeof plain / sizeof plain[0]; i++)
        known |= strlen(plain[i]) == length && strncmp(p + 1, plain[i], length) == 0;
      if (!known) return true;
      p += length;
    } else if (isalpha((unsigned char)*p)) return true;
  }
  return false;
}

/* By how much a value of this dimension grows when the base units shrink by these factors. Angles stay: lambda/B is one. */
static double scale_of(lac_dimension dimension, const double *scales) {
  double product_of_powers = 1;
  for (int i = LAC_LENGTH; i <= LAC_TEMPERATURE; i++)
    product_of_powers *= pow(scales[i], dimension.numerator[i] / (double)dimension.denominator);
  return product_of_powers;
}

/* A relation without constants doesn't depend on the units of length, mass, time and temperature. */
static void relations_scale_by_their_dimensions(void **state) {
  (void)state;
  uint64_t seed = 5;
  int checked = 0;
  for (int row = 0; row < lac_catalogue_rows(catalogue); row++) {
    const lac_relation *r = lac_catalogue_row(catalogue, row);
    if (!r->function || has_constants(r->equation) || r->conditions[0]) continue;
    int count, defined = 0;
    const int *from = lac_catalogue_from(catalogue, row, &count);
    for (int k = 0; k < DRAWS; k++) {
      double inputs[LAC_MAX_ARGUMENTS], scaled[LAC_MAX_ARGUMENTS], scales[LAC_BASE_DIMENSIONS];
      for (int i = 0; i < LAC_BASE_DIMENSIONS; i++) scales[i] = check_log_uniform(&seed, 0.1, 10);
      for (int i = 0; i < count; i++) {
        inputs[i] = draw_value(from[i], &seed);
        scaled[i] = inputs[i] * scale_of(lac_catalogue_unit(catalogue, from[i]).dimension, scales);
      }
      const double value = lac_relation_value(r, inputs), value_scaled = lac_relation_value(r, scaled);
      const double want = value * scale_of(lac_catalogue_unit(catalogue, lac_catalogue_gives(catalogue, row)).dimension, scales);
      /* A product this small had factors that were too small to keep all their digits. */
      if (isnan(value) || (value != 0 && fabs(value) < 1e-250)) continue;
      defined++;
      /* Rounding of some ten factors, amplified by powers and differences of like terms. */
      const bool fine = same(want, value_scaled, 1e4 * DBL_EPSILON);
      expect_row(fine, row, "changes with the units");
      if (fine) continue;
      print_error("#   want %.17g, got %.17g\n", want, value_scaled);
      print_inputs(row, inputs);
      break;
    }
    checked += defined > 0;
  }
  print_message("# %d of %d rows are without constants and scale\n", checked, lac_catalogue_rows(catalogue));
  assert_true(checked > lac_catalogue_rows(catalogue) / 4);
  end_walk();
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      FRESH(blocks_equal_functions),
      FRESH(undefined_out_of_range),
      FRESH(values_lie_in_range),
      FRESH(verdicts_follow_their_conditions),
      FRESH(relations_scale_by_their_dimensions),
  };
  return cmocka_run_group_tests(tests, NULL, NULL);
}
