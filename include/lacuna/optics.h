/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Scattering and absorption by homogeneous spheres (Mie), and the refractive index of mixtures. Sign convention: m = n + i k with
   k >= 0, time factor exp(-i omega t) (Bohren & Huffman 1983). */
#ifndef LACUNA_OPTICS_H
#define LACUNA_OPTICS_H

#include <stddef.h>

#include "lacuna/status.h"

#ifdef __cplusplus
extern "C" {
#endif

/* Efficiencies of a sphere: cross sections over pi a^2. */
typedef struct {
  double extinction, scattering, absorption; /* extinction = scattering + absorption, each without cancellation */
  double backscatter;                        /* |sum (2n+1)(-1)^n (a_n - b_n)|^2 / x^2, Bohren & Huffman 1983, Eq. 4.82 */
  double asymmetry;                          /* mean cosine of the scattering angle */
} lac_efficiencies;

/* Efficiencies of many spheres at once; they are sorted and interleaved inside.
   Given:    x, n, k    count values each: size parameter 2 pi a/lambda, 1e-6 to 1e5; index n + i k, n > 0, k >= 0, neither above 1e6,
                        not both below 1e-6, and n x at most 1e8 unless absorption inside is strong (else one sphere would take seconds)
   Result:   out        NaN for a sphere outside the domain, zeros for one of index 1. Bit-identical in any order and company.
   Errors:   LAC_OUT_OF_RANGE if a sphere was outside the domain (the others are done); LAC_NO_MEMORY: 16 bytes a sphere are needed, and
             128 x bytes for the greatest x.
   Accuracy: 1e-12 relative in extinction, scattering and absorption (1e-14 is usual), where the problem's own condition allows it: at a
             narrow resonance of a transparent sphere, or with n - 1 below 1e-3, the last digit of x and n weighs more. Asymmetry:
             absolute 1e-14 (1e-15 below x = 1) and 1e-16/|m - 1|. Backscatter: as its condition allows.
   Source:   Mie 1908, Annalen der Physik 330, 377; Bohren & Huffman 1983, Eqs. 4.61, 4.62, 4.82, 4.88; the downward recurrence starts
             higher than is usual, see core/mie.c. */
lac_status lac_mie(size_t count, const double *x, const double *n, const double *k, lac_efficiencies *out);

/* The scattering matrix of one sphere for unpolarised light.
   Given:    x, n, k       as for lac_mie, but not index 1, which scatters nothing
             cosine        count cosines of the scattering angle, in [-1, 1]
   Result:   phase         S11, normalised so that its mean over the sphere is 1
             polarisation  the degree of linear polarisation, -S12/S11: positive perpendicular to the plane of scattering
   Errors:   LAC_OUT_OF_RANGE, LAC_NO_MEMORY; all is NaN then.
   Accuracy: amplitudes to 1e-15 + 1e-16/|m - 1| of the forward one, which leaves fewer digits in directions of little light.
   Source:   Bohren & Huffman 1983, Eqs. 4.47, 4.74, 4.77. */
lac_status lac_mie_scattering(double x, double n, double k, size_t count, const double *cosine, double *phase, double *polarisation);

/* The index of a mixture in which all components are alike (Bruggeman) or all but one are inclusions in a matrix (Maxwell Garnett).
   Given:    fraction      count volume fractions, >= 0, sum 1 within 1e-9
             n, k          count indices n + i k, n > 0, k >= 0
             matrix        which component is the matrix
   Result:   mixed_n, mixed_k: always the physical root, the one that absorbs.
   Errors:   LAC_OUT_OF_RANGE, NaN.
   Accuracy: 1e-13 relative in both n and k for moderate contrasts, also where k is tiny; fewer digits near percolation of extreme ones.
   Source:   Bruggeman 1935, Annalen der Physik 416, 636; Maxwell Garnett 1904, Phil. Trans. R. Soc. A 203, 385. */
lac_status lac_mix_bruggeman(size_t count, const double *fraction, const double *n, const double *k, double *mixed_n, double *mixed_k);
lac_status lac_mix_maxwell_garnett(size_t count, size_t matrix, const double *fraction, const double *n, const double *k, double *mixed_n,
                                   double *mixed_k);

#ifdef __cplusplus
}
#endif

#endif
