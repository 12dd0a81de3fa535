/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The disc's own light against adaptive integrals over the radius, energy balances, limits and scalings. Single values are in
   tests/reference/checks_emission.csv and evaluated_emission.csv. */
#include <gsl/gsl_errno.h>
#include <gsl/gsl_integration.h>

#include "check.h"
#include "gauss_legendre.h"
#include "lacuna/constants.h"
#include "lacuna/disc.h"
#include "lacuna/emission.h"
#include "lacuna/planck.h"
#include "lacuna/rim.h"

#define PI 3.14159265358979323846

enum { TRIALS = 300 };

/* A few rounding errors; what the header promises for integrals over the radius; what the adaptive rules below are asked for. */
#define FEW_ROUNDINGS (16 * DBL_EPSILON)
#define PROMISED 5e-5
#define QUADRATURE 1e-9

static double integral(double (*f)(double, void *), void *context, double low, double high) {
  gsl_function function = {f, context};
  gsl_integration_workspace *space = gsl_integration_workspace_alloc(2000);
  double result, error;
  const int status = gsl_integration_qag(&function, low, high, 0, QUADRATURE / 10, 2000, GSL_INTEG_GAUSS31, space, &result, &error);
  gsl_integration_workspace_free(space);
  assert_true(status == GSL_SUCCESS || error <= QUADRATURE * fabs(result));
  return result;
}

/* A disc and how it is seen; used by both recipes. */
typedef struct {
  double temperature, temperature_index, stellar_radius, effective_temperature;
  double column, index, inner, outer, opacity, inclination, distance, wavelength;
} disc;

/* x at the inner edge stays below the 700 that the header names, edges within 1e4 of each other. */
static disc any_disc(uint64_t *seed) {
  const double inner = check_log_uniform(seed, 0.01, 30);
  return (disc){.temperature = check_log_uniform(seed, 30, 1000),
                .temperature_index = check_uniform(seed, 0.25, 0.8),
                .stellar_radius = check_log_uniform(seed, 0.5, 5) * LAC_SOLAR_RADIUS,
                .effective_temperature = check_log_uniform(seed, 2500, 12000),
                .column = check_log_uniform(seed, 1e-4, 1e4),
                .index = check_uniform(seed, -2, 3),
                .inner = inner * LAC_AU,
                .outer = inner * check_log_uniform(seed, 1.2, 1e4) * LAC_AU,
                .opacity = check_log_uniform(seed, 0.01, 100),
                .inclination = check_uniform(seed, 0, 1.5),
                .distance = check_log_uniform(seed, 10, 1000) * LAC_PC,
                .wavelength = check_log_uniform(seed, 1e-6, 1e-2)};
}

static double flat(const disc *d) {
  return lac_disc_flux_density_beckwith_1990(d->temperature, d->temperature_index, d->column, d->index, d->inner, d->outer, d->opacity,
                                             d->inclination, d->distance, d->wavelength);
}

static double flat_with_gap(const disc *d, double inner, double outer) {
  return lac_disc_flux_density_beckwith_1990_with_gap(d->temperature, d->temperature_index, d->column, d->index, d->inner, d->outer,
                                                      d->opacity, d->inclination, d->distance, d->wavelength, inner, outer);
}

static double layered(const disc *d) {
  return lac_disc_flux_density_chiang_goldreich_1997(d->stellar_radius, d->effective_temperature, d->column, d->index, d->inner, d->outer,
                                                     d->opacity, d->inclination, d->distance, d->wavelength);
}

static double layered_with_gap(const disc *d, double inner, double outer) {
  return lac_disc_flux_density_chiang_goldreich_1997_with_gap(d->stellar_radius, d->effective_temperature, d->column, d->index, d->inner,
                                                              d->outer, d->opacity, d->inclination, d->distance, d->wavelength, inner,
                                                              outer);
}

/* The integrands per unit of ln r, from library functions alone. */

static double slant_depth(const disc *d, double radius) {
  return d->opacity * d->column * pow(radius / LAC_AU, -d->index) / cos(d->inclination);
}

static double flat_ring(double log_radius, void *context) {
  const disc *d = context;
  const double radius = exp(log_radius), temperature = d->temperature * pow(radius / LAC_AU, -d->temperature_index);
  return cos(d->inclination) * lac_planck_nu(d->wavelength, temperature) * -expm1(-slant_depth(d, radius)) * 2 * PI * radius * radius /
         (d->distance * d->distance);
}

static const double surface_grain = 1e-7;

static double surface_temperature(const disc *d, double radius) {
  const double dilution = d->stellar_radius / (2 * radius);
  return pow(pow(d->effective_temperature, 4) * dilution * dilution * LAC_SECOND_RADIATION / (8 * PI * surface_grain), 0.2);
}

static double grazing_angle(double radius) { return 0.005 * LAC_AU / radius + 0.05 * pow(radius / LAC_AU, 2.0 / 7); }

/* The interior is as warm as the row for the midplane says. */
static double layered_ring(double log_radius, void *context) {
  const disc *d = context;
  const double radius = exp(log_radius), depth = slant_depth(d, radius), cosine = cos(d->inclination);
  const double interior = lac_midplane_temperature_chiang_goldreich_1997(d->stellar_radius, d->effective_temperature, radius);
  const double efficiency = fmin(1, 2 * PI * surface_grain / d->wavelength);
  const double surface = lac_planck_nu(d->wavelength, surface_temperature(d, radius)) *
                         -expm1(-grazing_angle(radius) * efficiency / cosine) * (1 + exp(-depth));
  return cosine * (lac_planck_nu(d->wavelength, interior) * -expm1(-depth) + surface) * 2 * PI * radius * radius /
         (d->distance * d->distance);
}

static void gauss_rule_is_the_library_s(void **state) {
  (void)state;
  gsl_integration_glfixed_table *table = gsl_integration_glfixed_table_alloc(LAC_GAUSS_POINTS);
  for (size_t i = 0; i < LAC_GAUSS_POINTS; i++) {
    double node, weight;
    assert_int_equal(gsl_integration_glfixed_point(0, 1, i, &node, &weight, table), GSL_SUCCESS);
    size_t at = 0;
    while (at < LAC_GAUSS_POINTS && !(fabs(lac_gauss_node[at] - node) <= FEW_ROUNDINGS)) at++;
    assert_true(at < LAC_GAUSS_POINTS);
    check_near(weight, lac_gauss_weight[at], FEW_ROUNDINGS, "weight");
  }
  gsl_integration_glfixed_table_free(table);
}

/* Fluxes that no instrument could see, of h c/(lambda k T) above 500 at the inner edge, are left out. */
static void integrals_keep_their_promise(void **state) {
  (void)state;
  uint64_t seed = 1;
  double worst_flat = 0, worst_layered = 0;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    const double low = log(d.inner), high = log(d.outer), hottest = d.temperature * pow(d.inner / LAC_AU, -d.temperature_index);
    if (LAC_SECOND_RADIATION / (d.wavelength * hottest) < 500) {
      const double want = integral(flat_ring, &d, low, high);
      worst_flat = fmax(worst_flat, fabs(flat(&d) / want - 1));
      check_within(want, flat(&d), PROMISED, "power-law disc");
    }
    const double want = integral(layered_ring, &d, low, high);
    worst_layered = fmax(worst_layered, fabs(layered(&d) / want - 1));
    check_within(want, layered(&d), PROMISED, "two-layer disc");
  }
  print_message("# worst relative errors: power law %.2g, two layers %.2g\n", worst_flat, worst_layered);
}

static void gap_takes_away_its_ring(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    const double extent = log(d.outer / d.inner);
    const double inner = d.inner * exp(check_uniform(&seed, 0.1, 0.4) * extent),
                 outer = inner * exp(check_uniform(&seed, 0.1, 0.5) * extent);
    disc ring = d;
    ring.inner = inner, ring.outer = outer;
    check_near(flat(&d) - flat(&ring), flat_with_gap(&d, inner, outer), PROMISED * flat(&d), "power-law disc");
    check_near(layered(&d) - layered(&ring), layered_with_gap(&d, inner, outer), PROMISED * layered(&d), "two-layer disc");
    /* A gap across an edge, and gaps outside, which take nothing. */
    disc outside = d;
    outside.inner = outer;
    check_within(flat(&outside), flat_with_gap(&d, d.inner / 2, outer), FEW_ROUNDINGS + 1e-12, "gap from the inner edge on");
    check_within(flat(&d), flat_with_gap(&d, d.outer * 1.5, d.outer * 2), 1e-12, "gap outside");
    check_within(layered(&d), layered_with_gap(&d, d.inner / 3, d.inner / 2), 1e-12, "gap inside");
  }
}

/* Opaque and in the Rayleigh-Jeans limit, thin and in that limit (in closed form, the logarithm for p + q = 2), and opaque of one
   temperature. */
static void limits_are_in_closed_form(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    d.wavelength = 1e6; /* x is 1e-9 and less */
    const double rayleigh_jeans = 2 * LAC_BOLTZMANN * d.temperature * LAC_SPEED_OF_LIGHT / (d.wavelength * d.wavelength) /
                                  LAC_SPEED_OF_LIGHT * 2 * PI / (d.distance * d.distance);
    const double inner = d.inner / LAC_AU, outer = d.outer / LAC_AU, power = 2 - d.temperature_index;
    d.opacity = 1e40;
    check_within(cos(d.inclination) * rayleigh_jeans * LAC_AU * LAC_AU * (pow(outer, power) - pow(inner, power)) / power, flat(&d),
                 PROMISED, "opaque");
    d.index = 2 - d.temperature_index, d.opacity = 1e-40;
    check_within(rayleigh_jeans * LAC_AU * LAC_AU * d.opacity * d.column * log(outer / inner), flat(&d), 1e-7, "thin");
  }
  disc d = any_disc(&seed);
  d.temperature_index = 0, d.opacity = 1e40, d.wavelength = 1e-4, d.outer = 5 * d.inner;
  check_within(lac_planck_nu(d.wavelength, d.temperature) * PI * (d.outer * d.outer - d.inner * d.inner) * cos(d.inclination) /
                   (d.distance * d.distance),
               flat(&d), PROMISED, "opaque of one temperature");
}

/* 0.01 Msun of gas with a hundredth of dust, from 0.01 to 100 au: thin and Rayleigh-Jeans in closed form is 277.9 mJy at 230 GHz, thin
   alone 257.3, and neither 76.0 (computed independently). */
static void thickness_and_wien_s_cut_off_take_their_share(void **state) {
  (void)state;
  const double wavelength = lac_wavelength(230e9), inner = 0.01 * LAC_AU, outer = 100 * LAC_AU;
  const double dust = lac_dust_mass_gas_to_dust(0.01 * LAC_SOLAR_MASS, 100), opacity = 0.23;
  const double column = lac_dust_surface_density_at_one_au(dust, 1.5, inner, outer);
  const double full = lac_disc_flux_density_beckwith_1990(150, 0.5, column, 1.5, inner, outer, opacity, 0, 140 * LAC_PC, wavelength);
  const double thin = lac_disc_flux_density_beckwith_1990(150, 0.5, column, 1.5, inner, outer, opacity * 1e-9, 0, 140 * LAC_PC, wavelength);
  const double closed = 2 * LAC_BOLTZMANN * 150 / (wavelength * wavelength) * opacity * column * 2 * PI * LAC_AU * LAC_AU * log(1e4) /
                        (140 * LAC_PC * 140 * LAC_PC);
  check_near(76.0, full / LAC_JY * 1e3, 0.05, "full");
  check_near(257.3, thin / LAC_JY * 1e12, 0.05, "thin");
  check_near(277.9, closed / LAC_JY * 1e3, 0.05, "thin, Rayleigh-Jeans");
}

static void fluxes_scale(void **state) {
  (void)state;
  uint64_t seed = 4;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed), far = d;
    const double factor = check_log_uniform(&seed, 0.1, 10), square = factor * factor;
    far.distance *= factor;
    check_within(flat(&d), flat(&far) * square, FEW_ROUNDINGS, "power-law disc, distance");
    check_within(layered(&d), layered(&far) * square, FEW_ROUNDINGS, "two-layer disc, distance");
    /* Wavelengths longer and temperatures lower by the same factor: B_nu falls with its cube. */
    disc colder = d;
    colder.temperature /= factor, colder.wavelength *= factor;
    check_within(flat(&d), flat(&colder) * square * factor, 1e-12, "displacement");
    /* Foreshortening and a thinner column cancel. */
    disc inclined = d;
    inclined.inclination = 0.3, inclined.opacity *= cos(0.3) / cos(d.inclination);
    check_within(flat(&d) / cos(d.inclination), flat(&inclined) / cos(0.3), 1e-12, "inclination");
  }
}

/* Power per unit of ln(wavelength) in all directions of a disc that is seen face on: an opaque flat one sends pi d^2 F per face. */
static double face_on_luminosity(double log_wavelength, void *context) {
  disc *d = context;
  d->wavelength = exp(log_wavelength);
  return 2 * PI * d->distance * d->distance * flat(d) * LAC_SPEED_OF_LIGHT / d->wavelength;
}

/* A flat opaque disc of T = (2/(3 pi))^(1/4) (R/r)^(3/4) T_star (Chiang & Goldreich 1997, Eq. 1) from the star to infinity shines with
   2/(3 pi) of the star's luminosity: exact for this law, which leaves some of the quarter out that a flat disc truly catches, for it holds
   far from the star only. Between two radii it is that times (R/r_in - R/r_out). */
static void flat_disc_shines_with_what_it_catches(void **state) {
  (void)state;
  const double star = 2 * LAC_SOLAR_RADIUS, effective = 4500;
  const double luminosity = 4 * PI * star * star * LAC_STEFAN_BOLTZMANN * pow(effective, 4);
  disc d = {.temperature = pow(2 / (3 * PI), 0.25) * pow(star / LAC_AU, 0.75) * effective,
            .temperature_index = 0.75,
            .column = 1e30,
            .index = 0,
            .inner = star,
            .outer = 1000 * star,
            .opacity = 1,
            .distance = LAC_PC};
  check_within(2 / (3 * PI) * (1 - 1e-3), integral(face_on_luminosity, &d, log(1e-8), log(1)) / luminosity, PROMISED, "whole disc");
  d.inner = 20 * star;
  check_within(2 / (3 * PI) * (0.05 - 1e-3), integral(face_on_luminosity, &d, log(1e-8), log(1)) / luminosity, PROMISED, "beyond 20 radii");
}

/* The near face's surface layer and the interior, by themselves: without dust both faces of the layer are left, and with much of it
   one of them and an opaque interior. */
static double surface_alone(const disc *d) {
  disc empty = *d;
  empty.opacity = 1e-30;
  return layered(&empty) / 2;
}

static double interior_alone(const disc *d) {
  disc opaque = *d;
  opaque.opacity = 1e30;
  return layered(&opaque) - surface_alone(d);
}

/* Thin layers shine alike in all directions: one face of the layer sends 2 pi d^2 F to its side; the interior pi d^2 F face on. */
static double surface_luminosity(double log_wavelength, void *context) {
  disc *d = context;
  d->wavelength = exp(log_wavelength);
  return 2 * PI * d->distance * d->distance * surface_alone(d) * LAC_SPEED_OF_LIGHT / d->wavelength;
}

static double interior_luminosity(double log_wavelength, void *context) {
  disc *d = context;
  d->wavelength = exp(log_wavelength);
  return PI * d->distance * d->distance * interior_alone(d) * LAC_SPEED_OF_LIGHT / d->wavelength;
}

/* What grains in the layer of one face take in, the angle times L/(4 pi r^2), per unit of ln r. */
static double intercepted(double log_radius, void *context) {
  const disc *d = context;
  const double radius = exp(log_radius), ratio = d->stellar_radius / radius;
  return 2 * PI * radius * radius * grazing_angle(radius) * ratio * ratio * LAC_STEFAN_BOLTZMANN * pow(d->effective_temperature, 4);
}

/* The layer sends half of it out, but for 4 %: the mean efficiency of the paper's grains, 8 pi s k T/(h c), has a 4 where the Planck mean
   of 2 pi s/lambda has Gamma(5) zeta(5)/(Gamma(4) zeta(4)) = 3.832. The interior, which the paper heats with half of the star's face, has a
   quarter. The layer isn't quite thin at angles of 0.1: 1 %. */
static void two_layers_shine_with_what_they_catch(void **state) {
  (void)state;
  disc d = {.stellar_radius = 2.5 * LAC_SOLAR_RADIUS,
            .effective_temperature = 4000,
            .column = 1,
            .index = 1,
            .inner = LAC_AU,
            .outer = 100 * LAC_AU,
            .opacity = 1,
            .distance = LAC_PC};
  const double caught = integral(intercepted, &d, log(d.inner), log(d.outer));
  const double planck_mean = 4 * 1.0369277551433699 / 1.0823232337111382;
  check_within(planck_mean / 8, integral(surface_luminosity, &d, log(3e-7), log(1e-2)) / caught, 0.01, "surface layer");
  check_within(0.25, integral(interior_luminosity, &d, log(3e-7), log(1)) / caught, PROMISED, "interior");
}

/* Chiang & Goldreich 1997, abstract: at a fixed frequency the surface contributes about three times as much as the interior. For their
   star and disc, where both shine. */
static void surface_outshines_the_interior(void **state) {
  (void)state;
  disc d = {.stellar_radius = 2.5 * LAC_SOLAR_RADIUS,
            .effective_temperature = 4000,
            .column = 1,
            .index = 1,
            .inner = 0.07 * LAC_AU,
            .outer = 270 * LAC_AU,
            .opacity = 1,
            .distance = LAC_PC};
  for (d.wavelength = 7e-6; d.wavelength < 35e-6; d.wavelength *= 1.1)
    check_near(3, surface_alone(&d) / interior_alone(&d), 1, "surface over interior");
}

/* The rim. */

typedef struct {
  double temperature, radius, height_ratio;
} rim;

static rim any_rim(uint64_t *seed) {
  return (rim){.temperature = check_uniform(seed, 900, 2000),
               .radius = check_log_uniform(seed, 0.02, 3) * LAC_AU,
               .height_ratio = check_uniform(seed, 0.01, 0.3)};
}

typedef double rim_function(double, double, double, double, double, double);

/* The area that is seen. */
static double seen(rim_function *flux, const rim *r, double inclination) {
  const double distance = 100 * LAC_PC, wavelength = 2.2e-6;
  return flux(r->temperature, r->radius, r->height_ratio, inclination, distance, wavelength) * distance * distance /
         lac_planck_nu(wavelength, r->temperature);
}

static void walls_show_their_far_side(void **state) {
  (void)state;
  uint64_t seed = 5;
  for (int i = 0; i < TRIALS; i++) {
    const rim r = any_rim(&seed);
    const double square = r.radius * r.radius, small = 1e-4, half_wall = 4 * r.height_ratio * square;
    check_within(half_wall * sin(small), seen(lac_rim_flux_density_vertical_wall, &r, small), 1e-8, "nearly face on");
    const double inclination = atan(check_uniform(&seed, 0.01, 0.2) / r.height_ratio);
    const double offset = r.height_ratio * tan(inclination);
    check_within(half_wall * sin(inclination) * (1 - offset * offset / 6), seen(lac_rim_flux_density_vertical_wall, &r, inclination),
                 offset * offset * offset * offset, "next order of f tan i");
    const double steep = atan(check_uniform(&seed, 1, 100) / r.height_ratio);
    check_within(PI * square * cos(steep), seen(lac_rim_flux_density_vertical_wall, &r, steep), FEW_ROUNDINGS / cos(steep),
                 "filled opening");
  }
}

/* E(45 deg) = 1.35064388 (Abramowitz & Stegun 1964, Table 17.1). */
static void rounded_rims_are_seen_from_everywhere(void **state) {
  (void)state;
  uint64_t seed = 6;
  for (int i = 0; i < TRIALS; i++) {
    const rim r = any_rim(&seed);
    const double annulus = 2 * PI * r.height_ratio * r.radius * r.radius;
    check_within(annulus, seen(lac_rim_flux_density_rounded_rim, &r, 0), FEW_ROUNDINGS, "face on");
    check_within(2 / PI * annulus, seen(lac_rim_flux_density_rounded_rim, &r, PI / 2), FEW_ROUNDINGS, "edge on");
    check_within(1.35064388 / (PI / 2), seen(lac_rim_flux_density_rounded_rim, &r, PI / 4) / annulus, 5e-9, "at 45 degrees");
  }
}

static double seen_in_band(double inclination, void *context) {
  return seen(lac_rim_flux_density_vertical_wall, context, inclination) * sin(inclination);
}

/* What leaves the wall in all directions is what we see of it summed over the sky; at the radius where the wall, which lights itself
   (Dullemond, Dominik & Natta 2001), has its temperature, this is the share sin(arctan f) of the star's light that it catches, to the order
   of f^2 that their factor 1 + f keeps. */
static void walls_shine_with_what_they_catch(void **state) {
  (void)state;
  uint64_t seed = 7;
  for (int i = 0; i < 30; i++) {
    rim r = any_rim(&seed);
    r.height_ratio = check_uniform(&seed, 0.02, 0.2);
    const double f = r.height_ratio, luminosity = check_log_uniform(&seed, 0.5, 100) * LAC_SOLAR_LUMINOSITY;
    r.radius = lac_sublimation_radius_dullemond_2001(luminosity, r.temperature, f);
    const double sky = 4 * PI * integral(seen_in_band, &r, 0, PI / 2); /* both sides */
    const double exitance = lac_blackbody_exitance(r.temperature);
    const double share = lac_blackbody_fraction(5e-6, r.temperature) - lac_blackbody_fraction(1e-6, r.temperature);
    check_within(sky * exitance / PI * share / luminosity, lac_near_infrared_excess(r.temperature, r.radius, f, luminosity), 1e-7,
                 "all directions");
    check_within(sin(atan(f)), lac_near_infrared_excess(r.temperature, r.radius, f, luminosity) / share, f * f, "what the wall catches");
  }
}

/* Magnitudes, shares and masses. */

static void sums_and_inverses_return(void **state) {
  (void)state;
  uint64_t seed = 8;
  for (int i = 0; i < TRIALS; i++) {
    const double star = check_log_uniform(&seed, 1e-3, 10) * LAC_JY, around = check_log_uniform(&seed, 1e-3, 10) * LAC_JY;
    const double disc_light = check_log_uniform(&seed, 1e-6, 1) * LAC_JY, extinction = check_uniform(&seed, 0, 5);
    const double total = lac_total_flux_density_star_rim_disc(star, around, disc_light);
    check_within(lac_total_flux_density_star_and_rim(star, around + disc_light), total, FEW_ROUNDINGS, "sums");
    check_within(lac_total_flux_density_star_and_rim(star, around), lac_total_flux_density_star_and_disc(star, around), 0, "two by two");
    check_within(1, lac_stellar_flux_fraction(star, total) * (1 + (around + disc_light) / star), FEW_ROUNDINGS, "share");
    const double zero = check_log_uniform(&seed, 100, 4000) * LAC_JY;
    const double bare = lac_observed_magnitude(lac_observed_flux_density_unextincted(total), zero);
    const double dimmed = lac_observed_magnitude(lac_observed_flux_density_extincted(total, extinction), zero);
    check_near(extinction, dimmed - bare, 32 * FEW_ROUNDINGS, "extinction");
    const double mass = check_log_uniform(&seed, 0.01, 300) * LAC_EARTH_MASS, distance = check_log_uniform(&seed, 50, 500) * LAC_PC;
    const double opacity = check_log_uniform(&seed, 0.01, 10), temperature = check_uniform(&seed, 5, 100);
    const double wavelength = check_log_uniform(&seed, 3e-4, 1e-2);
    check_within(mass,
                 lac_dust_mass_hildebrand_1983(lac_dust_flux_density(mass, distance, opacity, temperature, wavelength), distance, opacity,
                                               temperature, wavelength),
                 FEW_ROUNDINGS, "dust mass");
    check_within(mass, lac_dust_mass_gas_to_dust(lac_disc_mass_gas_to_dust(mass, opacity), opacity), FEW_ROUNDINGS, "gas and dust");
  }
}

/* A thin disc of one temperature shines with its mass, whatever its edges and its column's slope. */
static void mass_is_that_of_the_thin_disc(void **state) {
  (void)state;
  uint64_t seed = 9;
  for (int i = 0; i < TRIALS; i++) {
    disc d = any_disc(&seed);
    const double mass = check_log_uniform(&seed, 0.01, 300) * LAC_EARTH_MASS;
    d.temperature_index = 0, d.wavelength = check_log_uniform(&seed, 3e-4, 1e-2), d.opacity = 1e-30;
    d.column = lac_dust_surface_density_at_one_au(mass, d.index, d.inner, d.outer);
    check_within(mass, lac_dust_mass_hildebrand_1983(flat(&d), d.distance, d.opacity, d.temperature, d.wavelength), PROMISED, "mass");
    d.index = 2;
    const double exact = lac_dust_surface_density_at_one_au(mass, 2, d.inner, d.outer);
    check_within(mass / (2 * PI * LAC_AU * LAC_AU * log(d.outer / d.inner)), exact, FEW_ROUNDINGS, "logarithm");
    check_within(exact, lac_dust_surface_density_at_one_au(mass, 2 + 1e-12, d.inner, d.outer), 1e-10, "beside the logarithm");
  }
}

static void temperature_is_the_midplane_s(void **state) {
  (void)state;
  uint64_t seed = 10;
  for (int i = 0; i < TRIALS; i++) {
    const double angle = check_log_uniform(&seed, 0.005, 0.3), luminosity = check_log_uniform(&seed, 0.01, 100) * LAC_SOLAR_LUMINOSITY;
    const double radius = check_log_uniform(&seed, 0.1, 300) * LAC_AU;
    check_within(lac_midplane_temperature_dullemond_2018(angle, luminosity, radius),
                 lac_temperature_at_one_au(angle, luminosity) * pow(radius / LAC_AU, -lac_temperature_index(angle)), FEW_ROUNDINGS,
                 "midplane");
  }
}

int main(void) {
  cmocka_set_message_output(CM_OUTPUT_TAP);
  gsl_set_error_handler_off();
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(gauss_rule_is_the_library_s),
      cmocka_unit_test(integrals_keep_their_promise),
      cmocka_unit_test(gap_takes_away_its_ring),
      cmocka_unit_test(limits_are_in_closed_form),
      cmocka_unit_test(thickness_and_wien_s_cut_off_take_their_share),
      cmocka_unit_test(fluxes_scale),
      cmocka_unit_test(flat_disc_shines_with_what_it_catches),
      cmocka_unit_test(two_layers_shine_with_what_they_catch),
      cmocka_unit_test(surface_outshines_the_interior),
      cmocka_unit_test(walls_show_their_far_side),
      cmocka_unit_test(rounded_rims_are_seen_from_everywhere),
      cmocka_unit_test(walls_shine_with_what_they_catch),
      cmocka_unit_test(sums_and_inverses_return),
      cmocka_unit_test(mass_is_that_of_the_thin_disc),
      cmocka_unit_test(temperature_is_the_midplane_s),
  };
  return cmocka_run_group_tests_name("emission", tests, NULL, NULL);
}
