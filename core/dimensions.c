/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Dimensions: six exponents over one denominator. Sums are formed in 64 bits and brought to lowest terms before they are
   checked against 16, so that nothing overflows on the way to a result that fits. */
#include "lacuna/units.h"

#include <stdlib.h>
#include <string.h>

#include "text.h"
#include "unit_table.h"

static int64_t greatest_common_divisor(int64_t a, int64_t b) {
  while (b != 0) {
    int64_t rest = a % b;
    a = b;
    b = rest;
  }
  return a < 0 ? -a : a;
}

/* Lowest terms, then 16 bits. */
static lac_status normalise(const int64_t numerator[LAC_BASE_DIMENSIONS], int64_t denominator, lac_dimension *result) {
  int64_t divisor = denominator;
  for (int i = 0; i < LAC_BASE_DIMENSIONS; i++) divisor = greatest_common_divisor(divisor, numerator[i]);
  if (denominator / divisor > INT16_MAX) return LAC_TOO_MANY;
  lac_dimension reduced = {{0}, (int16_t)(denominator / divisor), 0};
  for (int i = 0; i < LAC_BASE_DIMENSIONS; i++) {
    int64_t exponent = numerator[i] / divisor;
    if (exponent > INT16_MAX || exponent < -INT16_MAX) return LAC_TOO_MANY;
    reduced.numerator[i] = (int16_t)exponent;
  }
  *result = reduced;
  return LAC_OK;
}

static lac_status sum(lac_dimension a, lac_dimension b, int sign, lac_dimension *result) {
  int64_t numerator[LAC_BASE_DIMENSIONS];
  for (int i = 0; i < LAC_BASE_DIMENSIONS; i++)
    numerator[i] = (int64_t)a.numerator[i] * b.denominator + sign * (int64_t)b.numerator[i] * a.denominator;
  return normalise(numerator, (int64_t)a.denominator * b.denominator, result);
}

lac_status lac_dimension_product(lac_dimension a, lac_dimension b, lac_dimension *result) { return sum(a, b, 1, result); }

lac_status lac_dimension_quotient(lac_dimension a, lac_dimension b, lac_dimension *result) { return sum(a, b, -1, result); }

lac_status lac_dimension_power(lac_dimension a, int numerator, int denominator, lac_dimension *result) {
  if (denominator <= 0) return LAC_OUT_OF_RANGE;
  int64_t raised[LAC_BASE_DIMENSIONS];
  for (int i = 0; i < LAC_BASE_DIMENSIONS; i++) raised[i] = (int64_t)a.numerator[i] * numerator;
  return normalise(raised, (int64_t)a.denominator * denominator, result);
}

bool lac_dimension_equal(lac_dimension a, lac_dimension b) {
  return a.denominator == b.denominator && memcmp(a.numerator, b.numerator, sizeof a.numerator) == 0;
}

static const struct {
  lac_dimension dimension;
  const char *words;
} common[] = {
    {LAC_OF(0, 0, 0, 0, 0, 0), "a plain number"},
    {LAC_OF(0, 0, 0, 0, 0, 1), "magnitude"},
    {LAC_OF(0, 0, 0, 0, 1, 0), "angle"},
    {LAC_OF(0, 0, 0, 0, 2, 0), "solid angle"},
    {LAC_OF(0, 0, 0, 0, -2, 1), "magnitude per solid angle"},
    {LAC_OF(0, 0, -1, 0, 0, 0), "frequency"},
    {LAC_OF(0, 0, -1, 0, 1, 0), "angular speed"},
    {LAC_OF(2, 0, 0, 0, 0, 0), "area"},
    {LAC_OF(3, 0, 0, 0, 0, 0), "volume"},
    {LAC_OF(1, 0, -1, 0, 0, 0), "speed"},
    {LAC_OF(1, 0, -2, 0, 0, 0), "acceleration"},
    {LAC_OF(-2, 1, 0, 0, 0, 0), "surface density"},
    {LAC_OF(-3, 1, 0, 0, 0, 0), "density"},
    {LAC_OF(2, -1, 0, 0, 0, 0), "opacity"},
    {LAC_OF(1, 1, -2, 0, 0, 0), "force"},
    {LAC_OF(-1, 1, -2, 0, 0, 0), "pressure"},
    {LAC_OF(2, 1, -2, 0, 0, 0), "energy"},
    {LAC_OF(2, 1, -3, 0, 0, 0), "luminosity"},
    {LAC_OF(0, 1, -3, 0, 0, 0), "flux"},
    {LAC_OF(0, 1, -2, 0, 0, 0), "flux density"},
    {LAC_OF(-1, 1, -3, 0, 0, 0), "flux density per wavelength"},
    {LAC_OF(0, 1, -3, 0, -2, 0), "intensity"},
    {LAC_OF(0, 1, -2, 0, -2, 0), "intensity per frequency"},
    {LAC_OF(-1, 1, -3, 0, -2, 0), "intensity per wavelength"},
};

/* Base dimensions in the order in which a unit string or a phrase names them. */
static const struct {
  int base;
  const char *word, *unit;
} spoken[] = {{LAC_MASS, "mass", "kg"},    {LAC_LENGTH, "length", "m"},
              {LAC_TIME, "time", "s"},     {LAC_TEMPERATURE, "temperature", "K"},
              {LAC_ANGLE, "angle", "rad"}, {LAC_MAGNITUDE, "magnitude", "mag"}};
enum { SPOKEN = sizeof spoken / sizeof spoken[0] };

static void say_power(lac_text *out, int numerator, int denominator) {
  if (denominator != 1) lac_text_format(out, " to the power %d/%d", numerator, denominator);
  else if (numerator == 2) lac_text_add(out, " squared");
  else if (numerator == 3) lac_text_add(out, " cubed");
  else if (numerator != 1) lac_text_format(out, " to the power %d", numerator);
}

/* The exponent of one base dimension in its own lowest terms. */
static void exponent_of(lac_dimension dimension, int base, int *numerator, int *denominator) {
  int divisor = (int)greatest_common_divisor(dimension.denominator, dimension.numerator[base]);
  *numerator = dimension.numerator[base] / divisor;
  *denominator = dimension.denominator / divisor;
}

/* The factors whose exponents have this sign, each led in by its word. */
static void say_factors(lac_text *out, lac_dimension dimension, int sign, const char *first, const char *next) {
  const char *lead = first;
  for (int i = 0; i < SPOKEN; i++) {
    int numerator, denominator;
    exponent_of(dimension, spoken[i].base, &numerator, &denominator);
    if (sign * numerator <= 0) continue;
    lac_text_add(out, out->used == 0 && sign < 0 ? lead + 1 : lead);
    lac_text_add(out, spoken[i].word);
    say_power(out, abs(numerator), denominator);
    lead = next;
  }
}

const char *lac_dimension_words(lac_dimension dimension, char *buffer, size_t size) {
  lac_text out = lac_text_in(buffer, size);
  for (size_t i = 0; i < sizeof common / sizeof common[0]; i++)
    if (lac_dimension_equal(dimension, common[i].dimension)) {
      lac_text_add(&out, common[i].words);
      return buffer;
    }
  say_factors(&out, dimension, 1, "", " times ");
  say_factors(&out, dimension, -1, " per ", " and ");
  return buffer;
}

const char *lac_dimension_unit(lac_dimension dimension, char *buffer, size_t size) {
  lac_text out = lac_text_in(buffer, size);
  for (int i = 0; i < SPOKEN; i++) {
    int numerator, denominator;
    exponent_of(dimension, spoken[i].base, &numerator, &denominator);
    if (numerator == 0) continue;
    if (out.used > 0) lac_text_add(&out, ".");
    lac_text_add(&out, spoken[i].unit);
    if (denominator != 1) lac_text_format(&out, "**(%d/%d)", numerator, denominator);
    else if (numerator != 1) lac_text_format(&out, "**%d", numerator);
  }
  if (out.used == 0) lac_text_add(&out, "1");
  return buffer;
}
