/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Populations of grains, against an independent Mie code and quadrature (tests/reference/opacity_check.csv, epsilon_constm.csv), against
   Rayleigh's limit and closed forms, and each table against what it was made from. */
#include "check.h"

#include <gsl/gsl_errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "grains.h"
#include "lacuna.h"
#include "relation.h"

#define UM 1e-6
#define CM2_PER_GRAM 0.1

static lac_work work;

static lac_dust_recipe pure(const char *name, double largest) {
  return (lac_dust_recipe){.components = 1,
                           .material = {lac_material_named(name)},
                           .mass_fraction = {1},
                           .sizes = LAC_POWER_LAW,
                           .smallest = 0.005 * UM,
                           .largest = largest,
                           .index = 3.5,
                           .temperature = (double)NAN};
}

static lac_dust *made_of(const lac_dust_recipe *recipe) {
  char words[200];
  lac_dust *dust;
  const lac_status status = lac_dust_new(&work, recipe, &dust, words, sizeof words);
  if (status != LAC_OK) print_error("# %s\n", words);
  assert_int_equal(status, LAC_OK);
  return dust;
}

/* Without tables, which the check of a size average doesn't need. */
static lac_dust untabled(const lac_dust_recipe *recipe) {
  lac_dust dust = {.recipe = *recipe, .mixed = 1, .volume_fraction = {1}};
  dust.density = lac_material_about(recipe->material[0]).density;
  return dust;
}

/* Part 2 of the file. Rows whose own quadrature changes by more than 1e-6 are not looked at. The others have nine digits; silicate is good
   to 4e-7 there. Asymmetry has six decimals. */
static void opacities_as_computed_elsewhere(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/opacity_check.csv", "r");
  assert_non_null(file);
  char line[400], name[40];
  double density, smallest, largest, wavelength, absorption, scattering, g, absorption_error, scattering_error;
  int rows = 0;
  lac_sizes sizes = {0};
  while (fgets(line, sizeof line, file)) {
    if (sscanf(line, "opacity,%39[^,],%lf,%lf,%lf,%lf,%lf,%lf,%lf,%lf,%lf", name, &density, &smallest, &largest, &wavelength, &absorption,
               &scattering, &g, &absorption_error, &scattering_error) != 10)
      continue;
    if (absorption_error > 1e-6 || scattering_error > 1e-6) continue;
    const lac_dust_recipe recipe = pure(name, largest * UM);
    const lac_dust dust = untabled(&recipe);
    lac_sizes_free(&sizes);
    assert_int_equal(lac_sizes_new(&dust, 256, &sizes), LAC_OK);
    lac_opacity got;
    const double at = wavelength * UM;
    assert_int_equal(lac_grains_opacities(&work, &dust, &sizes, 1, &at, &got), LAC_OK);
    check_within(absorption, got.absorption / CM2_PER_GRAM, 2e-6, line);
    check_within(scattering, got.scattering / CM2_PER_GRAM, 2e-6, line);
    check_near(g, got.asymmetry, 2e-6, line);
    rows++;
  }
  lac_sizes_free(&sizes);
  fclose(file);
  print_message("# %d rows\n", rows);
  assert_true(rows >= 60);
}

/* Rayleigh's limit: model_silicate_kappa.csv is kappa = 6 pi/(lambda rho) Im((m^2-1)/(m^2+2)), nine digits. Grains of 1 nm: x < 0.03, terms
   of x^2 left out there, below 1e-3 for lambda > 1 um. */
static void rayleigh_limit(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/model_silicate_kappa.csv", "r");
  assert_non_null(file);
  char line[200];
  double wavelength, n, k, kappa;
  int rows = 0;
  lac_dust_recipe recipe = pure("model_silicate", 1);
  recipe.sizes = LAC_SINGLE_SIZE;
  recipe.median = 1e-9;
  const lac_dust dust = untabled(&recipe);
  lac_sizes sizes;
  assert_int_equal(lac_sizes_new(&dust, 256, &sizes), LAC_OK);
  while (fgets(line, sizeof line, file)) {
    if (sscanf(line, "%lf,%lf,%lf,%lf", &wavelength, &n, &k, &kappa) != 4 || wavelength < 1) continue;
    const double at = wavelength * UM;
    lac_opacity got;
    assert_int_equal(lac_grains_opacities(&work, &dust, &sizes, 1, &at, &got), LAC_OK);
    check_within(kappa, got.absorption / CM2_PER_GRAM, 1e-3, line);
    rows++;
  }
  lac_sizes_free(&sizes);
  fclose(file);
  assert_true(rows > 50);
}

/* Part 1: Q_P with both integrals from 0.1 to 3000 um, as there. */
static double planck_efficiency(const lac_material *material, double radius, double temperature) {
  enum { STEPS = 3000 };
  double sum = 0, all = 0;
  const double low = log(0.1 * UM), step = log(3e4) / STEPS;
  for (int i = 0; i < STEPS; i++) {
    const double l = exp(low + step * (i + 0.5)), x = 2 * M_PI * radius / l;
    double n, k, weight = l * lac_planck_lambda(l, temperature);
    lac_efficiencies q;
    lac_material_index(material, l, (double)NAN, true, &n, &k);
    assert_int_equal(lac_mie(1, &x, &n, &k, &q), LAC_OK);
    sum += weight * q.absorption;
    all += weight;
  }
  return sum / all;
}

static void cooling_efficiencies_as_computed_elsewhere(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/opacity_check.csv", "r");
  assert_non_null(file);
  char line[400], name[40], before[40] = "";
  double radius, hot, cold_q, hot_q, ratio, relerr;
  int rows = 0;
  lac_dust *dust = NULL;
  while (fgets(line, sizeof line, file)) {
    if (sscanf(line, "planck,%39[^,],%lf,%lf,%lf,%lf,%lf,%lf", name, &radius, &hot, &cold_q, &hot_q, &ratio, &relerr) != 7) continue;
    if (strcmp(name, before) != 0) {
      if (dust) lac_dust_drop(dust);
      lac_dust_recipe recipe = pure(name, 1 * UM);
      recipe.sizes = LAC_SINGLE_SIZE;
      recipe.median = 1 * UM;
      recipe.extrapolate = true; /* as there, the formula also below 0.2 um */
      dust = made_of(&recipe);
      strcpy(before, name);
    }
    const double a = radius * UM;
    check_within(hot_q, planck_efficiency(lac_material_named(name), a, hot), 1e-7, line);
    check_within(cold_q, planck_efficiency(lac_material_named(name), a, 1500), 1e-7, line);
    /* Over all wavelengths instead of 0.1 to 3000 um: of a black body of 10000 K 3.2e-4 lie below, where Q is at most 2 Q_P. */
    check_within(cold_q, lac_dust_planck_efficiency(dust, a, 1500), 1e-5, line);
    check_within(hot_q, lac_dust_planck_efficiency(dust, a, hot), hot > 9000 ? 1e-3 : hot > 7000 ? 3e-4 : 1e-5, line);
    check_within(ratio, lac_dust_cooling_efficiency(dust, a, 1500, hot), 3e-3, line);
    rows++;
  }
  if (dust) lac_dust_drop(dust);
  fclose(file);
  assert_int_equal(rows, 27);
}

/* epsilon_constm.csv: a constant index. Converged to 1e-3 for the weakly absorbing one (its first rows), better for the other. */
static void constant_index(void **state) {
  (void)state;
  FILE *file = fopen("tests/reference/epsilon_constm.csv", "r");
  assert_non_null(file);
  char line[400];
  double n, k, radius, cold, hot, cold_q, hot_q, ratio, before = 0;
  lac_dust *dust = NULL;
  int rows = 0;
  while (fgets(line, sizeof line, file)) {
    if (sscanf(line, "%lf,%lf,%lf,%lf,%lf,%lf,%lf,%lf", &n, &k, &radius, &cold, &hot, &cold_q, &hot_q, &ratio) != 8) continue;
    if (n != before) {
      const double wavelengths[] = {1e-7, 1e-2}, ns[] = {n, n}, ks[] = {k, k};
      lac_material *material;
      size_t where;
      if (dust) lac_dust_drop(dust);
      assert_int_equal(lac_material_table("constant", 3000, 2, wavelengths, ns, ks, &material, &where), LAC_OK);
      const lac_dust_recipe recipe = {.components = 1,
                                      .material = {material},
                                      .mass_fraction = {1},
                                      .sizes = LAC_SINGLE_SIZE,
                                      .median = UM,
                                      .temperature = (double)NAN};
      dust = made_of(&recipe);
      lac_material_drop(material); /* the dust holds on to it */
      before = n;
    }
    check_within(cold_q, lac_dust_planck_efficiency(dust, radius * UM, cold), 1e-3, line);
    check_within(hot_q, lac_dust_planck_efficiency(dust, radius * UM, hot), 1e-3, line);
    check_within(ratio, lac_dust_cooling_efficiency(dust, radius * UM, cold, hot), 3e-3, line);
    rows++;
  }
  if (dust) lac_dust_drop(dust);
  fclose(file);
  assert_int_equal(rows, 14);
}

/* Moments of a^-3.5 from 0.005 to 0.25 um: <a^3>/<a^2> = sqrt(a1 a2), and so the geometric opacity 3/(4 rho sqrt(a1 a2)), 64282.4346533
   cm^2/g for 3.3 g/cm^3 (closed form). The sum of the weights is the geometric opacity. */
static void moments(void **state) {
  (void)state;
  const lac_dust_recipe recipe = pure("model_silicate", 0.25 * UM);
  const lac_dust dust = untabled(&recipe);
  lac_sizes sizes;
  assert_int_equal(lac_sizes_new(&dust, 16, &sizes), LAC_OK);
  double geometric = 0;
  for (size_t i = 0; i < sizes.count; i++) geometric += sizes.weight[i];
  check_within(64282.4346533, geometric / CM2_PER_GRAM, 1e-11, "geometric opacity");
  lac_sizes_free(&sizes);
  /* Log-normal: <a^3>/<a^2> = median exp(5 w^2/2). */
  lac_dust_recipe bell = recipe;
  bell.sizes = LAC_LOG_NORMAL_SIZES;
  bell.median = 0.3 * UM, bell.width = 0.4, bell.smallest = 1e-9, bell.largest = 1e-4;
  const lac_dust other = untabled(&bell);
  assert_int_equal(lac_sizes_new(&other, 16, &sizes), LAC_OK);
  geometric = 0;
  for (size_t i = 0; i < sizes.count; i++) geometric += sizes.weight[i];
  check_within(0.75 / (3300 * 0.3 * UM * exp(2.5 * 0.16)), geometric, 1e-9, "log-normal");
  lac_sizes_free(&sizes);
}

/* Each part within 0.3 %, or within as much of a thousandth of the extinction. */
static void compare_table(const lac_dust *dust, int count) {
  double shortest, longest;
  uint64_t seed = 5;
  lac_dust_holds(dust, &shortest, &longest);
  for (int i = 0; i < count; i++) {
    const double wavelength = check_log_uniform(&seed, shortest, longest);
    lac_opacity direct;
    const lac_opacity got = lac_dust_opacity(dust, wavelength);
    char label[60];
    snprintf(label, sizeof label, "at %.5g um", wavelength / UM);
    assert_int_equal(lac_dust_opacity_direct(dust, wavelength, &direct), LAC_OK);
    check_near(direct.absorption, got.absorption, 3e-3 * fmax(direct.absorption, 1e-3 * direct.extinction), label);
    check_near(direct.scattering, got.scattering, 3e-3 * fmax(direct.scattering, 1e-3 * direct.extinction), label);
    check_near(direct.asymmetry, got.asymmetry, 3e-3, label);
  }
}

static lac_dust_recipe mixture(void) {
  return (lac_dust_recipe){.components = 3,
                           .material = {lac_material_named("water_ice"), lac_material_named("model_silicate"), lac_material_named("soot")},
                           .mass_fraction = {0.3, 0.5, 0.2},
                           .porosity = 0.25,
                           .sizes = LAC_POWER_LAW,
                           .smallest = 0.05 * UM,
                           .largest = 1e-3,
                           .index = 3.5,
                           .temperature = 100};
}

static void tables_interpolate(void **state) {
  (void)state;
  const lac_dust_recipe mixed = mixture(), large = pure("model_silicate", 1e-3), small = pure("soot", 0.25 * UM);
  const lac_dust_recipe *recipes[] = {&mixed, &large, &small};
  for (int i = 0; i < 3; i++) {
    lac_dust *dust = made_of(recipes[i]);
    compare_table(dust, 40);
    lac_dust_drop(dust);
  }
}

/* The efficiencies' table, the population's means, the temperature of a grain; on any number of threads the same. */
static void means_and_threads(void **state) {
  (void)state;
  const lac_dust_recipe recipe = mixture();
  lac_dust *dust = made_of(&recipe);
  uint64_t seed = 7;
  for (int i = 0; i < 12; i++) {
    const double a = check_log_uniform(&seed, 1e-8, 1e-3), hot = check_log_uniform(&seed, 30, 3e4),
                 cold = check_log_uniform(&seed, 5, 2000);
    const double want = lac_dust_planck_efficiency(dust, a, cold) / lac_dust_planck_efficiency(dust, a, hot);
    check_within(want, lac_dust_cooling_efficiency(dust, a, cold, hot), 3e-3, "cooling efficiency");
    const double t = lac_dust_grain_temperature(dust, a, 3.828e26, hot, 1.5e11);
    const double heating = lac_dust_planck_efficiency(dust, a, hot) * 3.828e26 / (16 * M_PI * LAC_STEFAN_BOLTZMANN * 1.5e11 * 1.5e11);
    check_within(heating, lac_dust_planck_efficiency(dust, a, t) * t * t * t * t, 5e-3, "balance of a grain");
    double mean, error;
    const lac_status status = lac_dust_planck_mean(dust, cold + 20, &mean, &error);
    assert_true((status == LAC_OK || status == LAC_DOUBTFUL) && error > 0);
    check_within(mean, lac_dust_tabled_planck_mean(dust, cold + 20), 1e-3, "Planck mean");
  }
  lac_work one;
  lac_work_start(&one, 1, (size_t)1 << 30);
  lac_dust *again;
  assert_int_equal(lac_dust_new(&one, &recipe, &again, NULL, 0), LAC_OK);
  assert_int_equal(dust->opacity.count, again->opacity.count);
  assert_memory_equal(dust->opacity.value, again->opacity.value, dust->opacity.count * 3 * sizeof(double));
  assert_memory_equal(dust->efficiency.value, again->efficiency.value, dust->efficiency.count * LAC_TEMPERATURES * sizeof(double));
  lac_dust_drop(again);
  one.stop = 1;
  assert_int_equal(lac_dust_new(&one, &recipe, &again, NULL, 0), LAC_INTERRUPTED);
  lac_work_end(&one);
  lac_dust_drop(lac_dust_keep(dust));
  lac_dust_drop(dust);
}

/* Grey grains: every mean is the opacity. Large grains of soot are nearly that; a Rosseland mean is a harmonic one, so below the Planck
   mean of extinction. Here: bounds by the least and the greatest opacity. */
static void rosseland_within_bounds(void **state) {
  (void)state;
  const lac_dust_recipe recipe = pure("soot", 0.25 * UM);
  lac_dust *dust = made_of(&recipe);
  double mean, error, least = INFINITY, greatest = 0;
  assert_int_equal(lac_dust_rosseland_mean(dust, 300, &mean, &error), LAC_OK);
  for (double l = 1e-6; l < 1e-3; l *= 1.01) {
    const lac_opacity o = lac_dust_opacity(dust, l);
    least = fmin(least, o.extinction), greatest = fmax(greatest, o.extinction);
  }
  assert_true(mean > least && mean < greatest && error < 0.01);
  lac_dust_drop(dust);
}

/* Bell & Lin 1994: temperatures where regimes meet as widely quoted (166.81 K, 202.677 K, and with density 2286.77 rho^(2/49), 2029.76
   rho^(1/81), 10^4 rho^(1/21), 31195.2 rho^(4/75), 1.7939e8 rho^(2/5)); the law is continuous there, and bends. */
static void bell_and_lin(void **state) {
  (void)state;
  const double rho = 1e-9; /* g cm^-3 */
  const double meets[] = {166.81,
                          202.677,
                          2286.77 * pow(rho, 2. / 49),
                          2029.76 * pow(rho, 1. / 81),
                          1e4 * pow(rho, 1. / 21),
                          31195.2 * pow(rho, 4. / 75),
                          1.7939e8 * pow(rho, 0.4)};
  const double powers[] = {2, -7, 0.5, -24, 3, 10, -2.5, 0};
  for (int i = 0; i < 7; i++) {
    const double below = lac_rosseland_opacity_bell_lin_1994(1e3 * rho, meets[i] * 0.999),
                 above = lac_rosseland_opacity_bell_lin_1994(1e3 * rho, meets[i] * 1.001);
    check_within(powers[i], log(below / lac_rosseland_opacity_bell_lin_1994(1e3 * rho, meets[i] * 0.998)) / log(0.999 / 0.998), 1e-9,
                 "power below");
    if (i < 6 || meets[i] < 1e6)
      check_within(powers[i + 1], log(lac_rosseland_opacity_bell_lin_1994(1e3 * rho, meets[i] * 1.002) / above) / log(1.002 / 1.001), 1e-9,
                   "power above");
  }
  check_within(0.348, lac_rosseland_opacity_bell_lin_1994(1e3 * rho, 9e5) / CM2_PER_GRAM, 1e-12, "electron scattering");
  check_within(2e-4 * 100 * 100, lac_rosseland_opacity_bell_lin_1994(1e3 * rho, 100) / CM2_PER_GRAM, 1e-12, "ice grains");
  uint64_t seed = 9; /* continuous everywhere, also where a regime vanishes */
  for (int i = 0; i < 2000; i++) {
    const double density = check_log_uniform(&seed, 1e-17, 1e-1), t = check_log_uniform(&seed, 10, 9.9e5);
    const double one = lac_rosseland_opacity_bell_lin_1994(density, t),
                 other = lac_rosseland_opacity_bell_lin_1994(density, t * (1 + 1e-9));
    check_within(one, other, 1e-7, "continuous");
  }
  check_undefined(lac_rosseland_opacity_bell_lin_1994(1e-6, 9), "too cold");
}

/* At the solution the sublimation temperature, the radius and the disc's density agree; the chain's own functions, one by one. */
static void solved_rim_is_consistent(void **state) {
  (void)state;
  lac_dust_recipe recipe = pure("model_silicate", UM);
  recipe.sizes = LAC_SINGLE_SIZE;
  recipe.median = UM;
  lac_dust *dust = made_of(&recipe);
  const double a = 1.3 * UM, luminosity = 10 * LAC_SOLAR_LUMINOSITY, hot = 9000, mass = 2 * LAC_SOLAR_MASS, disc = 0.05 * LAC_SOLAR_MASS,
               rc = 60 * LAC_AU, gamma = 1, mu = 2.3;
  const double *in[] = {&a, &luminosity, &hot, &mass, &disc, &rc, &gamma, &mu};
  for (int grey = 0; grey < 2; grey++) {
    double density;
    if (grey) density = lac_rim_gas_density_solved_grey(luminosity, mass, disc, rc, gamma, mu);
    else lac_rim_gas_density_of_dust(dust, 1, &density, in);
    const double t = lac_sublimation_temperature_isella_natta_2005(density);
    const double radius = lac_sublimation_radius_kama_2009(luminosity, t, grey ? 1 : lac_dust_cooling_efficiency(dust, a, t, hot), 1);
    const double height = sqrt(LAC_BOLTZMANN * t / (mu * LAC_PROTON_MASS)) / sqrt(LAC_GRAVITATION * mass / (radius * radius * radius));
    const double surface = disc / (2 * M_PI * rc * rc) * (rc / radius) * exp(-radius / rc);
    check_within(surface / (sqrt(2 * M_PI) * height), density, 1e-11, "density at the rim");
  }
  lac_dust_drop(dust);
}

/* A row of dust by its key, at one point. */
static double by_row(const char *key, const lac_dust *dust, const double *inputs) {
  const double *in[LAC_MAX_ARGUMENTS];
  double out = (double)NAN;
  for (int i = 0; i < LAC_MAX_ARGUMENTS; i++) in[i] = &inputs[i];
  for (const lac_relation *r = lac_dust_relations; r->gives; r++) {
    char this[100];
    snprintf(this, sizeof this, "%s/%s", r->gives, r->by);
    if (strcmp(this, key) == 0) r->of_object(dust, 1, &out, in);
  }
  return out;
}

/* Each row of an object gives what the direct evaluations give, which the tests above check against values from outside. */
static void rows_of_dust(void **state) {
  (void)state;
  const lac_dust_recipe recipe = mixture();
  lac_dust *dust = made_of(&recipe);
  const double at[LAC_MAX_ARGUMENTS] = {1.65 * UM};
  lac_opacity o;
  assert_int_equal(lac_dust_opacity_direct(dust, at[0], &o), LAC_OK);
  check_within(o.absorption, by_row("dust_opacity/of_dust", dust, at), 3e-3, "absorption");
  check_within(o.scattering, by_row("dust_scattering_opacity/of_dust", dust, at), 3e-3, "scattering");
  check_within(o.scattering / (o.absorption + o.scattering), by_row("dust_albedo/of_dust", dust, at), 3e-3, "albedo");
  check_near(o.asymmetry, by_row("dust_asymmetry/of_dust", dust, at), 3e-3, "asymmetry");
  const double sideways = (1 - o.asymmetry) * o.scattering;
  check_within(sideways / (o.absorption + sideways), by_row("dust_effective_albedo/of_dust", dust, at), 6e-3, "effective albedo");
  const double grains[LAC_MAX_ARGUMENTS] = {UM, 1500, 9000}, temperatures[LAC_MAX_ARGUMENTS] = {1500, 6000};
  check_within(lac_dust_planck_efficiency(dust, UM, 1500) / lac_dust_planck_efficiency(dust, UM, 9000),
               by_row("cooling_efficiency/of_grains", dust, grains), 3e-3, "of grains");
  double cold, hot, error;
  lac_dust_planck_mean(dust, 1500, &cold, &error);
  lac_dust_planck_mean(dust, 6000, &hot, &error);
  check_within(cold / hot, by_row("cooling_efficiency/of_population", dust, temperatures), 1e-3, "of the population");
  const double disc[LAC_MAX_ARGUMENTS] = {UM, 4e27, 9000, 4e30, 1e29, 9e12, 1, 2.3};
  double solved;
  const double *in[] = {disc, disc + 1, disc + 2, disc + 3, disc + 4, disc + 5, disc + 6, disc + 7};
  lac_rim_gas_density_of_dust(dust, 1, &solved, in);
  check_within(solved, by_row("rim_gas_density/solved_at_the_rim", dust, disc), 0, "solved_is_consistent checks the value");
  lac_dust_drop(dust);
}

static void refused(const lac_dust_recipe *recipe, const char *wanted) {
  char words[200];
  lac_dust *dust;
  assert_int_equal(lac_dust_new(&work, recipe, &dust, words, sizeof words), LAC_OUT_OF_RANGE);
  assert_null(dust);
  if (!strstr(words, wanted)) print_error("# %s\n", words);
  assert_non_null(strstr(words, wanted));
}

static void bad_recipes(void **state) {
  (void)state;
  lac_dust_recipe recipe = mixture();
  recipe.mass_fraction[0] = 0.2;
  refused(&recipe, "must sum to 1; they sum to 0.9");
  recipe = mixture();
  recipe.smallest = 1;
  refused(&recipe, "below the largest");
  recipe = mixture();
  recipe.porosity = 1;
  refused(&recipe, "porosity");
  recipe = mixture();
  recipe.temperature = 400;
  refused(&recipe, "temperature");
  recipe = mixture();
  recipe.components = 0;
  refused(&recipe, "one to eight");
}

int main(void) {
  gsl_set_error_handler_off();
  cmocka_set_message_output(CM_OUTPUT_TAP);
  lac_work_start(&work, 2, (size_t)1 << 30);
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(opacities_as_computed_elsewhere),
      cmocka_unit_test(rayleigh_limit),
      cmocka_unit_test(cooling_efficiencies_as_computed_elsewhere),
      cmocka_unit_test(constant_index),
      cmocka_unit_test(moments),
      cmocka_unit_test(tables_interpolate),
      cmocka_unit_test(means_and_threads),
      cmocka_unit_test(rosseland_within_bounds),
      cmocka_unit_test(bell_and_lin),
      cmocka_unit_test(solved_rim_is_consistent),
      cmocka_unit_test(bad_recipes),
      cmocka_unit_test(rows_of_dust),
  };
  const int failed = cmocka_run_group_tests_name("dust", tests, NULL, NULL);
  lac_work_end(&work);
  return failed;
}
