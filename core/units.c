/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Unit strings: one recursive-descent reader of the grammar of VOUnits 1.1 (IVOA Recommendation of 2023-12-15), which also
   prints what it reads. Where not strict it accepts besides what FITS 4.0 (sect. 4.3) writes (products by spaces or *, powers
   by ^ or nothing, a leading slash), superscripts, and the short forms of the table. One slash at a level, in either mode:
   W/m2/um means different things to different people. */
#include "lacuna/units.h"

#include <math.h>

#include "text.h"
#include "unit_table.h"

/* Deep enough for any unit; bounds the recursion whatever the text. */
enum { DEEPEST = 32, LONGEST_INTEGER = 9 };

typedef struct {
  double size, decades; /* size times ten to the decades */
  lac_dimension dimension;
} measure;

typedef struct {
  lac_scan scan;
  bool strict;
  int depth;
  bool failed, deprecated, short_form, unknown, function;
  bool scaled; /* a scale factor stands just before */
  size_t failed_at, unknown_at;
  lac_text *out; /* the printed form, NULL where none is wanted */
  bool tex;
} reader;

static const measure one = {1, 0, {{0, 0, 0, 0, 0, 0}, 1, 0}};

static measure read_expression(reader *r);

static measure fail(reader *r, size_t at) {
  if (!r->failed) {
    r->failed = true;
    r->failed_at = at;
  }
  return one;
}

static void mark_unknown(reader *r, size_t at) {
  if (!r->unknown) {
    r->unknown = true;
    r->unknown_at = at;
  }
}

static void print(reader *r, const char *tex, const char *plain) {
  if (r->out) lac_text_add(r->out, r->tex ? tex : plain);
}

/* A token of the wider grammar. */
static bool take_short_form(reader *r, const char *token) {
  if (r->strict || !lac_scan_take(&r->scan, token)) return false;
  r->short_form = true;
  return true;
}

static bool take_spaces(reader *r) {
  if (r->strict || !lac_scan_spaces(&r->scan)) return false;
  r->short_form = true;
  return true;
}

/* Powers. */

static const char *const superscripts[] = {"⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"};

static void print_power(reader *r, int numerator, int denominator) {
  if (!r->out) return;
  if (denominator != 1) {
    lac_text_format(r->out, r->tex ? "^{%d/%d}" : "^(%d/%d)", numerator, denominator);
  } else if (r->tex) {
    lac_text_format(r->out, "^{%d}", numerator);
  } else {
    char digits[16];
    snprintf(digits, sizeof digits, "%d", numerator);
    for (const char *c = digits; *c; c++) lac_text_add(r->out, *c == '-' ? "⁻" : superscripts[*c - '0']);
  }
}

/* Digits onto value; how many there were. Too many in all fail. */
static int read_digits(reader *r, int *value, int already) {
  int count = 0;
  for (; lac_scan_digit(&r->scan, 0); r->scan.at++, count++) {
    if (already + count >= LONGEST_INTEGER) {
      fail(r, r->scan.at);
      return count;
    }
    *value = 10 * *value + (lac_scan_peek(&r->scan, 0) - '0');
  }
  if (count == 0) fail(r, r->scan.at);
  return count;
}

static int read_sign(reader *r) {
  if (lac_scan_take(&r->scan, "-") || take_short_form(r, "−")) return -1;
  lac_scan_take(&r->scan, "+");
  return 1;
}

static int read_integer(reader *r) {
  int sign = read_sign(r), value = 0;
  read_digits(r, &value, 0);
  return sign * value;
}

/* (3), (1.5), (1/2), after the opening bracket. */
static void read_bracketed_power(reader *r, int *numerator, int *denominator) {
  size_t start = r->scan.at;
  int sign = read_sign(r), value = 0, below = 1;
  int digits = read_digits(r, &value, 0);
  if (lac_scan_take(&r->scan, ".")) {
    for (int i = read_digits(r, &value, digits); i > 0; i--) below *= 10;
  } else if (lac_scan_take(&r->scan, "/")) {
    below = 0;
    read_digits(r, &below, 0);
    if (below == 0) fail(r, start);
  }
  if (!lac_scan_take(&r->scan, ")")) fail(r, r->scan.at);
  *numerator = sign * value;
  *denominator = below;
}

static void read_power(reader *r, int *numerator, int *denominator) {
  *denominator = 1;
  if (lac_scan_take(&r->scan, "(")) read_bracketed_power(r, numerator, denominator);
  else *numerator = read_integer(r);
}

static bool take_superscript(reader *r, int *digit) {
  for (int i = 0; i < 10; i++)
    if (take_short_form(r, superscripts[i])) {
      *digit = i;
      return true;
    }
  return false;
}

static bool read_superscripts(reader *r, int *numerator) {
  size_t start = r->scan.at;
  int sign = take_short_form(r, "⁻") ? -1 : 1, value = 0, digit, count = 0;
  for (; take_superscript(r, &digit); count++) {
    if (count >= LONGEST_INTEGER) {
      fail(r, start);
      break;
    }
    value = 10 * value + digit;
  }
  if (count == 0 && r->scan.at > start) fail(r, r->scan.at);
  *numerator = sign * value;
  return r->scan.at > start;
}

/* FITS also writes m2 and s-1. */
static bool at_bare_power(const reader *r) {
  char c = lac_scan_peek(&r->scan, 0);
  return !r->strict && (lac_scan_digit(&r->scan, 0) || ((c == '-' || c == '+') && lac_scan_digit(&r->scan, 1)));
}

static measure raised(reader *r, measure base, int numerator, int denominator, size_t at) {
  measure result = {pow(base.size, (double)numerator / denominator), base.decades * numerator / denominator, base.dimension};
  if (lac_dimension_power(base.dimension, numerator, denominator, &result.dimension) != LAC_OK) return fail(r, at);
  return result;
}

/* The power that may follow, applied and printed. */
static measure read_raised(reader *r, measure base) {
  size_t start = r->scan.at;
  int numerator = 1, denominator = 1;
  if (lac_scan_take(&r->scan, "**") || take_short_form(r, "^")) {
    read_power(r, &numerator, &denominator);
  } else if (at_bare_power(r)) {
    r->short_form = true;
    numerator = read_integer(r);
  } else if (r->strict || !read_superscripts(r, &numerator)) {
    return base;
  }
  if (r->failed) return one;
  print_power(r, numerator, denominator);
  return raised(r, base, numerator, denominator, start);
}

/* Units. */

static bool spelled(const char *symbol, const char *name, size_t length) {
  return strlen(symbol) == length && memcmp(symbol, name, length) == 0;
}

static const lac_unit_row *find_unit(const char *name, size_t length, bool strict) {
  for (const lac_unit_row *row = lac_unit_table; row->symbol; row++)
    if (spelled(row->symbol, name, length)) return strict && (row->flags & LAC_NOT_STANDARD) ? NULL : row;
  return NULL;
}

/* A prefix and a unit that takes one, after the rule that a whole known symbol goes first. */
static const lac_unit_row *resolve(const char *name, size_t length, bool strict, const lac_prefix_row **prefix) {
  *prefix = NULL;
  const lac_unit_row *whole = find_unit(name, length, strict);
  if (whole) return whole;
  for (const lac_prefix_row *row = lac_prefix_table; row->symbol; row++) {
    size_t n = strlen(row->symbol);
    if (n >= length || memcmp(row->symbol, name, n) != 0 || (strict && (row->flags & LAC_NOT_STANDARD))) continue;
    const lac_unit_row *unit = find_unit(name + n, length - n, strict);
    if (!unit || !(unit->flags & LAC_TAKES_PREFIX)) continue;
    *prefix = row;
    return unit;
  }
  return NULL;
}

static measure measure_of(reader *r, size_t start) {
  const lac_prefix_row *prefix;
  const lac_unit_row *unit = resolve(r->scan.text + start, r->scan.at - start, r->strict, &prefix);
  if (!unit || (unit->flags & LAC_NOT_MEASURED)) {
    mark_unknown(r, start);
    return one;
  }
  unsigned flags = unit->flags | (prefix ? prefix->flags : 0);
  r->deprecated |= (flags & LAC_ADVISED_AGAINST) != 0;
  r->short_form |= (flags & LAC_NOT_STANDARD) != 0;
  if (prefix) print(r, prefix->tex ? prefix->tex : prefix->symbol, prefix->plain ? prefix->plain : prefix->symbol);
  print(r, unit->tex ? unit->tex : unit->symbol, unit->plain ? unit->plain : unit->symbol);
  return (measure){unit->size, unit->decades + (prefix ? prefix->decades : 0), unit->dimension};
}

/* Letters; where not strict also the signs that stand in the table. */
static bool take_letter(reader *r) {
  static const char *const signs[] = {"°", "′", "″", "µ", "μ", "Å", "☉", "⊕"};
  char c = lac_scan_peek(&r->scan, 0);
  if ((c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z')) {
    r->scan.at++;
    return true;
  }
  for (size_t i = 0; i < sizeof signs / sizeof signs[0]; i++)
    if (!r->strict && lac_scan_take(&r->scan, signs[i])) return true;
  return false;
}

static bool read_name(reader *r) {
  size_t start = r->scan.at;
  while (take_letter(r)) continue;
  return r->scan.at > start;
}

static measure read_group(reader *r) {
  measure inside = one;
  if (++r->depth > DEEPEST) return fail(r, r->scan.at);
  inside = read_expression(r);
  r->depth--;
  if (!r->failed && !lac_scan_take(&r->scan, ")")) return fail(r, r->scan.at);
  return inside;
}

/* A quoted unit is unknown by definition, and may follow a prefix. */
static measure read_quoted(reader *r, size_t start) {
  size_t quote = r->scan.at, prefix = quote - start;
  const lac_prefix_row *row = lac_prefix_table;
  while (row->symbol && !spelled(row->symbol, r->scan.text + start, prefix)) row++;
  if (prefix > 0 && !row->symbol) return fail(r, quote);
  r->scan.at++;
  if (!read_name(r) || !lac_scan_take(&r->scan, "'")) return fail(r, r->scan.at);
  mark_unknown(r, start);
  return one;
}

static void read_scale(reader *r, measure *scale);

static measure read_function(reader *r, size_t start) {
  const char *name = r->scan.text + start;
  size_t length = r->scan.at - start;
  bool root = spelled("sqrt", name, length);
  if (root) print(r, "\\sqrt{", "sqrt(");
  else if (spelled("log", name, length) || spelled("ln", name, length) || spelled("exp", name, length)) r->function = true;
  else mark_unknown(r, start);
  r->scan.at++;
  measure scale = one;
  read_scale(r, &scale);
  measure inside = read_group(r);
  if (r->failed || !root) return one;
  print(r, "}", ")");
  inside.size *= scale.size;
  inside.decades += scale.decades;
  return raised(r, inside, 1, 2, start);
}

static measure read_factor(reader *r) {
  size_t start = r->scan.at;
  r->scaled = false;
  if (lac_scan_take(&r->scan, "(")) {
    print(r, "(", "(");
    measure inside = read_group(r);
    if (r->failed) return one;
    print(r, ")", ")");
    return r->strict ? inside : read_raised(r, inside);
  }
  if (!lac_scan_take(&r->scan, "%") && !read_name(r) && lac_scan_peek(&r->scan, 0) != '\'') return fail(r, start);
  measure unit = one;
  char next = lac_scan_peek(&r->scan, 0);
  if (next == '(') return read_function(r, start);
  if (next == '\'') unit = read_quoted(r, start);
  else unit = measure_of(r, start);
  return r->failed ? one : read_raised(r, unit);
}

/* Products and the quotient. */

/* Whether another factor is joined on. A space joins unless a slash, a closing bracket or the end follows. */
static bool take_product(reader *r) {
  bool spaces = take_spaces(r);
  if (lac_scan_take(&r->scan, ".")) {
    take_spaces(r);
    return true;
  }
  if (!lac_scan_starts(&r->scan, "**") && (take_short_form(r, "*") || take_short_form(r, "·") || take_short_form(r, "⋅"))) {
    take_spaces(r);
    return true;
  }
  char next = lac_scan_peek(&r->scan, 0);
  return spaces && r->scan.at < r->scan.length && next != '/' && next != ')';
}

static measure joined(reader *r, measure a, measure b, bool over, size_t at) {
  measure result = {over ? a.size / b.size : a.size * b.size, over ? a.decades - b.decades : a.decades + b.decades, a.dimension};
  lac_status status = over ? lac_dimension_quotient(a.dimension, b.dimension, &result.dimension)
                           : lac_dimension_product(a.dimension, b.dimension, &result.dimension);
  return status == LAC_OK ? result : fail(r, at);
}

static measure read_expression(reader *r) {
  measure result = one;
  take_spaces(r);
  bool leading_slash = !r->strict && lac_scan_peek(&r->scan, 0) == '/';
  if (leading_slash) {
    r->short_form = true;
    if (!r->scaled) print(r, "1", "1");
  } else {
    result = read_factor(r);
  }
  while (!r->failed && !leading_slash && take_product(r)) {
    size_t at = r->scan.at;
    print(r, "\\,", " ");
    result = joined(r, result, read_factor(r), false, at);
  }
  if (!r->failed && lac_scan_take(&r->scan, "/")) {
    take_spaces(r);
    size_t at = r->scan.at;
    print(r, "/", "/");
    result = joined(r, result, read_factor(r), true, at);
    take_spaces(r);
  }
  return r->failed ? one : result;
}

/* 10**-26 and, where not strict, 10^-26, 10-26 and 10⁻²⁶: whether it stands here. */
static bool read_power_of_ten(reader *r, measure *scale) {
  lac_scan back = r->scan;
  int numerator = 0, denominator = 1;
  if (!lac_scan_take(&r->scan, "10")) return false;
  if (lac_scan_take(&r->scan, "**") || take_short_form(r, "^")) {
    read_power(r, &numerator, &denominator);
  } else if (at_bare_power(r) && !lac_scan_digit(&r->scan, 0)) {
    r->short_form = true;
    numerator = read_integer(r);
  } else if (r->strict || !read_superscripts(r, &numerator)) {
    r->scan = back;
    return false;
  }
  scale->decades = (double)numerator / denominator;
  print(r, "10", "10");
  print_power(r, numerator, denominator);
  return true;
}

/* The standard's numbers have digits on both sides of the point, start with 1 to 9 or with 0. and are not zero. */
static void read_plain_scale(reader *r, measure *scale) {
  size_t start = r->scan.at, length = lac_scan_number(&r->scan);
  const char *text = r->scan.text + start, *point = memchr(text, '.', length);
  bool zero_first = text[0] == '0' && !(length > 1 && text[1] == '.');
  bool open_point = point && (point == text + length - 1 || point[1] < '0' || point[1] > '9');
  if (zero_first || open_point || !lac_number_value(text, length, "", 0, &scale->size) || !(scale->size > 0)) {
    fail(r, open_point ? (size_t)(point - r->scan.text) : start);
    return;
  }
  r->scan.at += length;
  if (r->out) lac_text_add_bytes(r->out, text, length);
}

static void read_scale(reader *r, measure *scale) {
  if (!lac_scan_digit(&r->scan, 0)) return;
  if (!read_power_of_ten(r, scale)) read_plain_scale(r, scale);
  r->scaled = true;
  take_spaces(r);
  if (lac_scan_peek(&r->scan, 0) != '/') print(r, "\\,", " ");
}

static double factor_of(measure m) {
  if (m.decades == floor(m.decades) && fabs(m.decades) <= 22)
    return m.decades >= 0 ? m.size * pow(10, m.decades) : m.size / pow(10, -m.decades); /* powers exact: one rounding */
  return m.size * pow(10, m.decades);
}

static lac_unit read_whole(reader *r) {
  lac_unit none = {(double)NAN, LAC_DIMENSIONLESS}, dimensionless = {1, LAC_DIMENSIONLESS};
  if (r->scan.length == 1 && r->scan.text[0] == '1') {
    print(r, "1", "1");
    return dimensionless;
  }
  measure scale = one;
  if (!r->strict) lac_scan_spaces(&r->scan);
  read_scale(r, &scale);
  if (r->failed) return none;
  measure unit = read_expression(r);
  if (!r->failed && r->scan.at < r->scan.length) fail(r, r->scan.at);
  if (r->failed || r->unknown || r->function) return none;
  unit.size *= scale.size;
  unit.decades += scale.decades;
  lac_unit result = {factor_of(unit), unit.dimension};
  if (!isfinite(result.factor) || !(result.factor > 0)) {
    fail(r, 0);
    return none;
  }
  return result;
}

static lac_unit_kind kind_of(const reader *r) {
  if (r->failed) return LAC_UNIT_SYNTAX;
  if (r->unknown) return LAC_UNIT_UNKNOWN;
  if (r->function) return LAC_UNIT_FUNCTION;
  if (r->short_form) return LAC_UNIT_SHORT_FORM;
  return r->deprecated ? LAC_UNIT_DEPRECATED : LAC_UNIT_FINE;
}

lac_unit_kind lac_unit_read(const char *text, size_t length, bool strict, lac_unit *unit, size_t *where) {
  reader r = {.scan = {text, length, 0}, .strict = strict};
  *unit = read_whole(&r);
  if (where) *where = r.failed ? r.failed_at : r.unknown ? r.unknown_at : 0;
  return kind_of(&r);
}

static const char *printed(const char *text, char *buffer, size_t size, bool tex) {
  lac_text out = lac_text_in(buffer, size);
  reader r = {.scan = {text, strlen(text), 0}, .out = &out, .tex = tex};
  if (tex) lac_text_add(&out, "\\mathrm{");
  read_whole(&r);
  if (r.failed || r.unknown || r.function) {
    out = lac_text_in(buffer, size);
    lac_text_add(&out, text);
  } else if (tex) {
    lac_text_add(&out, "}");
  }
  return buffer;
}

const char *lac_unit_tex(const char *text, char *buffer, size_t size) { return printed(text, buffer, size, true); }

const char *lac_unit_plain(const char *text, char *buffer, size_t size) { return printed(text, buffer, size, false); }

static bool typed_by_name(const lac_unit_row *row) {
  if (row->flags & LAC_NOT_MEASURED) return false;
  for (const char *c = row->symbol; *c; c++)
    if (!((*c >= 'a' && *c <= 'z') || (*c >= 'A' && *c <= 'Z'))) return false;
  return true;
}

const char *lac_unit_symbol(size_t index) {
  for (const lac_unit_row *row = lac_unit_table; row->symbol; row++)
    if (typed_by_name(row) && index-- == 0) return row->symbol;
  for (const char *const *symbol = lac_everyday_symbols; *symbol; symbol++)
    if (index-- == 0) return *symbol;
  return NULL;
}
