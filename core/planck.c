/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Black bodies. In x = h c/(lambda k T), exp(x) turns a relative error of x into x times as many units of the result, so x is carried in
   two doubles: the rounding of lambda T, of h c/k and of the quotient are all kept. exp(x) - 1 stays apart as 2^k m, so that nothing
   overflows. Exact combinations of the SI's constants stand as literals, because products of rounded constants are off in the last digit.
 */
#include "lacuna/planck.h"

#include "kernels_inline.h"
#include "planck_polynomials.h"
#include "relation.h"

#define SECOND_RADIATION_LOW -6.735986446804958e-19 /* h c/k less LAC_SECOND_RADIATION */
#define TWO_H_C 3.9728917142978574e-25              /* J m */
#define TWO_H_C_SQUARED 1.191042972397188414e-16    /* W m^2 */
#define TWO_C 599584916.0                           /* m/s */

/* Beyond this x every black-body quantity is 0, and powers of two stay within lac_scale. */
#define LARGEST_X 1400.0

/* h c/(lambda k T), and what it lost to rounding. */
LAC_INLINE double exponent_of(double wavelength, double temperature, double *lost) {
  double product = wavelength * temperature, product_lost = fma(wavelength, temperature, -product);
  double inverse = 1 / product, x = LAC_SECOND_RADIATION * inverse;
  double remainder = fma(-x, product, LAC_SECOND_RADIATION);
  double small = (fma(-x, product_lost, remainder) + SECOND_RADIATION_LOW) * inverse;
  *lost = lac_choose(x < LARGEST_X, small, 0);
  return lac_choose(x < LARGEST_X, x, LARGEST_X);
}

/* exp(x) = 2^k (1 + q) and exp(x) - 1 = 2^k m. */
typedef struct {
  double x, k, q, m;
} boltzmann;

LAC_INLINE boltzmann boltzmann_of(double wavelength, double temperature) {
  double lost, x = exponent_of(wavelength, temperature, &lost), k, q = lac_exp_reduced(x, lost, &k);
  return (boltzmann){x, k, q, q + (1 - lac_scale(1, -k))};
}

/* numerator/(power (exp(x) - 1)). */
LAC_INLINE double planck_of(double numerator, double power, double wavelength, double temperature) {
  boltzmann b = boltzmann_of(wavelength, temperature);
  return lac_where((wavelength > 0) & (temperature > 0), lac_scale(numerator / (power * b.m), -b.k));
}

/* Rounded once, for B_nu's last digit. */
LAC_INLINE double cube_of(double x) {
  double square = x * x, lost = fma(x, x, -square);
  return fma(square, x, lost * x);
}

LAC_RELATION(wavelength, frequency) { return lac_where(frequency > 0, LAC_SPEED_OF_LIGHT / frequency); }

LAC_RELATION(frequency, wavelength) { return lac_where(wavelength > 0, LAC_SPEED_OF_LIGHT / wavelength); }

LAC_RELATION(planck_nu, wavelength, body_temperature) { return planck_of(TWO_H_C, cube_of(wavelength), wavelength, body_temperature); }

LAC_RELATION(planck_lambda, wavelength, body_temperature) {
  double square = wavelength * wavelength;
  return planck_of(TWO_H_C_SQUARED, square * square * wavelength, wavelength, body_temperature);
}

LAC_RELATION(photon_radiance_nu, wavelength, body_temperature) {
  return planck_of(2, wavelength * wavelength, wavelength, body_temperature);
}

LAC_RELATION(photon_radiance_lambda, wavelength, body_temperature) {
  double square = wavelength * wavelength;
  return planck_of(TWO_C, square * square, wavelength, body_temperature);
}

/* The x of a peak: the root of x = n (1 - exp(-x)), that is n + W(-n exp(-n)), W Lambert's function; n = 5, 3, 4. */
#define PEAK_OF_B_LAMBDA 4.965114231744276303699
#define PEAK_OF_B_NU 2.821439372122078893403
#define PEAK_OF_LAMBDA_B_LAMBDA 3.920690394872886343561

LAC_RELATION(peak_wavelength, body_temperature) {
  return lac_where(body_temperature > 0, LAC_SECOND_RADIATION / PEAK_OF_B_LAMBDA / body_temperature);
}

LAC_RELATION(peak_frequency, body_temperature) {
  return lac_where(body_temperature > 0, PEAK_OF_B_NU * LAC_BOLTZMANN / LAC_PLANCK_CONSTANT * body_temperature);
}

LAC_RELATION(peak_wavelength_power, body_temperature) {
  return lac_where(body_temperature > 0, LAC_SECOND_RADIATION / PEAK_OF_LAMBDA_B_LAMBDA / body_temperature);
}

#define FIFTEEN_OVER_PI_4 0.1539897338202650278373

/* The share below the wavelength of x: 15/pi^4 times the integral of t^3/(e^t - 1) from x on, by polylogarithms of exp(-x) for x > 2, else
   what the Bernoulli series leaves of 1. */
LAC_INLINE double fraction_of(double x, double lost) {
  double k, q = lac_exp_reduced(-x, -lost, &k);
  double y = lac_scale(1 + q, k), square = x * x, cube = square * x;
  double tail = fma(cube, lac_polylogarithm_1(y),
                    fma(3 * square, lac_polylogarithm_2(y), fma(6 * x, lac_polylogarithm_3(y), 6 * lac_polylogarithm_4(y))));
  double series = fma(square, lac_bernoulli_tail(square), fma(x, -0.125, 1.0 / 3));
  return lac_choose(x > 2, FIFTEEN_OVER_PI_4 * tail * y, fma(-FIFTEEN_OVER_PI_4 * cube, series, 1));
}

LAC_RELATION(blackbody_fraction, wavelength, body_temperature) {
  double lost, x = exponent_of(wavelength, body_temperature, &lost);
  return lac_where((wavelength > 0) & (body_temperature > 0), fraction_of(x, lost));
}

LAC_RELATION(brightness_temperature, specific_intensity, wavelength) {
  double ratio = TWO_H_C / (cube_of(wavelength) * specific_intensity);
  double temperature = LAC_SECOND_RADIATION / (wavelength * lac_log1p_inline(ratio));
  return lac_where((specific_intensity > 0) & (wavelength > 0) & (ratio < (double)INFINITY), temperature);
}

LAC_RELATION(blackbody_exitance, body_temperature) {
  double square = body_temperature * body_temperature;
  return lac_where(body_temperature > 0, LAC_STEFAN_BOLTZMANN * (square * square));
}

LAC_CLONES void lac_planck_nu_block(size_t n, double *out, const double *wavelength, double body_temperature) {
#pragma GCC ivdep
  for (size_t i = 0; i < n; i++) out[i] = planck_nu_body(wavelength[i], body_temperature);
}

LAC_CLONES void lac_planck_lambda_block(size_t n, double *out, const double *wavelength, double body_temperature) {
#pragma GCC ivdep
  for (size_t i = 0; i < n; i++) out[i] = planck_lambda_body(wavelength[i], body_temperature);
}

/* B_nu (x/T)/(1 - exp(-x)), where 1 - exp(-x) = m/(1 + q); the power of two comes last, so that no factor is subnormal before the result
 * is. */
LAC_CLONES double lac_planck_nu_slope(double wavelength, double body_temperature) {
  boltzmann b = boltzmann_of(wavelength, body_temperature);
  double slope = TWO_H_C / (cube_of(wavelength) * b.m) * (b.x / body_temperature) * ((1 + b.q) / b.m);
  return lac_where((wavelength > 0) & (body_temperature > 0), lac_scale(slope, -b.k));
}

LAC_CLONES double lac_temperature_from_planck_lambda(double planck_lambda, double wavelength) {
  double square = wavelength * wavelength, ratio = TWO_H_C_SQUARED / (square * square * wavelength * planck_lambda);
  double temperature = LAC_SECOND_RADIATION / (wavelength * lac_log1p_inline(ratio));
  return lac_where((planck_lambda > 0) & (wavelength > 0) & (ratio < (double)INFINITY), temperature);
}

double lac_rayleigh_jeans_temperature(double specific_intensity, double wavelength) {
  return lac_where((specific_intensity >= 0) & (wavelength > 0), wavelength * wavelength * specific_intensity / (2 * LAC_BOLTZMANN));
}

double lac_photon_exitance(double body_temperature) {
  const double constant = 1520460859393136.211; /* 4 pi zeta(3) k^3/(h^3 c^2), m^-2 s^-1 K^-3 */
  return lac_where(body_temperature > 0, constant * (body_temperature * body_temperature * body_temperature));
}

/* d ln F/dx = -15/pi^4 x^3/((exp(x) - 1) F). */
static double fraction_slope(double x, double fraction) { return -FIFTEEN_OVER_PI_4 * x * x * x / (expm1(x) * fraction); }

/* ln F is nearly straight in x, so Newton's steps on it are few; a step out of the bracket is replaced by halving. */
LAC_CLONES static double x_of_fraction(double fraction) {
  double low = 0, high = 800, x = 3.5; /* F(3.5) is near 1/2, F(800) is 0 */
  for (int step = 0; step < 100; step++) {
    double value = fraction_of(x, 0);
    if (value == fraction || !(high - low > 0x1p-52 * x)) return x;
    if (value > fraction) low = x;
    else high = x;
    double next = value > 0 ? x + lac_log_inline(fraction / value) / fraction_slope(x, value) : low;
    if (!(next > low && next < high)) next = low + (high - low) / 2;
    if (fabs(next - x) < 0x1p-53 * x) return next;
    x = next;
  }
  return x;
}

double lac_wavelength_of_blackbody_fraction(double blackbody_fraction, double body_temperature) {
  if (!(blackbody_fraction > 0 && blackbody_fraction < 1 && body_temperature > 0)) return (double)NAN;
  return LAC_SECOND_RADIATION / (x_of_fraction(blackbody_fraction) * body_temperature);
}

const lac_relation lac_planck_relations[] = {
    {.gives = "wavelength",
     .by = "definition",
     .from = {"frequency"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(wavelength),
     .source = "definition",
     .equation = "[wavelength] = \\frac{c}{[frequency]}",
     .inverse_of = "frequency/definition"},
    {.gives = "frequency",
     .by = "definition",
     .from = {"wavelength"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(frequency),
     .source = "definition",
     .equation = "[frequency] = \\frac{c}{[wavelength]}"},
    {.gives = "planck_nu",
     .by = "planck",
     .from = {"wavelength", "body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(planck_nu),
     .source = "planck_1901",
     .equation = "[planck_nu] = \\frac{2 h_P c}{[wavelength]^{3}} \\frac{1}{\\exp\\left(\\frac{h_P c}{[wavelength] k_B "
                 "[body_temperature]}\\right) - 1}"},
    {.gives = "planck_lambda",
     .by = "planck",
     .from = {"wavelength", "body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(planck_lambda),
     .source = "planck_1901",
     .equation = "[planck_lambda] = \\frac{2 h_P c^{2}}{[wavelength]^{5}} \\frac{1}{\\exp\\left(\\frac{h_P c}{[wavelength] k_B "
                 "[body_temperature]}\\right) - 1}"},
    {.gives = "photon_radiance_nu",
     .by = "planck",
     .from = {"wavelength", "body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(photon_radiance_nu),
     .source = "planck_1901",
     .place_in_source = "divided by the energy of a photon",
     .equation = "[photon_radiance_nu] = \\frac{2}{[wavelength]^{2}} \\frac{1}{\\exp\\left(\\frac{h_P c}{[wavelength] k_B "
                 "[body_temperature]}\\right) - 1}"},
    {.gives = "photon_radiance_lambda",
     .by = "planck",
     .from = {"wavelength", "body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(photon_radiance_lambda),
     .source = "planck_1901",
     .place_in_source = "divided by the energy of a photon",
     .equation = "[photon_radiance_lambda] = \\frac{2 c}{[wavelength]^{4}} \\frac{1}{\\exp\\left(\\frac{h_P c}{[wavelength] k_B "
                 "[body_temperature]}\\right) - 1}"},
    {.gives = "peak_wavelength",
     .by = "wien",
     .from = {"body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(peak_wavelength),
     .source = "wien_1893",
     .place_in_source = "constant from the maximum of Planck's law",
     .equation = "[peak_wavelength] = \\frac{h_P c}{4.965114231744276 \\cdot k_B [body_temperature]}"},
    {.gives = "peak_frequency",
     .by = "wien",
     .from = {"body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(peak_frequency),
     .source = "wien_1893",
     .place_in_source = "constant from the maximum of Planck's law",
     .equation = "[peak_frequency] = \\frac{2.821439372122079 \\cdot k_B [body_temperature]}{h_P}"},
    {.gives = "peak_wavelength_power",
     .by = "wien",
     .from = {"body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(peak_wavelength_power),
     .source = "wien_1893",
     .place_in_source = "constant from the maximum of Planck's law",
     .equation = "[peak_wavelength_power] = \\frac{h_P c}{3.920690394872886 \\cdot k_B [body_temperature]}"},
    {.gives = "blackbody_fraction",
     .by = "planck",
     .from = {"wavelength", "body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(blackbody_fraction),
     .source = "chang_rhee_1984",
     .equation = "[blackbody_fraction] = \\frac{15}{\\pi^{4}} \\sum_{n} \\frac{\\exp\\left(-n x\\right)}{n} \\left(x^{3} + \\frac{3 "
                 "x^{2}}{n} + \\frac{6 x}{n^{2}} + \\frac{6}{n^{3}}\\right), x = \\frac{h_P c}{[wavelength] k_B [body_temperature]}"},
    {.gives = "brightness_temperature",
     .by = "inverse_planck",
     .from = {"specific_intensity", "wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(brightness_temperature),
     .source = "planck_1901",
     .place_in_source = "solved for the temperature",
     .equation = "[brightness_temperature] = \\frac{h_P c}{[wavelength] k_B} \\frac{1}{\\ln\\left(1 + \\frac{2 h_P c}{[wavelength]^{3} "
                 "[specific_intensity]}\\right)}"},
    {.gives = "blackbody_exitance",
     .by = "stefan_boltzmann",
     .from = {"body_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(blackbody_exitance),
     .source = "boltzmann_1884",
     .equation = "[blackbody_exitance] = \\sigma_{SB} [body_temperature]^{4}"},
    {.gives = NULL},
};
