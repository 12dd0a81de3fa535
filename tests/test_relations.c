/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Every relation against values from outside, which stand in tests/reference/checks_*.csv and evaluated_*.csv: one test a file,
   each failing line printed; and a last one that every row has been checked. A template counts as one row. */
#include "check.h"

#include <csv.h>
#include <glob.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "relation.h"

enum { GIVES, BY, INPUTS, EXPECTED, TOLERANCE, KIND, SOURCE, COLUMNS, LONGEST = 1000 };

static lac_catalogue *catalogue;
static bool *checked, *checked_outside;

/* One line of a file while it is read. */
typedef struct {
  const char *path;
  char field[COLUMNS][LONGEST];
  int column, line, checks, failures;
  bool header_seen;
} csv_reader;

/* Returned: false, so that a check can end with it. */
static bool say(csv_reader *r, const char *what, const char *which) {
  r->failures++;
  print_error("# %s, line %d (%s/%s): %s %s\n", r->path, r->line, r->field[GIVES], r->field[BY], what, which);
  return false;
}

/* A number with a unit of the name's dimension, in SI; a dimension needs its unit. */
static bool read_value(const char *text, size_t length, lac_dimension dimension, double *value) {
  lac_reading reading;
  size_t where;
  if (lac_reading_read(text, length, &reading, &where) != LAC_OK || reading.has_error) return false;
  const lac_dimension got = reading.unit_length > 0 ? reading.unit.dimension : LAC_DIMENSIONLESS;
  *value = reading.unit_length > 0 ? reading.value * reading.unit.factor : reading.value;
  return lac_dimension_equal(got, dimension);
}

/* "name=value unit; name=value unit" into the order of the row's inputs. */
static bool read_inputs(csv_reader *r, const lac_relation *relation, double *inputs) {
  char text[LONGEST], *rest = text, *part;
  int wanted = 0, found = 0;
  while (wanted < LAC_MAX_ARGUMENTS && relation->from[wanted]) inputs[wanted++] = (double)NAN;
  snprintf(text, sizeof text, "%s", r->field[INPUTS]);
  while ((part = strtok_r(rest, ";", &rest))) {
    char *value = strchr(part, '='), *name = part + strspn(part, " ");
    if (!value) return say(r, "no = in", part);
    *value++ = '\0';
    name[strcspn(name, " ")] = '\0';
    value += strspn(value, " ");
    const int id = lac_catalogue_find(catalogue, name);
    int at = 0;
    while (at < wanted && strcmp(relation->from[at], name) != 0) at++;
    if (id < 0 || at == wanted) return say(r, "doesn't take", name);
    if (!read_value(value, strlen(value), lac_catalogue_unit(catalogue, id).dimension, &inputs[at]))
      return say(r, "no value with its unit:", value);
    found++;
  }
  return found == wanted || say(r, "not all inputs, or one twice", "");
}

/* "relative 1e-13" or "absolute 0.05 au", as an absolute one. */
static bool read_tolerance(csv_reader *r, double expected, lac_dimension dimension, double *tolerance) {
  const char *text = r->field[TOLERANCE];
  const bool relative = strncmp(text, "relative ", 9) == 0;
  if (!relative && strncmp(text, "absolute ", 9) != 0) return false;
  if (!read_value(text + 9, strlen(text + 9), relative ? LAC_DIMENSIONLESS : dimension, tolerance)) return false;
  if (relative) *tolerance *= fabs(expected);
  return *tolerance >= 0;
}

static bool compare(csv_reader *r, int row, const double *inputs) {
  const lac_relation *relation = lac_catalogue_row(catalogue, row);
  const lac_dimension dimension = lac_catalogue_unit(catalogue, lac_catalogue_gives(catalogue, row)).dimension;
  const double got = lac_relation_value(relation, inputs);
  const char *expected = r->field[EXPECTED];
  if (strcmp(expected, "undefined") == 0) return isnan(got) || say(r, "is defined:", relation->function_name);
  double want, tolerance;
  if (!read_value(expected, strlen(expected), dimension, &want)) return say(r, "no expected value with its unit:", expected);
  if (!read_tolerance(r, want, dimension, &tolerance)) return say(r, "no tolerance:", r->field[TOLERANCE]);
  if (!(fabs(got - want) <= tolerance)) {
    print_error("# want %.17g, got %.17g, relative error %.3g (%s)\n", want, got, (got - want) / fabs(want), r->field[SOURCE]);
    return say(r, "is not within", r->field[TOLERANCE]);
  }
  checked[row] = true;
  checked_outside[row] |= strcmp(r->field[KIND], "outside") == 0;
  return true;
}

static bool check_line(csv_reader *r) {
  static const char *const kinds[] = {"outside", "evaluation", "memory"};
  bool known = false;
  for (size_t i = 0; i < sizeof kinds / sizeof kinds[0]; i++) known |= strcmp(r->field[KIND], kinds[i]) == 0;
  if (!known) return say(r, "is of no kind:", r->field[KIND]);
  if (!*r->field[SOURCE]) return say(r, "has no source", "");
  const int id = lac_catalogue_find(catalogue, r->field[GIVES]);
  const int row = id >= 0 ? lac_catalogue_find_row(catalogue, id, r->field[BY]) : -1;
  if (row < 0) return say(r, "is no row", "");
  double inputs[LAC_MAX_ARGUMENTS];
  r->checks++;
  return read_inputs(r, lac_catalogue_row(catalogue, row), inputs) && compare(r, row, inputs);
}

static void end_field(void *text, size_t length, void *context) {
  csv_reader *r = context;
  if (r->column < COLUMNS) snprintf(r->field[r->column], LONGEST, "%.*s", (int)length, (const char *)text);
  r->column++;
}

static void end_line(int terminator, void *context) {
  (void)terminator;
  csv_reader *r = context;
  const int columns = r->column;
  r->column = 0;
  if (!r->header_seen) r->header_seen = true;
  else if (columns != COLUMNS) (void)say(r, "has another number of columns", "");
  else (void)check_line(r);
}

/* Files of reference values that are no relations have other columns. */
static bool is_of_relations(const char *path) {
  char line[LONGEST] = "";
  FILE *file = fopen(path, "r");
  if (!file) return false;
  while (fgets(line, sizeof line, file) && *line == '#') continue;
  fclose(file);
  return strncmp(line, "gives,by,inputs,expected,tolerance,kind,source", 46) == 0;
}

static void check_file(void **state) {
  csv_reader *r = calloc(1, sizeof *r);
  assert_non_null(r);
  r->path = *state;
  struct csv_parser parser;
  assert_int_equal(csv_init(&parser, CSV_STRICT | CSV_APPEND_NULL), 0);
  FILE *file = fopen(r->path, "r");
  assert_non_null(file);
  char line[LONGEST * 4];
  while (fgets(line, sizeof line, file)) {
    r->line++;
    if (*line == '#') continue;
    if (csv_parse(&parser, line, strlen(line), end_field, end_line, r) != strlen(line))
      (void)say(r, "can't be read:", csv_strerror(csv_error(&parser)));
  }
  csv_fini(&parser, end_field, end_line, r);
  csv_free(&parser);
  fclose(file);
  const int checks = r->checks, failures = r->failures;
  print_message("# %s: %d checks, %d failures\n", r->path, checks, failures);
  free(r);
  assert_true(checks > 0);
  assert_int_equal(failures, 0);
}

/* A name without what a place or structure puts before it. */
static const char *stem(const char *name) {
  static const char *const prefixes[] = {"planet_", "ring_", "rim_", "cavity_", "gap_"};
  for (size_t i = 0; i < sizeof prefixes / sizeof prefixes[0]; i++)
    if (strncmp(name, prefixes[i], strlen(prefixes[i])) == 0) return name + strlen(prefixes[i]);
  return name;
}

static bool is_angle_row(const lac_relation *r) {
  for (const lac_relation *prototype = lac_angle_relations; prototype->gives; prototype++)
    if (prototype->function == r->function && strcmp(prototype->by, r->by) == 0) return true;
  return false;
}

/* Whether two rows are one template's. */
static bool same_template(const lac_relation *a, const lac_relation *b) {
  if (a->function != b->function || strcmp(a->by, b->by) != 0) return false;
  return is_angle_row(a) || strcmp(stem(a->gives), stem(b->gives)) == 0;
}

/* Rows of objects, whose arguments no line of a table can hold: tests/reference/checks_objects.txt names each with the test that covers it,
   "gives/by file", and that file must name the row. */
static bool file_holds(const char *path, const char *text) {
  char line[LONGEST];
  bool found = false;
  FILE *file = fopen(path, "r");
  while (file && !found && fgets(line, sizeof line, file)) found = strstr(line, text) != NULL;
  if (file) fclose(file);
  return found;
}

static bool is_covered_by_a_test(const lac_relation *r) {
  char key[LONGEST], line[LONGEST], test[LONGEST] = "";
  snprintf(key, sizeof key, "%s/%s", r->gives, r->by);
  FILE *file = fopen("tests/reference/checks_objects.txt", "r");
  while (file && !*test && fgets(line, sizeof line, file))
    if (strncmp(line, key, strlen(key)) == 0 && line[strlen(key)] == ' ') sscanf(line + strlen(key), " %999s", test);
  if (file) fclose(file);
  return *test && file_holds(test, key);
}

static void every_row_is_checked(void **state) {
  (void)state;
  int missing = 0, outside = 0;
  const int rows = lac_catalogue_rows(catalogue);
  for (int row = 0; row < rows; row++) {
    const lac_relation *r = lac_catalogue_row(catalogue, row);
    bool seen = false, seen_outside = false;
    for (int other = 0; other < rows; other++) {
      const bool same = same_template(r, lac_catalogue_row(catalogue, other));
      seen |= same && checked[other];
      seen_outside |= same && checked_outside[other];
    }
    outside += seen_outside;
    if (seen || (r->of_object && is_covered_by_a_test(r))) continue;
    missing++;
    print_error("# %s/%s has no check\n", r->gives, r->by);
  }
  print_message("# %d rows, %d of them with a value from outside\n", rows, outside);
  assert_int_equal(missing, 0);
}

int main(void) {
  enum { MOST = 64 };
  static struct CMUnitTest tests[MOST];
  size_t count = 0;
  cmocka_set_message_output(CM_OUTPUT_TAP);
  char error[200];
  if (lac_catalogue_new(&catalogue, error, sizeof error) != LAC_OK) {
    fprintf(stderr, "%s\n", error);
    return 1;
  }
  checked = calloc((size_t)lac_catalogue_rows(catalogue), sizeof *checked);
  checked_outside = calloc((size_t)lac_catalogue_rows(catalogue), sizeof *checked_outside);
  glob_t files = {0};
  if (!checked || !checked_outside || glob("tests/reference/checks_*.csv", 0, NULL, &files) != 0 ||
      glob("tests/reference/evaluated_*.csv", GLOB_APPEND, NULL, &files) != 0 || files.gl_pathc >= MOST) {
    fprintf(stderr, "no reference values: run from the top of the repository\n");
    return 1;
  }
  for (size_t i = 0; i < files.gl_pathc; i++)
    if (is_of_relations(files.gl_pathv[i]))
      tests[count++] = (struct CMUnitTest){.name = files.gl_pathv[i], .test_func = check_file, .initial_state = files.gl_pathv[i]};
  tests[count++] = (struct CMUnitTest){.name = "every_row_is_checked", .test_func = every_row_is_checked};
  const int failed = _cmocka_run_group_tests("relations", tests, count, NULL, NULL);
  globfree(&files);
  free(checked);
  free(checked_outside);
  lac_catalogue_free(catalogue);
  return failed;
}
