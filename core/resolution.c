/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What an array or a mirror can tell apart. An array's resolution goes with the separation of its elements, a mirror's with its
   width. A verdict means that a structure is resolved geometrically: enough resolution elements lie across it, and it is neither
   too large for the shortest baseline nor outside the field. Whether it is bright enough is another question.

   A verdict has a row for each set of inputs that may be known, from the one that checks most to the one that checks least;
   rows that leave a condition out say so in `unchecked`. */
#include "lacuna/resolution.h"

#include "relation.h"

/* The Airy pattern [2 J1(v)/v]^2, v = pi theta D/lambda. Full width at half maximum in lambda/D: 2 v/pi at the root of
   2 J1(v)/v = 1/sqrt(2). First dark ring: j_{1,1}/pi, the first zero of J1 over pi. */
static const double airy_fwhm = 1.0289939699621880515;
static const double airy_first_dark_ring = 1.2196698912665044549;

/* A wave's length over an aperture, both > 0: the angle from which all the others are made. */
LAC_INLINE double wavelengths_per_aperture(double factor, double wavelength, double aperture) {
  return lac_where((wavelength > 0) & (aperture > 0), factor * wavelength / aperture);
}

LAC_RELATION(angle_on_sky, length, distance) { return lac_where((length > 0) & (distance > 0), length / distance); }

LAC_RELATION(length_on_sky, angle, distance) { return lac_where((angle > 0) & (distance > 0), angle * distance); }

LAC_RELATION(spectral_resolving_power, wavelength, bandwidth) {
  return lac_where((wavelength > 0) & (bandwidth > 0), wavelength / bandwidth);
}

LAC_RELATION(bandwidth, wavelength, spectral_resolving_power) {
  return lac_where((wavelength > 0) & (spectral_resolving_power > 0), wavelength / spectral_resolving_power);
}

LAC_RELATION(array_resolution_half_fringe, wavelength, projected_baseline) {
  return wavelengths_per_aperture(0.5, wavelength, projected_baseline);
}

LAC_RELATION(array_resolution_fringe, wavelength, projected_baseline) {
  return wavelengths_per_aperture(1, wavelength, projected_baseline);
}

LAC_RELATION(bandwidth_field, wavelength, spectral_resolving_power, projected_baseline) {
  return lac_where(spectral_resolving_power > 0, wavelengths_per_aperture(spectral_resolving_power, wavelength, projected_baseline));
}

LAC_RELATION(beam_field, wavelength, element_diameter) { return wavelengths_per_aperture(1, wavelength, element_diameter); }

LAC_RELATION(array_field_both, bandwidth_field, beam_field) {
  return lac_where((bandwidth_field > 0) & (beam_field > 0), bandwidth_field < beam_field ? bandwidth_field : beam_field);
}

LAC_RELATION(array_field_alone, field) { return lac_where(field > 0, field); }

LAC_RELATION(recoverable_scale, wavelength, shortest_baseline) { return wavelengths_per_aperture(1, wavelength, shortest_baseline); }

LAC_RELATION(mirror_resolution_fwhm, wavelength, telescope_diameter) {
  return wavelengths_per_aperture(airy_fwhm, wavelength, telescope_diameter);
}

LAC_RELATION(mirror_resolution_rayleigh, wavelength, telescope_diameter) {
  return wavelengths_per_aperture(airy_first_dark_ring, wavelength, telescope_diameter);
}

LAC_RELATION(spatial_resolution, resolution, distance) { return lac_where((resolution > 0) & (distance > 0), resolution * distance); }

LAC_RELATION(size_angle_of_diameter, radius_angle) { return lac_where(radius_angle > 0, 2 * radius_angle); }

LAC_RELATION(size_angle_of_width, width_angle) { return lac_where(width_angle > 0, width_angle); }

LAC_RELATION(gap_radius_angle, planet_semi_major_axis_angle) {
  return lac_where(planet_semi_major_axis_angle > 0, planet_semi_major_axis_angle);
}

LAC_RELATION(resolution_elements, size_angle, resolution) {
  return lac_where((size_angle > 0) & (resolution > 0), size_angle / resolution);
}

/* Both ways of a comparison with NaN are false, so a verdict asks first whether its inputs are defined. */
LAC_INLINE double verdict(int defined, int conditions_hold) { return lac_where(defined, conditions_hold ? 1.0 : 0.0); }

LAC_RELATION(resolved_by_array, elements, elements_required, size_angle, recoverable_scale, radius_angle, array_field) {
  return verdict((elements > 0) & (elements_required > 0) & (size_angle > 0) & (recoverable_scale > 0) & (radius_angle > 0) &
                     (array_field > 0),
                 (elements >= elements_required) & (size_angle <= recoverable_scale) & (2 * radius_angle <= array_field));
}

LAC_RELATION(resolved_by_array_scale_unlimited, elements, elements_required, radius_angle, array_field) {
  return verdict((elements > 0) & (elements_required > 0) & (radius_angle > 0) & (array_field > 0),
                 (elements >= elements_required) & (2 * radius_angle <= array_field));
}

LAC_RELATION(resolved_by_array_field_unlimited, elements, elements_required, size_angle, recoverable_scale) {
  return verdict((elements > 0) & (elements_required > 0) & (size_angle > 0) & (recoverable_scale > 0),
                 (elements >= elements_required) & (size_angle <= recoverable_scale));
}

LAC_RELATION(elements_suffice, elements, elements_required) {
  return verdict((elements > 0) & (elements_required > 0), elements >= elements_required);
}

LAC_RELATION(resolved_by_mirror, elements, elements_required, radius_angle, inner_working_angle) {
  return verdict((elements > 0) & (elements_required > 0) & (radius_angle > 0) & (inner_working_angle >= 0),
                 (elements >= elements_required) & (radius_angle >= inner_working_angle));
}

const lac_relation lac_angle_relations[] = {
    {.gives = "<length>_angle",
     .by = "definition",
     .from = {"<length>", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(angle_on_sky),
     .source = "definition",
     .equation = "[<length>_angle] = \\frac{[<length>]}{[distance]}"},
    {.gives = "<length>",
     .by = "from_angle",
     .from = {"<length>_angle", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(length_on_sky),
     .source = "definition",
     .equation = "[<length>] = [<length>_angle] [distance]",
     .inverse_of = "<length>_angle/definition"},
    {.gives = NULL},
};

/* The conditions of a verdict, each with its sign left open: ">=" in the conditions field, "\\ge" in the equation. */
#define BY(instrument) "[<structure>_elements_by_" instrument "]"
#define ENOUGH_BY(instrument, at_least) BY(instrument) " " at_least " [elements_required]"
#define WITHIN_SCALE(at_most) "[<structure>_size_angle] " at_most " [recoverable_scale]"
#define WITHIN_FIELD(at_most) "2 [<structure>_radius_angle] " at_most " [array_field]"
#define OUTSIDE_IWA(at_least) "[<structure>_radius_angle] " at_least " [inner_working_angle]"

#define ENOUGH_BY_TEX(instrument) "\\left(" ENOUGH_BY(instrument, "\\ge") "\\right)"
#define WITHIN_SCALE_TEX "\\left(" WITHIN_SCALE("\\le") "\\right)"
#define WITHIN_FIELD_TEX "\\left(" WITHIN_FIELD("\\le") "\\right)"
#define OUTSIDE_IWA_TEX "\\left(" OUTSIDE_IWA("\\ge") "\\right)"
#define AND " \\mathrm{and} "

#define SCALE_UNCHECKED "size within the recoverable scale: shortest_baseline not given"
#define FIELD_UNCHECKED                                                                                                                    \
  "radius within half the field: <structure>_radius_angle or the field (spectral_resolving_power or element_diameter) not given"
#define IWA_UNCHECKED "radius outside the inner working angle: <structure>_radius_angle or inner_working_angle not given"

const lac_relation lac_resolution_relations[] = {
    {.gives = "spectral_resolving_power",
     .by = "definition",
     .from = {"wavelength", "bandwidth"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(spectral_resolving_power),
     .source = "definition",
     .equation = "[spectral_resolving_power] = \\frac{[wavelength]}{[bandwidth]}",
     .inverse_of = "bandwidth/definition"},
    {.gives = "bandwidth",
     .by = "definition",
     .from = {"wavelength", "spectral_resolving_power"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(bandwidth),
     .source = "definition",
     .equation = "[bandwidth] = \\frac{[wavelength]}{[spectral_resolving_power]}"},
    {.gives = "array_resolution",
     .by = "half_fringe",
     .from = {"wavelength", "projected_baseline"},
     .kind = LAC_RECIPE,
     .LAC_ROW(array_resolution_half_fringe),
     .source = "common_practice",
     .equation = "[array_resolution] = \\frac{[wavelength]}{2 [projected_baseline]}",
     .supposes = "the criterion of half a fringe spacing"},
    {.gives = "array_resolution",
     .by = "fringe",
     .from = {"wavelength", "projected_baseline"},
     .kind = LAC_RECIPE,
     .LAC_ROW(array_resolution_fringe),
     .source = "common_practice",
     .equation = "[array_resolution] = \\frac{[wavelength]}{[projected_baseline]}",
     .supposes = "the criterion of one fringe spacing"},
    {.gives = "bandwidth_field",
     .by = "first_null",
     .from = {"wavelength", "spectral_resolving_power", "projected_baseline"},
     .kind = LAC_RECIPE,
     .LAC_ROW(bandwidth_field),
     .source = "thompson_2017",
     .place_in_source = "Chap. 6",
     .from_memory = true,
     .equation = "[bandwidth_field] = \\frac{[spectral_resolving_power] [wavelength]}{[projected_baseline]}",
     .supposes = "a top-hat band; fringes vanish where the path difference is the coherence length"},
    {.gives = "beam_field",
     .by = "diffraction",
     .from = {"wavelength", "element_diameter"},
     .kind = LAC_RECIPE,
     .LAC_ROW(beam_field),
     .source = "common_practice",
     .from_memory = true,
     .equation = "[beam_field] = \\frac{[wavelength]}{[element_diameter]}",
     .supposes = "one spatial mode: full width at half maximum of an element's beam"},
    {.gives = "array_field",
     .by = "both_fields",
     .from = {"bandwidth_field", "beam_field"},
     .kind = LAC_RECIPE,
     .LAC_ROW(array_field_both),
     .source = "definition",
     .equation = "[array_field] = \\min\\left([bandwidth_field], [beam_field]\\right)"},
    {.gives = "array_field",
     .by = "bandwidth_alone",
     .from = {"bandwidth_field"},
     .kind = LAC_RECIPE,
     .LAC_ROW(array_field_alone),
     .source = "definition",
     .equation = "[array_field] = [bandwidth_field]",
     .supposes = "an element's beam does not limit the field: element_diameter not given"},
    {.gives = "array_field",
     .by = "beam_alone",
     .from = {"beam_field"},
     .kind = LAC_RECIPE,
     .LAC_ROW(array_field_alone),
     .source = "definition",
     .equation = "[array_field] = [beam_field]",
     .supposes = "the bandwidth does not limit the field: spectral_resolving_power not given"},
    {.gives = "recoverable_scale",
     .by = "shortest_fringe",
     .from = {"wavelength", "shortest_baseline"},
     .kind = LAC_RECIPE,
     .LAC_ROW(recoverable_scale),
     .source = "common_practice",
     .from_memory = true,
     .equation = "[recoverable_scale] = \\frac{[wavelength]}{[shortest_baseline]}",
     .supposes = "one fringe spacing of the shortest baseline; stricter authors take 0.5 to 0.6 of it"},
    {.gives = "mirror_resolution",
     .by = "fwhm",
     .from = {"wavelength", "telescope_diameter"},
     .kind = LAC_RECIPE,
     .LAC_ROW(mirror_resolution_fwhm),
     .source = "airy_1835",
     .equation = "[mirror_resolution] = 1.0289939699622 \\frac{[wavelength]}{[telescope_diameter]}",
     .supposes = "the full width at half maximum of the diffraction pattern of a full circular mirror"},
    {.gives = "mirror_resolution",
     .by = "rayleigh",
     .from = {"wavelength", "telescope_diameter"},
     .kind = LAC_RECIPE,
     .LAC_ROW(mirror_resolution_rayleigh),
     .source = "rayleigh_1879",
     .equation = "[mirror_resolution] = 1.2196698912665 \\frac{[wavelength]}{[telescope_diameter]}",
     .supposes = "the first dark ring of the diffraction pattern of a full circular mirror"},
    {.gives = "spatial_resolution_of_array",
     .by = "definition",
     .from = {"array_resolution", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(spatial_resolution),
     .source = "definition",
     .equation = "[spatial_resolution_of_array] = [array_resolution] [distance]"},
    {.gives = "spatial_resolution_of_mirror",
     .by = "definition",
     .from = {"mirror_resolution", "distance"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(spatial_resolution),
     .source = "definition",
     .equation = "[spatial_resolution_of_mirror] = [mirror_resolution] [distance]"},
    {.gives = "elements_required",
     .by = "common_practice",
     .kind = LAC_ASSUMED,
     .assumes = "1",
     .source = "common_practice",
     .equation = "[elements_required] = 1",
     .supposes = "one resolution element across a structure resolves it"},

    {.gives = "rim_size_angle",
     .by = "definition",
     .from = {"rim_radius_angle"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(size_angle_of_diameter),
     .source = "definition",
     .equation = "[rim_size_angle] = 2 [rim_radius_angle]"},
    {.gives = "cavity_size_angle",
     .by = "definition",
     .from = {"cavity_radius_angle"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(size_angle_of_diameter),
     .source = "definition",
     .equation = "[cavity_size_angle] = 2 [cavity_radius_angle]"},
    {.gives = "gap_size_angle",
     .by = "definition",
     .from = {"gap_width_angle"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(size_angle_of_width),
     .source = "definition",
     .equation = "[gap_size_angle] = [gap_width_angle]"},
    {.gives = "gap_radius_angle",
     .by = "definition",
     .from = {"planet_semi_major_axis_angle"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(gap_radius_angle),
     .source = "definition",
     .equation = "[gap_radius_angle] = [planet_semi_major_axis_angle]"},
    {.gives = "ring_size_angle",
     .by = "definition",
     .from = {"ring_width_angle"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(size_angle_of_width),
     .source = "definition",
     .equation = "[ring_size_angle] = [ring_width_angle]"},

    {.gives = "<structure>_elements_by_array",
     .by = "definition",
     .from = {"<structure>_size_angle", "array_resolution"},
     .kind = LAC_DEFINITION,
     .presence = LAC_FOR_EACH_STRUCTURE,
     .LAC_ROW(resolution_elements),
     .source = "definition",
     .equation = BY("array") " = \\frac{[<structure>_size_angle]}{[array_resolution]}"},
    {.gives = "<structure>_elements_by_mirror",
     .by = "definition",
     .from = {"<structure>_size_angle", "mirror_resolution"},
     .kind = LAC_DEFINITION,
     .presence = LAC_FOR_EACH_STRUCTURE,
     .LAC_ROW(resolution_elements),
     .source = "definition",
     .equation = BY("mirror") " = \\frac{[<structure>_size_angle]}{[mirror_resolution]}"},

    {.gives = "<structure>_resolved_by_array",
     .by = "all_conditions",
     .from = {"<structure>_elements_by_array", "elements_required", "<structure>_size_angle", "recoverable_scale",
              "<structure>_radius_angle", "array_field"},
     .kind = LAC_RECIPE,
     .presence = LAC_FOR_EACH_STRUCTURE,
     .LAC_ROW(resolved_by_array),
     .source = "definition",
     .equation = "[<structure>_resolved_by_array] = " ENOUGH_BY_TEX("array") AND WITHIN_SCALE_TEX AND WITHIN_FIELD_TEX,
     .conditions = {ENOUGH_BY("array", ">="), WITHIN_SCALE("<="), WITHIN_FIELD("<=")}},
    {.gives = "<structure>_resolved_by_array",
     .by = "scale_unlimited",
     .from = {"<structure>_elements_by_array", "elements_required", "<structure>_radius_angle", "array_field"},
     .kind = LAC_RECIPE,
     .presence = LAC_FOR_EACH_STRUCTURE,
     .LAC_ROW(resolved_by_array_scale_unlimited),
     .source = "definition",
     .equation = "[<structure>_resolved_by_array] = " ENOUGH_BY_TEX("array") AND WITHIN_FIELD_TEX,
     .conditions = {ENOUGH_BY("array", ">="), WITHIN_FIELD("<=")},
     .unchecked = SCALE_UNCHECKED},
    {.gives = "<structure>_resolved_by_array",
     .by = "field_unlimited",
     .from = {"<structure>_elements_by_array", "elements_required", "<structure>_size_angle", "recoverable_scale"},
     .kind = LAC_RECIPE,
     .presence = LAC_FOR_EACH_STRUCTURE,
     .LAC_ROW(resolved_by_array_field_unlimited),
     .source = "definition",
     .equation = "[<structure>_resolved_by_array] = " ENOUGH_BY_TEX("array") AND WITHIN_SCALE_TEX,
     .conditions = {ENOUGH_BY("array", ">="), WITHIN_SCALE("<=")},
     .unchecked = FIELD_UNCHECKED},
    {.gives = "<structure>_resolved_by_array",
     .by = "elements_alone",
     .from = {"<structure>_elements_by_array", "elements_required"},
     .kind = LAC_RECIPE,
     .presence = LAC_FOR_EACH_STRUCTURE,
     .LAC_ROW(elements_suffice),
     .source = "definition",
     .equation = "[<structure>_resolved_by_array] = " ENOUGH_BY_TEX("array"),
     .conditions = {ENOUGH_BY("array", ">=")},
     .unchecked = SCALE_UNCHECKED "; " FIELD_UNCHECKED},

    {.gives = "<structure>_resolved_by_mirror",
     .by = "outside_working_angle",
     .from = {"<structure>_elements_by_mirror", "elements_required", "<structure>_radius_angle", "inner_working_angle"},
     .kind = LAC_RECIPE,
     .presence = LAC_FOR_EACH_STRUCTURE,
     .LAC_ROW(resolved_by_mirror),
     .source = "definition",
     .equation = "[<structure>_resolved_by_mirror] = " ENOUGH_BY_TEX("mirror") AND OUTSIDE_IWA_TEX,
     .conditions = {ENOUGH_BY("mirror", ">="), OUTSIDE_IWA(">=")}},
    {.gives = "<structure>_resolved_by_mirror",
     .by = "elements_alone",
     .from = {"<structure>_elements_by_mirror", "elements_required"},
     .kind = LAC_RECIPE,
     .presence = LAC_FOR_EACH_STRUCTURE,
     .LAC_ROW(elements_suffice),
     .source = "definition",
     .equation = "[<structure>_resolved_by_mirror] = " ENOUGH_BY_TEX("mirror"),
     .conditions = {ENOUGH_BY("mirror", ">=")},
     .unchecked = IWA_UNCHECKED},
    {.gives = NULL},
};
