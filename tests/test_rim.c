/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Rim diameters through a chain of relations against published ones, misses included; and identities of the closed forms.
   Status of the published numbers: Kama's are from the abstract, the others are recalled from memory. */
#include "check.h"
#include "lacuna/constants.h"
#include "lacuna/rim.h"
#include "lacuna/starlight.h"

enum { DRAWS = 1000 };
static const double FEW_EPSILON = 16 * DBL_EPSILON; /* some ten roundings */
static const double COMMON_TEMPERATURE = 1500;      /* K, what the published numbers were printed for */

/* Published diameters are twice the published radii. A miss is the relative amount by which the relation is known to differ. */
typedef struct {
  const char *what;
  double radius, rounding; /* au, as printed */
  double got;              /* sublimation radius in m */
  double miss;             /* 0: agrees within the rounding */
} published;

static double heating(double solar_luminosities) {
  double distance = 140 * LAC_PC;
  return lac_heating_luminosity_star_alone(lac_stellar_luminosity_catalogue(solar_luminosities * LAC_SOLAR_LUMINOSITY, distance, distance));
}

static double kama(double temperature, double backwarming, double efficiency) {
  return lac_sublimation_radius_kama_2009(heating(47), temperature, efficiency, backwarming);
}

static double dullemond(double height) { return lac_sublimation_radius_dullemond_2001(heating(47), COMMON_TEMPERATURE, height); }

static void compare(const published *p) {
  double want = 2 * p->radius, got = 2 * lac_rim_radius(p->got) / LAC_AU, off = got / want - 1;
  print_message("# rim diameter, %s: published %.3f +- %.3f au, got %.4f au (%+.1f %%), %s\n", p->what, want, 2 * p->rounding, got,
                100 * off, p->miss == 0 ? "agrees" : "a known miss");
  if (p->miss == 0) {
    check_near(want, got, 2 * p->rounding, p->what);
    return;
  }
  assert_true(fabs(got - want) > 2 * p->rounding);
  check_near(p->miss, off, 0.002, p->what); /* the printed digits of the misses below */
}

static void published_diameters(void **state) {
  (void)state;
  double hot = lac_heating_luminosity_star_alone(lac_stellar_luminosity_radius_and_temperature(2.5 * LAC_SOLAR_RADIUS, 10000));
  const published table[] = {
      {"Monnier & Millan-Gabet 2002, Eq. 1, 1000 Lsun", 1.1, 0.05,
       lac_sublimation_radius_monnier_2002(heating(1000), COMMON_TEMPERATURE, 1), 0},
      {"Monnier & Millan-Gabet 2002, halves of Eq. 1, 10000 K and 2.5 Rsun", 0.261, 0.261 * 0.05 / 1.1,
       lac_sublimation_radius_monnier_2002(hot, COMMON_TEMPERATURE, 1), 0},
      {"Isella & Natta 2005, 1 Lsun", 0.034, 0.0005, lac_sublimation_radius_isella_natta_2005(heating(1), COMMON_TEMPERATURE, 1, 0), 0},
      {"Dullemond et al. 2001, 47 Lsun, no self-irradiation", 0.47, 0.005, dullemond(0), 0},
      {"Dullemond et al. 2001, 47 Lsun, wall of 0.1", 0.5, 0.05, dullemond(0.1), 0},
      {"Dullemond et al. 2001, 47 Lsun, wall of 0.2", 0.5, 0.05, dullemond(0.2), 0},
      {"Dullemond et al. 2001, 47 Lsun, by grey grains in the open", 0.5, 0.05,
       lac_sublimation_radius_grey_grains(heating(47), COMMON_TEMPERATURE), -0.528},
      {"Kama et al. 2009, 47 Lsun, smallest: no back-warming", 0.2, 0.05, kama(1500, 1, 1), 0},
      {"Kama et al. 2009, 47 Lsun, typical: back-warming 3", 0.4, 0.05, kama(1500, 3, 1), 0},
      {"Kama et al. 2009, 47 Lsun, typical: back-warming 4", 0.4, 0.05, kama(1500, 4, 1), 0.180},
      {"Kama et al. 2009, 47 Lsun, typical: grey grains", 0.4, 0.05, lac_sublimation_radius_grey_grains(heating(47), COMMON_TEMPERATURE),
       -0.410},
      {"Kama et al. 2009, 47 Lsun, small silicates: back-warming 4 of grey grains", 2.2, 0.05, kama(1500, 4, 1), -0.785},
      {"Kama et al. 2009, 47 Lsun, small silicates: back-warming 4, efficiency 0.05", 2.2, 0.05, kama(1500, 4, 0.05), -0.040},
      {"Kama et al. 2009, 47 Lsun, small silicates: back-warming over efficiency 87", 2.2, 0.05, kama(1500, 4, 4. / 87), 0},
      {"Kama et al. 2009, 47 Lsun, small silicates: 42 at 1250 K", 2.2, 0.05, kama(1250, 4, 4. / 42), 0},
  };
  for (size_t i = 0; i < sizeof table / sizeof table[0]; i++) compare(&table[i]);
}

/* The largest published rim, 2.2 au for 47 Lsun, asks for this much back-warming over efficiency. */
static void factor_that_the_largest_rim_needs(void **state) {
  (void)state;
  for (int i = 0; i < 2; i++) {
    double open = lac_sublimation_radius_grey_grains(heating(47), i == 0 ? 1500 : 1250) / LAC_AU;
    check_near(i == 0 ? 87 : 42, pow(2.2 / open, 2), 0.5, "back-warming over efficiency");
  }
}

static void scaling(void **state) {
  (void)state;
  uint64_t seed = 1;
  for (int i = 0; i < DRAWS; i++) {
    double l = check_log_uniform(&seed, 1e24, 1e30), t = check_uniform(&seed, 800, 2000), f = check_uniform(&seed, 0, 0.3);
    double eps = check_log_uniform(&seed, 0.01, 2), c = check_uniform(&seed, 1, 4), k = check_log_uniform(&seed, 0.1, 10);
    check_within(sqrt(k) * lac_sublimation_radius_kama_2009(l, t, eps, c), lac_sublimation_radius_kama_2009(k * l, t, eps, c), FEW_EPSILON,
                 "radius goes with the root of the luminosity");
    check_within(lac_sublimation_radius_dullemond_2001(l, t, f) / (k * k), lac_sublimation_radius_dullemond_2001(l, k * t, f), FEW_EPSILON,
                 "radius goes with the inverse square of the temperature");
  }
  /* Monnier et al. 2005, ApJ 624, 832: the line of 1000 K lies 2.25 times further out than that of 1500 K. */
  check_within(2.25, lac_sublimation_radius_grey_grains(1e27, 1000) / lac_sublimation_radius_grey_grains(1e27, 1500), FEW_EPSILON,
               "1000 K line");
}

/* Every form is (1/2) sqrt(X) (T_star/T)^2 R_star, as most were published, for a star of that radius and temperature. */
static void forms_with_one_factor_agree(void **state) {
  (void)state;
  uint64_t seed = 2;
  for (int i = 0; i < DRAWS; i++) {
    double star = check_log_uniform(&seed, 1e8, 1e10), star_temperature = check_uniform(&seed, 2500, 20000);
    double t = check_uniform(&seed, 800, 2000), x = check_uniform(&seed, 4, 40), c = check_uniform(&seed, 1, 4),
           b = check_uniform(&seed, 0, 3);
    double l = lac_stellar_luminosity_radius_and_temperature(star, star_temperature);
    double want = sqrt(x) / 2 * pow(star_temperature / t, 2) * star;
    check_within(want, lac_sublimation_radius_kama_2009(l, t, c / x, c), FEW_EPSILON, "kama_2009");
    check_within(want, lac_sublimation_radius_isella_natta_2005(l, t, 1 / (x - b), b), FEW_EPSILON, "isella_natta_2005");
    check_within(want, lac_sublimation_radius_dullemond_2001(l, t, x / 4 - 1), FEW_EPSILON, "dullemond_2001");
    check_within(want, lac_sublimation_radius_monnier_2002(l, t, lac_absorption_efficiency_ratio(1 / x)), FEW_EPSILON, "monnier_2002");
    check_within(want, sqrt(x) * lac_sublimation_radius_grey_grains(l, t), FEW_EPSILON, "grey_grains");
    check_within(x, lac_absorption_efficiency_ratio(lac_cooling_efficiency(x)), FEW_EPSILON, "efficiencies are inverse");
  }
}

/* With a luminosity that goes with the square of the distance the rim's angle does not depend on the distance. */
static void angle_is_independent_of_distance(void **state) {
  (void)state;
  uint64_t seed = 3;
  for (int i = 0; i < DRAWS; i++) {
    double flux = check_log_uniform(&seed, 1e-14, 1e-9), l = check_log_uniform(&seed, 1e25, 1e29), t = check_uniform(&seed, 800, 2000);
    double catalogued = check_uniform(&seed, 50, 500) * LAC_PC, d = check_log_uniform(&seed, 10, 5000) * LAC_PC;
    double angle = lac_sublimation_radius_grey_grains(l, t) / catalogued;
    check_within(angle, lac_sublimation_radius_grey_grains(lac_stellar_luminosity_catalogue(l, catalogued, d), t) / d, FEW_EPSILON,
                 "catalogue");
    angle = lac_sublimation_radius_grey_grains(lac_stellar_luminosity_flux_and_distance(flux, catalogued), t) / catalogued;
    check_within(angle, lac_sublimation_radius_grey_grains(lac_stellar_luminosity_flux_and_distance(flux, d), t) / d, FEW_EPSILON, "flux");
  }
}

/* The two laws for silicates, recalled independently of one another, are at most 6 % apart over the tabulated densities; in denser gas
   dust survives hotter. */
static void sublimation_temperatures(void **state) {
  (void)state;
  uint64_t seed = 4;
  for (int i = 0; i < DRAWS; i++) {
    double rho = check_log_uniform(&seed, 1e-15, 1e-1), denser = rho * check_uniform(&seed, 1.1, 10);
    check_within(lac_sublimation_temperature_pollack_1994_olivine(rho), lac_sublimation_temperature_isella_natta_2005(rho), 0.06,
                 "silicates");
    assert_true(lac_sublimation_temperature_isella_natta_2005(denser) > lac_sublimation_temperature_isella_natta_2005(rho));
    assert_true(lac_sublimation_temperature_pollack_1994_olivine(denser) > lac_sublimation_temperature_pollack_1994_olivine(rho));
    assert_true(lac_sublimation_temperature_pollack_1994_orthopyroxene(denser) >
                lac_sublimation_temperature_pollack_1994_orthopyroxene(rho));
    assert_true(lac_sublimation_temperature_pollack_1994_iron(denser) > lac_sublimation_temperature_pollack_1994_iron(rho));
  }
}

int main(void) {
  const struct CMUnitTest tests[] = {
      cmocka_unit_test(published_diameters),
      cmocka_unit_test(factor_that_the_largest_rim_needs),
      cmocka_unit_test(scaling),
      cmocka_unit_test(forms_with_one_factor_agree),
      cmocka_unit_test(angle_is_independent_of_distance),
      cmocka_unit_test(sublimation_temperatures),
  };
  cmocka_set_message_output(CM_OUTPUT_TAP);
  return cmocka_run_group_tests_name("rim", tests, NULL, NULL);
}
