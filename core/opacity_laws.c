/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Opacities as published, by name. Those at one wavelength are rows of relations and given per unit mass of dust, whatever they were
   published for; the mean of Bell & Lin is per unit mass of gas and dust, as published, and no row. */
#include "grains.h"
#include "lacuna/constants.h"
#include "relation.h"

#define UM 1e-6
#define SQUARE_CM_PER_GRAM 0.1 /* in m^2 kg^-1 */

LAC_RELATION(dust_opacity_li_draine_2001, wavelength) {
  double in_um = wavelength / UM;
  double shorter = 2.92e5 / (in_um * in_um), longer = 3.58e4 * pow(in_um, -1.68);
  return lac_where(wavelength > 0, SQUARE_CM_PER_GRAM * (in_um < 700 ? shorter : longer));
}

/* 18.75 cm^2 g^-1 at 125 um, by 3 Q/(4 a rho) with Q = 3/4000, a = 0.1 um, rho = 3 g cm^-3; a slope of 1 up to 250 um, and 2 beyond. */
LAC_RELATION(dust_opacity_hildebrand_1983, wavelength) {
  double in_125_um = wavelength / (125 * UM);
  return lac_where(wavelength > 0, SQUARE_CM_PER_GRAM * 18.75 / (in_125_um * fmax(1, in_125_um / 2)));
}

LAC_RELATION(dust_opacity_beckwith_1990, wavelength, gas_to_dust_ratio) {
  double frequency_in_thz = LAC_SPEED_OF_LIGHT / wavelength * 1e-12;
  return lac_where((wavelength > 0) & (gas_to_dust_ratio > 0), SQUARE_CM_PER_GRAM * 0.1 * frequency_in_thz * (1 + gas_to_dust_ratio));
}

/* kappa_0 rho^a T^b in cgs, in the order of rising temperature; two neighbours change over where they are equal. */
typedef struct {
  double ln_factor, density_power, temperature_power;
} regime;

static double ln_opacity(const regime *r, double ln_density, double ln_temperature) {
  return r->ln_factor + r->density_power * ln_density + r->temperature_power * ln_temperature;
}

static double crossing(const regime *lower, const regime *upper, double ln_density) {
  return (upper->ln_factor - lower->ln_factor + (upper->density_power - lower->density_power) * ln_density) /
         (lower->temperature_power - upper->temperature_power);
}

double lac_rosseland_opacity_bell_lin_1994(double gas_density, double temperature) {
  const regime regimes[] = {
      {log(2e-4), 0, 2},              /* ice grains */
      {log(2e16), 0, -7},             /* their evaporation */
      {log(0.1), 0, 0.5},             /* metal grains */
      {log(2) + 81 * M_LN10, 1, -24}, /* their evaporation */
      {log(1e-8), 2.0 / 3, 3},        /* molecules */
      {log(1e-36), 1.0 / 3, 10},      /* H- */
      {log(1.5e20), 1, -2.5},         /* bound-free, free-free */
      {log(0.348), 0, 0},             /* electrons */
  };
  enum { REGIMES = sizeof regimes / sizeof regimes[0] };
  const double density = gas_density * 1e-3; /* g cm^-3 */
  if (!(density >= 1e-20 * (1 - 1e-12) && density <= 1e-4 * (1 + 1e-12) && temperature >= 10 && temperature <= 1e6)) return (double)NAN;
  const double ln_density = log(density), ln_temperature = log(temperature);
  int at = 0;
  for (int next = 1; next < REGIMES; next = at + 1) {
    /* At low densities a regime may end below where it starts: it is passed over. */
    while (next + 1 < REGIMES &&
           crossing(&regimes[next], &regimes[next + 1], ln_density) <= crossing(&regimes[at], &regimes[next], ln_density))
      next++;
    if (ln_temperature < crossing(&regimes[at], &regimes[next], ln_density)) break;
    at = next;
  }
  return SQUARE_CM_PER_GRAM * exp(ln_opacity(&regimes[at], ln_density, ln_temperature));
}

/* ---- rows ---- */

LAC_RELATION(rim_gas_density_solved_grey, heating_luminosity, stellar_mass, disc_mass, characteristic_radius, surface_density_index,
             mean_molecular_weight) {
  return lac_solved_grey_rim(heating_luminosity, stellar_mass, disc_mass, characteristic_radius, surface_density_index,
                             mean_molecular_weight);
}

/* clang-format off */
#define OF_DUST(name, field)                                                                                             \
  void lac_##name##_of_dust(const void *dust, size_t n, double *restrict out, const double *const *in) {                \
    for (size_t i = 0; i < n; i++) out[i] = lac_dust_opacity(dust, in[0][i]).field;                                       \
  }
/* clang-format on */
OF_DUST(opacity, absorption)
OF_DUST(scattering, scattering)
OF_DUST(extinction, extinction)
OF_DUST(albedo, albedo)
OF_DUST(asymmetry, asymmetry)
OF_DUST(effective_albedo, effective_albedo)

static void cooling_of_grains(const void *dust, size_t n, double *restrict out, const double *const *in) {
  for (size_t i = 0; i < n; i++) out[i] = lac_dust_cooling_efficiency(dust, in[0][i], in[1][i], in[2][i]);
}

static void cooling_of_population(const void *dust, size_t n, double *restrict out, const double *const *in) {
  for (size_t i = 0; i < n; i++) out[i] = lac_dust_tabled_planck_mean(dust, in[0][i]) / lac_dust_tabled_planck_mean(dust, in[1][i]);
}

#define SPHERES "compact spheres of one mixture (Mie), in random order"
#define SIZE_AVERAGE(efficiency) "\\frac{3 \\int " efficiency " a^{2} \\mathrm{d}n}{4 \\rho_s \\int a^{3} \\mathrm{d}n}"
/* clang-format off */
#define ROW_OF_DUST(name, of, symbol, written, place, takes_for_granted)                                                              \
  {.gives = name, .by = "of_dust", .from = {"dust", "wavelength"}, .kind = LAC_RECIPE, .of_object = lac_##of##_of_dust,       \
   .source = "bohren_huffman_1983", .place_in_source = place, .from_memory = true, .equation = "[" name "] = " symbol "\\left([dust], [wavelength]\\right) = " written,       \
   .supposes = takes_for_granted}
#define SOLVED_AT_THE_RIM "sublimation temperature by isella_natta_2005, a self-similar disc down to the rim, gas there as warm as the grains, "
#define OBSERVED_LUMINOSITY {"heating_luminosity", LAC_SOLAR_LUMINOSITY, 1000 * LAC_SOLAR_LUMINOSITY}
/* clang-format on */
/* The radius is that of sublimation, of which the density is an argument too. */
#define RIM_EQUATION(arguments_of_radius)                                                                                                  \
  "[rim_gas_density] = \\frac{\\Sigma\\left([disc_mass], [characteristic_radius], [surface_density_index], R_{sub}\\right)}"               \
  "{\\sqrt{2 \\pi} H\\left([stellar_mass], [mean_molecular_weight], T_{sub}, R_{sub}\\right)}, "                                           \
  "R_{sub} = R\\left(" arguments_of_radius "[heating_luminosity], T_{sub}\\right)"

const lac_relation lac_dust_relations[] = {
    ROW_OF_DUST("dust_opacity", opacity, "\\kappa_{abs}", SIZE_AVERAGE("Q_{abs}"), "Ch. 4", SPHERES),
    {.gives = "dust_opacity",
     .by = "li_draine_2001",
     .from = {"wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(dust_opacity_li_draine_2001),
     .source = "li_draine_2001",
     .place_in_source = "Sect. 4, beyond 700 um with the slope 1.68",
     .from_memory = true,
     .equation =
         "[dust_opacity] = 2.92 \\cdot 10^{5} \\mathrm{cm}^{2} \\mathrm{g}^{-1} \\left(\\frac{[wavelength]}{1 \\mathrm{um}}\\right)^{-2}",
     .supposes =
         "interstellar grains, a mixture of silicate, graphite and polycyclic aromatic hydrocarbons, per gram of dust; beyond 700 um "
         "3.58e4 cm^2/g times wavelength^-1.68",
     .holds = {{"wavelength", 20 * UM, 1e4 * UM}}},
    {.gives = "dust_opacity",
     .by = "hildebrand_1983",
     .from = {"wavelength"},
     .kind = LAC_RECIPE,
     .LAC_ROW(dust_opacity_hildebrand_1983),
     .source = "hildebrand_1983",
     .place_in_source = "as derived in Li 2005",
     .from_memory = true,
     .equation = "[dust_opacity] = 18.75 \\mathrm{cm}^{2} \\mathrm{g}^{-1} \\cdot \\frac{125 \\mathrm{um}}{[wavelength]}",
     .supposes = "interstellar grains of 0.1 um and 3 g/cm^3; beyond 250 um the opacity falls with the square of the wavelength, from its "
                 "value there",
     .holds = {{"wavelength", 50 * UM, 1e3 * UM}}},
    {.gives = "dust_opacity",
     .by = "beckwith_1990",
     .from = {"wavelength", "gas_to_dust_ratio"},
     .kind = LAC_RECIPE,
     .LAC_ROW(dust_opacity_beckwith_1990),
     .source = "beckwith_1990",
     .place_in_source = "Sect. III, with a slope of 1",
     .from_memory = true,
     .equation = "[dust_opacity] = 0.1 \\mathrm{cm}^{2} \\mathrm{g}^{-1} \\cdot \\left(1 + [gas_to_dust_ratio]\\right) \\cdot "
                 "\\frac{c}{[wavelength] \\cdot 10^{12} \\mathrm{Hz}}",
     .supposes = "grains of a disc; published per gram of gas and dust, here per gram of dust",
     .holds = {{"wavelength", 300 * UM, 3e3 * UM}}},
    ROW_OF_DUST("dust_scattering_opacity", scattering, "\\kappa_{sca}", SIZE_AVERAGE("Q_{sca}"), "Ch. 4", SPHERES),
    ROW_OF_DUST("dust_albedo", albedo, "\\omega", "\\frac{\\kappa_{sca}}{\\kappa_{abs} + \\kappa_{sca}}", "Ch. 4", SPHERES),
    ROW_OF_DUST("dust_asymmetry", asymmetry, "g", "\\frac{\\int g Q_{sca} a^{2} \\mathrm{d}n}{\\int Q_{sca} a^{2} \\mathrm{d}n}", "Ch. 4",
                SPHERES),
    ROW_OF_DUST("dust_effective_albedo", effective_albedo, "\\omega_{eff}",
                "\\frac{(1 - g) \\kappa_{sca}}{\\kappa_{abs} + (1 - g) \\kappa_{sca}}", "Ch. 4",
                SPHERES "; light scattered forwards is as if it were not scattered"),
    {.gives = "cooling_efficiency",
     .by = "of_grains",
     .from = {"dust", "grain_size", "sublimation_temperature", "effective_temperature"},
     .kind = LAC_RECIPE,
     .of_object = cooling_of_grains,
     .source = "isella_natta_2005",
     .place_in_source = "definition of the cooling efficiency",
     .from_memory = true,
     .equation = "[cooling_efficiency] = \\frac{Q_P\\left([dust], [grain_size], [sublimation_temperature]\\right)}{Q_P\\left([dust], "
                 "[grain_size], [effective_temperature]\\right)}",
     .supposes = "compact spheres of one size and of the dust's mixture; a star that shines as a black body; an index that stays, outside "
                 "its wavelengths, as it is at their ends"},
    {.gives = "cooling_efficiency",
     .by = "of_population",
     .from = {"dust", "sublimation_temperature", "effective_temperature"},
     .kind = LAC_RECIPE,
     .of_object = cooling_of_population,
     .source = "isella_natta_2005",
     .place_in_source = "definition of the cooling efficiency, with opacities",
     .from_memory = true,
     .equation = "[cooling_efficiency] = \\frac{\\kappa_P\\left([dust], [sublimation_temperature]\\right)}{\\kappa_P\\left([dust], "
                 "[effective_temperature]\\right)}",
     .supposes = "that grains of all sizes share one temperature; a star that shines as a black body"},
    {.gives = "rim_gas_density",
     .by = "solved_at_the_rim",
     .from = {"dust", "grain_size", "heating_luminosity", "effective_temperature", "stellar_mass", "disc_mass", "characteristic_radius",
              "surface_density_index", "mean_molecular_weight"},
     .kind = LAC_RECIPE,
     .of_object = lac_rim_gas_density_of_dust,
     .source = "isella_natta_2005",
     .place_in_source = "Sect. 2, with the disc's density",
     .from_memory = true,
     .equation = RIM_EQUATION("[dust], [grain_size], [effective_temperature], "),
     .supposes = SOLVED_AT_THE_RIM "grains of one size in the open (no back-warming)",
     .holds = {OBSERVED_LUMINOSITY}},
    {.gives = "rim_gas_density",
     .by = "solved_at_the_rim_grey",
     .from = {"heating_luminosity", "stellar_mass", "disc_mass", "characteristic_radius", "surface_density_index", "mean_molecular_weight"},
     .kind = LAC_RECIPE,
     .LAC_ROW(rim_gas_density_solved_grey),
     .source = "isella_natta_2005",
     .place_in_source = "Sect. 2, with the disc's density",
     .from_memory = true,
     .equation = RIM_EQUATION(""),
     .supposes = SOLVED_AT_THE_RIM "large grey grains in the open (no back-warming)",
     .holds = {OBSERVED_LUMINOSITY}},
    {.gives = NULL},
};
