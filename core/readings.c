/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Numbers with an error bar and a unit, as they are written in papers and tables. Whatever could be meant in two ways is
   refused: "156 3 pc" (a lost sign), "1.5 ± 10%" (of the value, or points of a percentage). */
#include "lacuna/units.h"

#include <math.h>

#include "text.h"

/* A signed number's place in the text: its value is read once the exponent behind a bracket is known. */
typedef struct {
  size_t start, digits, length; /* of the sign, of the digits behind it, and their number */
  bool negative;
} span;

typedef struct {
  lac_scan scan;
  lac_status status;
  size_t where;
} parse;

static bool refuse(parse *p, lac_status status, size_t where) {
  if (p->status == LAC_OK) {
    p->status = status;
    p->where = where;
  }
  return false;
}

static char lower_case(char c) { return c >= 'A' && c <= 'Z' ? (char)(c - 'A' + 'a') : c; }

/* nan, inf and infinity in any case, not as the start of a longer word: numbers that are out of any range. */
static bool at_non_number(const lac_scan *scan) {
  static const char *const words[] = {"nan", "infinity", "inf"};
  for (size_t i = 0; i < sizeof words / sizeof words[0]; i++) {
    size_t n = 0;
    while (words[i][n] && lower_case(lac_scan_peek(scan, n)) == words[i][n]) n++;
    char next = lower_case(lac_scan_peek(scan, n));
    if (!words[i][n] && !(next >= 'a' && next <= 'z')) return true;
  }
  return false;
}

static bool take_minus(parse *p) { return lac_scan_take(&p->scan, "-") || lac_scan_take(&p->scan, "−"); }

/* A number without its sign. */
static bool read_digits(parse *p, span *number) {
  lac_scan_spaces(&p->scan);
  if (at_non_number(&p->scan)) return refuse(p, LAC_OUT_OF_RANGE, number->start);
  number->digits = p->scan.at;
  number->length = lac_scan_number(&p->scan);
  if (number->length == 0) return refuse(p, LAC_BAD_SYNTAX, p->scan.at);
  p->scan.at += number->length;
  return true;
}

static bool read_number(parse *p, span *number) {
  *number = (span){.start = p->scan.at};
  number->negative = take_minus(p);
  if (!number->negative) lac_scan_take(&p->scan, "+");
  return read_digits(p, number);
}

/* "± 3", "+- 3", "+/- 3"; "+4 -2" or "-2 +4". False where it can't be read; *has_error says whether one stands. */
static bool read_error(parse *p, span *upper, span *lower, bool *has_error) {
  lac_scan_spaces(&p->scan);
  *has_error = true;
  if (lac_scan_take(&p->scan, "±") || lac_scan_take(&p->scan, "+-") || lac_scan_take(&p->scan, "+/-")) {
    lac_scan_spaces(&p->scan);
    if (!read_number(p, upper)) return false;
    *lower = *upper;
    return !upper->negative || refuse(p, LAC_OUT_OF_RANGE, upper->start);
  }
  span first = {.start = p->scan.at}, second = {0};
  first.negative = take_minus(p);
  if (!first.negative && !lac_scan_take(&p->scan, "+")) {
    *has_error = false;
    return true;
  }
  if (!read_digits(p, &first)) return false;
  lac_scan_spaces(&p->scan);
  second.start = p->scan.at;
  second.negative = take_minus(p);
  if (second.negative == first.negative || (!second.negative && !lac_scan_take(&p->scan, "+")))
    return refuse(p, LAC_BAD_SYNTAX, second.start);
  if (!read_digits(p, &second)) return false;
  *upper = first.negative ? second : first;
  *lower = first.negative ? first : second;
  return true;
}

static bool has_exponent(const parse *p, const span *number) {
  for (size_t i = 0; i < number->length; i++)
    if (lower_case(p->scan.text[number->digits + i]) == 'e') return true;
  return false;
}

/* The e-11 of "(2.4 ± 0.2)e-11"; its length, 0 where none stands. */
static size_t exponent_length(const lac_scan *scan) {
  size_t sign = lac_scan_peek(scan, 1) == '-' || lac_scan_peek(scan, 1) == '+', n = 1 + sign;
  if (lower_case(lac_scan_peek(scan, 0)) != 'e' || !lac_scan_digit(scan, n)) return 0;
  while (lac_scan_digit(scan, n)) n++;
  return n;
}

static bool evaluate(parse *p, const span *number, size_t exponent_at, size_t exponent, double *value) {
  const char *text = p->scan.text;
  if (exponent > 0 && has_exponent(p, number)) return refuse(p, LAC_BAD_SYNTAX, exponent_at);
  if (!lac_number_value(text + number->digits, number->length, text + exponent_at, exponent, value))
    return refuse(p, LAC_BAD_SYNTAX, number->start);
  if (!isfinite(*value)) return refuse(p, LAC_OUT_OF_RANGE, number->start);
  return true;
}

/* The number and its error, in brackets or not. */
static bool read_values(parse *p, lac_reading *reading) {
  span value, upper = {0}, lower = {0};
  size_t exponent_at = 0, exponent = 0;
  lac_scan_spaces(&p->scan);
  bool bracket = lac_scan_take(&p->scan, "(");
  if (bracket) lac_scan_spaces(&p->scan);
  if (!read_number(p, &value)) return false;
  size_t after_value = p->scan.at;
  if (!read_error(p, &upper, &lower, &reading->has_error)) return false;
  if (!reading->has_error) p->scan.at = after_value;
  if (bracket) {
    lac_scan_spaces(&p->scan);
    if (!lac_scan_take(&p->scan, ")")) return refuse(p, LAC_BAD_SYNTAX, p->scan.at);
    exponent_at = p->scan.at;
    exponent = exponent_length(&p->scan);
    p->scan.at += exponent;
  } else if (reading->has_error && lac_scan_peek(&p->scan, 0) == '%') {
    return refuse(p, LAC_BAD_SYNTAX, p->scan.at);
  }
  if (!evaluate(p, &value, exponent_at, exponent, &reading->value)) return false;
  if (value.negative) reading->value = -reading->value;
  if (!reading->has_error) return true;
  return evaluate(p, &upper, exponent_at, exponent, &reading->upper) && evaluate(p, &lower, exponent_at, exponent, &reading->lower);
}

static bool read_unit(parse *p, lac_reading *reading) {
  lac_scan_spaces(&p->scan);
  size_t start = p->scan.at, end = p->scan.length, where = 0;
  lac_scan tail = p->scan;
  for (size_t at = start; at < p->scan.length; at++) { /* cut the spaces at the end */
    tail.at = at;
    if (lac_scan_spaces(&tail) && tail.at == p->scan.length) {
      end = at;
      break;
    }
  }
  reading->unit_at = start;
  reading->unit_length = end - start;
  if (end == start) return true;
  if (lac_scan_digit(&p->scan, 0)) return refuse(p, LAC_BAD_SYNTAX, start);
  reading->kind = lac_unit_read(p->scan.text + start, end - start, false, &reading->unit, &where);
  switch (reading->kind) {
  case LAC_UNIT_FINE:
  case LAC_UNIT_DEPRECATED:
  case LAC_UNIT_SHORT_FORM: return true;
  case LAC_UNIT_UNKNOWN:
  case LAC_UNIT_FUNCTION: return refuse(p, LAC_UNKNOWN_UNIT, start + where);
  case LAC_UNIT_SYNTAX: break;
  }
  return refuse(p, LAC_BAD_SYNTAX, start + where);
}

lac_status lac_reading_read(const char *text, size_t length, lac_reading *reading, size_t *where) {
  parse p = {.scan = {text, length, 0}, .status = LAC_OK};
  *reading = (lac_reading){.unit = {1, LAC_DIMENSIONLESS}, .kind = LAC_UNIT_FINE};
  if (!read_values(&p, reading) || !read_unit(&p, reading)) {
    reading->value = reading->upper = reading->lower = (double)NAN;
    reading->unit.factor = (double)NAN;
  }
  if (where) *where = p.where;
  return p.status;
}
