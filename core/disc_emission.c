/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The disc's own light: flux densities of discs as integrals over the radius, and what the power laws in them start from.

   The integrals are taken in u = ln(r/r_in), where power laws are exponentials and the integrands smooth, with one Gauss rule
   of 32 points. Where the disc gets so cold outside that Wien's cut-off leaves nothing, the rule ends there: this keeps the points
   where the light is, and with them the error below 5e-5. Points of one integral are evaluated side by side in a loop that is
   vectorised, then summed in their order, so that the bits don't depend on the processor. */
#include "gauss_legendre.h"
#include "kernels_inline.h"
#include "lacuna/emission.h"
#include "relation.h"

enum { POINTS = LAC_GAUSS_POINTS };

LAC_INLINE double weighted_sum(const double *term) {
  double even = 0, odd = 0;
  for (int k = 0; k < POINTS; k += 2) even += term[k], odd += term[k + 1];
  return even + odd;
}

/* How far in u to integrate: to the end, or to where the integrand, r^power/(exp(x) - 1), is gone. x = h c/(lambda k T) is x_inner at
   the inner edge and grows at least as r^index. Counted in x, r^power exp(-x) is a gamma density of order power/index, which is below
   1e-9 of the whole at 25 plus 2.5 times its order. */
LAC_INLINE double reach(double whole, double x_inner, double index, double power) {
  double cold = lac_log_inline(1 + (25 + 2.5 * power / index) / x_inner) / index;
  return lac_choose(cold < whole, cold, whole);
}

/* The disc on which both recipes agree: column and edges, seen by us. Radii in au, depth at 1 au along the line of sight. */
typedef struct {
  double log_inner, log_outer, depth, index, cosine;
} disc;

LAC_INLINE disc disc_of(double surface_density, double index, double inner, double outer, double opacity, double inclination) {
  double cosine = cos(inclination);
  return (disc){lac_log_inline(inner / LAC_AU), lac_log_inline(outer / LAC_AU), opacity * surface_density / cosine, index, cosine};
}

LAC_INLINE int is_disc(double surface_density, double index, double inner, double outer, double opacity, double inclination,
                       double distance, double wavelength) {
  return (surface_density > 0) & (index == index) & (inner > 0) & (outer > inner) & (opacity > 0) & (inclination >= 0) &
         (inclination <= M_PI_2) & (distance > 0) & (wavelength > 0);
}

/* 2 pi au^2/d^2 times 2 h c/lambda^3: what integrals of r dr/(exp(x) - 1) in au^2 lack to a flux density. */
LAC_INLINE double flux_scale(double distance, double wavelength) {
  double ratio = LAC_AU / distance;
  return 4 * M_PI * LAC_PLANCK_CONSTANT * LAC_SPEED_OF_LIGHT * (ratio * ratio) / (wavelength * wavelength * wavelength);
}

/* The ring from u = low to high, both ln(r/au), of a disc with x = x_one r^temperature_index: the integral of
   cos i (1 - exp(-tau)) r dr/(exp(x) - 1), in au^2. */
LAC_CLONES static double power_law_ring(const disc *d, double x_one, double temperature_index, double low, double high) {
  double x_inner = x_one * lac_exp_inline(temperature_index * low), depth_inner = d->depth * lac_exp_inline(-d->index * low);
  double growing = lac_choose(d->index < 0, 2 - d->index, 2);
  double extent = reach(high - low, x_inner, temperature_index, growing), term[POINTS];
  for (int k = 0; k < POINTS; k++) {
    double u = extent * lac_gauss_node[k];
    double x = x_inner * lac_exp_inline(temperature_index * u), depth = depth_inner * lac_exp_inline(-d->index * u);
    double area = lac_exp_inline(2 * u);
    term[k] = lac_gauss_weight[k] * area * -lac_expm1_inline(-depth) / lac_expm1_inline(x);
  }
  return d->cosine * extent * lac_exp_inline(2 * low) * weighted_sum(term);
}

/* Two layers after Chiang & Goldreich 1997. In au, with a = r/au: the grazing angle is 0.005/a + 0.05 a^(2/7), the interior's
   temperature (angle/4)^(1/4) (R/r)^(1/2) T, the surface's T_s, that of grains of 0.1 um in the star's full light, whose efficiency is
   2 pi s/lambda, and 8 pi s k T_s/(h c) on average: T_s^5 = T^4 (R/2r)^2 h c/(8 pi s k). */
#define SURFACE_GRAIN_SIZE 1e-7
#define SURFACE_COOLING (2.0 / 5) /* the power with which T_s falls */

/* Radii are had from their seventh roots, which need no square root on the way to the power 2/7. */
typedef struct {
  double radius, grazing_angle;
} place;

LAC_INLINE place place_of(double seventh_root) {
  double square = seventh_root * seventh_root, radius = square * square * square * seventh_root;
  return (place){radius, (0.005 + 0.05 * radius * square) / radius};
}

/* x_black over (angle/4)^(1/4) r^(-1/2) */
LAC_INLINE double interior_x(double x_black, place at) { return x_black * sqrt(sqrt(4 * at.radius * at.radius / at.grazing_angle)); }

typedef struct {
  disc disc;
  double x_black;    /* h c/(lambda k) over T (R/au)^(1/2): the interior's x at 1 au for an angle of 4 */
  double x_surface;  /* the surface's x at 1 au */
  double efficiency; /* of its grains at wavelength */
} two_layers;

LAC_INLINE two_layers two_layers_of(disc d, double stellar_radius, double effective_temperature, double wavelength) {
  double radius = stellar_radius / LAC_AU, x_star = LAC_SECOND_RADIATION / (wavelength * effective_temperature);
  double mean_efficiency = 8 * M_PI * SURFACE_GRAIN_SIZE * effective_temperature / LAC_SECOND_RADIATION; /* at the star's temperature */
  double surface_ratio = lac_exp_inline(0.2 * lac_log_inline(radius * radius / (4 * mean_efficiency)));
  double efficiency = 2 * M_PI * SURFACE_GRAIN_SIZE / wavelength;
  return (two_layers){d, x_star / sqrt(radius), x_star / surface_ratio, lac_choose(efficiency < 1, efficiency, 1)};
}

/* Interior, and both faces of the surface layer, the far one dimmed by the interior. The surface is the warmer one, so that its light
   reaches out as far as any. */
LAC_CLONES static double two_layer_ring(const two_layers *t, double low, double high) {
  const disc *d = &t->disc;
  double root_inner = lac_exp_inline(low / 7), depth_inner = d->depth * lac_exp_inline(-d->index * low);
  double x_inner = t->x_surface * lac_exp_inline(SURFACE_COOLING * low), slant = t->efficiency / d->cosine;
  double growing = lac_choose(d->index < -2.0 / 7, 2 - d->index, 16.0 / 7);
  double extent = reach(high - low, x_inner, SURFACE_COOLING, growing), term[POINTS];
  for (int k = 0; k < POINTS; k++) {
    double u = extent * lac_gauss_node[k];
    place at = place_of(root_inner * lac_exp_inline(u / 7));
    double opaque = -lac_expm1_inline(-depth_inner * lac_exp_inline(-d->index * u));
    double layer = -lac_expm1_inline(-slant * at.grazing_angle), x = x_inner * lac_exp_inline(SURFACE_COOLING * u);
    double interior = opaque / lac_expm1_inline(interior_x(t->x_black, at)), surface = layer * (2 - opaque) / lac_expm1_inline(x);
    term[k] = lac_gauss_weight[k] * (at.radius * at.radius) * (interior + surface);
  }
  return d->cosine * extent * weighted_sum(term);
}

/* An edge of the gap, or the disc's edge that it lies beyond. */
LAC_INLINE double gap_edge(const disc *d, double radius) { return lac_clamp(lac_log_inline(radius / LAC_AU), d->log_inner, d->log_outer); }

LAC_RELATION(disc_flux_density_beckwith_1990_with_gap, temperature_at_one_au, temperature_index, dust_surface_density_at_one_au,
             dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity, inclination, distance, wavelength,
             gap_inner_radius, gap_outer_radius) {
  disc d =
      disc_of(dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity, inclination);
  double x_one = LAC_SECOND_RADIATION / (wavelength * temperature_at_one_au);
  double inside = power_law_ring(&d, x_one, temperature_index, d.log_inner, gap_edge(&d, gap_inner_radius));
  double outside = power_law_ring(&d, x_one, temperature_index, gap_edge(&d, gap_outer_radius), d.log_outer);
  return lac_where(is_disc(dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity,
                           inclination, distance, wavelength) &
                       (temperature_at_one_au > 0) & (temperature_index >= 0) & (gap_inner_radius > 0) &
                       (gap_outer_radius > gap_inner_radius),
                   flux_scale(distance, wavelength) * (inside + outside));
}

LAC_RELATION(disc_flux_density_beckwith_1990, temperature_at_one_au, temperature_index, dust_surface_density_at_one_au,
             dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity, inclination, distance, wavelength) {
  disc d =
      disc_of(dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity, inclination);
  double x_one = LAC_SECOND_RADIATION / (wavelength * temperature_at_one_au);
  double whole = power_law_ring(&d, x_one, temperature_index, d.log_inner, d.log_outer);
  return lac_where(is_disc(dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity,
                           inclination, distance, wavelength) &
                       (temperature_at_one_au > 0) & (temperature_index >= 0),
                   flux_scale(distance, wavelength) * whole);
}

LAC_RELATION(disc_flux_density_chiang_goldreich_1997_with_gap, stellar_radius, effective_temperature, dust_surface_density_at_one_au,
             dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity, inclination, distance, wavelength,
             gap_inner_radius, gap_outer_radius) {
  disc d =
      disc_of(dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity, inclination);
  two_layers t = two_layers_of(d, stellar_radius, effective_temperature, wavelength);
  double inside = two_layer_ring(&t, d.log_inner, gap_edge(&d, gap_inner_radius));
  double outside = two_layer_ring(&t, gap_edge(&d, gap_outer_radius), d.log_outer);
  return lac_where(is_disc(dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity,
                           inclination, distance, wavelength) &
                       (stellar_radius > 0) & (effective_temperature > 0) & (gap_inner_radius > 0) & (gap_outer_radius > gap_inner_radius),
                   flux_scale(distance, wavelength) * (inside + outside));
}

LAC_RELATION(disc_flux_density_chiang_goldreich_1997, stellar_radius, effective_temperature, dust_surface_density_at_one_au,
             dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity, inclination, distance, wavelength) {
  disc d =
      disc_of(dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity, inclination);
  two_layers t = two_layers_of(d, stellar_radius, effective_temperature, wavelength);
  double whole = two_layer_ring(&t, d.log_inner, d.log_outer);
  return lac_where(is_disc(dust_surface_density_at_one_au, dust_surface_density_index, disc_inner_radius, disc_outer_radius, dust_opacity,
                           inclination, distance, wavelength) &
                       (stellar_radius > 0) & (effective_temperature > 0),
                   flux_scale(distance, wavelength) * whole);
}

/* Where the power laws start from. */

LAC_RELATION(disc_inner_radius_cavity, cavity_radius) { return lac_where(cavity_radius > 0, cavity_radius); }

LAC_RELATION(disc_inner_radius_rim, rim_radius) { return lac_where(rim_radius > 0, rim_radius); }

LAC_RELATION(temperature_at_one_au, flaring_angle, heating_luminosity) {
  double fourth_power = flaring_angle * heating_luminosity / (8 * M_PI * LAC_STEFAN_BOLTZMANN * LAC_AU * LAC_AU);
  return lac_where((flaring_angle > 0) & (heating_luminosity > 0), sqrt(sqrt(fourth_power)));
}

LAC_RELATION(temperature_index, flaring_angle) { return lac_where(flaring_angle > 0, 0.5); }

/* The mass in units of Sigma_1 au^2: 2 pi times the integral of a^(1 - p), with the logarithm as its limit for p = 2. */
LAC_RELATION(dust_surface_density_at_one_au, dust_mass, dust_surface_density_index, disc_inner_radius, disc_outer_radius) {
  double power = 2 - dust_surface_density_index, whole = log(disc_outer_radius / disc_inner_radius);
  double rest = lac_choose(fabs(power * whole) < 0x1p-54, whole, expm1(power * whole) / power);
  double mass = 2 * M_PI * LAC_AU * LAC_AU * exp(power * log(disc_inner_radius / LAC_AU)) * rest;
  return lac_where((dust_mass > 0) & (dust_surface_density_index == dust_surface_density_index) & (disc_inner_radius > 0) &
                       (disc_outer_radius > disc_inner_radius),
                   dust_mass / mass);
}

/* What the rows share. */
#define POWER_LAW_COLUMN                                                                                                                   \
  "\\tau = \\frac{[dust_opacity] [dust_surface_density_at_one_au]}{\\cos [inclination]} "                                                  \
  "\\left(\\frac{r}{\\mathrm{au}}\\right)^{-[dust_surface_density_index]}, "
#define WHOLE "[disc_inner_radius] \\le r \\le [disc_outer_radius]"
#define GAPPED "[disc_inner_radius] \\le r \\le [gap_inner_radius], [gap_outer_radius] \\le r \\le [disc_outer_radius]"
#define BECKWITH_TEX                                                                                                                       \
  "[disc_flux_density] = \\frac{\\cos [inclination]}{[distance]^{2}} \\int B_\\nu\\left([wavelength], T\\right) "                          \
  "\\left(1 - \\exp\\left(-\\tau\\right)\\right) 2 \\pi r \\mathrm{dr}, "                                                                  \
  "T = [temperature_at_one_au] \\left(\\frac{r}{\\mathrm{au}}\\right)^{-[temperature_index]}, " POWER_LAW_COLUMN
#define CHIANG_GOLDREICH_TEX                                                                                                               \
  "[disc_flux_density] = \\frac{\\cos [inclination]}{[distance]^{2}} \\int \\left[B_\\nu\\left([wavelength], T_i\\right) "                 \
  "\\left(1 - \\exp\\left(-\\tau\\right)\\right) + B_\\nu\\left([wavelength], T_s\\right) "                                                \
  "\\left(1 - \\exp\\left(-\\frac{\\alpha \\epsilon}{\\cos [inclination]}\\right)\\right) "                                                \
  "\\left(1 + \\exp\\left(-\\tau\\right)\\right)\\right] 2 \\pi r \\mathrm{dr}, "                                                          \
  "T_i = \\left(\\frac{\\alpha}{4}\\right)^{1/4} \\left(\\frac{[stellar_radius]}{r}\\right)^{1/2} [effective_temperature], "               \
  "T_s = \\left[\\left(\\frac{[stellar_radius]}{2 r}\\right)^{2} [effective_temperature]^{4} \\frac{h c}{8 \\pi s k_B}\\right]^{1/5}, "    \
  "\\alpha = 0.005 \\frac{\\mathrm{au}}{r} + 0.05 \\left(\\frac{r}{\\mathrm{au}}\\right)^{2/7}, "                                          \
  "\\epsilon = \\min\\left(1, \\frac{2 \\pi s}{[wavelength]}\\right), s = 0.1 \\mathrm{um}, " POWER_LAW_COLUMN
#define FLAT "a flat disc whose temperature is the same at all heights; absorption alone, no scattering"
#define TWO_LAYERS                                                                                                                         \
  "a flat disc in outline (near face on, no part of it hides another) with the grazing angle of the paper's star (0.5 Msun, 2.5 Rsun, "    \
  "4000 K); an interior as warm as where it is opaque to its own light, heated with half of the star; a surface of grains of 0.1 um, "     \
  "which see all of the star"
#define EMPTY_GAP "; a gap without any dust"
/* The geometry is flat: beyond this inclination flaring hides the far part. */
#define NEARLY_FACE_ON                                                                                                                     \
  {                                                                                                                                        \
    { "inclination", 0, 60 * M_PI / 180 }                                                                                                  \
  }

#define COLUMN_AND_VIEW                                                                                                                    \
  "dust_surface_density_at_one_au", "dust_surface_density_index", "disc_inner_radius", "disc_outer_radius", "dust_opacity", "inclination", \
      "distance", "wavelength"

const lac_relation lac_disc_emission_relations[] = {
    {.gives = "disc_inner_radius",
     .by = "cavity",
     .from = {"cavity_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(disc_inner_radius_cavity),
     .source = "common_practice",
     .equation = "[disc_inner_radius] = [cavity_radius]",
     .supposes = "a cavity without any dust but the rim's"},
    {.gives = "disc_inner_radius",
     .by = "rim",
     .from = {"rim_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(disc_inner_radius_rim),
     .source = "common_practice",
     .equation = "[disc_inner_radius] = [rim_radius]",
     .supposes = "that the disc reaches in to its rim: no cavity"},
    {.gives = "temperature_at_one_au",
     .by = "dullemond_2018",
     .from = {"flaring_angle", "heating_luminosity"},
     .kind = LAC_RECIPE,
     .LAC_ROW(temperature_at_one_au),
     .source = "dullemond_2018",
     .place_in_source = "Eq. 5 of the preprint, at 1 au",
     .equation = "[temperature_at_one_au] = \\left(\\frac{[flaring_angle] [heating_luminosity]}{8 \\pi \\mathrm{au}^{2} "
                 "\\sigma_{SB}}\\right)^{1/4}",
     .supposes = "the dust as warm as the irradiated midplane; a temperature index of 1/2, which belongs to it"},
    {.gives = "temperature_index",
     .by = "dullemond_2018",
     .from = {"flaring_angle"},
     .kind = LAC_RECIPE,
     .LAC_ROW(temperature_index),
     .source = "dullemond_2018",
     .place_in_source = "Eq. 5 of the preprint",
     .equation = "[temperature_index] = \\frac{1}{2}, T^{4} \\propto \\frac{[flaring_angle]}{r^{2}}",
     .supposes = "the dust as warm as the irradiated midplane, with the same flaring angle everywhere"},
    {.gives = "dust_surface_density_at_one_au",
     .by = "power_law",
     .from = {"dust_mass", "dust_surface_density_index", "disc_inner_radius", "disc_outer_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(dust_surface_density_at_one_au),
     .source = "definition",
     .place_in_source = "of the mass of a disc whose surface density is a power of the radius",
     .equation = "[dust_mass] = \\int [dust_surface_density_at_one_au] "
                 "\\left(\\frac{r}{\\mathrm{au}}\\right)^{-[dust_surface_density_index]} 2 \\pi r \\mathrm{dr}, " WHOLE,
     .supposes = "the same power law from the inner to the outer edge, no gap"},
    {.gives = "disc_flux_density",
     .by = "beckwith_1990_with_gap",
     .from = {"temperature_at_one_au", "temperature_index", COLUMN_AND_VIEW, "gap_inner_radius", "gap_outer_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(disc_flux_density_beckwith_1990_with_gap),
     .source = "beckwith_1990",
     .place_in_source = "Eqs. 1-4",
     .from_memory = true,
     .equation = BECKWITH_TEX GAPPED,
     .supposes = FLAT EMPTY_GAP},
    {.gives = "disc_flux_density",
     .by = "beckwith_1990",
     .from = {"temperature_at_one_au", "temperature_index", COLUMN_AND_VIEW},
     .kind = LAC_RECIPE,
     .LAC_ROW(disc_flux_density_beckwith_1990),
     .source = "beckwith_1990",
     .place_in_source = "Eqs. 1-4",
     .from_memory = true,
     .equation = BECKWITH_TEX WHOLE,
     .supposes = FLAT "; no gap"},
    {.gives = "disc_flux_density",
     .by = "chiang_goldreich_1997_with_gap",
     .from = {"stellar_radius", "effective_temperature", COLUMN_AND_VIEW, "gap_inner_radius", "gap_outer_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(disc_flux_density_chiang_goldreich_1997_with_gap),
     .source = "chiang_goldreich_1997",
     .place_in_source = "Sect. 2, both layers integrated over the disc",
     .from_memory = true,
     .equation = CHIANG_GOLDREICH_TEX GAPPED,
     .supposes = TWO_LAYERS EMPTY_GAP " whose edges are not lit",
     .holds = NEARLY_FACE_ON},
    {.gives = "disc_flux_density",
     .by = "chiang_goldreich_1997",
     .from = {"stellar_radius", "effective_temperature", COLUMN_AND_VIEW},
     .kind = LAC_RECIPE,
     .LAC_ROW(disc_flux_density_chiang_goldreich_1997),
     .source = "chiang_goldreich_1997",
     .place_in_source = "Sect. 2, both layers integrated over the disc",
     .from_memory = true,
     .equation = CHIANG_GOLDREICH_TEX WHOLE,
     .supposes = TWO_LAYERS "; no gap",
     .holds = NEARLY_FACE_ON},
    {.gives = NULL},
};
