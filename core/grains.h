/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What the files of dust share: what a population consists of, its tables, and the grains' index and efficiencies. */
#ifndef LACUNA_CORE_GRAINS_H
#define LACUNA_CORE_GRAINS_H

#include <math.h>

#include "adaptive.h"
#include "lacuna/dust.h"
#include "lacuna/optics.h"

/* Radii at which a population is integrated, and the weight of the efficiency of each in the opacity: pi a^2 n(a) da over the mass. */
typedef struct {
  size_t count;
  double *radius, *weight;
} lac_sizes;

/* Planck-mean absorption efficiencies of single grains (their logarithms, over the logarithm of the radius), and Planck means of the
   population: at temperatures even in ln T. */
enum { LAC_TEMPERATURES = 116 };

struct lac_dust {
  size_t references;
  lac_dust_recipe recipe;
  size_t mixed; /* components of the mixture, the pores among them */
  double volume_fraction[LAC_MAX_COMPONENTS + 1];
  double density;
  double shortest, longest; /* what all materials hold for, within the table's wavelengths */
  lac_sizes sizes;
  lac_table opacity;    /* over ln wavelength: ln absorption, ln scattering, asymmetry */
  lac_table efficiency; /* over ln radius: ln Q_P at each temperature */
  double ln_mean[LAC_TEMPERATURES];
};

/* The opacity table's wavelengths, in m. */
#define LAC_TABLE_SHORTEST 1e-7
#define LAC_TABLE_LONGEST 1e-2

/* What a material holds for, at a temperature (NaN: the model's own). */
void lac_material_holds(const lac_material *material, double temperature, double *shortest, double *longest);

/* The index of the grains' material; beyond what the components hold for it stays what it is there, unless extrapolated. */
lac_status lac_grains_index(const lac_dust *dust, double wavelength, double *n, double *k);

/* Efficiencies of spheres of any size parameter > 0: below and above what Mie's series is for, by its limits. x, n and k are changed.
   LAC_NO_MEMORY, LAC_OUT_OF_RANGE. */
lac_status lac_grains_efficiencies(size_t count, double *x, double *n, double *k, double greatest_x, lac_efficiencies *out);

/* Quadrature over a population's sizes with so many radii for each e-fold. LAC_NO_MEMORY. */
lac_status lac_sizes_new(const lac_dust *dust, double radii_per_efold, lac_sizes *sizes);
void lac_sizes_free(lac_sizes *sizes);

/* Opacities at count wavelengths, on many threads. LAC_INTERRUPTED, LAC_NO_MEMORY. */
lac_status lac_grains_opacities(lac_work *work, const lac_dust *dust, const lac_sizes *sizes, size_t count, const double *wavelength,
                                lac_opacity *opacity);

/* Fills dust->efficiency and dust->ln_mean; the opacity table is there. LAC_INTERRUPTED, LAC_NO_MEMORY. */
lac_status lac_planck_tables_fill(lac_work *work, lac_dust *dust);

/* From the table whatever the materials hold for: what the means over black bodies need. */
lac_opacity lac_dust_tabled_opacity(const lac_dust *dust, double wavelength);
double lac_dust_tabled_ln_absorption(const lac_dust *dust, double ln_wavelength);

/* The population's Planck mean from its table; NaN where less than 98 % of the black body lie in the table's wavelengths. */
double lac_dust_tabled_planck_mean(const lac_dust *dust, double temperature);

/* A task done for each item 0 .. count - 1, on many threads, stopped between items. The task's status ends it where it is not LAC_OK. */
typedef lac_status lac_item_task(void *context, size_t item);
lac_status lac_for_items(lac_work *work, size_t count, lac_item_task *task, void *context);

/* Functions of objects and of the grey rim, for rows. */
lac_object_function lac_rim_gas_density_of_dust;
double lac_solved_grey_rim(double heating_luminosity, double stellar_mass, double disc_mass, double characteristic_radius,
                           double surface_density_index, double mean_molecular_weight);

#endif
