/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Units and prefixes. Symbols and prefixes after VOUnits 1.1 (IVOA Recommendation of 2023-12-15, its list of known units),
   sizes from the list of constants; erg, angstrom, barn, Ba by definition. Of the standard's list those are left out
   that need electric current, amount of substance or information, or name no unit (Sun): they are read as unknown.
   That the counted things take prefixes is from memory. Short forms: common practice, no source. */
#include "unit_table.h"

#include "lacuna/constants.h"

#define S LAC_TAKES_PREFIX
#define D LAC_ADVISED_AGAINST
#define SHORT LAC_NOT_STANDARD

#define A_NUMBER LAC_OF(0, 0, 0, 0, 0, 0)
#define A_LENGTH LAC_OF(1, 0, 0, 0, 0, 0)
#define A_MASS LAC_OF(0, 1, 0, 0, 0, 0)
#define A_TIME LAC_OF(0, 0, 1, 0, 0, 0)
#define AN_ANGLE LAC_OF(0, 0, 0, 0, 1, 0)
#define A_PRESSURE LAC_OF(-1, 1, -2, 0, 0, 0)
#define AN_ENERGY LAC_OF(2, 1, -2, 0, 0, 0)
#define A_POWER LAC_OF(2, 1, -3, 0, 0, 0)

const lac_unit_row lac_unit_table[] = {
    /* length */
    {"m", 1, 0, A_LENGTH, S, NULL, NULL},
    {"au", LAC_AU, 0, A_LENGTH, 0, NULL, NULL},
    {"AU", LAC_AU, 0, A_LENGTH, 0, "au", "au"},
    {"pc", LAC_PC, 0, A_LENGTH, S, NULL, NULL},
    {"lyr", LAC_SPEED_OF_LIGHT *LAC_YEAR, 0, A_LENGTH, S, NULL, NULL},
    {"solRad", LAC_SOLAR_RADIUS, 0, A_LENGTH, S, "R_{\\odot}", "Rsun"},
    {"Rsun", LAC_SOLAR_RADIUS, 0, A_LENGTH, SHORT, "R_{\\odot}", NULL},
    {"R☉", LAC_SOLAR_RADIUS, 0, A_LENGTH, SHORT, "R_{\\odot}", "Rsun"},
    {"Rjup", LAC_JUPITER_RADIUS, 0, A_LENGTH, SHORT, "R_{Jup}", NULL},
    {"Rearth", LAC_EARTH_RADIUS, 0, A_LENGTH, SHORT, "R_{\\oplus}", NULL},
    {"R⊕", LAC_EARTH_RADIUS, 0, A_LENGTH, SHORT, "R_{\\oplus}", "Rearth"},
    {"angstrom", 1, -10, A_LENGTH, D, "\\mathring{A}", "Å"},
    {"Angstrom", 1, -10, A_LENGTH, D, "\\mathring{A}", "Å"},
    {"Å", 1, -10, A_LENGTH, SHORT, "\\mathring{A}", NULL},
    {"micron", 1, -6, A_LENGTH, SHORT, "\\mu{}m", "µm"},
    {"barn", 1, -28, LAC_OF(2, 0, 0, 0, 0, 0), S | D, NULL, NULL},
    /* angle */
    {"rad", 1, 0, AN_ANGLE, S, NULL, NULL},
    {"deg", 3600 * LAC_ARCSEC, 0, AN_ANGLE, S, NULL, NULL},
    {"°", 3600 * LAC_ARCSEC, 0, AN_ANGLE, SHORT, "{}^{\\circ}", NULL},
    {"arcmin", 60 * LAC_ARCSEC, 0, AN_ANGLE, S, NULL, NULL},
    {"′", 60 * LAC_ARCSEC, 0, AN_ANGLE, SHORT, "{}^{\\prime}", NULL},
    {"arcsec", LAC_ARCSEC, 0, AN_ANGLE, S, NULL, NULL},
    {"″", LAC_ARCSEC, 0, AN_ANGLE, SHORT, "{}^{\\prime\\prime}", NULL},
    {"mas", LAC_ARCSEC, -3, AN_ANGLE, 0, NULL, NULL},
    {"uas", LAC_ARCSEC, -6, AN_ANGLE, SHORT, "\\mu{}as", "µas"},
    {"µas", LAC_ARCSEC, -6, AN_ANGLE, SHORT, "\\mu{}as", NULL},
    {"μas", LAC_ARCSEC, -6, AN_ANGLE, SHORT, "\\mu{}as", "µas"},
    {"sr", 1, 0, LAC_OF(0, 0, 0, 0, 2, 0), S, NULL, NULL},
    /* time and frequency */
    {"s", 1, 0, A_TIME, S, NULL, NULL},
    {"min", 60, 0, A_TIME, S, NULL, NULL},
    {"h", 3600, 0, A_TIME, S, NULL, NULL},
    {"d", LAC_DAY, 0, A_TIME, S, NULL, NULL},
    {"yr", LAC_YEAR, 0, A_TIME, S, NULL, NULL},
    {"a", LAC_YEAR, 0, A_TIME, S, NULL, NULL},
    {"Hz", 1, 0, LAC_OF(0, 0, -1, 0, 0, 0), S, NULL, NULL},
    /* mass */
    {"g", 1, -3, A_MASS, S, NULL, NULL},
    {"solMass", LAC_SOLAR_MASS, 0, A_MASS, S, "M_{\\odot}", "Msun"},
    {"Msun", LAC_SOLAR_MASS, 0, A_MASS, SHORT, "M_{\\odot}", NULL},
    {"M☉", LAC_SOLAR_MASS, 0, A_MASS, SHORT, "M_{\\odot}", "Msun"},
    {"Mjup", LAC_JUPITER_MASS, 0, A_MASS, SHORT, "M_{Jup}", NULL},
    {"Mearth", LAC_EARTH_MASS, 0, A_MASS, SHORT, "M_{\\oplus}", NULL},
    {"M⊕", LAC_EARTH_MASS, 0, A_MASS, SHORT, "M_{\\oplus}", "Mearth"},
    {"u", LAC_ATOMIC_MASS, 0, A_MASS, S, NULL, NULL},
    /* force, energy, power, flux density, temperature */
    {"N", 1, 0, LAC_OF(1, 1, -2, 0, 0, 0), S, NULL, NULL},
    {"Pa", 1, 0, A_PRESSURE, S, NULL, NULL},
    {"Ba", 1, -1, A_PRESSURE, D, NULL, NULL},
    {"J", 1, 0, AN_ENERGY, S, NULL, NULL},
    {"eV", LAC_ELECTRON_VOLT, 0, AN_ENERGY, S, NULL, NULL},
    {"erg", 1, -7, AN_ENERGY, S | D, NULL, NULL},
    {"W", 1, 0, A_POWER, S, NULL, NULL},
    {"solLum", LAC_SOLAR_LUMINOSITY, 0, A_POWER, S, "L_{\\odot}", "Lsun"},
    {"Lsun", LAC_SOLAR_LUMINOSITY, 0, A_POWER, SHORT, "L_{\\odot}", NULL},
    {"L☉", LAC_SOLAR_LUMINOSITY, 0, A_POWER, SHORT, "L_{\\odot}", "Lsun"},
    {"Jy", 1, -26, LAC_OF(0, 1, -2, 0, 0, 0), S, NULL, NULL},
    {"K", 1, 0, LAC_OF(0, 0, 0, 1, 0, 0), S, NULL, NULL},
    {"mag", 1, 0, LAC_OF(0, 0, 0, 0, 0, 1), S, NULL, NULL},
    /* counted things, ratios */
    {"ph", 1, 0, A_NUMBER, S, NULL, NULL},
    {"photon", 1, 0, A_NUMBER, S, NULL, NULL},
    {"ct", 1, 0, A_NUMBER, S, NULL, NULL},
    {"count", 1, 0, A_NUMBER, S, NULL, NULL},
    {"adu", 1, 0, A_NUMBER, S, NULL, NULL},
    {"pix", 1, 0, A_NUMBER, S, NULL, NULL},
    {"pixel", 1, 0, A_NUMBER, S, NULL, NULL},
    {"beam", 1, 0, A_NUMBER, S, NULL, NULL},
    {"chan", 1, 0, A_NUMBER, S, NULL, NULL},
    {"bin", 1, 0, A_NUMBER, S, NULL, NULL},
    {"%", 1, -2, A_NUMBER, 0, "\\%", NULL},
    /* candela, which would be read as a hundredth of a day */
    {"cd", 1, 0, A_NUMBER, LAC_NOT_MEASURED, NULL, NULL},
    {NULL, 0, 0, A_NUMBER, 0, NULL, NULL},
};

/* The two-letter one first, so that dam is ten metres and not a tenth of an unknown am. */
const lac_prefix_row lac_prefix_table[] = {
    {"da", 1, D, NULL, NULL},  {"q", -30, 0, NULL, NULL},   {"r", -27, 0, NULL, NULL},        {"y", -24, 0, NULL, NULL},
    {"z", -21, 0, NULL, NULL}, {"a", -18, 0, NULL, NULL},   {"f", -15, 0, NULL, NULL},        {"p", -12, 0, NULL, NULL},
    {"n", -9, 0, NULL, NULL},  {"u", -6, 0, "\\mu{}", "µ"}, {"µ", -6, SHORT, "\\mu{}", NULL}, {"μ", -6, SHORT, "\\mu{}", "µ"},
    {"m", -3, 0, NULL, NULL},  {"c", -2, 0, NULL, NULL},    {"d", -1, D, NULL, NULL},         {"h", 2, 0, NULL, NULL},
    {"k", 3, 0, NULL, NULL},   {"M", 6, 0, NULL, NULL},     {"G", 9, 0, NULL, NULL},          {"T", 12, 0, NULL, NULL},
    {"P", 15, 0, NULL, NULL},  {"E", 18, 0, NULL, NULL},    {"Z", 21, 0, NULL, NULL},         {"Y", 24, 0, NULL, NULL},
    {"R", 27, 0, NULL, NULL},  {"Q", 30, 0, NULL, NULL},    {NULL, 0, 0, NULL, NULL},
};

const char *const lac_everyday_symbols[] = {"km", "cm", "mm",  "um",  "nm",  "kpc",  "Mpc", "mrad", "kg",  "mg",  "ug",  "ms",
                                            "us", "ns", "kyr", "Myr", "Gyr", "kHz",  "MHz", "GHz",  "THz", "mJy", "uJy", "mW",
                                            "kW", "kJ", "keV", "meV", "MeV", "mmag", "mK",  "kPa",  "hPa", NULL};
