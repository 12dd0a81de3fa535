/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Means over black bodies: of a population's opacity (Planck, Rosseland), and of single grains' absorption efficiency, from which
   follow how well a grain cools and how warm it gets in a star's light.
   Q_P(a, T) = int Q_abs(a, lambda) B_lambda(T) dlambda / int B_lambda(T) dlambda. It is dear (a Mie series at hundreds of wavelengths)
   and wanted for many draws, so it is tabulated over ln a and ln T when the dust is made; lac_dust_planck_efficiency computes it anew. */
#include <gsl/gsl_errno.h>
#include <gsl/gsl_integration.h>
#include <math.h>
#include <stdlib.h>

#include "grains.h"
#include "lacuna/constants.h"
#include "lacuna/planck.h"
#include "root.h"

#define SMALLEST_GRAIN 1e-9
#define LARGEST_GRAIN 1e-2
#define COLDEST 1.0
#define HOTTEST 1e5
/* All wavelengths at which bodies between these temperatures shine. */
#define SHORTEST 1e-8
#define LONGEST 0.1
#define GREATEST_X 3000.0 /* above, geometric optics: see lac_grains_efficiencies */

enum { WAVELENGTHS = 646 }; /* even in ln lambda: 0.025 apart, less than a third of the width of the sharpest band */
enum { FIRST_RADII = 20 };
#define TABLE_TOLERANCE 2.5e-3 /* resonances between the wavelengths leave a noise of some 1e-3 */
#define FINEST 0.1

static double ln_temperature(size_t t) { return log(COLDEST) + log(HOTTEST / COLDEST) * ((double)t / (LAC_TEMPERATURES - 1)); }

static double grid_wavelength(size_t i) { return SHORTEST * exp(log(LONGEST / SHORTEST) * ((double)i / (WAVELENGTHS - 1))); }

/* ---- tables ---- */

typedef struct {
  lac_work *work;
  const lac_dust *dust;
  double wavelength[WAVELENGTHS], n[WAVELENGTHS], k[WAVELENGTHS];
  double share[LAC_TEMPERATURES][WAVELENGTHS]; /* of a black body's power at each wavelength */
  const double *ln_radius;                     /* of one round */
  double *values;
} mean_maker;

static lac_status start_maker(mean_maker *maker) {
  for (size_t i = 0; i < WAVELENGTHS; i++) {
    maker->wavelength[i] = grid_wavelength(i);
    const lac_status status = lac_grains_index(maker->dust, maker->wavelength[i], &maker->n[i], &maker->k[i]);
    if (status != LAC_OK) return status;
  }
  for (size_t t = 0; t < LAC_TEMPERATURES; t++) {
    double *share = maker->share[t], sum = 0;
    lac_planck_lambda_block(WAVELENGTHS, share, maker->wavelength, exp(ln_temperature(t)));
    for (size_t i = 0; i < WAVELENGTHS; i++) sum += share[i] *= maker->wavelength[i];
    for (size_t i = 0; i < WAVELENGTHS; i++) share[i] /= sum;
  }
  return LAC_OK;
}

static lac_status efficiencies_of_radius(void *context, size_t item) {
  const mean_maker *maker = context;
  const double radius = exp(maker->ln_radius[item]);
  double x[WAVELENGTHS], n[WAVELENGTHS], k[WAVELENGTHS];
  lac_efficiencies q[WAVELENGTHS];
  for (size_t i = 0; i < WAVELENGTHS; i++) {
    x[i] = 2 * M_PI * radius / maker->wavelength[i];
    n[i] = maker->n[i];
    k[i] = maker->k[i];
  }
  const lac_status status = lac_grains_efficiencies(WAVELENGTHS, x, n, k, GREATEST_X, q);
  for (size_t t = 0; t < LAC_TEMPERATURES && status == LAC_OK; t++) {
    double mean = 0;
    for (size_t i = 0; i < WAVELENGTHS; i++) mean += maker->share[t][i] * q[i].absorption;
    maker->values[item * LAC_TEMPERATURES + t] = log(fmax(mean, 1e-300));
  }
  return status;
}

static lac_status sample_efficiencies(void *context, size_t count, const double *ln_radius, double *values) {
  mean_maker *maker = context;
  maker->ln_radius = ln_radius;
  maker->values = values;
  return lac_for_items(maker->work, count, efficiencies_of_radius, maker);
}

static bool efficiencies_agree(size_t width, const double *guess, const double *exact) {
  for (size_t t = 0; t < width; t++)
    if (!(fabs(guess[t] - exact[t]) <= TABLE_TOLERANCE)) return false;
  return true;
}

/* The population's means, from its opacity table. */
static void fill_means(const mean_maker *maker, lac_dust *dust) {
  double opacity[WAVELENGTHS] = {0};
  bool inside[WAVELENGTHS];
  for (size_t i = 0; i < WAVELENGTHS; i++) {
    inside[i] = maker->wavelength[i] >= LAC_TABLE_SHORTEST && maker->wavelength[i] <= LAC_TABLE_LONGEST;
    if (inside[i]) opacity[i] = lac_dust_tabled_opacity(dust, maker->wavelength[i]).absorption;
  }
  for (size_t t = 0; t < LAC_TEMPERATURES; t++) {
    double sum = 0, covered = 0;
    for (size_t i = 0; i < WAVELENGTHS; i++) {
      sum += maker->share[t][i] * opacity[i];
      if (inside[i]) covered += maker->share[t][i];
    }
    dust->ln_mean[t] = covered >= 0.98 ? log(sum / covered) : (double)NAN;
  }
}

lac_status lac_planck_tables_fill(lac_work *work, lac_dust *dust) {
  mean_maker *maker = calloc(1, sizeof *maker);
  if (!maker) return LAC_NO_MEMORY;
  maker->work = work;
  maker->dust = dust;
  lac_status status = start_maker(maker);
  dust->efficiency.width = LAC_TEMPERATURES;
  if (status == LAC_OK)
    status = lac_table_fill(log(SMALLEST_GRAIN), log(LARGEST_GRAIN), FIRST_RADII, FINEST, sample_efficiencies, efficiencies_agree, maker,
                            &dust->efficiency);
  if (status == LAC_OK) fill_means(maker, dust);
  free(maker);
  return status;
}

/* Even places: the cubic's weights depend on the fraction of a step alone. */
static size_t temperature_weights(double temperature, double *weight) {
  const double at = log(temperature / COLDEST) / log(HOTTEST / COLDEST) * (LAC_TEMPERATURES - 1);
  const size_t below = (size_t)at, first = below == 0 ? 0 : below > LAC_TEMPERATURES - 3 ? LAC_TEMPERATURES - 4 : below - 1;
  const double a = at - (double)first, b = a - 1, c = a - 2, d = a - 3;
  weight[0] = -b * c * d / 6;
  weight[1] = a * c * d / 2;
  weight[2] = -a * b * d / 2;
  weight[3] = a * b * c / 6;
  return first;
}

static bool in_table(double grain_size, double temperature) {
  return grain_size >= SMALLEST_GRAIN && grain_size <= LARGEST_GRAIN && temperature >= COLDEST && temperature <= HOTTEST;
}

/* Needs in_table. */
static double tabled_ln_efficiency(const lac_dust *dust, double grain_size, double temperature) {
  const lac_table *table = &dust->efficiency;
  double along_radius[4], along_temperature[4], sum = 0;
  const size_t first = lac_cubic_weights(table->count, table->place, log(grain_size), along_radius);
  const size_t t = temperature_weights(temperature, along_temperature);
  for (size_t i = 0; i < 4; i++) {
    const double *value = table->value + (first + i) * table->width + t;
    for (size_t j = 0; j < 4; j++) sum += along_radius[i] * along_temperature[j] * value[j];
  }
  return sum;
}

double lac_dust_cooling_efficiency(const lac_dust *dust, double grain_size, double cold, double hot) {
  if (!in_table(grain_size, cold) || !in_table(grain_size, hot)) return (double)NAN;
  return exp(tabled_ln_efficiency(dust, grain_size, cold) - tabled_ln_efficiency(dust, grain_size, hot));
}

double lac_dust_tabled_planck_mean(const lac_dust *dust, double temperature) {
  if (!(temperature >= COLDEST && temperature <= HOTTEST)) return (double)NAN;
  double weight[4], sum = 0;
  const size_t first = temperature_weights(temperature, weight);
  for (size_t j = 0; j < 4; j++) sum += weight[j] * dust->ln_mean[first + j];
  return exp(sum);
}

/* ---- the temperature of a grain ---- */

typedef struct {
  const lac_dust *dust;
  double grain_size, ln_heating;
} grain_balance;

static double surplus(void *context, double ln_t) {
  const grain_balance *balance = context;
  return tabled_ln_efficiency(balance->dust, balance->grain_size, exp(ln_t)) + 4 * ln_t - balance->ln_heating;
}

double lac_dust_grain_temperature(const lac_dust *dust, double grain_size, double luminosity, double effective_temperature, double radius) {
  if (!in_table(grain_size, effective_temperature) || !(luminosity > 0) || !(radius > 0)) return (double)NAN;
  grain_balance balance = {dust, grain_size,
                           tabled_ln_efficiency(dust, grain_size, effective_temperature) +
                               log(luminosity / (16 * M_PI * LAC_STEFAN_BOLTZMANN * radius * radius))};
  return exp(lac_root_between(surplus, &balance, log(COLDEST) + 1e-12, log(HOTTEST) - 1e-12));
}

/* ---- by adaptive quadrature ---- */

enum { INTERVALS = 400 };
#define OPACITY_ERROR 3e-3 /* of the opacity table, as promised */

/* Over ln lambda, where a black body shines: h c/(lambda k T) from 60 to 1e-3; within low and high. *error is absolute. */
static lac_status integral(double (*f)(double, void *), void *context, double temperature, double low, double high, double tolerance,
                           double *value, double *error) {
  *value = *error = (double)NAN;
  const double from = log(fmax(low, LAC_SECOND_RADIATION / (60 * temperature))),
               to = log(fmin(high, LAC_SECOND_RADIATION / (1e-3 * temperature)));
  if (!(from < to)) return LAC_OUT_OF_RANGE;
  gsl_integration_workspace *workspace = gsl_integration_workspace_alloc(INTERVALS);
  if (!workspace) return LAC_NO_MEMORY;
  gsl_function function = {f, context};
  const int status = gsl_integration_qag(&function, from, to, 0, tolerance, INTERVALS, GSL_INTEG_GAUSS15, workspace, value, error);
  gsl_integration_workspace_free(workspace);
  if (status != GSL_SUCCESS && !isfinite(*value)) return LAC_OUT_OF_RANGE;
  return status == GSL_SUCCESS ? LAC_OK : LAC_DOUBTFUL;
}

/* The share of a black body's power between two wavelengths. */
static double share_between(double low, double high, double temperature) {
  return lac_blackbody_fraction(high, temperature) - lac_blackbody_fraction(low, temperature);
}

typedef struct {
  const lac_dust *dust;
  double temperature, grain_size;
  lac_status status;
} integrand;

static double absorbed_by_grain(double ln_wavelength, void *context) {
  integrand *i = context;
  const double wavelength = exp(ln_wavelength);
  double x = 2 * M_PI * i->grain_size / wavelength, n, k;
  lac_efficiencies q = {0};
  if (i->status == LAC_OK) i->status = lac_grains_index(i->dust, wavelength, &n, &k);
  if (i->status == LAC_OK) i->status = lac_grains_efficiencies(1, &x, &n, &k, GREATEST_X, &q);
  return q.absorption * wavelength * lac_planck_lambda(wavelength, i->temperature);
}

double lac_dust_planck_efficiency(const lac_dust *dust, double grain_size, double temperature) {
  if (!in_table(grain_size, temperature)) return (double)NAN;
  integrand i = {dust, temperature, grain_size, LAC_OK};
  double value, error;
  const lac_status status = integral(absorbed_by_grain, &i, temperature, SHORTEST, LONGEST, 1e-6, &value, &error);
  if (i.status != LAC_OK || (status != LAC_OK && !(error <= 1e-3 * value))) return (double)NAN;
  return M_PI * value / (lac_blackbody_exitance(temperature) * share_between(SHORTEST, LONGEST, temperature));
}

static double absorbed(double ln_wavelength, void *context) {
  const integrand *i = context;
  const double wavelength = exp(ln_wavelength);
  return exp(lac_dust_tabled_ln_absorption(i->dust, ln_wavelength)) * wavelength * lac_planck_lambda(wavelength, i->temperature);
}

/* dB_nu/dT dnu, which is dB_nu/dT c/lambda dln lambda; let through, and all. */
static double let_through(double ln_wavelength, void *context) {
  const integrand *i = context;
  const double wavelength = exp(ln_wavelength);
  return lac_planck_nu_slope(wavelength, i->temperature) * LAC_SPEED_OF_LIGHT / wavelength /
         lac_dust_tabled_opacity(i->dust, wavelength).extinction;
}

static double slope(double ln_wavelength, void *context) {
  const integrand *i = context;
  const double wavelength = exp(ln_wavelength);
  return lac_planck_nu_slope(wavelength, i->temperature) * LAC_SPEED_OF_LIGHT / wavelength;
}

/* A mean's error: that of the quadrature, that of the table, and the share of the black body outside what the materials hold for. */
static lac_status finish(const lac_dust *dust, double temperature, double quadrature, double *mean, double *error) {
  const double covered = share_between(LAC_TABLE_SHORTEST, LAC_TABLE_LONGEST, temperature);
  *error = quadrature + OPACITY_ERROR + 1 - share_between(dust->shortest, dust->longest, temperature);
  if (covered >= 0.5 && isfinite(*mean)) return *error > 0.01 ? LAC_DOUBTFUL : LAC_OK;
  *mean = *error = (double)NAN;
  return LAC_OUT_OF_RANGE;
}

lac_status lac_dust_planck_mean(const lac_dust *dust, double temperature, double *mean, double *error) {
  *mean = *error = (double)NAN;
  if (!(temperature >= COLDEST && temperature <= HOTTEST)) return LAC_OUT_OF_RANGE;
  integrand i = {.dust = dust, .temperature = temperature};
  double value, part;
  const lac_status status = integral(absorbed, &i, temperature, LAC_TABLE_SHORTEST, LAC_TABLE_LONGEST, 3e-4, &value, &part);
  if (status != LAC_OK && status != LAC_DOUBTFUL) return status;
  *mean = M_PI * value / (lac_blackbody_exitance(temperature) * share_between(LAC_TABLE_SHORTEST, LAC_TABLE_LONGEST, temperature));
  return finish(dust, temperature, part / value, mean, error);
}

lac_status lac_dust_rosseland_mean(const lac_dust *dust, double temperature, double *mean, double *error) {
  *mean = *error = (double)NAN;
  if (!(temperature >= COLDEST && temperature <= HOTTEST)) return LAC_OUT_OF_RANGE;
  integrand i = {.dust = dust, .temperature = temperature};
  double through, through_error, all, all_error;
  lac_status status = integral(let_through, &i, temperature, LAC_TABLE_SHORTEST, LAC_TABLE_LONGEST, 3e-4, &through, &through_error);
  if (status == LAC_OK || status == LAC_DOUBTFUL)
    status = integral(slope, &i, temperature, LAC_TABLE_SHORTEST, LAC_TABLE_LONGEST, 1e-6, &all, &all_error);
  if (status != LAC_OK && status != LAC_DOUBTFUL) return status;
  *mean = all / through;
  return finish(dust, temperature, through_error / through + all_error / all, mean, error);
}
