/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Ranges: one end, two ends, or none; each end included unless < or > stands before it. */
#include "range.h"

#include <math.h>
#include <string.h>

lac_status lac_table_value(const char *text, size_t length, lac_dimension dimension, double *value) {
  while (length > 0 && *text == ' ') text++, length--;
  while (length > 0 && text[length - 1] == ' ') length--;
  lac_reading reading;
  size_t where;
  const lac_status status = lac_reading_read(text, length, &reading, &where);
  if (status != LAC_OK) return status == LAC_UNKNOWN_UNIT ? status : LAC_BAD_SYNTAX;
  if (reading.has_error) return LAC_BAD_SYNTAX;
  const bool has_unit = reading.unit_length > 0;
  if (has_unit && !lac_dimension_equal(reading.unit.dimension, dimension)) return LAC_WRONG_DIMENSION;
  *value = has_unit ? reading.value * reading.unit.factor : reading.value;
  return LAC_OK;
}

/* "> a", ">= a" or "a": an open end has the sign alone. */
static lac_status read_low(const char *text, size_t length, lac_dimension dimension, lac_range *range) {
  const bool sign = length > 0 && *text == '>';
  const bool equal = sign && length > 1 && text[1] == '=';
  const size_t skip = (size_t)sign + (size_t)equal;
  range->low_included = !sign || equal;
  return lac_table_value(text + skip, length - skip, dimension, &range->low);
}

static lac_status read_high(const char *text, size_t length, lac_dimension dimension, lac_range *range) {
  while (length > 0 && *text == ' ') text++, length--;
  const bool sign = length > 0 && *text == '<';
  range->high_included = !sign;
  return lac_table_value(text + sign, length - (size_t)sign, dimension, &range->high);
}

lac_status lac_range_read(const char *text, lac_dimension dimension, lac_range *range) {
  *range = (lac_range){-INFINITY, INFINITY, false, false};
  if (!text) return LAC_BAD_SYNTAX;
  if (strcmp(text, "any") == 0) return LAC_OK;
  const char *dots = strstr(text, " .. ");
  if (!dots && *text != '>') return LAC_BAD_SYNTAX;
  const size_t length = dots ? (size_t)(dots - text) : strlen(text);
  lac_status status = read_low(text, length, dimension, range);
  if (status == LAC_OK && dots) status = read_high(dots + 4, strlen(dots + 4), dimension, range);
  if (status != LAC_OK || !(range->low <= range->high)) return LAC_BAD_SYNTAX;
  return LAC_OK;
}

bool lac_range_holds(lac_range range, double value) {
  const bool above = range.low_included ? value >= range.low : value > range.low;
  const bool below = range.high_included ? value <= range.high : value < range.high;
  return above && below;
}
