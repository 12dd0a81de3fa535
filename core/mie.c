/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Coefficients of Mie's series (Bohren & Huffman 1983, Eq. 4.88) and sums over them, for several spheres side by side in real arithmetic,
   for what takes time is the wait for one division after another.

   With rho_n = psi_{n+1}(mx)/psi_n(mx) the coefficients are
     a_n = A/(A - iC),  A = psi_{n+1}(x) - V psi_n(x),  C = chi_{n+1}(x) - V chi_n(x),
   where V = rho_n/m + (n + 1)(1 - 1/m^2)/x for a_n and V = m rho_n for b_n. This is Eq. 4.88, the logarithmic derivative and
   psi_{n-1} put in terms of orders n and n+1: what cancels at small x is gone, so that no series is needed there. With the Wronskian
   psi_n chi_{n+1} - psi_{n+1} chi_n = 1,
     |A - iC|^2 = |A|^2 + |C|^2 + 2 Im V,  Re a = (|A|^2 + Im V)/|A - iC|^2,  Im a = Re(A C*)/|A - iC|^2,
     Re a - |a|^2 = Im V/|A - iC|^2:
   scattering and absorption are sums of positive terms, and weak absorption is no difference of large numbers.

   psi_n(x) and rho_n run downward, chi_n upward, each in its stable direction; the sum runs downward with them, so that only chi is
   stored. psi starts with any factor, which the Wronskian then gives. Over n steps the roundings of (2n+1)/x and (2n+1)/z add up as a
   random walk of the phase, but an error of 1/x or 1/z itself would add up in proportion to x: hence these two are kept in two parts. */
#include "mie.h"

#include <math.h>
#include <stddef.h>

#include "clones.h"

enum { LANES = LAC_MIE_LANES };

#define EACH_LANE for (int l = 0; l < LANES; l++)

/* ---- Where to start ---- */

/* Beyond order x the coefficients fall like Ai/Bi of 2^(1/3) (n - x)/x^(1/3) does: after 6 x^(1/3) they are 1e-12, and their number and
   weight take care of the rest where x is large; where it is small, the 6 orders more do. psi needs few relative digits there. The usual
   start of the ratio, some 16 orders above |z|, is too low for large transparent spheres (wrong by up to 1e-2): between order |z| and zero
   nothing damps what is wrong at the start. 8 |z|^(1/3) above |z| it is exp(-43). In an absorbing sphere it is damped by exp(-(N^2 - n^2)
   Im z/|z|^2) from N to n, so that N may be far below |z|. */
lac_mie_orders lac_mie_orders_of(double x, double n, double k) {
  const double enough = 40; /* exp(-40) = 4e-18 */
  double root = cbrt(x), z = x * hypot(n, k), absorbed = x * k;
  lac_mie_orders orders = {.terms = floor(x + 6 * root + 6)};
  orders.psi_start = floor(orders.terms + 2 * root + 8);
  double transparent = floor(fmax(orders.terms, z) + 8 * cbrt(z) + 16);
  double damped = absorbed > 0 ? floor(sqrt(orders.terms * orders.terms + enough * z * (z / absorbed)) + 10) : (double)INFINITY;
  orders.absorbed = damped < transparent;
  orders.ratio_start = fmax(orders.psi_start, orders.absorbed ? damped : transparent);
  return orders;
}

double lac_mie_most(const double *orders) {
  double most = 0;
  EACH_LANE most = fmax(most, orders[l]);
  return most;
}

static double least(const double *orders) {
  double lowest = (double)INFINITY;
  EACH_LANE lowest = fmin(lowest, orders[l]);
  return lowest;
}

/* ---- One sphere into its lane ---- */

/* A sum of two doubles, the second below the last bit of the first. */
typedef struct {
  double high, low;
} pair;

static pair product(double a, double b) { return (pair){a * b, fma(a, b, -(a * b))}; }

static pair sum(pair a, pair b) {
  double high = a.high + b.high, part = high - a.high;
  return (pair){high, (a.high - (high - part)) + (b.high - part) + (a.low + b.low)};
}

/* a/b in two parts of which the first has the 24 bits of a float: times an odd number below 2^29 it is exact. */
static void split_quotient(double a, pair b, double *high, double *low) {
  double quotient = a / b.high, rest = (fma(-quotient, b.high, a) - quotient * b.low) / b.high;
  *high = (double)(float)quotient;
  *low = (quotient - *high) + rest;
}

static void place_index(lac_mie_group *g, int l, double x, double n, double k) {
  double square = n * n + k * k, real = (n - k) * (n + k), scale = 1 / (square * square * x);
  pair exact = sum(product(n, n), product(k, k)), z_scale = product(exact.high, x);
  z_scale.low += exact.low * x;
  split_quotient(n, z_scale, &g->inverse_z_re_high[l], &g->inverse_z_re_low[l]);
  split_quotient(-k, z_scale, &g->inverse_z_im_high[l], &g->inverse_z_im_low[l]);
  g->m_re[l] = n;
  g->m_im[l] = k;
  g->inverse_m_re[l] = n / square;
  g->inverse_m_im[l] = -k / square;
  g->contrast_re[l] = (((n - 1) * (n + 1) - k * k) * real + 4 * (n * k) * (n * k)) * scale;
  g->contrast_im[l] = 2 * n * k * scale;
}

void lac_mie_place(lac_mie_group *g, int l, double x, double n, double k) {
  lac_mie_orders orders = lac_mie_orders_of(x, n, k);
  place_index(g, l, x, n, k);
  split_quotient(1, (pair){x, 0}, &g->inverse_x_high[l], &g->inverse_x_low[l]);
  g->x[l] = x;
  g->terms[l] = orders.terms;
  g->psi_start[l] = orders.psi_start;
  g->ratio_start[l] = orders.ratio_start;
  g->chi_first[l] = -sin(x);
  g->chi_second[l] = cos(x);
  g->psi[l] = 1;
  g->psi_above[l] = 0;
  /* A wave that only runs inward has the logarithmic derivative -i; else the ratio is small at the start. */
  double above = orders.absorbed ? orders.ratio_start + 1 : 0;
  g->ratio_re[l] = above * g->inverse_z_re_high[l];
  g->ratio_im[l] = orders.absorbed ? above * g->inverse_z_im_high[l] + 1 : 0;
  g->a_re[l] = g->a_im[l] = g->b_re[l] = g->b_im[l] = 0;
  g->scattering[l] = g->absorption[l] = g->back_re[l] = g->back_im[l] = g->asymmetry[l] = 0;
}

/* ---- Recurrences ---- */

/* With `waiting`, some lanes have not started yet and keep what they have: each sphere starts where it would start alone. */
LAC_INLINE double started(bool waiting, int condition, double yes, double no) { return !waiting || condition ? yes : no; }

LAC_INLINE double over(double odd, double high, double low) { return odd * high + odd * low; }

/* rho_{n-1} = 1/((2n+1)/z - rho_n). The imaginary part is a sum of positive terms. Where the real difference is zero to the last bit, a
   tiny one stands for it: the ratio is at a pole, and the next one at zero. */
LAC_INLINE void ratio_down(lac_mie_group *g, double n, bool waiting) {
  const double tiny = 1e-60;
  double odd = 2 * n + 1;
  EACH_LANE {
    double re = over(odd, g->inverse_z_re_high[l], g->inverse_z_re_low[l]) - g->ratio_re[l] + tiny;
    double im = over(odd, g->inverse_z_im_high[l], g->inverse_z_im_low[l]) - g->ratio_im[l];
    double scale = 1 / (re * re + im * im);
    g->ratio_re[l] = started(waiting, n <= g->ratio_start[l], re * scale, g->ratio_re[l]);
    g->ratio_im[l] = started(waiting, n <= g->ratio_start[l], -im * scale, g->ratio_im[l]);
  }
}

LAC_INLINE void psi_down(lac_mie_group *g, double n, bool waiting) {
  double odd = 2 * n + 1;
  EACH_LANE {
    double below = over(odd, g->inverse_x_high[l], g->inverse_x_low[l]) * g->psi[l] - g->psi_above[l];
    g->psi_above[l] = started(waiting, n <= g->psi_start[l], g->psi[l], g->psi_above[l]);
    g->psi[l] = started(waiting, n <= g->psi_start[l], below, g->psi[l]);
  }
}

/* Lanes with fewer terms than others run into infinity above them, where nobody looks. */
LAC_INLINE void chi_up(const lac_mie_group *g, double last, double *chi) {
  EACH_LANE chi[l] = g->chi_second[l];
  EACH_LANE chi[LANES + l] = over(1, g->inverse_x_high[l], g->inverse_x_low[l]) * chi[l] - g->chi_first[l];
  for (double n = 1; n < last; n++) {
    chi += LANES;
    EACH_LANE chi[LANES + l] = over(2 * n + 1, g->inverse_x_high[l], g->inverse_x_low[l]) * chi[l] - chi[l - LANES];
  }
}

/* Gives psi its factor where a lane's sum starts: above x, where psi chi has one sign and nothing cancels. */
LAC_INLINE void normalise(lac_mie_group *g, double n, const double *chi) {
  EACH_LANE {
    double wronskian = g->psi[l] * chi[LANES + l] - g->psi_above[l] * chi[l], factor = n == g->terms[l] ? 1 / wronskian : 1;
    g->psi[l] *= factor;
    g->psi_above[l] *= factor;
  }
}

/* ---- Sums ---- */

/* A and C of the head of the file, and |A|^2, |A - iC|^2, Re(A C*) from them. */
typedef struct {
  double size, whole, cross;
} coefficient;

LAC_INLINE coefficient coefficient_of(double v_re, double v_im, double psi, double psi_above, double chi, double chi_above) {
  double a_re = psi_above - v_re * psi, a_im = -v_im * psi;
  double c_re = chi_above - v_re * chi, c_im = -v_im * chi;
  double size = a_re * a_re + a_im * a_im;
  return (coefficient){size, size + (c_re * c_re + c_im * c_im) + 2 * v_im, a_re * c_re + a_im * c_im};
}

/* Adds the terms of order n (Bohren & Huffman 1983, Eqs. 4.61, 4.62, 4.82; the asymmetry from the section 4.5).
   One division serves both coefficients. */
LAC_INLINE void add_order(lac_mie_group *g, double n, const double *chi, bool waiting) {
  double odd = 2 * n + 1, sign = (size_t)n % 2 == 0 ? odd : -odd, same = odd / (n * (n + 1)), next = n * (n + 2) / (n + 1);
  EACH_LANE {
    double re = g->ratio_re[l], im = g->ratio_im[l], m_re = g->m_re[l], m_im = g->m_im[l];
    double electric_re = (re * g->inverse_m_re[l] - im * g->inverse_m_im[l]) + (n + 1) * g->contrast_re[l];
    double electric_im = (re * g->inverse_m_im[l] + im * g->inverse_m_re[l]) + (n + 1) * g->contrast_im[l];
    double magnetic_re = re * m_re - im * m_im, magnetic_im = re * m_im + im * m_re;
    coefficient a = coefficient_of(electric_re, electric_im, g->psi[l], g->psi_above[l], chi[l], chi[LANES + l]);
    coefficient b = coefficient_of(magnetic_re, magnetic_im, g->psi[l], g->psi_above[l], chi[l], chi[LANES + l]);
    double both = 1 / (a.whole * b.whole);
    double a_scale = started(waiting, n <= g->terms[l], both * b.whole, 0), b_scale = started(waiting, n <= g->terms[l], both * a.whole, 0);
    double a_re = started(waiting, n <= g->terms[l], (a.size + electric_im) * a_scale, 0);
    double a_im = started(waiting, n <= g->terms[l], a.cross * a_scale, 0);
    double b_re = started(waiting, n <= g->terms[l], (b.size + magnetic_im) * b_scale, 0);
    double b_im = started(waiting, n <= g->terms[l], b.cross * b_scale, 0);
    g->scattering[l] += odd * started(waiting, n <= g->terms[l], a.size * a_scale + b.size * b_scale, 0);
    g->absorption[l] += odd * started(waiting, n <= g->terms[l], electric_im * a_scale + magnetic_im * b_scale, 0);
    g->back_re[l] += sign * (a_re - b_re);
    g->back_im[l] += sign * (a_im - b_im);
    g->asymmetry[l] +=
        next * ((a_re * g->a_re[l] + a_im * g->a_im[l]) + (b_re * g->b_re[l] + b_im * g->b_im[l])) + same * (a_re * b_re + a_im * b_im);
    g->a_re[l] = a_re;
    g->a_im[l] = a_im;
    g->b_re[l] = b_re;
    g->b_im[l] = b_im;
  }
}

/* From the highest order of any lane down to the one where the sums start. Returned: the order reached. */
LAC_INLINE double down_to_terms(lac_mie_group *g) {
  double n = lac_mie_most(g->ratio_start), all_started = least(g->ratio_start);
  double psi_start = lac_mie_most(g->psi_start), terms = lac_mie_most(g->terms);
  for (; n > psi_start && n > all_started; n--) ratio_down(g, n, true);
  for (; n > psi_start; n--) ratio_down(g, n, false);
  for (; n > terms; n--) {
    ratio_down(g, n, true);
    psi_down(g, n, true);
  }
  return n;
}

LAC_CLONES void lac_mie_sum(lac_mie_group *group, double *chi) {
  lac_mie_group local = *group; /* nothing else points to it, so that the compiler may keep it in registers */
  lac_mie_group *g = &local;
  double n = down_to_terms(g), all_started = least(g->terms);
  chi_up(g, n + 1, chi);
  for (; n >= all_started; n--) {
    normalise(g, n, chi + (size_t)n * LANES);
    add_order(g, n, chi + (size_t)n * LANES, true);
    ratio_down(g, n, true);
    psi_down(g, n, true);
  }
  for (; n >= 1; n--) {
    add_order(g, n, chi + (size_t)n * LANES, false);
    ratio_down(g, n, false);
    psi_down(g, n, false);
  }
  *group = local;
}

void lac_mie_sum_and_keep(lac_mie_group *g, double *chi, double *coefficients) {
  double n = down_to_terms(g);
  chi_up(g, n + 1, chi);
  for (; n >= 1; n--) {
    normalise(g, n, chi + (size_t)n * LANES);
    add_order(g, n, chi + (size_t)n * LANES, true);
    double *kept = coefficients + 4 * ((size_t)n - 1);
    kept[0] = g->a_re[0], kept[1] = g->a_im[0], kept[2] = g->b_re[0], kept[3] = g->b_im[0];
    ratio_down(g, n, true);
    psi_down(g, n, true);
  }
}
