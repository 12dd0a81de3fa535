/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The rim: where dust sublimates. The temperature comes from the gas density (fits to tabulated sublimation temperatures) or is
   assumed; the radius from the balance of a grain's heating and cooling. The published closed forms differ in one factor X of
     R = sqrt(X L / (16 pi sigma T^4)) = (1/2) sqrt(X) (T_star/T)^2 R_star,
   which is 1 for a grey grain in the open: how badly the grains cool, and how their neighbours warm them.
   All take the gas inside the rim to be transparent, and hold for luminosities of some 1 to 1000 times the Sun's; above, the
   observed sizes fall below the relation. */
#include "lacuna/rim.h"

#include "relation.h"

#define TEXT_(x) #x
#define TEXT(x) TEXT_(x)

/* The laws were published for densities in g cm^-3; the rows take kg m^-3. */
#define GRAM_PER_CUBIC_CENTIMETRE 1e3

LAC_RELATION(sublimation_temperature_isella_natta_2005, rim_gas_density) {
  return lac_where(rim_gas_density > 0, 2000 * pow(rim_gas_density / GRAM_PER_CUBIC_CENTIMETRE, 0.0195));
}

/* 1/T falls linearly with log10 of the density, as Clausius and Clapeyron demand: T = 10^4 K / (A - B log10(rho / g cm^-3)).
   A and B fit the rows of Pollack et al. (1994), Table 3, to 0.07 % (olivine, iron), and orthopyroxene's too but for its entry at 1e-18. */
#define OLIVINE_A 4.171910
#define OLIVINE_B 0.3660674
#define ORTHOPYROXENE_A 4.822242
#define ORTHOPYROXENE_B 0.3363444
#define IRON_A 3.318018
#define IRON_B 0.4811307

LAC_INLINE double pollack(double density, double a, double b) {
  double inverse = a - b * log10(density / GRAM_PER_CUBIC_CENTIMETRE);
  return lac_where((density > 0) & (inverse > 0), 1e4 / inverse);
}

LAC_RELATION(sublimation_temperature_pollack_1994_olivine, rim_gas_density) { return pollack(rim_gas_density, OLIVINE_A, OLIVINE_B); }

LAC_RELATION(sublimation_temperature_pollack_1994_orthopyroxene, rim_gas_density) {
  return pollack(rim_gas_density, ORTHOPYROXENE_A, ORTHOPYROXENE_B);
}

LAC_RELATION(sublimation_temperature_pollack_1994_iron, rim_gas_density) { return pollack(rim_gas_density, IRON_A, IRON_B); }

LAC_RELATION(absorption_efficiency_ratio, cooling_efficiency) { return lac_where(cooling_efficiency > 0, 1 / cooling_efficiency); }

LAC_RELATION(cooling_efficiency, absorption_efficiency_ratio) {
  return lac_where(absorption_efficiency_ratio > 0, 1 / absorption_efficiency_ratio);
}

/* The balance that all forms share; x is the factor in which they differ. */
LAC_INLINE double balance(double luminosity, double temperature, double x) {
  return lac_where((luminosity > 0) & (temperature > 0),
                   sqrt(x * luminosity / (16 * M_PI * LAC_STEFAN_BOLTZMANN)) / (temperature * temperature));
}

LAC_RELATION(sublimation_radius_kama_2009, heating_luminosity, sublimation_temperature, cooling_efficiency, backwarming_factor) {
  return lac_where((cooling_efficiency > 0) & (backwarming_factor >= 1) & (backwarming_factor <= 4),
                   balance(heating_luminosity, sublimation_temperature, backwarming_factor / cooling_efficiency));
}

LAC_RELATION(sublimation_radius_isella_natta_2005, heating_luminosity, sublimation_temperature, cooling_efficiency, backwarming_term) {
  return lac_where((cooling_efficiency > 0) & (backwarming_term >= 0),
                   balance(heating_luminosity, sublimation_temperature, backwarming_term + 1 / cooling_efficiency));
}

LAC_RELATION(sublimation_radius_dullemond_2001, heating_luminosity, sublimation_temperature, rim_height_ratio) {
  return lac_where(rim_height_ratio >= 0, balance(heating_luminosity, sublimation_temperature, 4 * (1 + rim_height_ratio)));
}

LAC_RELATION(sublimation_radius_monnier_2002, heating_luminosity, sublimation_temperature, absorption_efficiency_ratio) {
  return lac_where(absorption_efficiency_ratio > 0, balance(heating_luminosity, sublimation_temperature, absorption_efficiency_ratio));
}

LAC_RELATION(sublimation_radius_grey_grains, heating_luminosity, sublimation_temperature) {
  return balance(heating_luminosity, sublimation_temperature, 1);
}

LAC_RELATION(rim_radius, sublimation_radius) { return lac_where(sublimation_radius > 0, sublimation_radius); }

/* Where the table of Pollack et al. ends, in kg m^-3; where observed sizes follow the relation. */
/* clang-format off */
#define TABULATED_DENSITY {"rim_gas_density", 1e-15, 1e-1}
#define OBSERVED_LUMINOSITY {"heating_luminosity", LAC_SOLAR_LUMINOSITY, 1000 * LAC_SOLAR_LUMINOSITY}

#define IN_THE_OPEN "\\frac{[heating_luminosity]}{16 \\pi \\sigma_{SB} [sublimation_temperature]^{4}}"

#define POLLACK_ROW(species, a, b, fits)                                                                                           \
  {.gives = "sublimation_temperature", .by = "pollack_1994_" #species, .from = {"rim_gas_density"}, .kind = LAC_RECIPE,            \
   .LAC_ROW(sublimation_temperature_pollack_1994_##species), .source = "pollack_1994", .place_in_source = "Table 3, fitted",       \
   .from_memory = true,                                                                                                            \
   .equation = "[sublimation_temperature] = \\frac{10^{4} \\mathrm{K}}{" TEXT(a) " - " TEXT(b)                                     \
               " \\log_{10}\\left(\\frac{[rim_gas_density]}{1 \\mathrm{g} \\mathrm{cm}^{-3}}\\right)}",                            \
   .supposes = "grains of " #species "; the table was recalled from memory, and the law that 1/T is linear in the logarithm of "   \
               "the density fits " fits,                                                                                           \
   .holds = {TABULATED_DENSITY}}
/* clang-format on */

const lac_relation lac_rim_relations[] = {
    {.gives = "sublimation_temperature",
     .by = "isella_natta_2005",
     .from = {"rim_gas_density"},
     .kind = LAC_RECIPE,
     .LAC_ROW(sublimation_temperature_isella_natta_2005),
     .source = "isella_natta_2005",
     .from_memory = true,
     .equation =
         "[sublimation_temperature] = 2000 \\mathrm{K} \\left(\\frac{[rim_gas_density]}{1 \\mathrm{g} \\mathrm{cm}^{-3}}\\right)^{0.0195}",
     .supposes = "silicates; a fit that is 4 to 6 % below the olivine it stands for at the ends of its table",
     .holds = {TABULATED_DENSITY}},
    POLLACK_ROW(olivine, OLIVINE_A, OLIVINE_B, "it to 0.07 %"),
    POLLACK_ROW(orthopyroxene, ORTHOPYROXENE_A, ORTHOPYROXENE_B, "it to 0.07 %, except at 1e-18 g cm^-3 (2 %)"),
    POLLACK_ROW(iron, IRON_A, IRON_B, "it to 0.07 %"),
    {.gives = "sublimation_temperature",
     .by = "common_practice",
     .kind = LAC_ASSUMED,
     .assumes = "1500 K",
     .source = "common_practice",
     .equation = "[sublimation_temperature] = 1500 \\mathrm{K}"},
    {.gives = "cooling_efficiency",
     .by = "definition",
     .from = {"absorption_efficiency_ratio"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(cooling_efficiency),
     .source = "definition",
     .equation = "[cooling_efficiency] = \\frac{1}{[absorption_efficiency_ratio]}",
     .inverse_of = "absorption_efficiency_ratio/definition"},
    {.gives = "absorption_efficiency_ratio",
     .by = "definition",
     .from = {"cooling_efficiency"},
     .kind = LAC_DEFINITION,
     .LAC_ROW(absorption_efficiency_ratio),
     .source = "definition",
     .equation = "[absorption_efficiency_ratio] = \\frac{1}{[cooling_efficiency]}"},
    {.gives = "sublimation_radius",
     .by = "kama_2009",
     .from = {"heating_luminosity", "sublimation_temperature", "cooling_efficiency", "backwarming_factor"},
     .kind = LAC_RECIPE,
     .LAC_ROW(sublimation_radius_kama_2009),
     .source = "kama_2009",
     .place_in_source = "analytic rim radius, written with the luminosity",
     .from_memory = true,
     .equation = "[sublimation_radius] = \\sqrt{\\frac{[backwarming_factor]}{[cooling_efficiency]} \\cdot " IN_THE_OPEN "}",
     .supposes = "grains of one size, optically thin gas inside the rim",
     .holds = {OBSERVED_LUMINOSITY}},
    {.gives = "sublimation_radius",
     .by = "isella_natta_2005",
     .from = {"heating_luminosity", "sublimation_temperature", "cooling_efficiency", "backwarming_term"},
     .kind = LAC_RECIPE,
     .LAC_ROW(sublimation_radius_isella_natta_2005),
     .source = "isella_natta_2005",
     .place_in_source = "rim radius, written with the luminosity",
     .equation =
         "[sublimation_radius] = \\sqrt{\\left([backwarming_term] + \\frac{1}{[cooling_efficiency]}\\right) \\cdot " IN_THE_OPEN "}",
     .supposes = "grains of one size, optically thin gas inside the rim",
     .holds = {OBSERVED_LUMINOSITY}},
    {.gives = "sublimation_radius",
     .by = "dullemond_2001",
     .from = {"heating_luminosity", "sublimation_temperature", "rim_height_ratio"},
     .kind = LAC_RECIPE,
     .LAC_ROW(sublimation_radius_dullemond_2001),
     .source = "dullemond_2001",
     .place_in_source = "Sect. 2, written with the luminosity",
     .from_memory = true,
     .equation = "[sublimation_radius] = \\sqrt{4 \\left(1 + [rim_height_ratio]\\right) \\cdot " IN_THE_OPEN "}",
     .supposes = "a black, vertical dust wall that lights itself, optically thin gas inside the rim",
     .holds = {OBSERVED_LUMINOSITY, {"rim_height_ratio", 0, 0.2}}},
    {.gives = "sublimation_radius",
     .by = "monnier_2002",
     .from = {"heating_luminosity", "sublimation_temperature", "absorption_efficiency_ratio"},
     .kind = LAC_RECIPE,
     .LAC_ROW(sublimation_radius_monnier_2002),
     .source = "monnier_millan_gabet_2002",
     .place_in_source = "Eq. 1, written with the luminosity",
     .equation = "[sublimation_radius] = \\sqrt{[absorption_efficiency_ratio] \\cdot " IN_THE_OPEN "}",
     .supposes = "grains of one size, optically thin gas inside the rim, no back-warming",
     .holds = {OBSERVED_LUMINOSITY}},
    {.gives = "sublimation_radius",
     .by = "grey_grains",
     .from = {"heating_luminosity", "sublimation_temperature"},
     .kind = LAC_RECIPE,
     .LAC_ROW(sublimation_radius_grey_grains),
     .source = "monnier_millan_gabet_2002",
     .place_in_source = "Eq. 1 with an absorption efficiency ratio of 1",
     .equation = "[sublimation_radius] = \\sqrt{" IN_THE_OPEN "}",
     .supposes = "large grey grains, optically thin gas inside the rim, no back-warming",
     .holds = {OBSERVED_LUMINOSITY}},
    {.gives = "rim_radius",
     .by = "at_sublimation_radius",
     .from = {"sublimation_radius"},
     .kind = LAC_RECIPE,
     .LAC_ROW(rim_radius),
     .source = "common_practice",
     .equation = "[rim_radius] = [sublimation_radius]",
     .supposes = "that the rim sits where the dust sublimates, and nothing has emptied the disc further out"},
    {.gives = NULL},
};
