/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Brightness models and their visibilities in closed form. All of them are functions of z = pi q diameter; those of discs are
   members of one family, Gamma(n + 1) J_n(z)/(z/2)^n: the ring has n = 0, the uniform disc 1, the fully darkened disc 3/2. */
#include "lacuna/brightness.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_bessel.h>
#include <gsl/gsl_sf_gamma.h>
#include <stdbool.h>

#include "kernels_inline.h"
#include "lacuna/kernels.h"
#include "relation.h"

#define PI 3.14159265358979323846
#define LN_2 0.69314718055994530942

/* The baseline's components along the disc's major and minor axes, in wavelengths, the minor one foreshortened. The sine is
   had from the cosine, as sin and cos of one argument in a loop would not be vectorised; no digits are lost in the sum. */
LAC_INLINE double deprojected_frequency(double baseline, double baseline_position_angle, double inclination, double disc_position_angle,
                                        double wavelength) {
  double along = cos(baseline_position_angle - disc_position_angle), shortening = cos(inclination);
  double along2 = along * along, across2 = (1 - along2) * shortening * shortening;
  return lac_where((baseline > 0) & (wavelength > 0) & (inclination >= 0) & (inclination <= PI / 2),
                   baseline / wavelength * sqrt(along2 + across2));
}

/* Unresolved star, thin ring, and over-resolved light that adds to the total flux alone. */
LAC_INLINE double star_and_ring(double star, double halo, double radius_angle, double frequency) {
  double ring = 1 - (star + halo);
  return lac_where((star >= 0) & (halo >= 0) & (ring >= 0) & (radius_angle > 0),
                   star + ring * lac_j0_inline(2 * PI * frequency * radius_angle));
}

LAC_RELATION(rim_visibility, stellar_flux_fraction, halo_flux_fraction, rim_radius_angle, inclination, disc_position_angle,
             projected_baseline, baseline_position_angle, wavelength) {
  return star_and_ring(stellar_flux_fraction, halo_flux_fraction, rim_radius_angle,
                       deprojected_frequency(projected_baseline, baseline_position_angle, inclination, disc_position_angle, wavelength));
}

LAC_RELATION(rim_visibility_without_halo, stellar_flux_fraction, rim_radius_angle, inclination, disc_position_angle, projected_baseline,
             baseline_position_angle, wavelength) {
  return star_and_ring(stellar_flux_fraction, 0, rim_radius_angle,
                       deprojected_frequency(projected_baseline, baseline_position_angle, inclination, disc_position_angle, wavelength));
}

LAC_RELATION(rim_squared_visibility, rim_visibility) {
  return lac_where((rim_visibility >= -1) & (rim_visibility <= 1), rim_visibility * rim_visibility);
}

LAC_RELATION(rim_visibility_drop, rim_squared_visibility) {
  return lac_where((rim_squared_visibility >= 0) & (rim_squared_visibility <= 1), 1 - rim_squared_visibility);
}

LAC_RELATION(rim_drop_significance, rim_visibility_drop, visibility_error) {
  return lac_where((rim_visibility_drop >= 0) & (rim_visibility_drop <= 1) & (visibility_error > 0),
                   rim_visibility_drop / visibility_error);
}

double lac_deprojected_frequency(double projected_baseline, double baseline_position_angle, double inclination, double disc_position_angle,
                                 double wavelength) {
  return deprojected_frequency(projected_baseline, baseline_position_angle, inclination, disc_position_angle, wavelength);
}

/* z, or NaN outside the domain that all closed forms share. */
static double scaled_frequency(double spatial_frequency, double diameter) {
  double z = PI * spatial_frequency * diameter;
  return lac_where((spatial_frequency >= 0) & (diameter > 0) & (z < (double)INFINITY), z);
}

/* Below this the family is had from its power series, where J_n(z)/z^n loses its digits and, near 0, underflows. */
static const double series_below = 1;

/* Gamma(n + 1) J_n(z)/(z/2)^n = sum over k of (-z^2/4)^k / (k! (n + 1)(n + 2) ... (n + k)), for z <= series_below:
   after ten terms less than 1e-19 is left. */
static double family_near_zero(double n, double z) {
  double sum = 1, term = 1;
  for (int k = 1; k < 10; k++) {
    term *= -z * z / 4 / (k * (n + k));
    sum += term;
  }
  return sum;
}

static double result_value(int status, gsl_sf_result result) { return status == GSL_SUCCESS ? result.val : (double)NAN; }

/* 2 J1(z)/z */
static double uniform_disc(double z) {
  if (z < series_below) return family_near_zero(1, z);
  gsl_sf_result j1;
  int status = gsl_sf_bessel_J1_e(z, &j1);
  return 2 * result_value(status, j1) / z;
}

/* 3 j1(z)/z, with the spherical Bessel function j1(z) = sqrt(pi/(2 z)) J_{3/2}(z). */
static double fully_darkened_disc(double z) {
  if (z < series_below) return family_near_zero(1.5, z);
  gsl_sf_result j1;
  int status = gsl_sf_bessel_j1_e(z, &j1);
  return 3 * result_value(status, j1) / z;
}

double lac_uniform_disc_visibility(double spatial_frequency, double diameter) {
  double z = scaled_frequency(spatial_frequency, diameter);
  return isnan(z) ? z : uniform_disc(z);
}

double lac_linear_limb_darkened_visibility(double spatial_frequency, double diameter, double coefficient) {
  double z = scaled_frequency(spatial_frequency, diameter);
  bool in_range = coefficient >= 0 && coefficient <= 1;
  if (isnan(z) || !in_range) return (double)NAN;
  double uniform_share = (1 - coefficient) / 2, darkened_share = coefficient / 3;
  return (uniform_share * uniform_disc(z) + darkened_share * fully_darkened_disc(z)) / (uniform_share + darkened_share);
}

double lac_power_law_limb_darkened_visibility(double spatial_frequency, double diameter, double exponent) {
  double z = scaled_frequency(spatial_frequency, diameter);
  bool in_range = exponent >= 0 && exponent <= 20;
  if (isnan(z) || !in_range) return (double)NAN;
  double n = exponent / 2 + 1;
  if (z < series_below) return family_near_zero(n, z);
  gsl_sf_result bessel, gamma;
  int bessel_status = gsl_sf_bessel_Jnu_e(n, z, &bessel), gamma_status = gsl_sf_gamma_e(n + 1, &gamma);
  return result_value(gamma_status, gamma) * result_value(bessel_status, bessel) / pow(z / 2, n);
}

double lac_thin_ring_visibility(double spatial_frequency, double diameter) { return lac_j0(scaled_frequency(spatial_frequency, diameter)); }

double lac_gaussian_visibility(double spatial_frequency, double fwhm) {
  double z = scaled_frequency(spatial_frequency, fwhm);
  return exp(-z * z / (4 * LN_2));
}

/* The mean of J0(z) over the annulus' area, by the Gauss-Legendre rule of eight points in z (Abramowitz & Stegun 1964,
   Table 25.4): exact to rounding while z grows by less than 1 from edge to edge. */
static double narrow_annulus(double spatial_frequency, double inner_diameter, double outer_diameter) {
  static const double node[] = {0.183434642495649805, 0.525532409916328986, 0.796666477413626740, 0.960289856497536232};
  static const double weight[] = {0.362683783378361983, 0.313706645877887287, 0.222381034453374471, 0.101228536290376259};
  double middle = (outer_diameter + inner_diameter) / 2, half = (outer_diameter - inner_diameter) / 2, sum = 0;
  for (int k = 0; k < 4; k++) {
    double outside = middle + node[k] * half, inside = middle - node[k] * half;
    sum += weight[k] * (outside * lac_j0(PI * spatial_frequency * outside) + inside * lac_j0(PI * spatial_frequency * inside));
  }
  return sum / (2 * middle);
}

double lac_annulus_visibility(double spatial_frequency, double inner_diameter, double outer_diameter) {
  double outer = scaled_frequency(spatial_frequency, outer_diameter), inner = PI * spatial_frequency * inner_diameter;
  bool in_range = inner_diameter >= 0 && inner_diameter <= outer_diameter;
  if (isnan(outer) || !in_range) return (double)NAN;
  if (outer - inner < 1) return narrow_annulus(spatial_frequency, inner_diameter, outer_diameter);
  return (outer * outer * uniform_disc(outer) - inner * inner * uniform_disc(inner)) / ((outer - inner) * (outer + inner));
}

/* Visibility of star and ring, with the ring's share of the flux as the rows have it. */
#define STAR_AND_RING_TEX(ring)                                                                                                            \
  "[rim_visibility] = [stellar_flux_fraction] + \\left(" ring "\\right) J_0\\left(\\frac{2 \\pi [rim_radius_angle] "                       \
  "[projected_baseline]}{[wavelength]} \\sqrt{\\cos^{2}\\left([baseline_position_angle] - [disc_position_angle]\\right) + "                \
  "\\sin^{2}\\left([baseline_position_angle] - [disc_position_angle]\\right) \\cos^{2}\\left([inclination]\\right)}\\right)"

const lac_relation lac_brightness_relations[] = {
    {.gives = "rim_visibility",
     .by = "with_halo",
     .from = {"stellar_flux_fraction", "halo_flux_fraction", "rim_radius_angle", "inclination", "disc_position_angle", "projected_baseline",
              "baseline_position_angle", "wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(rim_visibility),
     .source = "lazareff_2017",
     .equation = STAR_AND_RING_TEX("1 - [stellar_flux_fraction] - [halo_flux_fraction]"),
     .supposes = "an unresolved star and a thin circular ring, seen inclined"},
    {.gives = "rim_visibility",
     .by = "without_halo",
     .from = {"stellar_flux_fraction", "rim_radius_angle", "inclination", "disc_position_angle", "projected_baseline",
              "baseline_position_angle", "wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(rim_visibility_without_halo),
     .source = "berger_2007",
     .equation = STAR_AND_RING_TEX("1 - [stellar_flux_fraction]"),
     .supposes = "an unresolved star and a thin circular ring, seen inclined; no over-resolved light"},
    {.gives = "rim_squared_visibility",
     .by = "definition",
     .from = {"rim_visibility"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(rim_squared_visibility),
     .source = "definition",
     .equation = "[rim_squared_visibility] = [rim_visibility]^{2}"},
    {.gives = "rim_visibility_drop",
     .by = "definition",
     .from = {"rim_squared_visibility"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(rim_visibility_drop),
     .source = "definition",
     .equation = "[rim_visibility_drop] = 1 - [rim_squared_visibility]"},
    {.gives = "rim_drop_significance",
     .by = "definition",
     .from = {"rim_visibility_drop", "visibility_error"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(rim_drop_significance),
     .source = "definition",
     .equation = "[rim_drop_significance] = \\frac{[rim_visibility_drop]}{[visibility_error]}"},
    {.gives = NULL},
};
