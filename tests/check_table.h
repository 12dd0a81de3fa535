/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Tables of numbers in tests/reference/: comments start with #, then comes one line of headings, fields are split by commas. */
#ifndef LACUNA_TESTS_CHECK_TABLE_H
#define LACUNA_TESTS_CHECK_TABLE_H

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "check.h"

enum { TABLE_ROWS = 600, TABLE_COLUMNS = 18 };

/* Long doubles, so that errors of a fraction of a double's last digit can be seen. A text field is NaN. */
typedef struct {
  size_t rows;
  long double cell[TABLE_ROWS][TABLE_COLUMNS];
} check_table;

static inline void check_table_line(check_table *table, char *line) {
  assert_true(table->rows < TABLE_ROWS);
  long double *cell = table->cell[table->rows++];
  char *field = line;
  for (size_t column = 0; field && column < TABLE_COLUMNS; column++) {
    char *next = strchr(field, ','), *end;
    cell[column] = strtold(field, &end);
    if (end == field) cell[column] = (long double)NAN;
    field = next ? next + 1 : NULL;
  }
}

/* The table of a file; freed by the caller. Fails the test if there is none, or no row in it. */
static inline check_table *check_read_table(const char *path) {
  FILE *file = fopen(path, "r");
  check_table *table = calloc(1, sizeof *table);
  char line[1024];
  int headings = 1;
  assert_non_null(file);
  assert_non_null(table);
  while (fgets(line, sizeof line, file)) {
    if (line[0] == '#') continue;
    if (!headings) check_table_line(table, line);
    headings = 0;
  }
  fclose(file);
  assert_true(table->rows > 0);
  return table;
}

/* Within so many units of 2^-53 of what is wanted, or of the given size where that is greater than 0. */
static inline void check_units(long double want, double got, double units, double size, const char *label) {
  long double unit = (size > 0 ? (long double)size : fabsl(want)) * 0x1p-53L, error = fabsl((long double)got - want);
  check_fail_unless(error <= (long double)units * unit, (double)want, got, units * 0x1p-53, label);
}

#endif
