/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Brightness models on the sky and their visibilities on a baseline, normalised to the total flux of the model.
   The functions of the first part are documented by their rows in the table of relations, whose keys are given.

   The closed forms of the second part take the spatial frequency q of circular models (for an inclined one that of
   lac_deprojected_frequency), at least 0 and in cycles per radian, and angular sizes in rad, above 0. Where no more is said they
   return the visibility, from -1 to 1 and 1 at q = 0, to an absolute error of some 1e-15 while pi q diameter is below 100; beyond,
   the rounding of that product itself counts, and from 1e8 on the forms made of J0 are NaN. Outside the domain, and for NaN and
   infinity: NaN. None has an inverse, as V is not monotonic, save where one is given. */
#ifndef LACUNA_BRIGHTNESS_H
#define LACUNA_BRIGHTNESS_H

#ifdef __cplusplus
extern "C" {
#endif

/* rim_visibility/with_halo, rim_visibility/without_halo */
double lac_rim_visibility(double stellar_flux_fraction, double halo_flux_fraction, double rim_radius_angle, double inclination,
                          double disc_position_angle, double projected_baseline, double baseline_position_angle, double wavelength);
double lac_rim_visibility_without_halo(double stellar_flux_fraction, double rim_radius_angle, double inclination,
                                       double disc_position_angle, double projected_baseline, double baseline_position_angle,
                                       double wavelength);
double lac_rim_squared_visibility(double rim_visibility);                              /* rim_squared_visibility/definition */
double lac_rim_visibility_drop(double rim_squared_visibility);                         /* rim_visibility_drop/definition */
double lac_rim_drop_significance(double rim_visibility_drop, double visibility_error); /* rim_drop_significance/definition */

/* The spatial frequency at which the face-on model has the visibility that the inclined one has on the baseline.
   Given: projected_baseline (m, > 0), wavelength (m, > 0); inclination (rad, 0 face on to pi/2 edge on); the position angles of
     the baseline and of the projected major axis (rad, any, from north through east).
   Returned: q in 1/rad, from 0 to baseline over wavelength; relative error some 1e-15.
   Notes: along the major axis the baseline counts in full, along the minor axis times cos(inclination); opposite baselines
     give the same.
   Source: geometry. */
double lac_deprojected_frequency(double projected_baseline, double baseline_position_angle, double inclination, double disc_position_angle,
                                 double wavelength);

/* A uniform disc: 2 J1(z)/z, z = pi q diameter.
   Given: spatial_frequency (1/rad, >= 0); diameter (rad, > 0).
   Returned: the visibility; its nulls lie at z = j_{1,k}.
   Source: Hanbury Brown, R. et al. 1974, MNRAS 167, 475. */
double lac_uniform_disc_visibility(double spatial_frequency, double diameter);

/* A disc darkened linearly to the limb, I(mu) = 1 - c (1 - mu).
   Given: spatial_frequency (1/rad, >= 0); diameter (rad, > 0); coefficient c, 0 (uniform) to 1 (dark limb).
   Returned: the visibility [(1 - c) J1(z)/z + c sqrt(pi/2) J_{3/2}(z)/z^{3/2}] / [(1 - c)/2 + c/3], z = pi q diameter.
   Source: Hanbury Brown, R. et al. 1974, MNRAS 167, 475. */
double lac_linear_limb_darkened_visibility(double spatial_frequency, double diameter, double coefficient);

/* A disc darkened to the limb by a power law, I(mu) = mu^a.
   Given: spatial_frequency (1/rad, >= 0); diameter (rad, > 0); exponent a, 0 (uniform) to 20.
   Returned: the visibility Gamma(n + 1) J_n(z)/(z/2)^n, n = a/2 + 1, z = pi q diameter.
   Source: Hestroffer, D. 1997, A&A 327, 199. */
double lac_power_law_limb_darkened_visibility(double spatial_frequency, double diameter, double exponent);

/* A thin ring: J0(pi q diameter).
   Given: spatial_frequency (1/rad, >= 0); diameter (rad, > 0).
   Returned: the visibility; its nulls lie at j_{0,k}.
   Source: Berger, J. P. & Segransan, D. 2007, New Astronomy Reviews 51, 576. */
double lac_thin_ring_visibility(double spatial_frequency, double diameter);

/* A round Gaussian: exp(-(pi q fwhm)^2 / (4 ln 2)).
   Given: spatial_frequency (1/rad, >= 0); fwhm, its full width at half maximum (rad, > 0).
   Returned: the visibility, from 0 to 1, falling with q: q = 2 sqrt(ln 2 ln(1/V)) / (pi fwhm).
   Source: Berger, J. P. & Segransan, D. 2007, New Astronomy Reviews 51, 576. */
double lac_gaussian_visibility(double spatial_frequency, double fwhm);

/* A uniform annulus: the difference of two discs, over that of their areas.
   Given: spatial_frequency (1/rad, >= 0); inner_diameter (rad, >= 0); outer_diameter (rad, > 0, at least the inner one).
   Returned: the visibility; for inner_diameter 0 that of the uniform disc, for equal diameters that of the thin ring.
   Notes: narrow annuli are integrated by Gauss-Legendre instead, so that no digits are lost to the difference.
   Source: linearity of the Fourier transform. */
double lac_annulus_visibility(double spatial_frequency, double inner_diameter, double outer_diameter);

#ifdef __cplusplus
}
#endif

#endif
