/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The table of units and prefixes: the one place where a unit's symbol, size, dimension and standing are written. */
#ifndef LACUNA_CORE_UNIT_TABLE_H
#define LACUNA_CORE_UNIT_TABLE_H

#include "lacuna/units.h"

/* A dimension by its whole exponents, in the order of the base dimensions. */
#define LAC_OF(length, mass, time, temperature, angle, magnitude)                                                                          \
  { {length, mass, time, temperature, angle, magnitude}, 1, 0 }

/* How a symbol stands to the standard; flags add up. */
enum {
  LAC_TAKES_PREFIX = 1,
  LAC_ADVISED_AGAINST = 2, /* VOUnits calls it deprecated */
  LAC_NOT_STANDARD = 4,    /* the trade's short form */
  LAC_NOT_MEASURED = 8     /* of VOUnits, but of a dimension that is not among ours: read as unknown, never as prefix and unit */
};

/* A unit is size times ten to the power decades in SI units. The decades are kept apart so that g.cm**-2 is exactly 10. */
typedef struct {
  const char *symbol;
  double size;
  int decades;
  lac_dimension dimension;
  unsigned flags;
  const char *tex, *plain; /* how it is printed, NULL: as its symbol */
} lac_unit_row;

typedef struct {
  const char *symbol;
  int decades;
  unsigned flags;
  const char *tex, *plain;
} lac_prefix_row;

extern const lac_unit_row lac_unit_table[];      /* ends with symbol NULL */
extern const lac_prefix_row lac_prefix_table[];  /* ends with symbol NULL */
extern const char *const lac_everyday_symbols[]; /* prefixed units in daily use, ends with NULL */

#endif
