/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Dust: materials, populations of grains, their opacities per gram of dust. SI units. Objects are immutable and may be used
   from several threads at once; keep and drop are not for several threads at once.
   The means use GSL's adaptive quadrature, whose error handler ends the process where it isn't switched off: call gsl_set_error_handler_off() first. */
#ifndef LACUNA_DUST_H
#define LACUNA_DUST_H

#include <stdbool.h>
#include <stddef.h>

#include "lacuna/plan.h"
#include "lacuna/status.h"

#ifdef __cplusplus
extern "C" {
#endif

/* Materials. */
typedef struct lac_material lac_material;

/* A built-in analytic model by its name ("model_silicate", "water_ice", "iron", "soot", "silica_glass"); NULL if there is none. Not to be dropped. */
const lac_material *lac_material_named(const char *name);
const lac_material *lac_material_at(size_t index); /* the built-in ones in order; NULL past the last */

/* A user's table: count wavelengths in ascending order, n > 0, k >= 0, density > 0. Interpolated linearly in ln lambda: n, and ln k.
   n and k are held beyond the ends, where that is asked for. On LAC_OUT_OF_RANGE *where is the first bad row (or count for the density). LAC_NO_MEMORY. */
lac_status lac_material_table(const char *name, double density, size_t count, const double *wavelength, const double *n, const double *k,
                              lac_material **material, size_t *where);
lac_material *lac_material_keep(lac_material *material);
void lac_material_drop(lac_material *material);

/* Facts: name, density, the wavelengths it holds for, what it is and how good (one line each, for help). */
typedef struct {
  const char *name, *what, *validity, *source;
  double density, shortest, longest;
} lac_material_facts;
lac_material_facts lac_material_about(const lac_material *material);

/* Its index at a wavelength; temperature matters for water ice beyond 100 um (Maetzler et al. 2006), NaN: the model's own. LAC_OUT_OF_RANGE (with NaN)
   outside its wavelengths unless extrapolate, LAC_DOUBTFUL (with values) if extrapolated. */
lac_status lac_material_index(const lac_material *material, double wavelength, double temperature, bool extrapolate, double *n, double *k);

/* Populations. */
typedef struct lac_dust lac_dust;
typedef enum { LAC_POWER_LAW, LAC_LOG_NORMAL_SIZES, LAC_SINGLE_SIZE } lac_size_kind;
typedef enum { LAC_BRUGGEMAN, LAC_MAXWELL_GARNETT } lac_mixing_rule;

enum { LAC_MAX_COMPONENTS = 8 };

/* What a population is made of. Mass fractions >= 0 with sum 1 within 1e-6; porosity: volume fraction of vacuum, 0 <= p < 1.
   Sizes are radii in m: power law n(a) ~ a^-index from smallest to largest; log-normal about median with width (of ln a), cut at smallest and largest;
   single: median. With LAC_MAXWELL_GARNETT the first component is the matrix. */
typedef struct {
  size_t components;
  const lac_material *material[LAC_MAX_COMPONENTS];
  double mass_fraction[LAC_MAX_COMPONENTS];
  lac_mixing_rule mixing;
  double porosity;
  lac_size_kind sizes;
  double smallest, largest, index, median, width;
  double temperature; /* of the ice; NaN: the model's own */
  bool extrapolate;
} lac_dust_recipe;

/* Builds a population and its opacity table (0.1 um to 1 cm, or what the materials hold for), in parallel, interruptible. LAC_OUT_OF_RANGE with
   a one-line complaint in words (if not NULL). LAC_INTERRUPTED, LAC_NO_MEMORY. The same bits on any number of threads.
   Accuracy: absorption and scattering to 0.3 %, of themselves or of a thousandth of the extinction where they are less than that; asymmetry to 0.003.
   Not so for the narrow resonances of transparent grains of one size, nor is the absorption of transparent ones below a thousandth of the extinction known. */
lac_status lac_dust_new(lac_work *work, const lac_dust_recipe *recipe, lac_dust **dust, char *words, size_t size);
lac_dust *lac_dust_keep(lac_dust *dust);
void lac_dust_drop(const lac_dust *dust);

/* Per gram (in SI: kg) of dust, at a wavelength; from the table. NaN outside it. */
typedef struct {
  double absorption, scattering, extinction; /* m^2/kg */
  double asymmetry, albedo, effective_albedo;
} lac_opacity;
lac_opacity lac_dust_opacity(const lac_dust *dust, double wavelength);
lac_status lac_dust_opacity_direct(const lac_dust *dust, double wavelength, lac_opacity *opacity); /* evaluated anew: for checks */

/* Density of a grain, its pores included.
   Result: kg/m^3. Source: definition, from the materials' densities and the recipe. */
double lac_dust_density(const lac_dust *dust);

bool lac_dust_extrapolated(const lac_dust *dust, double wavelength);
void lac_dust_holds(const lac_dust *dust, double *shortest, double *longest); /* the wavelengths for which all its materials hold */

/* Planck and Rosseland mean absorption (Rosseland: extinction) opacity, m^2/kg, by adaptive quadrature over the table's wavelengths, 0.1 um to 1 cm.
   Given:    temperature  K, 1 to 1e5, such that half of a black body's power lies in these wavelengths
   Returned: error, relative: of the quadrature, of the table (0.003), and the share of the black body outside what the materials hold for, where
             their index is held as it is at the end (or the formula followed, if the recipe extrapolates). LAC_DOUBTFUL where it is above 0.01;
             LAC_OUT_OF_RANGE (with NaN), LAC_NO_MEMORY. */
lac_status lac_dust_planck_mean(const lac_dust *dust, double temperature, double *mean, double *error);
lac_status lac_dust_rosseland_mean(const lac_dust *dust, double temperature, double *mean, double *error);

/* Planck-mean absorption efficiency of single grains of the population's mixture, and the cooling efficiency Q_P(cold)/Q_P(hot). The first is
   computed anew (milliseconds), the second from a table made with the dust (below a microsecond).
   Given:  grain_size m, 1e-9 to 0.01; temperature, cold and hot K, 1 to 1e5
   Result: plain numbers; the table's to 0.3 %; NaN outside. Outside the materials' wavelengths as for the means above; for size parameters
           above 3000 by geometric optics.
   Source: definition of the Planck mean; Mie 1908 for the efficiencies. */
double lac_dust_planck_efficiency(const lac_dust *dust, double grain_size, double temperature);
double lac_dust_cooling_efficiency(const lac_dust *dust, double grain_size, double cold, double hot);

/* Temperature of a grain in the open at a distance from a star that shines as a black body: Q_P(T) T^4 = Q_P(T_star) L/(16 pi sigma r^2).
   Given:    grain_size m, 1e-9 to 0.01; luminosity W; effective_temperature K, 1 to 1e5; radius (distance) m
   Result:   K, to 0.1 %; NaN outside, or where it is not between 1 and 1e5 K.
   Source:   energy balance of a grain in the open. */
double lac_dust_grain_temperature(const lac_dust *dust, double grain_size, double luminosity, double effective_temperature, double radius);

/* Block functions of a lac_dust (as object) and a wavelength, for lac_value_of_object: dust_opacity/of_dust and its kin. */
lac_object_function lac_opacity_of_dust, lac_scattering_of_dust, lac_extinction_of_dust, lac_albedo_of_dust, lac_asymmetry_of_dust,
    lac_effective_albedo_of_dust;

/* Published laws, per unit mass of dust. */
double lac_dust_opacity_li_draine_2001(double wavelength);                           /* dust_opacity/li_draine_2001 */
double lac_dust_opacity_hildebrand_1983(double wavelength);                          /* dust_opacity/hildebrand_1983 */
double lac_dust_opacity_beckwith_1990(double wavelength, double gas_to_dust_ratio);  /* dust_opacity/beckwith_1990 */
double lac_rim_gas_density_solved_grey(double heating_luminosity, double stellar_mass, double disc_mass, double characteristic_radius,
                                       double surface_density_index, double mean_molecular_weight); /* rim_gas_density/solved_at_the_rim_grey */

/* The Rosseland mean opacity of gas and dust.
   Given:    gas_density  kg m^-3, 1e-17 to 1e-1
             temperature  K, 10 to 1e6
   Result:   m^2 kg^-1, per unit mass of gas and dust (not of dust alone); NaN outside.
   Accuracy: the fit's own, some tens of per cent; continuous where its regimes meet.
   Source:   Bell & Lin 1994, ApJ 427, 987 (coefficients from memory; the temperatures where they meet agree with those widely quoted). */
double lac_rosseland_opacity_bell_lin_1994(double gas_density, double temperature);

#ifdef __cplusplus
}
#endif

#endif
