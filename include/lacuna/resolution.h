/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What an array or a mirror can tell apart: resolutions, fields, scales, elements across a structure, verdicts.
   SI units (angles in rad); NaN outside a relation's range. Each function is documented by its row in the table of relations,
   whose key is given; <structure> stands for rim, cavity, gap or ring, <length> for each length on the sky. */
#ifndef LACUNA_RESOLUTION_H
#define LACUNA_RESOLUTION_H

#ifdef __cplusplus
extern "C" {
#endif

/* A length seen on the sky, and back: <length>_angle/definition, <length>/from_angle. */
double lac_angle_on_sky(double length, double distance);
double lac_length_on_sky(double angle, double distance);

/* The channel. */
double lac_spectral_resolving_power(double wavelength, double bandwidth); /* spectral_resolving_power/definition */
double lac_bandwidth(double wavelength, double spectral_resolving_power); /* bandwidth/definition */

/* Arrays. */
double lac_array_resolution_half_fringe(double wavelength, double projected_baseline); /* array_resolution/half_fringe */
double lac_array_resolution_fringe(double wavelength, double projected_baseline);      /* array_resolution/fringe */
double lac_bandwidth_field(double wavelength, double spectral_resolving_power, double projected_baseline); /* bandwidth_field/first_null */
double lac_beam_field(double wavelength, double element_diameter);                                         /* beam_field/diffraction */
double lac_array_field_both(double bandwidth_field, double beam_field);                                    /* array_field/both_fields */
double lac_array_field_alone(double field);                                /* array_field/bandwidth_alone, array_field/beam_alone */
double lac_recoverable_scale(double wavelength, double shortest_baseline); /* recoverable_scale/shortest_fringe */

/* Mirrors. */
double lac_mirror_resolution_fwhm(double wavelength, double telescope_diameter);     /* mirror_resolution/fwhm */
double lac_mirror_resolution_rayleigh(double wavelength, double telescope_diameter); /* mirror_resolution/rayleigh */

/* spatial_resolution_of_array/definition, spatial_resolution_of_mirror/definition */
double lac_spatial_resolution(double resolution, double distance);

/* Structures: rim_size_angle/definition, cavity_size_angle/definition; gap_size_angle/definition, ring_size_angle/definition;
   <structure>_elements_by_array/definition, <structure>_elements_by_mirror/definition. */
double lac_size_angle_of_diameter(double radius_angle);
double lac_size_angle_of_width(double width_angle);
double lac_gap_radius_angle(double planet_semi_major_axis_angle); /* gap_radius_angle/definition */
double lac_resolution_elements(double size_angle, double resolution);

/* Verdicts, 1 or 0, NaN where an argument is: <structure>_resolved_by_array/all_conditions, <structure>_resolved_by_array/scale_unlimited,
   <structure>_resolved_by_array/field_unlimited, <structure>_resolved_by_array/elements_alone. */
double lac_resolved_by_array(double elements, double elements_required, double size_angle, double recoverable_scale, double radius_angle,
                             double array_field);
double lac_resolved_by_array_scale_unlimited(double elements, double elements_required, double radius_angle, double array_field);
double lac_resolved_by_array_field_unlimited(double elements, double elements_required, double size_angle, double recoverable_scale);
double lac_elements_suffice(double elements, double elements_required); /* also <structure>_resolved_by_mirror/elements_alone */

/* <structure>_resolved_by_mirror/outside_working_angle */
double lac_resolved_by_mirror(double elements, double elements_required, double radius_angle, double inner_working_angle);

#ifdef __cplusplus
}
#endif

#endif
