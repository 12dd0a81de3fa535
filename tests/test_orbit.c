/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Identities of the orbit relations, and the Roche lobe's fit against the lobe itself. Values are checked by the reference tables. */
#include "check.h"
#include "lacuna/orbit.h"

enum { DRAWS = 1000 };
static const double FEW_EPSILON = 16 * DBL_EPSILON; /* some ten roundings */

static void mass_ratios(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < DRAWS; i++) {
    double star = check_log_uniform(&seed, 1e28, 1e32), planet = check_log_uniform(&seed, 1e22, 1e29),
           other = check_log_uniform(&seed, 1e28, 1e32);
    check_within(planet, lac_planet_mass(lac_planet_star_mass_ratio(planet, star), star), FEW_EPSILON, "planet's mass");
    check_within(other, lac_companion_mass(lac_companion_mass_ratio(other, star), star), FEW_EPSILON, "companion's mass");
    check_within(1, lac_companion_mass_ratio(other, star) * lac_companion_mass_ratio(star, other), FEW_EPSILON, "ratios either way");
    check_within(1, lac_companion_mass_fraction(other, star) + lac_companion_mass_fraction(star, other), FEW_EPSILON,
                 "fractions either way");
  }
}

static void hill_radii(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < DRAWS; i++) {
    double star = check_log_uniform(&seed, 1e29, 1e31), m1 = check_log_uniform(&seed, 1e23, 1e28),
           m2 = check_log_uniform(&seed, 1e23, 1e28);
    double a1 = check_log_uniform(&seed, 1e9, 1e14), a2 = a1 * check_uniform(&seed, 1, 2);
    double one = lac_hill_radius(a1, lac_planet_star_mass_ratio(m1, star));
    check_within(2 * one, lac_hill_radius(a1, 8 * lac_planet_star_mass_ratio(m1, star)), FEW_EPSILON, "eight times the mass");
    check_within(one, lac_mutual_hill_radius(m1 / 2, m1 / 2, star, a1, a1), FEW_EPSILON, "two halves on one orbit");
    check_within(lac_mutual_hill_radius(m1, m2, star, a1, a2), lac_mutual_hill_radius(m2, m1, star, a2, a1), FEW_EPSILON, "either order");
  }
}

/* The lobe from its potential (tests/reference/evaluate_orbit.py, quadrature, 5 digits) for the star's mass over its companion's;
   Eggleton 1983 states 1 %. The fit's known errors are asserted too, so that a lucky slip is noticed. */
static void roche_lobe_fit(void **state) {
  (void)state;
  static const struct {
    double q, exact, off;
  } lobe[] = {{0.1, 0.20540, 0.0067}, {0.5, 0.32065, 0.0004}, {1, 0.37986, -0.0025}, {2, 0.44198, -0.0045}, {10, 0.58031, -0.0037}};
  for (size_t i = 0; i < sizeof lobe / sizeof lobe[0]; i++) {
    double got = lac_roche_lobe_radius(1, 1 / lobe[i].q);
    print_message("# Roche lobe, mass ratio %g: %.5f of the separation, fit %.5f (%+.2f %%)\n", lobe[i].q, lobe[i].exact, got,
                  100 * (got / lobe[i].exact - 1));
    check_within(lobe[i].exact, got, 0.01, "Roche lobe");
    check_near(lobe[i].off, got / lobe[i].exact - 1, 1e-4, "error of the fit");
  }
}

typedef double truncation(double roche_lobe_radius, double companion_mass_fraction, double companion_eccentricity);

static void truncation_radii(void **state) {
  (void)state;
  truncation *const at_reynolds[] = {lac_truncation_radius_manara_2019_re1e4, lac_truncation_radius_manara_2019_re1e5,
                                     lac_truncation_radius_manara_2019_re1e6};
  uint64_t seed = 3;
  for (int i = 0; i < DRAWS; i++) {
    double lobe = check_log_uniform(&seed, 1e9, 1e14), any = check_uniform(&seed, 0, 1), mu = check_uniform(&seed, 0.1, 0.5);
    double e = check_uniform(&seed, 0.001, 0.9), former = INFINITY;
    for (int k = 0; k < 3; k++) {
      check_within(0.88 * pow(any, 0.01) * lobe, at_reynolds[k](lobe, any, 0), FEW_EPSILON, "a circular orbit needs no table");
      double got = at_reynolds[k](lobe, mu, e);
      assert_true(got > 0 && got < at_reynolds[k](lobe, mu, 0)); /* eccentricity shrinks the disc */
      assert_true(got > at_reynolds[k](lobe, mu, e + 0.09));     /* the more, the more eccentric the orbit */
      assert_true(got < former);                                 /* and so does a less viscous disc */
      former = got;
      check_undefined(at_reynolds[k](lobe, mu - 0.4, e), "below the table");
      check_undefined(at_reynolds[k](lobe, mu + 0.4000001, e), "above the table");
    }
  }
}

/* Nothing jumps where one interval of the table meets the next. */
static void truncation_is_continuous(void **state) {
  (void)state;
  for (int i = 1; i <= 3; i++) {
    double node = 0.1 + 0.1 * i, step = 1e-9;
    double below = lac_truncation_radius_manara_2019_re1e5(1, node - step, 0.3),
           above = lac_truncation_radius_manara_2019_re1e5(1, node + step, 0.3);
    check_within(below, above, 1e-8, "across a node"); /* slopes are below 1 */
  }
}

int main(void) {
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(mass_ratios),
      cmocka_unit_test(hill_radii),
      cmocka_unit_test(roche_lobe_fit),
      cmocka_unit_test(truncation_radii),
      cmocka_unit_test(truncation_is_continuous),
  };
  cmocka_set_message_output(CM_OUTPUT_TAP);
  return cmocka_run_group_tests_name("orbit", tests, NULL, NULL);
}
