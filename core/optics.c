/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Scattering by a sphere: efficiencies of many spheres, which are sorted and handed to mie.c group by group, and the scattering matrix of
 * one. */
#include "lacuna/optics.h"

#include <math.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdlib.h>

#include "clones.h"
#include "mie.h"
#include "value.h"

/* Orders that the recurrence inside the sphere may take: beyond x |m| = 2e8 in a transparent sphere a single one would take a second or
   more, and 2n+1 would pass the 29 bits that mie.c reckons with. Indices beyond 1e6, or below its inverse, could overflow its products. */
#define MOST_ORDERS 2e8
#define GREATEST_INDEX 1e6

static bool in_domain(double x, double n, double k, lac_mie_orders *orders) {
  if (!(x >= 1e-6 && x <= 1e5 && n > 0 && k >= 0 && n <= GREATEST_INDEX && k <= GREATEST_INDEX && fmax(n, k) >= 1 / GREATEST_INDEX))
    return false;
  *orders = lac_mie_orders_of(x, n, k);
  return orders->ratio_start <= MOST_ORDERS;
}

/* A sphere and its work. Spheres of one group go through as many orders as the longest of them, so like goes with like. */
typedef struct {
  double work;
  size_t index;
} sphere;

static int by_work(const void *left, const void *right) {
  const sphere *a = left, *b = right;
  if (a->work != b->work) return a->work < b->work ? -1 : 1;
  return (a->index > b->index) - (a->index < b->index);
}

static const lac_efficiencies undefined = {(double)NAN, (double)NAN, (double)NAN, (double)NAN, (double)NAN};

/* The sums of a lane as efficiencies. What is not there scatters nothing, and evenly. */
static lac_efficiencies efficiencies_of(const lac_mie_group *group, int lane) {
  double x = group->x[lane], scale = 2 / (x * x), scattering = group->scattering[lane], absorption = group->absorption[lane];
  double re = group->back_re[lane], im = group->back_im[lane];
  if (group->m_re[lane] == 1 && group->m_im[lane] == 0) return (lac_efficiencies){0};
  return (lac_efficiencies){.extinction = scale * (scattering + absorption),
                            .scattering = scale * scattering,
                            .absorption = scale * absorption,
                            .backscatter = (re / x) * (re / x) + (im / x) * (im / x),
                            .asymmetry = 2 * group->asymmetry[lane] / scattering};
}

/* Lists the spheres in the domain, the least work first. Returned: how many are listed; most_terms: of any of them. */
static size_t list_spheres(size_t count, const double *x, const double *n, const double *k, sphere *list, double *most_terms) {
  size_t listed = 0;
  *most_terms = 0;
  for (size_t i = 0; i < count; i++) {
    lac_mie_orders orders;
    if (!in_domain(x[i], n[i], k[i], &orders)) continue;
    const double cost_of_term = 3; /* against an order of the ratio's recurrence alone, as measured */
    list[listed++] = (sphere){cost_of_term * orders.terms + orders.ratio_start, i};
    *most_terms = fmax(*most_terms, orders.terms);
  }
  qsort(list, listed, sizeof *list, by_work);
  return listed;
}

/* One group of spheres from the list; lanes left over repeat its last one. */
static void sum_group(size_t count, const sphere *list, const double *x, const double *n, const double *k, lac_efficiencies *out,
                      double *chi) {
  lac_mie_group group;
  for (size_t lane = 0; lane < LAC_MIE_LANES; lane++) {
    size_t i = list[lane < count ? lane : count - 1].index;
    lac_mie_place(&group, (int)lane, x[i], n[i], k[i]);
  }
  lac_mie_sum(&group, chi);
  for (size_t lane = 0; lane < LAC_MIE_LANES && lane < count; lane++) out[list[lane].index] = efficiencies_of(&group, (int)lane);
}

static lac_status take_chi(double terms, lac_buffer *chi) { return lac_buffer_take(NULL, ((size_t)terms + 2) * LAC_MIE_LANES, chi); }

lac_status lac_mie(size_t count, const double *x, const double *n, const double *k, lac_efficiencies *out) {
  for (size_t i = 0; i < count; i++) out[i] = undefined;
  if (count == 0) return LAC_OK;
  sphere *list = count <= SIZE_MAX / sizeof *list ? malloc(count * sizeof *list) : NULL;
  if (!list) return LAC_NO_MEMORY;
  double most_terms;
  size_t listed = list_spheres(count, x, n, k, list, &most_terms);
  lac_buffer chi;
  lac_status status = take_chi(most_terms, &chi);
  if (status == LAC_OK) {
    for (size_t i = 0; i < listed; i += LAC_MIE_LANES) sum_group(listed - i, list + i, x, n, k, out, chi.data);
    lac_buffer_give(&chi);
    if (listed < count) status = LAC_OUT_OF_RANGE;
  }
  free(list);
  return status;
}

/* ---- The scattering matrix ---- */

enum { ANGLES = 64 };

/* |S1|^2 and |S2|^2 at up to ANGLES angles: Bohren & Huffman 1983, Eq. 4.74, the angular functions by Eq. 4.47. */
LAC_CLONES static void amplitudes(size_t terms, const double *coefficients, size_t count, const double *cosine, double *perpendicular,
                                  double *parallel) {
  double s1_re[ANGLES] = {0}, s1_im[ANGLES] = {0}, s2_re[ANGLES] = {0}, s2_im[ANGLES] = {0}, angular[ANGLES], before[ANGLES] = {0},
         mu[ANGLES] = {0};
  for (size_t i = 0; i < ANGLES; i++) {
    mu[i] = i < count ? cosine[i] : 0;
    angular[i] = 1;
  }
  for (size_t order = 1; order <= terms; order++) {
    const double *c = coefficients + 4 * (order - 1);
    double n = (double)order, scale = (2 * n + 1) / (n * (n + 1)), up = (2 * n + 1) / n, down = (n + 1) / n;
    double a_re = scale * c[0], a_im = scale * c[1], b_re = scale * c[2], b_im = scale * c[3];
    for (size_t i = 0; i < ANGLES; i++) {
      double pi = angular[i], tau = n * mu[i] * pi - (n + 1) * before[i];
      s1_re[i] += a_re * pi + b_re * tau;
      s1_im[i] += a_im * pi + b_im * tau;
      s2_re[i] += a_re * tau + b_re * pi;
      s2_im[i] += a_im * tau + b_im * pi;
      angular[i] = up * mu[i] * pi - down * before[i];
      before[i] = pi;
    }
  }
  for (size_t i = 0; i < count; i++) {
    perpendicular[i] = s1_re[i] * s1_re[i] + s1_im[i] * s1_im[i];
    parallel[i] = s2_re[i] * s2_re[i] + s2_im[i] * s2_im[i];
  }
}

static void matrix_from(const lac_mie_group *group, const double *coefficients, size_t count, const double *cosine, double *phase,
                        double *polarisation) {
  double scale = 1 / group->scattering[0]; /* the mean of |S1|^2 + |S2|^2 over the sphere is x^2 Qsca/2, which is the sum itself */
  for (size_t i = 0; i < count; i += ANGLES) {
    size_t some = count - i < ANGLES ? count - i : ANGLES;
    double perpendicular[ANGLES], parallel[ANGLES];
    amplitudes((size_t)group->terms[0], coefficients, some, cosine + i, perpendicular, parallel);
    for (size_t j = 0; j < some; j++) {
      double both = perpendicular[j] + parallel[j];
      bool seen = cosine[i + j] >= -1 && cosine[i + j] <= 1;
      phase[i + j] = seen ? scale * both : (double)NAN;
      polarisation[i + j] = seen ? (perpendicular[j] - parallel[j]) / both : (double)NAN;
    }
  }
}

static lac_status sum_one(double x, double n, double k, lac_mie_group *group, lac_buffer *coefficients) {
  for (int lane = 0; lane < LAC_MIE_LANES; lane++) lac_mie_place(group, lane, x, n, k);
  lac_buffer chi;
  lac_status status = take_chi(group->terms[0], &chi);
  if (status != LAC_OK) return status;
  status = lac_buffer_take(NULL, 4 * (size_t)group->terms[0], coefficients);
  if (status == LAC_OK) lac_mie_sum_and_keep(group, chi.data, coefficients->data);
  lac_buffer_give(&chi);
  return status;
}

lac_status lac_mie_scattering(double x, double n, double k, size_t count, const double *cosine, double *phase, double *polarisation) {
  lac_mie_orders orders;
  bool good = in_domain(x, n, k, &orders) && !(n == 1 && k == 0); /* nothing scatters nothing */
  for (size_t i = 0; i < count; i++) {
    good = good && cosine[i] >= -1 && cosine[i] <= 1;
    phase[i] = polarisation[i] = (double)NAN;
  }
  if (!good) return LAC_OUT_OF_RANGE;
  lac_mie_group group;
  lac_buffer coefficients;
  lac_status status = sum_one(x, n, k, &group, &coefficients);
  if (status != LAC_OK) return status;
  matrix_from(&group, coefficients.data, count, cosine, phase, polarisation);
  lac_buffer_give(&coefficients);
  return LAC_OK;
}
