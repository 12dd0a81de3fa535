/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Unit strings against the standards' own examples and rules, readings, dimensions; and that no text whatever does harm. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "check.h"
#include "lacuna/constants.h"
#include "lacuna/units.h"

static lac_unit_kind read_strict(const char *text, lac_unit *unit) { return lac_unit_read(text, strlen(text), true, unit, NULL); }
static lac_unit_kind read_lenient(const char *text, lac_unit *unit) { return lac_unit_read(text, strlen(text), false, unit, NULL); }

static bool usable(lac_unit_kind kind) { return kind == LAC_UNIT_FINE || kind == LAC_UNIT_DEPRECATED || kind == LAC_UNIT_SHORT_FORM; }

static lac_dimension dimension(int length, int mass, int time, int temperature, int angle, int magnitude, int denominator) {
  return (lac_dimension){
      {(int16_t)length, (int16_t)mass, (int16_t)time, (int16_t)temperature, (int16_t)angle, (int16_t)magnitude}, (int16_t)denominator, 0};
}

/* The next field of a CSV line, quotes taken off; the line goes on at *at. */
static void next_field(const char **at, char *field, size_t size) {
  size_t n = 0;
  bool quoted = false;
  for (; **at && **at != '\n' && (quoted || **at != ','); (*at)++) {
    if (**at == '"') quoted = !quoted;
    else if (n + 1 < size) field[n++] = **at;
  }
  if (**at == ',') (*at)++;
  field[n] = 0;
}

/* "kg1/2 m-2" as a dimension; sr is rad2, what is counted (beam) has none. */
static lac_dimension dimension_in_words_of_table(char *text) {
  static const char *const bases[] = {"m", "kg", "s", "K", "rad", "mag"};
  lac_dimension result = LAC_DIMENSIONLESS;
  for (char *word = strtok(text, " "); word; word = strtok(NULL, " ")) {
    char name[16];
    int numerator = 1, denominator = 1;
    sscanf(word, "%15[a-zA-Z]%d/%d", name, &numerator, &denominator);
    if (strcmp(name, "beam") == 0) continue;
    bool solid = strcmp(name, "sr") == 0, found = false;
    for (int i = 0; i < LAC_BASE_DIMENSIONS; i++) {
      if (strcmp(bases[i], solid ? "rad" : name) != 0) continue;
      lac_dimension factor = LAC_DIMENSIONLESS;
      factor.numerator[i] = 1;
      assert_int_equal(lac_dimension_power(factor, solid ? 2 * numerator : numerator, denominator, &factor), LAC_OK);
      assert_int_equal(lac_dimension_product(result, factor, &result), LAC_OK);
      found = true;
    }
    assert_true(found);
  }
  return result;
}

typedef struct {
  char text[64], vounits[16], fits[16], factor[40], dims[40];
} table_row;

static lac_unit_kind kind_in_words_of_table(const table_row *row) {
  if (strcmp(row->vounits, "ok") == 0) return row->factor[0] ? LAC_UNIT_FINE : LAC_UNIT_FUNCTION;
  if (strcmp(row->vounits, "deprecated") == 0) return LAC_UNIT_DEPRECATED;
  if (strcmp(row->vounits, "unknown") == 0) return LAC_UNIT_UNKNOWN;
  assert_string_equal(row->vounits, "syntax");
  return LAC_UNIT_SYNTAX;
}

/* Within half a unit of the 16th printed digit, and three roundings. */
static void check_unit(const table_row *row, const lac_unit *unit) {
  char dims[40];
  snprintf(dims, sizeof dims, "%s", row->dims);
  check_within(strtod(row->factor, NULL), unit->factor, 5e-16 + 3 * DBL_EPSILON, row->text);
  if (!lac_dimension_equal(dimension_in_words_of_table(dims), unit->dimension)) fail_msg("dimension of %s", row->text);
}

/* Strict is VOUnits; what FITS takes, lenient takes; what neither takes, lenient refuses. */
static void check_row(const table_row *row) {
  lac_unit unit;
  lac_unit_kind kind = read_strict(row->text, &unit);
  if (kind != kind_in_words_of_table(row)) fail_msg("'%s' strict: want %s, got kind %d", row->text, row->vounits, (int)kind);
  if (usable(kind)) check_unit(row, &unit);
  else check_undefined(unit.factor, row->text);

  kind = read_lenient(row->text, &unit);
  bool function = strncmp(row->text, "log", 3) == 0;
  if (strcmp(row->fits, "ok") == 0 || strcmp(row->vounits, "ok") == 0) {
    if (function ? kind != LAC_UNIT_FUNCTION : !usable(kind)) fail_msg("'%s' lenient: got kind %d", row->text, (int)kind);
    if (usable(kind)) check_unit(row, &unit);
  } else if (strcmp(row->vounits, "syntax") == 0) {
    if (kind != LAC_UNIT_SYNTAX) fail_msg("'%s' lenient: want syntax, got kind %d", row->text, (int)kind);
  }
}

/* Source: tests/reference/unit_strings.csv, which names its own. */
static void the_table_of_unit_strings(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/unit_strings.csv", "r");
  assert_non_null(file);
  char line[512];
  int rows = 0;
  bool header = true;
  while (fgets(line, sizeof line, file)) {
    if (line[0] == '#') continue;
    if (header) {
      header = false;
      continue;
    }
    table_row row;
    const char *at = line;
    next_field(&at, row.text, sizeof row.text);
    next_field(&at, row.vounits, sizeof row.vounits);
    next_field(&at, row.fits, sizeof row.fits);
    next_field(&at, row.factor, sizeof row.factor);
    next_field(&at, row.dims, sizeof row.dims);
    check_row(&row);
    rows++;
  }
  fclose(file);
  assert_int_equal(rows, 69);
}

/* Forms people type. Source of the sizes: IAU 2015 Resolution B3 nominal GM over CODATA 2018 G, nominal radii; SI. */
static void short_forms(void **state) {
  (void)state;
  static const struct {
    const char *text;
    double factor;
  } rows[] = {
      {"Msun", 1.3271244e20 / 6.67430e-11},
      {"Mjup", 1.2668653e17 / 6.67430e-11},
      {"Mearth", 3.986004e14 / 6.67430e-11},
      {"Lsun", 3.828e26},
      {"Rsun", 6.957e8},
      {"Rjup", 7.1492e7},
      {"Rearth", 6.3781e6},
      {"M☉", 1.3271244e20 / 6.67430e-11},
      {"Msun/yr", 1.3271244e20 / 6.67430e-11 / 31557600},
      {"um s-1", 1e-6},
      {"m s-1", 1},
      {"cm^-2", 1e4},
      {"cm⁻²", 1e4},
      {"W m-2 um-1", 1e6},
      {"W m**-2", 1},
      {"W·m⁻²", 1},
      {"erg s^-1 cm^-2", 1e-3},
      {"arcsec^2", 2.3504430539097885e-11},
      {"5 pc", 5 * 3.0856775814913673e16},
      {"10^-26 W m-2 Hz-1", 1e-26},
      {"10-3 m", 1e-3},
      {"10⁻³ m", 1e-3},
      {"µm", 1e-6},
      {"μm", 1e-6},
      {"°", 1.7453292519943296e-2},
      {"″", 4.8481368110953599e-6},
      {"uas", 4.8481368110953599e-12},
      {"µas", 4.8481368110953599e-12},
      {"m^(1/2)", 1},
      {"(km/s)^2", 1e6},
      {"1/s", 1},
      {"10**3 /s", 1e3},
      {" km / s ", 1e3},
      {"ph s-1", 1},
      {"W/(m2 um)", 1e6},
      {"micron", 1e-6},
      {"Å", 1e-10},
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    lac_unit unit;
    if (!usable(read_lenient(rows[i].text, &unit))) fail_msg("'%s' was refused", rows[i].text);
    check_within(rows[i].factor, unit.factor, 4 * DBL_EPSILON, rows[i].text);
    lac_unit_kind strict = read_strict(rows[i].text, &unit);
    if (strict != LAC_UNIT_SYNTAX && strict != LAC_UNIT_UNKNOWN) fail_msg("'%s' is no VOUnits string", rows[i].text);
  }
}

/* Decimal steps are kept apart from sizes, so these come out exact. Source: the SI's definitions of its prefixes. */
static void decimal_units_are_exact(void **state) {
  (void)state;
  static const struct {
    const char *text;
    double factor;
  } rows[] = {{"g.cm**-2", 10},
              {"g.cm**-3", 1000},
              {"km/s", 1000},
              {"kg", 1},
              {"um", 1e-6},
              {"nm", 1e-9},
              {"mg", 1e-6},
              {"ug/um", 1e-3},
              {"cm**3", 1e-6},
              {"GHz", 1e9},
              {"mm**(3/2)", 3.1622776601683795e-5},
              {"%", 0.01},
              {"Ym.ym", 1},
              {"dm", 0.1},
              {"dam", 10},
              {"qm", 1e-30},
              {"Qm", 1e30},
              {"rm", 1e-27},
              {"Rm", 1e27},
              {"hPa", 100},
              {"Pg", 1e12}};
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    lac_unit unit;
    if (!usable(read_strict(rows[i].text, &unit))) fail_msg("'%s' was refused", rows[i].text);
    double tolerance = rows[i].factor < 1e-22 || rows[i].factor > 1e22 || strstr(rows[i].text, "(") ? 2 * DBL_EPSILON : 0;
    check_within(rows[i].factor, unit.factor, tolerance, rows[i].text);
  }
}

/* Symbols that could be read in two ways. Source: VOUnits 1.1, sect. 2.4 on clashes; deci and deca: its advice on prefixes. */
static void clashes(void **state) {
  (void)state;
  lac_unit unit;
  assert_int_equal(read_strict("cd", &unit), LAC_UNIT_UNKNOWN); /* candela, no hundredth of a day */
  assert_int_equal(read_strict("dB", &unit), LAC_UNIT_UNKNOWN);
  assert_int_equal(read_strict("dm", &unit), LAC_UNIT_DEPRECATED);
  assert_int_equal(read_strict("dam", &unit), LAC_UNIT_DEPRECATED);
  assert_int_equal(read_strict("umas", &unit), LAC_UNIT_UNKNOWN);
  assert_int_equal(read_strict("kau", &unit), LAC_UNIT_UNKNOWN);
  assert_int_equal(read_strict("Pyr", &unit), LAC_UNIT_FINE);
  check_within(1e15 * 31557600, unit.factor, 2 * DBL_EPSILON, "Pyr");
  assert_int_equal(read_strict("min", &unit), LAC_UNIT_FINE);
  check_within(60, unit.factor, 0, "min");
  assert_int_equal(read_strict("Msun", &unit), LAC_UNIT_UNKNOWN);
  assert_int_equal(read_lenient("kMsun", &unit), LAC_UNIT_UNKNOWN);
  assert_int_equal(read_lenient("erg", &unit), LAC_UNIT_DEPRECATED);
  assert_int_equal(read_lenient("log(Hz)", &unit), LAC_UNIT_FUNCTION);
  assert_int_equal(read_lenient("cosh(Hz)", &unit), LAC_UNIT_UNKNOWN);
}

static void where_it_cannot_be_read(void **state) {
  (void)state;
  static const struct {
    const char *text;
    size_t where;
    lac_unit_kind kind;
  } rows[] = {
      {"W/m2/um", 4, LAC_UNIT_SYNTAX},
      {"m//s", 2, LAC_UNIT_SYNTAX},
      {"(m", 2, LAC_UNIT_SYNTAX},
      {"m.", 2, LAC_UNIT_SYNTAX},
      {"W m-2 furlong", 6, LAC_UNIT_UNKNOWN},
      {"M_sun", 1, LAC_UNIT_SYNTAX},
      {"m**1.5", 5, LAC_UNIT_SYNTAX},
      {"", 0, LAC_UNIT_SYNTAX},
      {"0m", 0, LAC_UNIT_SYNTAX},
      {"m)", 1, LAC_UNIT_SYNTAX},
      {"W/m2 um", 5, LAC_UNIT_SYNTAX},
      {"m**", 3, LAC_UNIT_SYNTAX},
      {"m**(1/0)", 4, LAC_UNIT_SYNTAX},
      {"m**9999999999", 12, LAC_UNIT_SYNTAX},
      {"m**99999", 1, LAC_UNIT_SYNTAX},
      {"s.m**30000.m**30000", 11, LAC_UNIT_SYNTAX},
      {"km**1000", 0, LAC_UNIT_SYNTAX},
      {"10**400m", 0, LAC_UNIT_SYNTAX},
      {"1e999m", 0, LAC_UNIT_SYNTAX},
      {"x'm'", 1, LAC_UNIT_SYNTAX},
      {"'m", 2, LAC_UNIT_SYNTAX},
      {"5.m", 1, LAC_UNIT_SYNTAX},
      {"km/s/Mpc", 4, LAC_UNIT_SYNTAX},
      {"m⁻", 4, LAC_UNIT_SYNTAX},
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    lac_unit unit;
    size_t where = 999;
    lac_unit_kind kind = lac_unit_read(rows[i].text, strlen(rows[i].text), false, &unit, &where);
    if (kind != rows[i].kind || where != rows[i].where)
      fail_msg("'%s': want kind %d at %zu, got kind %d at %zu", rows[i].text, (int)rows[i].kind, rows[i].where, (int)kind, where);
    check_undefined(unit.factor, rows[i].text);
  }
  char deep[200];
  memset(deep, '(', sizeof deep);
  lac_unit unit;
  assert_int_equal(lac_unit_read(deep, sizeof deep, true, &unit, NULL), LAC_UNIT_SYNTAX);
}

static int random_whole(uint64_t *seed, int low, int high) { return (int)floor(check_uniform(seed, low, high + 1)); }

/* SI strings of random dimensions are read back; algebra of dimensions: (a b)/b = a, (a^(p/q))^(q/p) = a. */
static void dimensions_go_round(void **state) {
  (void)state;
  uint64_t seed = 20231215;
  for (int i = 0; i < 20000; i++) {
    lac_dimension a = LAC_DIMENSIONLESS, b, c;
    for (int k = 0; k < LAC_BASE_DIMENSIONS; k++)
      if (random_whole(&seed, 0, 2) == 0) a.numerator[k] = (int16_t)random_whole(&seed, -12, 12);
    int denominator = random_whole(&seed, 1, 6), numerator = random_whole(&seed, 1, 9);
    assert_int_equal(lac_dimension_power(a, numerator, denominator, &b), LAC_OK);
    char text[256];
    lac_unit unit;
    lac_unit_kind kind = read_strict(lac_dimension_unit(b, text, sizeof text), &unit);
    if (kind != LAC_UNIT_FINE || !lac_dimension_equal(unit.dimension, b)) fail_msg("round %d: '%s'", i, text);
    check_within(1, unit.factor, 0, text);
    assert_int_equal(lac_dimension_power(b, denominator, numerator, &c), LAC_OK);
    assert_true(lac_dimension_equal(a, c));
    assert_int_equal(lac_dimension_product(a, b, &c), LAC_OK);
    assert_int_equal(lac_dimension_quotient(c, b, &c), LAC_OK);
    assert_true(lac_dimension_equal(a, c));
  }
}

static void exponents_that_do_not_fit(void **state) {
  (void)state;
  lac_dimension big = dimension(32767, 0, 0, 0, 0, 0, 1), result = LAC_DIMENSIONLESS;
  assert_int_equal(lac_dimension_product(big, dimension(1, 0, 0, 0, 0, 0, 1), &result), LAC_TOO_MANY);
  assert_int_equal(lac_dimension_quotient(big, dimension(-1, 0, 0, 0, 0, 0, 1), &result), LAC_TOO_MANY);
  assert_int_equal(lac_dimension_power(big, 2147483647, 1, &result), LAC_TOO_MANY);
  assert_int_equal(lac_dimension_power(dimension(1, 0, 0, 0, 0, 0, 1), 1, 2147483647, &result), LAC_TOO_MANY);
  assert_int_equal(lac_dimension_power(big, 1, 0, &result), LAC_OUT_OF_RANGE);
  assert_true(lac_dimension_equal(result, LAC_DIMENSIONLESS)); /* untouched */
  assert_int_equal(lac_dimension_power(big, 2, 32767, &result), LAC_OK);
  assert_true(lac_dimension_equal(result, dimension(2, 0, 0, 0, 0, 0, 1)));
  assert_int_equal(lac_dimension_power(big, 0, 7, &result), LAC_OK);
  assert_true(lac_dimension_equal(result, LAC_DIMENSIONLESS));
}

static void words(void **state) {
  (void)state;
  static const struct {
    const char *unit, *words;
  } rows[] = {
      {"1", "a plain number"},
      {"m", "length"},
      {"kg", "mass"},
      {"s", "time"},
      {"K", "temperature"},
      {"mas", "angle"},
      {"mag", "magnitude"},
      {"Hz", "frequency"},
      {"km/s", "speed"},
      {"W.m**-2", "flux"},
      {"Jy", "flux density"},
      {"solLum", "luminosity"},
      {"g.cm**-2", "surface density"},
      {"g.cm**-3", "density"},
      {"cm**2/g", "opacity"},
      {"J", "energy"},
      {"Pa", "pressure"},
      {"sr", "solid angle"},
      {"deg/yr", "angular speed"},
      {"solMass/yr", "mass per time"},
      {"ph.s**-1.m**-2", "per length squared and time"},
      {"Jy/beam", "flux density"},
      {"m**(3/2).K**-4", "length to the power 3/2 per temperature to the power 4"},
      {"kg.m**3.s", "mass times length cubed times time"},
      {"m**3.kg**-1.s**-2", "length cubed per mass and time squared"},
      {"mag/arcsec**2", "magnitude per solid angle"},
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    lac_unit unit;
    char text[256];
    assert_int_equal(read_strict(rows[i].unit, &unit), LAC_UNIT_FINE);
    assert_string_equal(lac_dimension_words(unit.dimension, text, sizeof text), rows[i].words);
  }
  char small[8];
  assert_true(strlen(lac_dimension_words(dimension(1, 1, 1, 1, 1, 1, 7), small, sizeof small)) < sizeof small);
}

static void printed_units(void **state) {
  (void)state;
  static const struct {
    const char *unit, *tex, *plain;
  } rows[] = {
      {"g.cm**-2", "\\mathrm{g\\,cm^{-2}}", "g cm⁻²"},
      {"W m-2 um-1", "\\mathrm{W\\,m^{-2}\\,\\mu{}m^{-1}}", "W m⁻² µm⁻¹"},
      {"Msun", "\\mathrm{M_{\\odot}}", "Msun"},
      {"solMass/yr", "\\mathrm{M_{\\odot}/yr}", "Msun/yr"},
      {"%", "\\mathrm{\\%}", "%"},
      {"W/(m**2.um)", "\\mathrm{W/(m^{2}\\,\\mu{}m)}", "W/(m² µm)"},
      {"m**(1/2)", "\\mathrm{m^{1/2}}", "m^(1/2)"},
      {"10**-26W.m**-2", "\\mathrm{10^{-26}\\,W\\,m^{-2}}", "10⁻²⁶ W m⁻²"},
      {"25.4mm", "\\mathrm{25.4\\,mm}", "25.4 mm"},
      {"/s", "\\mathrm{1/s}", "1/s"},
      {"10**3 /s", "\\mathrm{10^{3}/s}", "10³/s"},
      {"1/s", "\\mathrm{1/s}", "1/s"},
      {"sqrt(Jy)", "\\mathrm{\\sqrt{Jy}}", "sqrt(Jy)"},
      {"furlong", "furlong", "furlong"},
      {"m//s", "m//s", "m//s"},
      {"mas", "\\mathrm{mas}", "mas"},
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    char text[128];
    assert_string_equal(lac_unit_tex(rows[i].unit, text, sizeof text), rows[i].tex);
    assert_string_equal(lac_unit_plain(rows[i].unit, text, sizeof text), rows[i].plain);
  }
  char text[6];
  assert_string_equal(lac_unit_plain("g.cm**-2", text, sizeof text), "g cm"); /* never half a character */
}

/* Every symbol offered is known, none twice, and what is printed plainly is read back as the same unit. */
static void symbols(void **state) {
  (void)state;
  size_t count = 0;
  for (; lac_unit_symbol(count); count++) {
    const char *symbol = lac_unit_symbol(count);
    lac_unit unit, again;
    char text[64];
    if (!usable(read_lenient(symbol, &unit))) fail_msg("'%s' is offered and not known", symbol);
    if (!usable(read_lenient(lac_unit_plain(symbol, text, sizeof text), &again))) fail_msg("'%s' can't be read back", text);
    check_within(unit.factor, again.factor, 0, symbol);
    for (size_t i = 0; i < count; i++) assert_string_not_equal(symbol, lac_unit_symbol(i));
  }
  assert_true(count > 80);
}

/* The constants' own unit strings are VOUnits, and those that have a unit are that unit. */
static void units_of_the_constants(void **state) {
  (void)state;
  lac_unit unit;
  for (size_t i = 0; lac_constant_at(i); i++) assert_int_equal(read_strict(lac_constant_at(i)->unit, &unit), LAC_UNIT_FINE);
  assert_int_equal(read_strict("pc", &unit), LAC_UNIT_FINE);
  check_within(LAC_PC, unit.factor, 0, "pc");
}

static void readings(void **state) {
  (void)state;
  static const struct {
    const char *text;
    double value, upper, lower, factor;
    bool has_error;
  } rows[] = {
      {"156 ± 3 pc", 156, 3, 3, 3.0856775814913673e16, true},
      {"156 +- 3 pc", 156, 3, 3, 3.0856775814913673e16, true},
      {"156 +/- 3 pc", 156, 3, 3, 3.0856775814913673e16, true},
      {"156 +4 -2 pc", 156, 4, 2, 3.0856775814913673e16, true},
      {"156 -2 +4 pc", 156, 4, 2, 3.0856775814913673e16, true},
      {"156", 156, 0, 0, 1, false},
      {"1e-3", 1e-3, 0, 0, 1, false},
      {"2.4e-11 ± 0.2e-11 W.m**-2", 2.4e-11, 0.2e-11, 0.2e-11, 1, true},
      {"(2.4 ± 0.2)e-11 W.m**-2", 2.4e-11, 0.2e-11, 0.2e-11, 1, true},
      {"( 2.4 +0.3 -0.2 )e-11", 2.4e-11, 0.3e-11, 0.2e-11, 1, true},
      {"−1.5 ± 0.2", -1.5, 0.2, 0.2, 1, true},
      {"-7 m", -7, 0, 0, 1, false},
      {"156 +4 −2 m", 156, 4, 2, 1, true},
      {"1.9 Msun", 1.9, 0, 0, 1.988409870698051e30, false},
      {"1.65um", 1.65, 0, 0, 1e-6, false},
      {"5 eV", 5, 0, 0, 1.602176634e-19, false},
      {"5eV", 5, 0, 0, 1.602176634e-19, false},
      {"3 /s", 3, 0, 0, 1, false},
      {"83 ± 2 %", 83, 2, 2, 0.01, true},
      {"(83 ± 2)%", 83, 2, 2, 0.01, true},
      {"83%", 83, 0, 0, 0.01, false},
      {".5 m", 0.5, 0, 0, 1, false},
      {" 12\u00a0km ", 12, 0, 0, 1e3, false},
      {"0 ± 0 m", 0, 0, 0, 1, true},
      {"12.5 ± 0.5 m s-1", 12.5, 0.5, 0.5, 1, true},
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    lac_reading reading;
    size_t where = 0;
    lac_status status = lac_reading_read(rows[i].text, strlen(rows[i].text), &reading, &where);
    if (status != LAC_OK) fail_msg("'%s': %s at %zu", rows[i].text, lac_status_words(status), where);
    check_near(rows[i].value, reading.value, 0, rows[i].text);
    check_near(rows[i].upper, reading.upper, 0, rows[i].text);
    check_near(rows[i].lower, reading.lower, 0, rows[i].text);
    check_within(rows[i].factor, reading.unit.factor, 0, rows[i].text);
    assert_int_equal(reading.has_error, rows[i].has_error);
  }
  lac_reading reading;
  assert_int_equal(lac_reading_read("156 ± 3 pc  ", 13, &reading, NULL), LAC_OK);
  assert_int_equal(reading.unit_at, 9);
  assert_int_equal(reading.unit_length, 2);
  assert_int_equal(reading.kind, LAC_UNIT_FINE);
}

static void readings_refused(void **state) {
  (void)state;
  static const struct {
    const char *text;
    lac_status status;
    size_t where;
  } rows[] = {
      {"", LAC_BAD_SYNTAX, 0},
      {"pc", LAC_BAD_SYNTAX, 0},
      {"156 3 pc", LAC_BAD_SYNTAX, 4},
      {"1,5 pc", LAC_BAD_SYNTAX, 1},
      {"156 ± pc", LAC_BAD_SYNTAX, 7},
      {"156 +4 pc", LAC_BAD_SYNTAX, 7},
      {"156 +4 +2 pc", LAC_BAD_SYNTAX, 7},
      {"156 furlong", LAC_UNKNOWN_UNIT, 4},
      {"5 log(Hz)", LAC_UNKNOWN_UNIT, 2},
      {"nan pc", LAC_OUT_OF_RANGE, 0},
      {"-inf", LAC_OUT_OF_RANGE, 0},
      {"1e999 m", LAC_OUT_OF_RANGE, 0},
      {"156 ± -3 pc", LAC_OUT_OF_RANGE, 7},
      {"156 ± Infinity", LAC_OUT_OF_RANGE, 7},
      {"1.5 ± 10%", LAC_BAD_SYNTAX, 9},
      {"(1 ± 2 m", LAC_BAD_SYNTAX, 8},
      {"(1e3 ± 2)e4", LAC_BAD_SYNTAX, 10},
      {"5 W/m2/um", LAC_BAD_SYNTAX, 6},
      {"1.5.2", LAC_BAD_SYNTAX, 3},
      {"- m", LAC_BAD_SYNTAX, 2},
      {"5 m !", LAC_BAD_SYNTAX, 4},
      {"0x10", LAC_UNKNOWN_UNIT, 1},
  };
  for (size_t i = 0; i < sizeof rows / sizeof rows[0]; i++) {
    lac_reading reading;
    size_t where = 999;
    lac_status status = lac_reading_read(rows[i].text, strlen(rows[i].text), &reading, &where);
    if (status != rows[i].status || where != rows[i].where)
      fail_msg("'%s': want %s at %zu, got %s at %zu", rows[i].text, lac_status_words(rows[i].status), rows[i].where,
               lac_status_words(status), where);
    check_undefined(reading.value, rows[i].text);
  }
}

/* Random bytes, and random runs of what unit strings are made of: whatever comes, the answer is within its own bounds. Each text lies
   in a block of its own size without a final zero, so that a sanitizer sees a byte read past the end. */
static void no_text_does_harm(void **state) {
  (void)state;
  static const char *const pieces[] = {"m",  "kg", "um", "s",    ".",        "*",  "**",  "^",  "/",   "(",    ")",    "-", "+",
                                       "1",  "10", "0",  "2",    "⁻",        "²",  " ",   "'",  "%",   "sqrt", "log",  "e", "±",
                                       "+-", "−",  "µ",  "\xc2", "\xe2\x81", "Jy", "1/2", "e9", "nan", "inf",  "99999"};
  uint64_t seed = 6;
  for (int round = 0; round < 60000; round++) {
    char made[256];
    size_t length = 0;
    int parts = random_whole(&seed, 0, 14);
    for (int i = 0; i < parts; i++) {
      if (round % 2) {
        made[length++] = (char)random_whole(&seed, -128, 127);
      } else {
        const char *piece = pieces[random_whole(&seed, 0, (int)(sizeof pieces / sizeof pieces[0]) - 1)];
        memcpy(made + length, piece, strlen(piece));
        length += strlen(piece);
      }
    }
    char *text = malloc(length + (length == 0));
    memcpy(text, made, length);
    lac_unit strict, lenient;
    lac_reading reading;
    size_t where = 0;
    lac_unit_kind kind = lac_unit_read(text, length, true, &strict, &where);
    if (where > length || usable(kind) != (strict.factor > 0)) fail_msg("round %d", round);
    lac_unit_kind wide = lac_unit_read(text, length, false, &lenient, &where);
    if (where > length || usable(wide) != (lenient.factor > 0)) fail_msg("round %d", round);
    if (usable(kind)) check_within(strict.factor, lenient.factor, 0, "strict strings mean the same where not strict");
    lac_status status = lac_reading_read(text, length, &reading, &where);
    if (where > length || (status == LAC_OK) != isfinite(reading.value)) fail_msg("round %d", round);
    free(text);
    made[length] = 0;
    char out[48];
    lac_unit_tex(made, out, sizeof out);
    if (usable(wide) && strlen(made) == length) {
      lac_unit again;
      lac_unit_plain(made, out, sizeof out);
      if (strlen(out) < 40 && (!usable(read_lenient(out, &again)) || !(fabs(again.factor / lenient.factor - 1) < 1e-12)))
        fail_msg("round %d: '%s' printed as '%s'", round, made, out);
    }
  }
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(the_table_of_unit_strings),
      cmocka_unit_test(short_forms),
      cmocka_unit_test(decimal_units_are_exact),
      cmocka_unit_test(clashes),
      cmocka_unit_test(where_it_cannot_be_read),
      cmocka_unit_test(dimensions_go_round),
      cmocka_unit_test(exponents_that_do_not_fit),
      cmocka_unit_test(words),
      cmocka_unit_test(printed_units),
      cmocka_unit_test(symbols),
      cmocka_unit_test(units_of_the_constants),
      cmocka_unit_test(readings),
      cmocka_unit_test(readings_refused),
      cmocka_unit_test(no_text_does_harm),
  };
  return cmocka_run_group_tests(tests, NULL, NULL);
}
