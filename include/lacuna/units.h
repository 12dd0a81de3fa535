/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Dimensions with rational exponents, and unit strings in and out: the IVOA's VOUnits 1.1
   (Recommendation of 2023-12-15) and the trade's short forms besides. */
#ifndef LACUNA_UNITS_H
#define LACUNA_UNITS_H

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

#include "lacuna/status.h"

#ifdef __cplusplus
extern "C" {
#endif

/* The base dimensions. Angle is one of its own, so that a ratio of lengths is never mistaken for
   an angle; sr is rad**2. Things that are counted (photons, pixels, beams) have no dimension. */
enum { LAC_LENGTH, LAC_MASS, LAC_TIME, LAC_TEMPERATURE, LAC_ANGLE, LAC_MAGNITUDE, LAC_BASE_DIMENSIONS };

/* Exponents of the base dimensions over one common denominator (> 0), in lowest terms, so that
   equal dimensions are equal field by field. Dimensionless is all zero over 1. */
typedef struct {
  int16_t numerator[LAC_BASE_DIMENSIONS];
  int16_t denominator;
  int16_t unused;
} lac_dimension;

#define LAC_DIMENSIONLESS ((lac_dimension){{0, 0, 0, 0, 0, 0}, 1, 0})

/* A unit: how many SI units it is, and of what dimension. */
typedef struct {
  double factor;
  lac_dimension dimension;
} lac_unit;

/* What a unit string is in the words of VOUnits. */
typedef enum {
  LAC_UNIT_FINE,
  LAC_UNIT_DEPRECATED, /* known, but the standard advises against it */
  LAC_UNIT_SHORT_FORM, /* the trade's own short form (Msun, um/s ...), not VOUnits */
  LAC_UNIT_UNKNOWN,    /* well formed, with a unit nobody here knows */
  LAC_UNIT_FUNCTION,   /* well formed, but a logarithm, which no linear quantity has */
  LAC_UNIT_SYNTAX      /* not well formed */
} lac_unit_kind;

/* Product, quotient and power of dimensions.
   Given: normalised dimensions; for the power, the exponent numerator/denominator (denominator > 0).
   Returned: the normalised result; LAC_TOO_MANY where an exponent passes 16 bits, else LAC_OK. */
lac_status lac_dimension_product(lac_dimension a, lac_dimension b, lac_dimension *result);
lac_status lac_dimension_quotient(lac_dimension a, lac_dimension b, lac_dimension *result);
lac_status lac_dimension_power(lac_dimension a, int numerator, int denominator, lac_dimension *result);
bool lac_dimension_equal(lac_dimension a, lac_dimension b);

/* The words for a dimension as a person would say it: "length", "surface density", "length squared per mass and time",
   "a plain number"; usually under 64 bytes, never over 256. Written to buffer (at most size bytes with the final zero); returns buffer. */
const char *lac_dimension_words(lac_dimension dimension, char *buffer, size_t size);

/* The SI unit string of a dimension, in VOUnits: "kg.m**-2", "1". Returns buffer. */
const char *lac_dimension_unit(lac_dimension dimension, char *buffer, size_t size);

/* Reads a unit string.
   Given: text (need not end in zero) and its length; strict: VOUnits 1.1 alone, else the trade's short forms too.
   Returned: the kind. *unit is filled for FINE, DEPRECATED and SHORT_FORM, else its factor is NaN.
   *where (if not NULL) is the offset of what could not be read or is not known. A factor that a double can't hold is
   LAC_UNIT_SYNTAX at 0, an exponent that a dimension can't hold LAC_UNIT_SYNTAX where it stands.
   Accuracy: powers of ten are exact up to 22, so that g.cm**-2 is exactly 10; else some units of 2^-53 a factor.
   Not strict: also products by spaces, * and ·, powers by ^, bare digits or superscripts, a leading slash, µ ° ′ ″ Å ☉ ⊕.
   More than one slash at a level is refused in either mode. Inverse, for the dimension: lac_dimension_unit. */
lac_unit_kind lac_unit_read(const char *text, size_t length, bool strict, lac_unit *unit, size_t *where);

/* The unit in TeX (math mode, upright): "\mathrm{g\,cm^{-2}}"; and as a person reads it: "g cm⁻²", "M☉" stays "Msun".
   Given: a string that lac_unit_read accepts. Returns buffer; the string itself where it can't be read. */
const char *lac_unit_tex(const char *text, char *buffer, size_t size);
const char *lac_unit_plain(const char *text, char *buffer, size_t size);

/* Unit symbols of letters alone, for completion and for a language's globals: first the table's, then everyday ones with a
   prefix (um, km, mJy ...). Given: an index from 0. Returned: the symbol, NULL past the last. Each is known and no two are equal. */
const char *lac_unit_symbol(size_t index);

/* A number with an error bar and a unit, as people write it: "156 pc", "156 ± 3 pc", "156 +- 3 pc",
   "156 +4 -2 pc", "2.4e-11 W.m**-2", "1e-3". The unit's string starts at text + unit_at. */
typedef struct {
  double value, upper, lower; /* in the string's own unit; upper and lower are 0 where no error stands */
  bool has_error;
  lac_unit unit;
  lac_unit_kind kind;
  size_t unit_at, unit_length;
} lac_reading;

/* Reads such a string (UTF-8 or ASCII); units as lac_unit_read does where not strict,
   also "(2.4 ± 0.2)e-11 W.m**-2" and the minus sign −.
   Returned: LAC_OK; LAC_BAD_SYNTAX with *where at the first byte that can't be read; LAC_UNKNOWN_UNIT with *where at
   the unit (kind tells a logarithm from an unknown one). Infinite and NaN values and negative errors are LAC_OUT_OF_RANGE,
   with *where at the number. On refusal the numbers are NaN. Refused as ambiguous: a unit that starts with a digit ("156 3 pc"),
   a percent sign right behind an error ("1.5 ± 10%"). Numbers have at most 127 characters. */
lac_status lac_reading_read(const char *text, size_t length, lac_reading *reading, size_t *where);

#ifdef __cplusplus
}
#endif

#endif
