/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A catalogue for each test, and a walk over it that says all that is wrong before it fails. */
#ifndef LACUNA_TESTS_WALK_H
#define LACUNA_TESTS_WALK_H

#include "check.h"

#include "lacuna/catalogue.h"

static lac_catalogue *catalogue;

static inline int set_up(void **state) {
  (void)state;
  char error[200];
  if (lac_catalogue_new(&catalogue, error, sizeof error) == LAC_OK) return 0;
  print_error("# %s\n", error);
  return -1;
}

static inline int tear_down(void **state) {
  (void)state;
  lac_catalogue_free(catalogue);
  return 0;
}

static int defects;

/* Says what is wrong and with what; the walk goes on to the next. */
static inline void expect(bool holds, const char *where, const char *by, const char *what) {
  if (holds) return;
  defects++;
  print_error("# %s%s%s: %s\n", where, by ? "/" : "", by ? by : "", what);
}

static inline void expect_row(bool holds, int row, const char *what) {
  const lac_relation *relation = lac_catalogue_row(catalogue, row);
  expect(holds, relation->gives, relation->by, what);
}

static inline void end_walk(void) {
  const int found = defects;
  defects = 0;
  assert_int_equal(found, 0);
}

#define FRESH(test) cmocka_unit_test_setup_teardown(test, set_up, tear_down)

#endif
