/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The Mie sums of several spheres side by side: what mie.c does for optics.c. */
#ifndef LACUNA_CORE_MIE_H
#define LACUNA_CORE_MIE_H

#include <stdbool.h>

/* So many that the divisions of one recurrence, which wait for one another, leave no gap: two vectors of eight, or four of four. */
enum { LAC_MIE_LANES = 16 };

typedef double lac_mie_lanes[LAC_MIE_LANES];

/* LAC_MIE_LANES spheres. A number that multiplies 2n+1 is split in two: `high` has 24 bits, so that the product is exact. */
typedef struct {
  lac_mie_lanes x, terms, psi_start, ratio_start; /* where the sum and the two downward recurrences start */
  lac_mie_lanes inverse_x_high, inverse_x_low;
  lac_mie_lanes inverse_z_re_high, inverse_z_re_low, inverse_z_im_high, inverse_z_im_low; /* 1/z, z = m x */
  lac_mie_lanes m_re, m_im, inverse_m_re, inverse_m_im;
  lac_mie_lanes contrast_re, contrast_im; /* (1 - 1/m^2)/x */
  lac_mie_lanes chi_first, chi_second;    /* of order -1 and 0 */

  lac_mie_lanes ratio_re, ratio_im, psi, psi_above; /* psi_{n+1}(z)/psi_n(z), psi_n(x), psi_{n+1}(x) */
  lac_mie_lanes a_re, a_im, b_re, b_im;             /* the coefficients of the order reached last */

  lac_mie_lanes scattering, absorption, back_re, back_im, asymmetry; /* sums over the orders */
} lac_mie_group;

/* Orders that a sphere takes: the terms summed, and where the recurrence of the ratio starts (as long as the whole work). */
typedef struct {
  double terms, psi_start, ratio_start;
  bool absorbed; /* the wave through the sphere is lost before it could come back */
} lac_mie_orders;

lac_mie_orders lac_mie_orders_of(double x, double n, double k);

/* Puts a sphere into a lane. */
void lac_mie_place(lac_mie_group *group, int lane, double x, double n, double k);

/* The greatest of some orders over the lanes. */
double lac_mie_most(const double *orders);

/* Sums over all orders. chi: scratch for LAC_MIE_LANES (lac_mie_most(group->terms) + 2) doubles. */
void lac_mie_sum(lac_mie_group *group, double *chi);

/* The same, and the coefficients of lane 0: coefficients[4 (n - 1)] and on are a_n and b_n, real and imaginary parts. */
void lac_mie_sum_and_keep(lac_mie_group *group, double *chi, double *coefficients);

#endif
