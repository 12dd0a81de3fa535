/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Materials of grains: refractive indices m = n + i k (k >= 0, time factor exp(-i omega t)) from analytic models, or from a user's table.
   The models are sums of Lorentz, Drude and Gauss terms, each causal by itself, so that n and k obey Kramers and Kronig exactly. Without
   complex error functions: a Gaussian in Im eps has Dawson's function as its real part.
   Sources: Bohren & Huffman 1983, Eqs. 9.7 and 9.26 (Lorentz, Drude); for the Gaussians the Hilbert transform of exp(-x^2), which is
   -(2/sqrt(pi)) times Dawson's function. Far-infrared water ice: Maetzler et al. 2006, in Thermal Microwave Radiation, IET
   Electromagnetic Waves Series 52, ch. 5. */
#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_dawson.h>
#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "lacuna/constants.h"
#include "grains.h"
#include "material_models.h"

struct lac_material {
  lac_material_facts facts;
  double background; /* eps far above all terms */
  const lorentz_term *lorentz;
  const drude_term *drude;
  const gauss_term *gauss;
  size_t lorentz_terms, drude_terms, gauss_terms;
  bool freezes; /* water: its far infrared depends on temperature */
  /* A user's table instead; the strings and arrays are its own. */
  size_t references, rows;
  double *ln_wavelength, *n, *k;
};

#define UM 1e-6
#define LORENTZ(list) .lorentz = list, .lorentz_terms = sizeof list / sizeof list[0]
#define DRUDE(list) .drude = list, .drude_terms = sizeof list / sizeof list[0]
#define GAUSS(list) .gauss = list, .gauss_terms = sizeof list / sizeof list[0]

static const lac_material built_in[] = {
    {.facts =
         {.name = "model_silicate",
          .what = "a generic amorphous silicate, constructed, not measured; no olivine or pyroxene, and no crystals",
          .validity = "0.2 um to 3 mm; opacities to some 30 %, as far as the facts it was made to meet agree; its 9.7 um band is symmetric",
          .source =
              "constructed from published facts: m = 1.7 + 0.03 i in the near infrared and the far-infrared opacity of Draine & Lee 1984, "
              "ApJ 285, 89, and Li & Draine 2001, ApJ 554, 778; bands at 9.6 and 18.4 um",
          .density = 3300,
          .shortest = 0.2 * UM,
          .longest = 3000 * UM},
     .background = 1.507,
     LORENTZ(model_silicate_lorentz),
     GAUSS(model_silicate_gauss)},
    {.facts = {.name = "water_ice",
               .what = "crystalline water ice (Ih) at 266 K; with a temperature, its far infrared beyond 100 um follows that",
               .validity =
                   "0.2 um to 3 mm (with a temperature to 3 cm); n to 2.5 %, k to 20 % where it is above 1e-3, below only in order of "
                   "magnitude; without a temperature millimetre opacities are upper limits for cold discs",
               .source =
                   "fitted to Warren & Brandt 2008, JGR 113, D14220; Maetzler et al. 2006, IET Electromagnetic Waves Series 52, ch. 5",
               .density = 917,
               .shortest = 0.2 * UM,
               .longest = 3000 * UM},
     .background = 1.251,
     GAUSS(water_ice_gauss),
     .freezes = true},
    {.facts = {.name = "iron",
               .what = "metallic iron at room temperature",
               .validity =
                   "0.2 um to 3 mm; n to 7 %, k to 8 % up to 286 um, an extrapolation beyond; hot iron conducts several times worse",
               .source = "fitted to Ordal et al. 1988, Appl. Opt. 27, 1203; Johnson & Christy 1974, Phys. Rev. B 9, 5056",
               .density = 7874,
               .shortest = 0.2 * UM,
               .longest = 3000 * UM},
     .background = 3.01,
     LORENTZ(iron_lorentz),
     DRUDE(iron_drude)},
    {.facts = {.name = "soot",
               .what = "propane soot, for amorphous carbon",
               .validity = "0.2 um to 3 mm; n and k to 12 % from 0.44 to 10 um (n at 5 um to 24 %), k to 30 % below; beyond 10 um an "
                           "extrapolation, to a factor of "
                           "2, and 5 against other carbons",
               .source = "fitted to Dalzell & Sarofim 1969, J. Heat Transfer 91, 100",
               .density = 1800,
               .shortest = 0.2 * UM,
               .longest = 3000 * UM},
     .background = 1,
     LORENTZ(soot_lorentz),
     DRUDE(soot_drude)},
    {.facts = {.name = "silica_glass",
               .what = "fused silica",
               .validity = "0.2 um to 3 mm; n to 1e-4 below 2.5 um and 11 % at the bands' flanks, k to 23 % in the bands, 44 % in the "
                           "overtones at 2.5 to 7 um; beyond 126 um an extrapolation",
               .source = "fitted to Franta et al. 2016, Proc. SPIE 9890, 989014",
               .density = 2203,
               .shortest = 0.2 * UM,
               .longest = 3000 * UM},
     .background = 1.261,
     GAUSS(silica_glass_gauss)},
};
enum { BUILT_IN = sizeof built_in / sizeof built_in[0] };

const lac_material *lac_material_at(size_t index) { return index < BUILT_IN ? &built_in[index] : NULL; }

const lac_material *lac_material_named(const char *name) {
  for (size_t i = 0; i < BUILT_IN; i++)
    if (strcmp(built_in[i].facts.name, name) == 0) return &built_in[i];
  return NULL;
}

lac_material_facts lac_material_about(const lac_material *material) { return material->facts; }

/* ---- analytic models ---- */

typedef struct {
  double real, imaginary;
} permittivity;

static void add_lorentz(permittivity *eps, const lorentz_term *term, double w) {
  const double square = term->wavenumber * term->wavenumber, detuning = square - w * w, damping = term->damping * w;
  const double scale = term->strength * square / (detuning * detuning + damping * damping);
  eps->real += scale * detuning;
  eps->imaginary += scale * damping;
}

static void add_drude(permittivity *eps, const drude_term *term, double w) {
  const double scale = term->plasma_wavenumber * term->plasma_wavenumber / (w * w + term->damping * term->damping);
  eps->real -= scale;
  eps->imaginary += scale * term->damping / w;
}

static double dawson(double x) {
  gsl_sf_result result;
  return gsl_sf_dawson_e(x, &result) == GSL_SUCCESS ? result.val : (double)NAN;
}

/* exp(-x^2) - exp(-y^2) without cancellation at small wavenumbers: y^2 - x^2 = 4 w w0/s^2. */
static void add_gauss(permittivity *eps, const gauss_term *term, double w) {
  const double x = (w - term->wavenumber) / term->width, y = (w + term->wavenumber) / term->width;
  eps->real += M_2_SQRTPI * term->amplitude * (dawson(y) - dawson(x));
  eps->imaginary -= term->amplitude * exp(-x * x) * expm1(-4 * w * term->wavenumber / (term->width * term->width));
}

/* The principal root, each part without cancellation. */
static void index_of(permittivity eps, double *n, double *k) {
  const double size = hypot(eps.real, eps.imaginary);
  if (eps.real >= 0) {
    *n = sqrt((size + eps.real) / 2);
    *k = eps.imaginary / (2 * *n);
  } else {
    *k = sqrt((size - eps.real) / 2);
    *n = eps.imaginary / (2 * *k);
  }
}

static permittivity model(const lac_material *material, double wavelength) {
  const double w = 0.01 / wavelength; /* cm^-1 */
  permittivity eps = {material->background, 0};
  for (size_t i = 0; i < material->lorentz_terms; i++) add_lorentz(&eps, &material->lorentz[i], w);
  for (size_t i = 0; i < material->drude_terms; i++) add_drude(&eps, &material->drude[i], w);
  for (size_t i = 0; i < material->gauss_terms; i++) add_gauss(&eps, &material->gauss[i], w);
  return eps;
}

/* ---- cold water ice ---- */

/* The formula holds from 20 to 273 K, and up to 3 THz: 100 um. From there to 80 um it passes over into the model, evenly in ln lambda. */
#define ICE_SHORTEST (100 * UM)
#define ICE_PASSES (80 * UM)
#define ICE_LONGEST 0.03

static permittivity cold_ice(double wavelength, double temperature) {
  const double t = fmin(fmax(temperature, 20), 273), f = LAC_SPEED_OF_LIGHT / wavelength * 1e-9; /* GHz */
  const double theta = 300 / t - 1, growth = exp(335 / t);
  const double alpha = (0.00504 + 0.0062 * theta) * exp(-22.1 * theta);
  const double beta = 0.0207 / t * growth / ((growth - 1) * (growth - 1)) + 1.16e-11 * f * f + exp(-9.963 + 0.0372 * (t - 273));
  return (permittivity){fmax(3.10, 3.1884 + 9.1e-4 * (t - 273)), alpha / f + beta * f};
}

static permittivity ice(const lac_material *material, double wavelength, double temperature) {
  if (wavelength >= ICE_SHORTEST) return cold_ice(wavelength, temperature);
  permittivity warm = model(material, wavelength);
  if (wavelength <= ICE_PASSES) return warm;
  const permittivity cold = cold_ice(wavelength, temperature);
  const double share = log(wavelength / ICE_PASSES) / log(ICE_SHORTEST / ICE_PASSES);
  warm.real += share * (cold.real - warm.real);
  warm.imaginary = exp((1 - share) * log(warm.imaginary) + share * log(cold.imaginary));
  return warm;
}

/* ---- users' tables ---- */

static char *copied(const char *text) {
  const size_t size = strlen(text) + 1;
  char *copy = malloc(size);
  return copy ? memcpy(copy, text, size) : NULL;
}

static bool good_row(size_t i, const double *wavelength, const double *n, const double *k) {
  return wavelength[i] > 0 && isfinite(wavelength[i]) && n[i] > 0 && isfinite(n[i]) && k[i] >= 0 && isfinite(k[i]) &&
         (i == 0 || wavelength[i] > wavelength[i - 1]);
}

static void destroy(lac_material *material) {
  free((void *)(uintptr_t)material->facts.name);
  free(material->ln_wavelength);
  free(material);
}

lac_status lac_material_table(const char *name, double density, size_t count, const double *wavelength, const double *n, const double *k,
                              lac_material **material, size_t *where) {
  *material = NULL;
  for (*where = 0; *where < count; ++*where)
    if (!good_row(*where, wavelength, n, k)) return LAC_OUT_OF_RANGE;
  if (count < 2 || !(density > 0 && isfinite(density))) return LAC_OUT_OF_RANGE;
  lac_material *made = calloc(1, sizeof *made);
  if (!made) return LAC_NO_MEMORY;
  made->references = 1;
  made->rows = count;
  made->facts = (lac_material_facts){copied(name), "a table of the user's", "where the table has values", "the user",
                                     density,      wavelength[0],           wavelength[count - 1]};
  made->ln_wavelength = calloc(3 * count, sizeof *made->ln_wavelength);
  if (!made->facts.name || !made->ln_wavelength) {
    destroy(made);
    return LAC_NO_MEMORY;
  }
  made->n = made->ln_wavelength + count;
  made->k = made->n + count;
  for (size_t i = 0; i < count; i++) made->ln_wavelength[i] = log(wavelength[i]);
  memcpy(made->n, n, count * sizeof *n);
  memcpy(made->k, k, count * sizeof *k);
  *material = made;
  return LAC_OK;
}

lac_material *lac_material_keep(lac_material *material) {
  if (material->references) material->references++;
  return material;
}

void lac_material_drop(lac_material *material) {
  if (material && material->references && --material->references == 0) destroy(material);
}

/* n linearly and k geometrically in ln lambda; k linearly next to a zero; beyond the ends both are held. */
static void look_up(const lac_material *table, double wavelength, double *n, double *k) {
  const double at = log(wavelength);
  size_t low = 0, high = table->rows - 1;
  while (high - low > 1) {
    const size_t middle = (low + high) / 2;
    if (table->ln_wavelength[middle] <= at) low = middle;
    else high = middle;
  }
  const double share = fmin(fmax((at - table->ln_wavelength[low]) / (table->ln_wavelength[high] - table->ln_wavelength[low]), 0), 1);
  const double a = table->k[low], b = table->k[high];
  *n = table->n[low] + share * (table->n[high] - table->n[low]);
  *k = a > 0 && b > 0 ? a * pow(b / a, share) : a + share * (b - a);
}

/* ---- all ---- */

void lac_material_holds(const lac_material *material, double temperature, double *shortest, double *longest) {
  *shortest = material->facts.shortest;
  *longest = material->freezes && temperature > 0 ? ICE_LONGEST : material->facts.longest;
}

lac_status lac_material_index(const lac_material *material, double wavelength, double temperature, bool extrapolate, double *n, double *k) {
  *n = *k = (double)NAN;
  double shortest, longest;
  lac_material_holds(material, temperature, &shortest, &longest);
  const bool inside = wavelength >= shortest && wavelength <= longest;
  if (!(wavelength > 0) || !isfinite(wavelength) || (!inside && !extrapolate)) return LAC_OUT_OF_RANGE;
  if (material->rows) look_up(material, wavelength, n, k);
  else index_of(material->freezes && temperature > 0 ? ice(material, wavelength, temperature) : model(material, wavelength), n, k);
  if (!(*n > 0 && *k >= 0)) return LAC_OUT_OF_RANGE;
  return inside ? LAC_OK : LAC_DOUBTFUL;
}
