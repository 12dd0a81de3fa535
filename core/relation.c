/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A row's function called with as many doubles as the row has inputs. */
#include "relation.h"

#include <string.h>

#include "range.h"

#define DOUBLE_(name, index) double
#define ARGUMENT_(name, index) x[index]
/* Calls f, a function of as many doubles as letters are given, with the elements of x. */
#define CALL(...) ((double (*)(LAC_EACH(DOUBLE_, __VA_ARGS__)))f)(LAC_EACH(ARGUMENT_, __VA_ARGS__))

/* A value that stands in the row in place of a function; its unit is taken as it comes. */
static double assumed_value(const char *text) {
  lac_reading reading;
  size_t where;
  if (lac_reading_read(text, strlen(text), &reading, &where) != LAC_OK) return (double)NAN;
  return reading.unit_length > 0 ? reading.value * reading.unit.factor : reading.value;
}

double lac_relation_value(const lac_relation *relation, const double *x) {
  void (*const f)(void) = relation->function;
  if (!f) return relation->assumes ? assumed_value(relation->assumes) : (double)NAN;
  int count = 0;
  while (count < LAC_MAX_ARGUMENTS && relation->from[count]) count++;
  switch (count) {
  case 1: return CALL(a);
  case 2: return CALL(a, b);
  case 3: return CALL(a, b, c);
  case 4: return CALL(a, b, c, d);
  case 5: return CALL(a, b, c, d, e);
  case 6: return CALL(a, b, c, d, e, f);
  case 7: return CALL(a, b, c, d, e, f, g);
  case 8: return CALL(a, b, c, d, e, f, g, h);
  case 9: return CALL(a, b, c, d, e, f, g, h, i);
  case 10: return CALL(a, b, c, d, e, f, g, h, i, j);
  case 11: return CALL(a, b, c, d, e, f, g, h, i, j, k);
  case 12: return CALL(a, b, c, d, e, f, g, h, i, j, k, l);
  }
  return (double)NAN;
}
