/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Bands against the published zero points, photon rates and the extinction curve against tables, the rows that take a band as an object,
   and identities: inverses, and a black-body star that gets its own bolometric flux back from its magnitudes. */
#include "check.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "lacuna/catalogue.h"
#include "lacuna/chain.h"
#include "lacuna/constants.h"
#include "lacuna/photometry.h"
#include "lacuna/plan.h"
#include "lacuna/starlight.h"

enum { DRAWS = 1000 };
static const double UM = 1e-6, JY = 1e-26;
static const double FEW_EPSILON = 16 * DBL_EPSILON;   /* some ten roundings */
static const double POWER_EPSILON = 64 * DBL_EPSILON; /* those of an exponent up to 20, and of its exponential */

/* ---- Tables ---- */

/* A text field and the numbers after it. Returned: false for comments and headings. */
static bool read_line(char *line, char *name, size_t size, double *cell, int cells) {
  char *field = strchr(line, ',');
  if (line[0] == '#' || !field || size <= (size_t)(field - line)) return false;
  snprintf(name, size, "%.*s", (int)(field - line), line);
  for (int i = 0; i < cells; i++) {
    char *end = NULL;
    cell[i] = field ? strtod(field + 1, &end) : (double)NAN;
    if (i == 0 && end == field + 1) return false;
    field = field ? strchr(field + 1, ',') : NULL;
  }
  return true;
}

/* The systems' names in the table, and those of the built-in bands. */
static const lac_band *band_of_row(const char *name) {
  char built_in[80];
  if (strncmp(name, "BCP98 ", 6) == 0) snprintf(built_in, sizeof built_in, "Johnson-Cousins %s", name + 6);
  else snprintf(built_in, sizeof built_in, "%s", name);
  return lac_band_named(built_in);
}

/* Columns after the name: wavelength in um, F_nu in Jy, F_lambda in W m^-2 um^-1, photons per s m^2 and um, and ln lambda, and Hz, AB. */
static void zero_points_and_photon_rates(void **state) {
  (void)state;
  const double printed = 1e-7; /* eight digits */
  FILE *file = fopen("tests/reference/zeropoints.csv", "r");
  assert_non_null(file);
  char line[400], name[64];
  double cell[7];
  int rows = 0, built_in = 0;
  while (fgets(line, sizeof line, file)) {
    if (!read_line(line, name, sizeof name, cell, 7)) continue;
    rows++;
    const double wavelength = cell[0] * UM, flux = cell[1] * JY;
    const double hertz = wavelength * (wavelength / LAC_SPEED_OF_LIGHT); /* the width of one hertz */
    const double one_um = lac_photon_flux(flux, wavelength, UM);
    check_within(cell[2], one_um * LAC_PLANCK_CONSTANT * LAC_SPEED_OF_LIGHT / wavelength, printed, name);
    check_within(cell[3], one_um, printed, name);
    check_within(cell[4], lac_photon_flux(flux, wavelength, wavelength), printed, name);
    check_within(cell[5], lac_photon_flux(flux, wavelength, hertz), printed, name);
    if (strcmp(name, "AB") == 0) check_within(flux, LAC_AB_ZERO_POINT, printed, name);
    else check_within(cell[6], lac_magnitude(flux, LAC_AB_ZERO_POINT), 5e-6, name); /* six digits */
    const lac_band *band = band_of_row(name);
    if (!band) continue;
    built_in++;
    check_within(wavelength, band->wavelength, FEW_EPSILON, name);
    check_within(flux, band->zero_point, FEW_EPSILON, name);
  }
  fclose(file);
  print_message("# %d rows, %d of them built-in bands\n", rows, built_in);
  assert_int_equal(rows, 22);
  int bands = 0;
  while (lac_band_at((size_t)bands)) bands++;
  assert_int_equal(built_in, bands); /* every built-in band stands in the table */
}

/* Columns after the name: x in um^-1, a, b and the ratio as published, a, b computed, the ratios computed for R_V = 3.1 and 5. */
static void extinction_curve(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/ccm89.csv", "r");
  assert_non_null(file);
  char line[400], name[64];
  double cell[8];
  int rows = 0;
  while (fgets(line, sizeof line, file)) {
    if (!read_line(line, name, sizeof name, cell, 8)) continue;
    rows++;
    const double wavelength = UM / cell[0], printed = 1e-13; /* fifteen digits, of x and of the ratio */
    check_within(cell[6], lac_extinction(wavelength, 1, 3.1), printed, name);
    check_within(cell[7], lac_extinction(wavelength, 1, 5), printed, name);
    /* Table 3 from memory: it lists the regression points, which lie up to 1.2 % off the curve at B, and x with two digits. */
    if (cell[3] > 0) check_within(cell[3], lac_extinction(wavelength, 1, 3.1), 0.017, name);
  }
  fclose(file);
  assert_int_equal(rows, 28);
}

/* What the curve must be by the meaning of its parameters: a wrong digit in any coefficient would spoil it. */
static void extinction_is_consistent(void **state) {
  (void)state;
  for (double r_v = 2; r_v <= 6; r_v += 0.5) {
    check_within(1, lac_extinction(UM / 1.82, 1, r_v), FEW_EPSILON, "V");
    check_within(1 + 1 / r_v, lac_extinction(UM / 2.27, 1, r_v), 3e-6, "B, by the definition of R_V"); /* six printed digits */
    /* The branches meet at 1.1 to 0.05 % in a and 0.3 % in b. */
    const double above = lac_extinction(UM / 1.1000001, 1, r_v), below = lac_extinction(UM / 1.0999999, 1, r_v);
    check_within(below, above, 0.004, "the two branches meet");
    check_within(2.5 * lac_extinction(1.3e-6, 1, r_v), lac_extinction(1.3e-6, 2.5, r_v), FEW_EPSILON, "proportional to A_V");
    /* a power of the wavelength in the infrared */
    check_within(pow(2, -1.61), lac_extinction(4e-6, 1, r_v) / lac_extinction(2e-6, 1, r_v), FEW_EPSILON, "infrared slope");
  }
  check_undefined(lac_extinction(UM / 3.31, 1, 3.1), "ultraviolet");
  check_undefined(lac_extinction(1e-6, 1, 1.9), "R_V");
}

/* Cohen, Wheaton & Megeath 2003, Table 2 (F_lambda in W cm^-2 um^-1, from memory): photons per second into a mirror of diameter D with a
   throughput, A = pi D^2/4. */
static void photons_into_mirrors(void **state) {
  (void)state;
  static const struct {
    const char *band;
    double f_lambda, magnitude, diameter, throughput, photons;
  } examples[] = {
      {"H", 1.133e-13, 0, 8, 0.10, 1.1959906206e10}, {"H", 1.133e-13, 7, 8, 0.10, 1.8955173929e7},
      {"H", 1.133e-13, 7, 2, 0.02, 2.3693967411e5},  {"Ks", 4.283e-14, 0, 8, 0.10, 6.1304891910e9},
      {"Ks", 4.283e-14, 7, 8, 0.10, 9.7161705853e6}, {"Ks", 4.283e-14, 7, 2, 0.02, 1.2145213232e5},
      {"J", 3.129e-13, 0, 8, 0.10, 1.5840929395e10},
  };
  for (size_t i = 0; i < sizeof examples / sizeof examples[0]; i++) {
    const lac_band *band = lac_band_named(examples[i].band);
    assert_non_null(band);
    const double zero = examples[i].f_lambda * 1e10 * band->wavelength * band->wavelength / LAC_SPEED_OF_LIGHT;
    const double area = M_PI / 4 * examples[i].diameter * examples[i].diameter;
    const double got =
        lac_photon_flux(lac_flux_density(examples[i].magnitude, zero), band->wavelength, band->width) * area * examples[i].throughput;
    check_within(examples[i].photons, got, 2e-10, examples[i].band); /* eleven printed digits */
  }
}

/* ---- Bands ---- */

static void bands_are_found(void **state) {
  (void)state;
  static const char *const called[][2] = {{"H", "2MASS H"},           {"K", "2MASS Ks"},          {"Ks", "2MASS Ks"}, {"L'", "MKO L'"},
                                          {"M'", "MKO M'"},           {"V", "Johnson-Cousins V"}, {"N", "CIT N"},     {"Q", "CIT Q"},
                                          {"B", "Johnson-Cousins B"}, {"U", "Johnson-Cousins U"}, {"J", "2MASS J"},   {"MKO K", "MKO K"}};
  for (size_t i = 0; i < sizeof called / sizeof called[0]; i++) {
    const lac_band *band = lac_band_named(called[i][0]);
    assert_non_null(band);
    assert_string_equal(band->name, called[i][1]);
    assert_ptr_equal(lac_band_named(band->name), band);
  }
  for (size_t i = 0; lac_band_at(i); i++) {
    const lac_band *band = lac_band_at(i);
    assert_ptr_equal(lac_band_named(band->name), band);
    assert_non_null(lac_source_find(band->source));
    assert_true(band->wavelength > 0 && band->width > 0 && band->width < band->wavelength && band->zero_point > 0);
    lac_band_drop(band); /* nothing to do */
    assert_ptr_equal(lac_band_named(band->name), band);
  }
  const char *near[3];
  assert_null(lac_band_named("2mass h"));
  assert_null(lac_band_named(""));
  assert_null(lac_band_named("AB"));
  assert_int_equal(lac_band_nearest("2mass h", near, 3), 3);
  assert_string_equal(near[0], "2MASS H");
  assert_true(lac_band_nearest("MKO L", near, 1) == 1);
  assert_string_equal(near[0], "MKO L'");
  assert_int_equal(lac_band_nearest("a band of my own", near, 3), 0);
  assert_int_equal(lac_band_nearest("H", near, 0), 0);
  char longest[200];
  memset(longest, 'J', sizeof longest), longest[sizeof longest - 1] = '\0';
  assert_int_equal(lac_band_nearest(longest, near, 3), 0);
}

static void bands_are_made(void **state) {
  (void)state;
  lac_band *band;
  char name[] = "narrow";
  assert_int_equal(lac_band_new(name, "mine", 2.166e-6, 2e-8, 650 * JY, &band), LAC_OK);
  name[0] = 'N';
  assert_string_equal(band->name, "narrow");
  assert_string_equal(band->system, "mine");
  assert_null(band->source);
  assert_true(band->wavelength == 2.166e-6 && band->width == 2e-8 && band->zero_point == 650 * JY);
  lac_band_drop(band);
  assert_int_equal(lac_band_new(NULL, "AB", 6e-7, (double)NAN, (double)NAN, &band), LAC_OK);
  assert_string_equal(band->name, "AB");
  /* Oke & Gunn 1983: -48.60 in erg s^-1 cm^-2 Hz^-1 */
  check_within(48.60, -2.5 * log10(band->zero_point / 1e-3), FEW_EPSILON, "AB's constant");
  check_near(8.9, lac_magnitude(JY, band->zero_point), 8.9 * FEW_EPSILON, "1 Jy is AB = 8.9");
  lac_band_drop(band);
  lac_band_drop(NULL);
  const double bad[][3] = {{0, 1e-8, JY},
                           {1e-6, 0, JY},
                           {1e-6, -1, JY},
                           {1e-6, 1e-8, 0},
                           {1e-6, 1e-8, (double)NAN},
                           {(double)NAN, 1e-8, JY},
                           {(double)INFINITY, 1e-8, JY},
                           {1e-6, (double)INFINITY, JY}};
  for (size_t i = 0; i < sizeof bad / sizeof bad[0]; i++) {
    assert_int_equal(lac_band_new("bad", "mine", bad[i][0], bad[i][1], bad[i][2], &band), LAC_OUT_OF_RANGE);
    assert_null(band);
  }
  assert_int_equal(lac_band_new("two", "AB", 6e-7, (double)NAN, 3631 * JY, &band), LAC_OUT_OF_RANGE);
}

/* ---- Rows of a band: wavelength/of_band, bandwidth/of_band, zero_point_flux/of_band ---- */

/* A case: a catalogue, its names' values, and the chain from those given. */
typedef struct {
  lac_catalogue *catalogue;
  bool *given;
  lac_value **values;
  lac_chain *chain;
} settled_case;

static void drop_band(const void *band) { lac_band_drop(band); }

static void give(settled_case *c, const char *name, lac_value *value) {
  const int id = lac_catalogue_find(c->catalogue, name);
  assert_true(id >= 0);
  c->given[id] = true;
  c->values[id] = value;
}

static void give_number(settled_case *c, const char *name, double number) {
  lac_value *value;
  assert_int_equal(lac_value_number(number, &value), LAC_OK);
  give(c, name, value);
}

static void give_band(settled_case *c, const lac_band *band) {
  lac_value *value;
  assert_int_equal(lac_value_object(band, drop_band, &value), LAC_OK);
  give(c, "band", value);
}

static settled_case start(void) {
  settled_case c = {0};
  char error[200];
  assert_int_equal(lac_catalogue_new(&c.catalogue, error, sizeof error), LAC_OK);
  const size_t names = (size_t)lac_catalogue_names(c.catalogue);
  c.given = calloc(names, sizeof *c.given);
  c.values = calloc(names, sizeof *c.values);
  assert_true(c.given && c.values);
  return c;
}

static lac_value *ask(settled_case *c, const char *name) {
  const int id = lac_catalogue_find(c->catalogue, name);
  int culprit;
  if (!c->chain) assert_int_equal(lac_chain_settle(c->catalogue, c->given, NULL, &c->chain, &culprit), LAC_OK);
  assert_int_equal(lac_plan_ask(c->chain, c->values, id), LAC_OK);
  return c->values[id];
}

static double ask_number(settled_case *c, const char *name) { return lac_value_as_number(ask(c, name)); }

static const char *recipe_of(settled_case *c, const char *name) {
  const int row = lac_chain_row(c->chain, lac_catalogue_find(c->catalogue, name));
  return row >= 0 ? lac_catalogue_row(c->catalogue, row)->by : "none";
}

static void finish(settled_case *c) {
  for (int i = 0; i < lac_catalogue_names(c->catalogue); i++) lac_value_drop(c->values[i]);
  lac_chain_free(c->chain);
  lac_catalogue_free(c->catalogue);
  free(c->values);
  free(c->given);
}

static void a_band_gives_its_numbers(void **state) {
  (void)state;
  settled_case c = start();
  const lac_band *band = lac_band_named("H");
  give_band(&c, band);
  give_number(&c, "magnitude", 7);
  check_near(band->wavelength, ask_number(&c, "wavelength"), 0, "wavelength/of_band");
  check_near(band->width, ask_number(&c, "bandwidth"), 0, "bandwidth/of_band");
  check_near(band->zero_point, ask_number(&c, "zero_point_flux"), 0, "zero_point_flux/of_band");
  check_within(LAC_SPEED_OF_LIGHT / band->wavelength, ask_number(&c, "frequency"), FEW_EPSILON, "frequency");
  check_within(lac_photon_flux(lac_flux_density(7, band->zero_point), band->wavelength, band->width), ask_number(&c, "photon_flux"), 0,
               "photon flux");
  finish(&c);
}

/* What is given beside the band is honoured: a frequency, a wavelength, a resolving power. */
static void givens_go_before_the_band(void **state) {
  (void)state;
  settled_case c = start();
  give_band(&c, lac_band_named("H"));
  give_number(&c, "frequency", 1e14);
  give_number(&c, "spectral_resolving_power", 1000);
  check_within(LAC_SPEED_OF_LIGHT / 1e14, ask_number(&c, "wavelength"), FEW_EPSILON, "wavelength of the frequency");
  check_within(LAC_SPEED_OF_LIGHT / 1e17, ask_number(&c, "bandwidth"), FEW_EPSILON, "bandwidth of the resolving power");
  assert_string_equal(recipe_of(&c, "wavelength"), "definition");
  finish(&c);
  c = start();
  give_band(&c, lac_band_named("H"));
  give_number(&c, "wavelength", 1.65e-6);
  check_near(1.65e-6, ask_number(&c, "wavelength"), 0, "wavelength as given");
  check_near(1024 * JY, ask_number(&c, "zero_point_flux"), 1024 * JY * FEW_EPSILON, "zero point of the band all the same");
  finish(&c);
}

/* A user's band is freed with the last value; a sweep of magnitudes goes through; what a band doesn't know is undefined. */
static void a_users_band_and_a_sweep(void **state) {
  (void)state;
  enum { POINTS = 3000 };
  settled_case c = start();
  lac_work work;
  lac_band *band;
  lac_axis *axis;
  lac_value *sweep;
  double magnitudes[POINTS];
  for (int i = 0; i < POINTS; i++) magnitudes[i] = 0.01 * i;
  lac_work_start(&work, 2, 1 << 24);
  assert_int_equal(lac_band_new(NULL, "AB", 9e-7, (double)NAN, (double)NAN, &band), LAC_OK);
  assert_int_equal(lac_axis_new("magnitude", POINTS, magnitudes, &axis), LAC_OK);
  assert_int_equal(lac_value_array(1, &axis, magnitudes, &sweep), LAC_OK);
  give_band(&c, band);
  give(&c, "magnitude", sweep);
  check_undefined(ask_number(&c, "bandwidth"), "width not known");
  lac_value *flux = ask(&c, "flux_density");
  assert_int_equal(lac_plan_store(&work, flux), LAC_OK);
  for (int i = 0; i < POINTS; i++)
    check_within(lac_flux_density(magnitudes[i], LAC_AB_ZERO_POINT), lac_value_data(flux)[i], POWER_EPSILON, "flux along a sweep");
  finish(&c);
  lac_axis_drop(axis);
  lac_work_end(&work);
}

/* ---- Identities ---- */

static void magnitudes_and_fluxes(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < DRAWS; i++) {
    double m = check_uniform(&seed, -5, 25), zero = check_log_uniform(&seed, 1, 1e4) * JY, k = check_uniform(&seed, -2, 12);
    check_near(m, lac_magnitude(lac_flux_density(m, zero), zero), 25 * POWER_EPSILON, "magnitude of a flux density");
    check_within(100 * lac_flux_density(m + 5, zero), lac_flux_density(m, zero), POWER_EPSILON, "five magnitudes are a hundred");
    check_within(10 * lac_stellar_angular_diameter_v_k_no_extinction(m + 5, k + 5), lac_stellar_angular_diameter_v_k_no_extinction(m, k),
                 POWER_EPSILON, "the same colour, five magnitudes fainter: a tenth of the diameter");
    check_within(10 * lac_stellar_angular_diameter_b_l_no_extinction(m + 5, k + 5), lac_stellar_angular_diameter_b_l_no_extinction(m, k),
                 POWER_EPSILON, "the same colour, five magnitudes fainter: a tenth of the diameter");
    check_within(lac_stellar_angular_diameter_v_k_no_extinction(m, k), lac_stellar_angular_diameter_v_k(m, k, 0, 3.1), POWER_EPSILON,
                 "no extinction, V - K");
    check_within(lac_stellar_angular_diameter_b_l_no_extinction(m, k), lac_stellar_angular_diameter_b_l(m, k, 0, 3.1), POWER_EPSILON,
                 "no extinction, B - L");
  }
}

/* A black-body star's magnitude behind its extinction; in V the extinction is the visual one. */
static double reddened(const char *name, double radius, double temperature, double distance, double visual, double r_v) {
  const lac_band *band = lac_band_named(name);
  const double bare = lac_stellar_magnitude(lac_stellar_flux_density(radius, temperature, distance, band->wavelength), band->zero_point);
  return bare + (strcmp(name, "V") == 0 ? visual : lac_extinction(band->wavelength, visual, r_v));
}

static void a_black_star_gets_its_flux_back(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < DRAWS; i++) {
    double r = check_log_uniform(&seed, 0.3, 30) * LAC_SOLAR_RADIUS, t = check_log_uniform(&seed, 2000, 4e4);
    double d = check_log_uniform(&seed, 5, 5000) * LAC_PC, visual = check_uniform(&seed, 0, 10), r_v = check_uniform(&seed, 2, 6);
    const double v = reddened("V", r, t, d, visual, r_v), j = reddened("J", r, t, d, visual, r_v);
    const double h = reddened("H", r, t, d, visual, r_v), k = reddened("K", r, t, d, visual, r_v);
    const double flux = lac_bolometric_flux(lac_stellar_luminosity_radius_and_temperature(r, t), d);
    const double tolerance = 4 * POWER_EPSILON; /* magnitudes up to 40 */
    check_within(flux, lac_bolometric_flux_v_j_h_k(v, j, h, k, t, visual, r_v), tolerance, "V, J, H, Ks");
    check_within(flux, lac_bolometric_flux_j_h_k(j, h, k, t, visual, r_v), tolerance, "J, H, Ks");
    check_within(flux, lac_bolometric_flux_h_k(h, k, t, visual, r_v), tolerance, "H, Ks");
    check_within(flux, lac_bolometric_flux_k(k, t, visual, r_v), tolerance, "Ks");
    /* An excess in Ks alone raises the flux, by its share of the bands. */
    check_within(pow(10, 0.4 * 0.5 / 3), lac_bolometric_flux_j_h_k(j, h, k - 0.5, t, visual, r_v) / flux, tolerance, "an excess in Ks");
    check_within(lac_stellar_flux_density(r, t, d, 2e-6), 9 * lac_stellar_flux_density(r, t, 3 * d, 2e-6), FEW_EPSILON, "inverse square");
  }
  check_undefined(lac_bolometric_flux_k(5, 0, 0, 3.1), "no temperature");
  check_undefined(lac_bolometric_flux_k(5, 1, 0, 3.1), "a temperature at which the band tells nothing");
  check_undefined(lac_stellar_flux_density(1e9, 5000, 0, 1e-6), "no distance");
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(zero_points_and_photon_rates),
      cmocka_unit_test(extinction_curve),
      cmocka_unit_test(extinction_is_consistent),
      cmocka_unit_test(photons_into_mirrors),
      cmocka_unit_test(bands_are_found),
      cmocka_unit_test(bands_are_made),
      cmocka_unit_test(a_band_gives_its_numbers),
      cmocka_unit_test(givens_go_before_the_band),
      cmocka_unit_test(a_users_band_and_a_sweep),
      cmocka_unit_test(magnitudes_and_fluxes),
      cmocka_unit_test(a_black_star_gets_its_flux_back),
  };
  return cmocka_run_group_tests_name("photometry", tests, NULL, NULL);
}
