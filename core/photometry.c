/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Photometry: magnitudes and flux densities, photon rates, extinction, the star's photosphere in a band, and what its magnitudes tell of
   its angular diameter and its bolometric flux. Colours are taken at the bands' reference wavelengths; the extinction in V is the visual
   extinction by definition, whatever the curve says there. */
#include "lacuna/photometry.h"

#include "bands.h"
#include "kernels_inline.h"
#include "lacuna/planck.h"
#include "relation.h"

#define MICROMETRE 1e-6
#define LN_10 2.302585092994045684018

/* Of Johnson's L (Beckwith et al. 1976). */
#define WAVELENGTH_OF_L (3.4 * MICROMETRE)

LAC_INLINE double power_of_ten(double x) { return exp(LN_10 * x); }

/* Magnitudes and photons. */

LAC_RELATION(flux_density, magnitude, zero_point_flux) {
  return lac_where(zero_point_flux > 0, zero_point_flux * power_of_ten(-0.4 * magnitude));
}

LAC_INLINE double magnitude_of(double flux_density, double zero_point_flux) {
  return lac_where((flux_density > 0) & (zero_point_flux > 0), -2.5 * log10(flux_density / zero_point_flux));
}

LAC_RELATION(magnitude, flux_density, zero_point_flux) { return magnitude_of(flux_density, zero_point_flux); }

LAC_RELATION(stellar_magnitude, stellar_flux_density, zero_point_flux) { return magnitude_of(stellar_flux_density, zero_point_flux); }

/* The width in frequency, c/lambda^2 times the bandwidth, over the energy of a photon, h c/lambda. */
LAC_RELATION(photon_flux, flux_density, wavelength, bandwidth) {
  return lac_where((flux_density > 0) & (wavelength > 0) & (bandwidth > 0), flux_density * (bandwidth / wavelength) / LAC_PLANCK_CONSTANT);
}

/* Extinction by Cardelli, Clayton & Mathis 1989: x = 1/lambda in um^-1. */
#define INFRARED_BELOW 1.1
#define OPTICAL_BELOW 3.3

LAC_INLINE double over_visual(double wavelength, double r_v) {
  double x = MICROMETRE / wavelength, power = pow(x, 1.61), y = x - 1.82;
  double a = 1 + y * (0.17699 + y * (-0.50447 + y * (-0.02427 + y * (0.72085 + y * (0.01979 + y * (-0.77530 + y * 0.32999))))));
  double b = y * (1.41338 + y * (2.28305 + y * (1.07233 + y * (-5.38434 + y * (-0.62251 + y * (5.30260 - y * 2.09002))))));
  return lac_choose(x <= INFRARED_BELOW, power * (0.574 - 0.527 / r_v), a + b / r_v);
}

LAC_INLINE int extinction_is_fine(double visual_extinction, double r_v) { return (visual_extinction >= 0) & (r_v >= 2) & (r_v <= 6); }

LAC_RELATION(extinction, wavelength, visual_extinction, total_to_selective_extinction) {
  return lac_where(extinction_is_fine(visual_extinction, total_to_selective_extinction) & (wavelength > 0) &
                       (MICROMETRE <= OPTICAL_BELOW * wavelength),
                   visual_extinction * over_visual(wavelength, total_to_selective_extinction));
}

/* The photosphere. */

LAC_RELATION(stellar_flux_density, stellar_radius, effective_temperature, distance, wavelength) {
  double ratio = stellar_radius / distance;
  return lac_where((stellar_radius > 0) & (distance > 0), M_PI * ratio * ratio * lac_planck_nu(wavelength, effective_temperature));
}

/* Angular diameters of limb-darkened discs, by Kervella et al. 2004. */

LAC_INLINE double diameter_v_k(double v, double k) { return LAC_MAS * power_of_ten(0.0755 * (v - k) + 0.5170 - 0.2 * k); }

LAC_INLINE double diameter_b_l(double b, double l) { return LAC_MAS * power_of_ten(0.0502 * (b - l) + 0.5133 - 0.2 * l); }

LAC_RELATION(stellar_angular_diameter_v_k, v_magnitude, k_magnitude, visual_extinction, total_to_selective_extinction) {
  double in_k = over_visual(lac_bands[LAC_2MASS_KS].wavelength, total_to_selective_extinction);
  return lac_where(extinction_is_fine(visual_extinction, total_to_selective_extinction),
                   diameter_v_k(v_magnitude - visual_extinction, k_magnitude - visual_extinction * in_k));
}

LAC_RELATION(stellar_angular_diameter_b_l, b_magnitude, l_magnitude, visual_extinction, total_to_selective_extinction) {
  double in_b = over_visual(lac_bands[LAC_JOHNSON_B].wavelength, total_to_selective_extinction);
  double in_l = over_visual(WAVELENGTH_OF_L, total_to_selective_extinction);
  return lac_where(extinction_is_fine(visual_extinction, total_to_selective_extinction),
                   diameter_b_l(b_magnitude - visual_extinction * in_b, l_magnitude - visual_extinction * in_l));
}

LAC_RELATION(stellar_angular_diameter_v_k_no_extinction, v_magnitude, k_magnitude) { return diameter_v_k(v_magnitude, k_magnitude); }

LAC_RELATION(stellar_angular_diameter_b_l_no_extinction, b_magnitude, l_magnitude) { return diameter_b_l(b_magnitude, l_magnitude); }

/* Bolometric flux: the black body of the star's temperature that goes through the dereddened magnitudes. */

/* The logarithm of the flux density without extinction over the black body's intensity, in a band. */
LAC_INLINE double log_scale(int band, double magnitude, double extinction, double effective_temperature) {
  double intensity = lac_planck_nu(lac_bands[band].wavelength, effective_temperature);
  return log(lac_bands[band].zero_point / intensity) - 0.4 * LN_10 * (magnitude - extinction);
}

LAC_INLINE double log_scale_infrared(int band, double magnitude, double effective_temperature, double visual_extinction, double r_v) {
  return log_scale(band, magnitude, visual_extinction * over_visual(lac_bands[band].wavelength, r_v), effective_temperature);
}

/* sigma T^4/pi times exp(scale). A temperature so low that the band tells nothing gives no number. */
LAC_INLINE double scaled_flux(double scale, double effective_temperature, double visual_extinction, double r_v) {
  double square = effective_temperature * effective_temperature;
  double flux = LAC_STEFAN_BOLTZMANN / M_PI * square * square * exp(scale);
  return lac_where(extinction_is_fine(visual_extinction, r_v) & (effective_temperature > 0) & (flux < (double)INFINITY), flux);
}

LAC_RELATION(bolometric_flux_v_j_h_k, v_magnitude, j_magnitude, h_magnitude, k_magnitude, effective_temperature, visual_extinction,
             total_to_selective_extinction) {
  double sum = log_scale(LAC_JOHNSON_V, v_magnitude, visual_extinction, effective_temperature) +
               log_scale_infrared(LAC_2MASS_J, j_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction) +
               log_scale_infrared(LAC_2MASS_H, h_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction) +
               log_scale_infrared(LAC_2MASS_KS, k_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction);
  return scaled_flux(sum / 4, effective_temperature, visual_extinction, total_to_selective_extinction);
}

LAC_RELATION(bolometric_flux_j_h_k, j_magnitude, h_magnitude, k_magnitude, effective_temperature, visual_extinction,
             total_to_selective_extinction) {
  double sum = log_scale_infrared(LAC_2MASS_J, j_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction) +
               log_scale_infrared(LAC_2MASS_H, h_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction) +
               log_scale_infrared(LAC_2MASS_KS, k_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction);
  return scaled_flux(sum / 3, effective_temperature, visual_extinction, total_to_selective_extinction);
}

LAC_RELATION(bolometric_flux_h_k, h_magnitude, k_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction) {
  double sum = log_scale_infrared(LAC_2MASS_H, h_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction) +
               log_scale_infrared(LAC_2MASS_KS, k_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction);
  return scaled_flux(sum / 2, effective_temperature, visual_extinction, total_to_selective_extinction);
}

LAC_RELATION(bolometric_flux_k, k_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction) {
  double scale = log_scale_infrared(LAC_2MASS_KS, k_magnitude, effective_temperature, visual_extinction, total_to_selective_extinction);
  return scaled_flux(scale, effective_temperature, visual_extinction, total_to_selective_extinction);
}

/* What a band itself tells. */

static void fill(size_t n, double *out, double value) {
  for (size_t i = 0; i < n; i++) out[i] = value;
}

static void wavelength_of_band(const void *object, size_t n, double *restrict out, const double *const *in) {
  (void)in;
  fill(n, out, ((const lac_band *)object)->wavelength);
}

static void width_of_band(const void *object, size_t n, double *restrict out, const double *const *in) {
  (void)in;
  fill(n, out, ((const lac_band *)object)->width);
}

static void zero_point_of_band(const void *object, size_t n, double *restrict out, const double *const *in) {
  (void)in;
  fill(n, out, ((const lac_band *)object)->zero_point);
}

#define CURVE(band) "a_{" band "} + \\frac{b_{" band "}}{[total_to_selective_extinction]}"
#define EXTINCTION(band) "[visual_extinction] \\left(" CURVE(band) "\\right)"
#define DEREDDENED " less the extinction by Cardelli, Clayton and Mathis 1989 at the bands' wavelengths"
#define DWARFS "a dwarf of type A0 to M2 or a subgiant of type A0 to K0, and no excess light"
#define BLACK_PHOTOSPHERE                                                                                                                  \
  "a black photosphere of that temperature (the Sun's flux comes out a tenth too large), and no other light in these bands: with the "     \
  "near-infrared excess of a disc the flux is an upper limit"

/* The row of bolometric_flux from some bands: their count, letters and magnitudes in the equation. */
#define SCALED_BLACK_BODY(bands, count, letters, magnitudes)                                                                               \
  .gives = "bolometric_flux", .by = #bands, .kind = LAC_RECIPE, .LAC_ROW(bolometric_flux_##bands), .source = "common_practice",            \
  .place_in_source = "a black body scaled to the magnitudes",                                                                              \
  .equation =                                                                                                                              \
      "[bolometric_flux] = \\frac{\\sigma_{SB} [effective_temperature]^{4}}{\\pi} \\exp\\left(\\frac{1}{" count                            \
      "} \\sum_{i} \\ln \\left(\\frac{F_{0,i} 10^{-0.4 \\left(m_{i} - A_{i}\\right)}}{B_{\\nu,i}}\\right)\\right), i = " letters           \
      ", m_{i} = " magnitudes ", A_{i} = [visual_extinction] \\left(a_{i} + \\frac{b_{i}}{[total_to_selective_extinction]}\\right)",       \
  .supposes = BLACK_PHOTOSPHERE, .aside = true

const lac_relation lac_photometry_relations[] = {
    {.gives = "wavelength",
     .by = "of_band",
     .from = {"band"},
     .kind = LAC_RECIPE,
     .of_object = wavelength_of_band,
     .source = "definition",
     .equation = "[wavelength] = \\lambda_{b}, b = [band]",
     .supposes = "that the band is observed at its reference wavelength",
     .aside = true},
    {.gives = "bandwidth",
     .by = "of_band",
     .from = {"band"},
     .kind = LAC_RECIPE,
     .of_object = width_of_band,
     .source = "definition",
     .equation = "[bandwidth] = \\Delta\\lambda_{b}, b = [band]",
     .supposes = "that the whole band is one channel",
     .aside = true},
    {.gives = "zero_point_flux",
     .by = "of_band",
     .from = {"band"},
     .kind = LAC_DEFINITION,
     .of_object = zero_point_of_band,
     .source = "definition",
     .equation = "[zero_point_flux] = F_{0,b}, b = [band]"},
    {.gives = "total_to_selective_extinction",
     .by = "cardelli_1989",
     .kind = LAC_ASSUMED,
     .assumes = "3.1",
     .source = "cardelli_1989",
     .place_in_source = "of the diffuse interstellar medium; common practice",
     .equation = "[total_to_selective_extinction] = 3.1"},
    {.gives = "extinction",
     .by = "cardelli_1989",
     .from = {"wavelength", "visual_extinction", "total_to_selective_extinction"},
     .kind = LAC_RECIPE,
     .LAC_ROW(extinction),
     .source = "cardelli_1989",
     .place_in_source = "Eqs. 1 to 3",
     .from_memory = true,
     .equation = "[extinction] = [visual_extinction] \\left(a_{x} + \\frac{b_{x}}{[total_to_selective_extinction]}\\right), x = "
                 "\\frac{1 \\mathrm{um}}{[wavelength]}",
     .supposes = "the mean curve of that ratio; ultraviolet wavelengths are left out",
     .holds = {{"wavelength", MICROMETRE / OPTICAL_BELOW, 3.5e-6}}},
    {.gives = "flux_density",
     .by = "from_magnitude",
     .from = {"magnitude", "zero_point_flux"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(flux_density),
     .source = "pogson_1856",
     .equation = "[flux_density] = [zero_point_flux] 10^{-0.4 [magnitude]}"},
    {.gives = "magnitude",
     .by = "from_flux_density",
     .from = {"flux_density", "zero_point_flux"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(magnitude),
     .source = "pogson_1856",
     .equation = "[magnitude] = -2.5 \\log_{10} \\left(\\frac{[flux_density]}{[zero_point_flux]}\\right)",
     .inverse_of = "flux_density/from_magnitude"},
    {.gives = "photon_flux",
     .by = "of_flux_density",
     .from = {"flux_density", "wavelength", "bandwidth"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(photon_flux),
     .source = "planck_1901",
     .place_in_source = "energy of a photon",
     .equation = "[photon_flux] = \\frac{[flux_density]}{h_P} \\frac{[bandwidth]}{[wavelength]}",
     .supposes = "a flux density that is even over the bandwidth"},
    {.gives = "stellar_flux_density",
     .by = "black_body",
     .from = {"stellar_radius", "effective_temperature", "distance", "wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(stellar_flux_density),
     .source = "planck_1901",
     .equation = "[stellar_flux_density] = \\pi \\left(\\frac{[stellar_radius]}{[distance]}\\right)^{2} \\frac{2 h_P c}{[wavelength]^{3}} "
                 "\\frac{1}{\\exp\\left(\\frac{h_P c}{[wavelength] k_B [effective_temperature]}\\right) - 1}",
     .supposes = "a photosphere that is a black body of the effective temperature"},
    {.gives = "stellar_magnitude",
     .by = "of_flux_density",
     .from = {"stellar_flux_density", "zero_point_flux"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(stellar_magnitude),
     .source = "pogson_1856",
     .equation = "[stellar_magnitude] = -2.5 \\log_{10} \\left(\\frac{[stellar_flux_density]}{[zero_point_flux]}\\right)"},
    {.gives = "stellar_angular_diameter",
     .by = "kervella_2004_v_k",
     .from = {"v_magnitude", "k_magnitude", "visual_extinction", "total_to_selective_extinction"},
     .kind = LAC_RECIPE,
     .LAC_ROW(stellar_angular_diameter_v_k),
     .source = "kervella_2004",
     .place_in_source = "abstract",
     .equation = "[stellar_angular_diameter] = 10^{0.0755 \\left(V - K\\right) + 0.5170 - 0.2 K} \\mathrm{mas}, V = [v_magnitude] - "
                 "[visual_extinction], K = [k_magnitude] - " EXTINCTION("K"),
     .supposes = DWARFS "; Ks for Johnson's K," DEREDDENED},
    {.gives = "stellar_angular_diameter",
     .by = "kervella_2004_b_l",
     .from = {"b_magnitude", "l_magnitude", "visual_extinction", "total_to_selective_extinction"},
     .kind = LAC_RECIPE,
     .LAC_ROW(stellar_angular_diameter_b_l),
     .source = "kervella_2004",
     .place_in_source = "abstract",
     .equation =
         "[stellar_angular_diameter] = 10^{0.0502 \\left(B - L\\right) + 0.5133 - 0.2 L} \\mathrm{mas}, B = [b_magnitude] - " EXTINCTION(
             "B") ", L = [l_magnitude] - " EXTINCTION("L"),
     .supposes = DWARFS ";" DEREDDENED},
    {.gives = "stellar_angular_diameter",
     .by = "kervella_2004_v_k_no_extinction",
     .from = {"v_magnitude", "k_magnitude"},
     .kind = LAC_RECIPE,
     .LAC_ROW(stellar_angular_diameter_v_k_no_extinction),
     .source = "kervella_2004",
     .place_in_source = "abstract",
     .equation = "[stellar_angular_diameter] = 10^{0.0755 \\left([v_magnitude] - [k_magnitude]\\right) + 0.5170 - 0.2 [k_magnitude]} "
                 "\\mathrm{mas}",
     .supposes = DWARFS "; Ks for Johnson's K, and no extinction"},
    {.gives = "stellar_angular_diameter",
     .by = "kervella_2004_b_l_no_extinction",
     .from = {"b_magnitude", "l_magnitude"},
     .kind = LAC_RECIPE,
     .LAC_ROW(stellar_angular_diameter_b_l_no_extinction),
     .source = "kervella_2004",
     .place_in_source = "abstract",
     .equation = "[stellar_angular_diameter] = 10^{0.0502 \\left([b_magnitude] - [l_magnitude]\\right) + 0.5133 - 0.2 [l_magnitude]} "
                 "\\mathrm{mas}",
     .supposes = DWARFS "; no extinction"},
    {SCALED_BLACK_BODY(v_j_h_k, "4", "V, J, H, K_{s}", "[v_magnitude], [j_magnitude], [h_magnitude], [k_magnitude]"),
     .from = {"v_magnitude", "j_magnitude", "h_magnitude", "k_magnitude", "effective_temperature", "visual_extinction",
              "total_to_selective_extinction"}},
    {SCALED_BLACK_BODY(j_h_k, "3", "J, H, K_{s}", "[j_magnitude], [h_magnitude], [k_magnitude]"),
     .from = {"j_magnitude", "h_magnitude", "k_magnitude", "effective_temperature", "visual_extinction", "total_to_selective_extinction"}},
    {SCALED_BLACK_BODY(h_k, "2", "H, K_{s}", "[h_magnitude], [k_magnitude]"),
     .from = {"h_magnitude", "k_magnitude", "effective_temperature", "visual_extinction", "total_to_selective_extinction"}},
    {SCALED_BLACK_BODY(k, "1", "K_{s}", "[k_magnitude]"),
     .from = {"k_magnitude", "effective_temperature", "visual_extinction", "total_to_selective_extinction"}},
    {.gives = NULL},
};
