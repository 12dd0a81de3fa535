/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Identities of the starlight relations: inverses, and what does not depend on the distance. Values are checked by the reference tables. */
#include "check.h"
#include "lacuna/constants.h"
#include "lacuna/starlight.h"

enum { DRAWS = 1000 };
static const double FEW_EPSILON = 16 * DBL_EPSILON; /* some ten roundings */

static void distances_and_fluxes(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < DRAWS; i++) {
    double d = check_log_uniform(&seed, 1, 1e4) * LAC_PC, flux = check_log_uniform(&seed, 1e-15, 1e-8),
           l = check_log_uniform(&seed, 1e24, 1e31);
    double catalogued = check_log_uniform(&seed, 1, 1e4) * LAC_PC;
    check_within(d, lac_distance(lac_parallax(d)), FEW_EPSILON, "distance of a parallax");
    check_within(LAC_PC / d, lac_parallax(d) / LAC_ARCSEC, FEW_EPSILON, "one parsec per arcsecond");
    check_within(flux, lac_bolometric_flux(lac_stellar_luminosity_flux_and_distance(flux, d), d), FEW_EPSILON, "flux of a luminosity");
    check_within(lac_bolometric_flux(l, catalogued), lac_bolometric_flux(lac_stellar_luminosity_catalogue(l, catalogued, d), d),
                 FEW_EPSILON, "a catalogued star keeps its flux at any distance");
  }
}

static void radii_and_temperatures(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < DRAWS; i++) {
    double r = check_log_uniform(&seed, 1e7, 1e12), t = check_log_uniform(&seed, 1000, 1e5), d = check_log_uniform(&seed, 1, 1e4) * LAC_PC;
    double l = lac_stellar_luminosity_radius_and_temperature(r, t), flux = check_log_uniform(&seed, 1e-15, 1e-8);
    check_within(r, lac_stellar_radius_luminosity_and_temperature(l, t), FEW_EPSILON, "radius of a luminosity");
    check_within(t, lac_effective_temperature(l, r), FEW_EPSILON, "temperature of a luminosity");
    check_within(r, lac_stellar_radius_angular_diameter(lac_stellar_angular_diameter(r, d), d), FEW_EPSILON,
                 "radius of an angular diameter");
    double near = lac_stellar_luminosity_flux_and_distance(flux, d), far = lac_stellar_luminosity_flux_and_distance(flux, 3 * d);
    check_within(lac_stellar_angular_diameter(lac_stellar_radius_luminosity_and_temperature(near, t), d),
                 lac_stellar_angular_diameter(lac_stellar_radius_luminosity_and_temperature(far, t), 3 * d), FEW_EPSILON,
                 "flux and temperature fix the angular diameter at any distance");
  }
}

static void accretion_and_rotation(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < DRAWS; i++) {
    double m = check_log_uniform(&seed, 1e29, 1e31), r = check_log_uniform(&seed, 1e8, 1e10), rate = check_log_uniform(&seed, 1e13, 1e20);
    double period = check_log_uniform(&seed, 1e4, 1e7), edge = r * check_log_uniform(&seed, 1.01, 100);
    double l = lac_accretion_luminosity(rate, m, r, edge);
    check_within(rate, lac_mass_accretion_rate(l, m, r, edge), FEW_EPSILON, "rate of an accretion luminosity");
    /* Gullbring et al. 1998: five stellar radii leave four fifths of the energy of a fall from afar. */
    check_within(0.8 * LAC_GRAVITATION * m * rate / r, lac_accretion_luminosity(rate, m, r, lac_magnetospheric_radius(r)), FEW_EPSILON,
                 "four fifths");
    check_within(period, lac_rotation_period(m, lac_corotation_radius(m, period)), FEW_EPSILON, "period of a corotation radius");
    check_within(4 * lac_corotation_radius(m, period), lac_corotation_radius(m, 8 * period), FEW_EPSILON, "Kepler's third law");
  }
  check_undefined(lac_accretion_luminosity(1e15, 2e30, 1e9, 0.5e9), "magnetosphere inside the star");
  check_undefined(lac_mass_accretion_rate(1e25, 2e30, 1e9, 1e9), "no height to fall from");
  check_near(0, lac_accretion_luminosity(1e15, 2e30, 1e9, 1e9), 0, "no height to fall from");
}

int main(void) {
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(distances_and_fluxes),
      cmocka_unit_test(radii_and_temperatures),
      cmocka_unit_test(accretion_and_rotation),
  };
  cmocka_set_message_output(CM_OUTPUT_TAP);
  return cmocka_run_group_tests_name("starlight", tests, NULL, NULL);
}
