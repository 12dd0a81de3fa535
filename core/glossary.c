/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The glossary: one row for each quantity the field talks about. The order of the rows is the order in which the chain is
   settled where a choice remains, and the order of help's map. Dimensions follow from the display units, ranges are in SI
   or carry a unit. Templates (LAC_AT_EACH_PLACE, LAC_FOR_EACH_STRUCTURE) are expanded by the catalogue, which also adds
   <name>_angle after each name that is on the sky. */
#include "relation.h"

/* A plain quantity; one on the sky; a template at each place; a template for each structure. */
#define QUANTITY(subject_, name_, unit_, range_, symbol_, synonyms_, meaning_)                                                      \
  {.name = name_, .synonyms = synonyms_, .unit = unit_, .range = range_, .symbol = symbol_, .meaning = meaning_, .subject = subject_}
#define ON_SKY(subject_, name_, unit_, range_, symbol_, synonyms_, meaning_)                                                        \
  {.name = name_, .synonyms = synonyms_, .unit = unit_, .range = range_, .symbol = symbol_, .meaning = meaning_, .subject = subject_, \
   .on_sky = true}
#define AT_PLACE(name_, unit_, range_, symbol_, synonyms_, meaning_)                                                                \
  {.name = "<at>" name_, .synonyms = synonyms_, .unit = unit_, .range = range_, .symbol = symbol_, .meaning = meaning_ " <where>",  \
   .subject = "disc", .presence = LAC_AT_EACH_PLACE}
#define OF_STRUCTURE(name_, unit_, range_, symbol_, meaning_)                                                                       \
  {.name = "<structure>_" name_, .unit = unit_, .range = range_, .symbol = symbol_, .meaning = meaning_, .subject = "structure",    \
   .presence = LAC_FOR_EACH_STRUCTURE}
#define VERDICT_OF_STRUCTURE(name_, symbol_, meaning_)                                                                              \
  {.name = "<structure>_" name_, .unit = "1", .range = "0 .. 1", .symbol = symbol_, .meaning = meaning_, .subject = "structure",    \
   .kind = LAC_VERDICT, .presence = LAC_FOR_EACH_STRUCTURE}

const lac_name lac_glossary[] = {
    /* The star. */
    QUANTITY("star", "parallax", "mas", "> 0", "\\varpi", "plx", "annual parallax of the star"),
    QUANTITY("star", "distance", "pc", "> 0", "d", "dist", "distance of the star from the observer"),
    QUANTITY("star", "stellar_mass", "Msun", "> 0", "M_*", "mstar M_star", "mass of the star"),
    QUANTITY("star", "stellar_radius", "Rsun", "> 0", "R_*", "rstar R_star", "radius of the star's photosphere"),
    QUANTITY("star", "effective_temperature", "K", "> 0", "T_*", "teff T_eff", "effective temperature of the star's photosphere"),
    QUANTITY("star", "bolometric_flux", "W.m**-2", "> 0", "F_{bol}", "fbol F_bol", "bolometric flux at Earth of the photosphere, dereddened"),
    QUANTITY("star", "catalogue_luminosity", "Lsun", "> 0", "L_{cat}", NULL, "a published luminosity of the photosphere, for catalogue_distance"),
    QUANTITY("star", "catalogue_distance", "pc", "> 0", "d_{cat}", NULL, "the distance that catalogue_luminosity was published for"),
    QUANTITY("star", "stellar_luminosity", "Lsun", "> 0", "L_*", "lstar luminosity", "luminosity of the star's photosphere"),
    QUANTITY("star", "mass_accretion_rate", "Msun/yr", ">= 0", "\\dot{M}", "mdot Mdot", "rate at which mass falls from the disc onto the star"),
    QUANTITY("star", "magnetospheric_radius", "Rsun", "> 0", "R_{mag}", "truncation R_in", "where accretion leaves the disc for the star's magnetic field lines"),
    QUANTITY("star", "accretion_luminosity", "Lsun", ">= 0", "L_{acc}", "lacc L_acc", "luminosity released by accretion onto the star"),
    QUANTITY("star", "heating_luminosity", "Lsun", "> 0", "L", NULL, "luminosity that heats the rim and the disc"),
    QUANTITY("star", "rotation_period", "d", "> 0", "P_{rot}", "prot", "rotation period of the star"),
    ON_SKY("star", "corotation_radius", "au", "> 0", "R_{co}", "rco", "where the disc's Keplerian period equals the star's rotation period"),
    QUANTITY("star", "stellar_angular_diameter", "mas", "> 0", "\\theta_*", "theta_star", "angular diameter of the star's photosphere"),

    /* Photometry. */
    {.name = "band", .unit = "1", .range = "any", .symbol = "\\mathrm{band}", .subject = "photometry", .kind = LAC_OBJECT,
     .meaning = "spectral band of observation, by its name (\"H\") or made by band{...}"},
    QUANTITY("photometry", "zero_point_flux", "Jy", "> 0", "F_{0}", "zero_point", "flux density of a source of magnitude zero in the band"),
    QUANTITY("photometry", "visual_extinction", "mag", ">= 0", "A_V", "A_V av", "extinction in the V band towards the star"),
    QUANTITY("photometry", "total_to_selective_extinction", "1", "2 .. 6", "R_V", "R_V rv", "visual extinction over the reddening of B - V"),
    QUANTITY("photometry", "extinction", "mag", ">= 0", "A_\\lambda", "A_lambda", "extinction at wavelength towards the star"),
    QUANTITY("photometry", "flux_density", "Jy", "> 0", "F_\\nu", NULL, "a flux density at Earth at wavelength"),
    QUANTITY("photometry", "magnitude", "mag", "any", "m", NULL, "magnitude of flux_density in the band"),
    QUANTITY("photometry", "photon_flux", "ph.s**-1.m**-2", "> 0", "\\dot{n}", NULL, "photons of flux_density in the bandwidth, per time and area above the atmosphere"),
    QUANTITY("photometry", "stellar_flux_density", "Jy", "> 0", "F_{\\nu,*}", NULL, "flux density of the star's photosphere at wavelength, without extinction"),
    QUANTITY("photometry", "stellar_magnitude", "mag", "any", "m_*", NULL, "magnitude of the star's photosphere in the band, without extinction"),
    QUANTITY("photometry", "b_magnitude", "mag", "any", "m_B", "Bmag", "B magnitude of the star as observed (Johnson)"),
    QUANTITY("photometry", "v_magnitude", "mag", "any", "m_V", "Vmag", "V magnitude of the star as observed (Johnson)"),
    QUANTITY("photometry", "j_magnitude", "mag", "any", "m_J", "Jmag", "J magnitude of the star as observed (2MASS)"),
    QUANTITY("photometry", "h_magnitude", "mag", "any", "m_H", "Hmag", "H magnitude of the star as observed (2MASS)"),
    QUANTITY("photometry", "k_magnitude", "mag", "any", "m_K", "Kmag", "Ks magnitude of the star as observed (2MASS)"),
    QUANTITY("photometry", "l_magnitude", "mag", "any", "m_L", "Lmag", "L magnitude of the star as observed (Johnson)"),

    /* Radiation. */
    QUANTITY("radiation", "wavelength", "um", "> 0", "\\lambda", "lambda lam", "wavelength of observation, in vacuum"),
    QUANTITY("radiation", "frequency", "Hz", "> 0", "\\nu", "nu", "frequency of observation"),
    QUANTITY("radiation", "body_temperature", "K", "> 0", "T", NULL, "temperature of a black body"),
    QUANTITY("radiation", "planck_nu", "W.m**-2.Hz**-1.sr**-1", ">= 0", "B_\\nu", "B_nu", "Planck function per unit frequency"),
    QUANTITY("radiation", "planck_lambda", "W.m**-2.um**-1.sr**-1", ">= 0", "B_\\lambda", "B_lambda", "Planck function per unit wavelength"),
    QUANTITY("radiation", "photon_radiance_nu", "ph.s**-1.m**-2.Hz**-1.sr**-1", ">= 0", "N_\\nu", NULL, "photon radiance of a black body per unit frequency"),
    QUANTITY("radiation", "photon_radiance_lambda", "ph.s**-1.m**-2.um**-1.sr**-1", ">= 0", "N_\\lambda", NULL, "photon radiance of a black body per unit wavelength"),
    QUANTITY("radiation", "peak_wavelength", "um", "> 0", "\\lambda_{max}", "wien", "wavelength at which B_lambda is greatest"),
    QUANTITY("radiation", "peak_frequency", "Hz", "> 0", "\\nu_{max}", NULL, "frequency at which B_nu is greatest"),
    QUANTITY("radiation", "peak_wavelength_power", "um", "> 0", "\\lambda_{pow}", NULL, "wavelength at which lambda B_lambda is greatest"),
    QUANTITY("radiation", "blackbody_fraction", "1", "0 .. 1", "F_{0-\\lambda}", NULL, "share of a black body's exitance below wavelength"),
    QUANTITY("radiation", "specific_intensity", "Jy.arcsec**-2", "> 0", "I_\\nu", "surface_brightness", "specific intensity per unit frequency"),
    QUANTITY("radiation", "brightness_temperature", "K", "> 0", "T_b", "T_B", "temperature of the black body that has specific_intensity at wavelength"),
    QUANTITY("radiation", "blackbody_exitance", "W.m**-2", "> 0", "M", NULL, "power a black body sends out per unit area"),

    /* The disc at a place: at radius, at the planet, at the ring. */
    ON_SKY("disc", "radius", "au", "> 0", "r", "r", "a distance from the star in the disc's plane"),
    AT_PLACE("midplane_temperature", "K", "> 0", "T_{mid<sub>}", "T_mid", "temperature of the irradiated midplane"),
    AT_PLACE("blackbody_grain_temperature", "K", "> 0", "T_{bb<sub>}", "T_bb", "temperature of a black grain in the open, not the midplane's,"),
    AT_PLACE("viscous_effective_temperature", "K", ">= 0", "T_{visc<sub>}", NULL, "effective temperature of the accreting disc's surface"),
    AT_PLACE("sound_speed", "km.s**-1", "> 0", "c_{s<sub>}", "c_s", "isothermal sound speed of the gas"),
    AT_PLACE("keplerian_frequency", "s**-1", "> 0", "\\Omega<_sub>", "Omega", "Keplerian orbital frequency, without angle,"),
    AT_PLACE("keplerian_speed", "km.s**-1", "> 0", "v_{K<sub>}", "v_K", "Keplerian orbital speed"),
    AT_PLACE("orbital_period", "yr", "> 0", "P<_sub>", NULL, "Keplerian orbital period"),
    AT_PLACE("scale_height", "au", "> 0", "H<_sub>", "H", "pressure scale height of the gas, sound speed over orbital frequency,"),
    AT_PLACE("aspect_ratio", "1", "> 0", "h<_sub>", "h H/r", "scale height over radius"),
    AT_PLACE("surface_density", "g.cm**-2", "> 0", "\\Sigma<_sub>", "Sigma", "surface density of the gas"),
    AT_PLACE("gas_density", "g.cm**-3", "> 0", "\\rho<_sub>", "rho_gas", "midplane density of the gas"),
    AT_PLACE("toomre_q", "1", "> 0", "Q<_sub>", "Q", "Toomre's stability parameter, Keplerian,"),
    AT_PLACE("critical_surface_density", "g.cm**-2", "> 0", "\\Sigma_{crit<sub>}", NULL, "surface density of the gas for which Toomre's Q is one"),
    AT_PLACE("stokes_number", "1", "> 0", "St<_sub>", "St", "Stokes number of the grains in the midplane, in the Epstein regime,"),
    AT_PLACE("pressure_slope", "1", "any", "\\gamma<_sub>", "dlnP/dlnr", "logarithmic slope of the midplane pressure with radius"),
    AT_PLACE("headwind_speed", "m.s**-1", "any", "\\Delta v<_sub>", NULL, "by how much the gas orbits slower than Kepler's law"),
    AT_PLACE("radial_drift_speed", "m.s**-1", "any", "v_{r<sub>}", NULL, "radial speed of the grains, negative inwards,"),

    /* The disc as a whole. */
    QUANTITY("disc", "flaring_angle", "1", "> 0", "\\varphi", "grazing_angle", "angle at which starlight grazes the disc's surface"),
    QUANTITY("disc", "mean_molecular_weight", "1", "> 0", "\\mu", "mu", "mean mass of a gas particle in proton masses"),
    QUANTITY("disc", "disc_mass", "Msun", "> 0", "M_d", "mdisc", "mass of the disc's gas"),
    ON_SKY("disc", "characteristic_radius", "au", "> 0", "r_c", "r_c", "radius beyond which the self-similar disc's surface density falls exponentially"),
    QUANTITY("disc", "surface_density_index", "1", "any", "\\gamma_\\Sigma", NULL, "power with which the self-similar disc's surface density falls inside, below 2"),
    QUANTITY("disc", "inclination", "deg", "0 deg .. 90 deg", "i", "incl", "inclination of the disc, 0 is face on"),
    QUANTITY("disc", "disc_position_angle", "deg", "any", "\\mathrm{PA}_d", NULL, "position angle of the disc's projected major axis, from north through east"),
    QUANTITY("disc", "snow_temperature", "K", "> 0", "T_{snow}", NULL, "midplane temperature at which water ice sublimates"),
    ON_SKY("disc", "snow_line_radius", "au", "> 0", "r_{snow}", "snow_line ice_line", "where the irradiated midplane has snow_temperature"),
    QUANTITY("disc", "grain_size", "um", "> 0", "a", "grain_radius", "radius of the grains"),
    QUANTITY("disc", "grain_density", "g.cm**-3", "> 0", "\\rho_s", NULL, "density of the grains' material"),
    {.name = "dust", .unit = "1", .range = "any", .symbol = "\\mathrm{dust}", .subject = "dust", .kind = LAC_OBJECT,
     .meaning = "a population of grains, made by dust{...}"},
    QUANTITY("dust", "dust_opacity", "cm**2.g**-1", "> 0", "\\kappa_{abs}", "kappa kappa_abs", "absorption opacity at wavelength per gram of dust"),
    QUANTITY("dust", "dust_scattering_opacity", "cm**2.g**-1", ">= 0", "\\kappa_{sca}", "kappa_sca", "scattering opacity at wavelength per gram of dust"),
    QUANTITY("dust", "dust_albedo", "1", "0 .. 1", "\\omega", "albedo", "scattering over extinction opacity of the dust at wavelength"),
    QUANTITY("dust", "dust_asymmetry", "1", "-1 .. 1", "g", "asymmetry", "mean cosine of the scattering angle of the dust at wavelength"),
    QUANTITY("dust", "dust_effective_albedo", "1", "0 .. 1", "\\omega_{eff}", NULL, "albedo without what is scattered forwards, at wavelength"),
    QUANTITY("dust", "gas_to_dust_ratio", "1", "> 0", "r_{gd}", NULL, "mass of the gas over that of the dust"),
    QUANTITY("dust", "dust_temperature", "K", "> 0", "T_d", NULL, "temperature of the dust that sends out dust_flux_density"),
    QUANTITY("dust", "dust_mass", "Mearth", "> 0", "M_{dust}", NULL, "mass of the dust that sends out dust_flux_density, optically thin"),
    QUANTITY("dust", "dust_flux_density", "mJy", "> 0", "F_{dust}", NULL, "optically thin flux density of the disc's dust at wavelength, in the millimetre range mostly"),

    /* Rim and cavity. */
    QUANTITY("rim", "rim_gas_density", "g.cm**-3", "> 0", "\\rho_{rim}", NULL, "density of the gas at the rim"),
    QUANTITY("rim", "sublimation_temperature", "K", "> 0", "T_{sub}", "T_sub T_evp evaporation_temperature", "temperature at which the grains at the rim sublimate"),
    QUANTITY("rim", "cooling_efficiency", "1", "> 0", "\\epsilon", "eps", "Planck-mean absorption efficiency of the grains at the sublimation temperature over that at the star's"),
    QUANTITY("rim", "absorption_efficiency_ratio", "1", "> 0", "Q_R", "Q_R", "absorption efficiency of the grains for starlight over that for their own heat"),
    QUANTITY("rim", "backwarming_factor", "1", "1 .. 4", "C_{bw}", "C_bw", "factor by which neighbouring dust warms a grain at the rim, 1 (none) to 4"),
    QUANTITY("rim", "backwarming_term", "1", ">= 0", "B_w", NULL, "term that back-warming adds to the inverse cooling efficiency, about 2"),
    QUANTITY("rim", "rim_height_ratio", "1", ">= 0", "f_{rim}", NULL, "height of the dust wall over the rim's radius"),
    ON_SKY("rim", "sublimation_radius", "au", "> 0", "R_{sub}", "R_sub dust_sublimation_radius", "distance from the star at which dust sublimates"),
    ON_SKY("rim", "rim_radius", "au", "> 0", "R_{rim}", "R_rim inner_rim", "where the dust starts"),
    ON_SKY("rim", "cavity_radius", "au", "> 0", "R_{cav}", "R_cav hole", "radius of an emptied inner disc, wherever it comes from"),

    /* Orbits and companions. */
    QUANTITY("orbit", "planet_mass", "Mjup", "> 0", "M_p", "mp M_p", "mass of the planet"),
    QUANTITY("orbit", "planet_star_mass_ratio", "1", "> 0", "q", "q", "mass of the planet over that of the star"),
    ON_SKY("orbit", "planet_semi_major_axis", "au", "> 0", "a_p", "a_p semimajor_axis", "semi-major axis of the planet's orbit"),
    ON_SKY("orbit", "hill_radius", "au", "> 0", "R_H", "R_H r_hill", "Hill radius of the planet"),
    QUANTITY("orbit", "second_planet_mass", "Mjup", "> 0", "M_{p2}", NULL, "mass of a second planet"),
    ON_SKY("orbit", "second_planet_semi_major_axis", "au", "> 0", "a_{p2}", NULL, "semi-major axis of the second planet's orbit"),
    ON_SKY("orbit", "mutual_hill_radius", "au", "> 0", "R_{Hm}", NULL, "mutual Hill radius of the two planets"),
    QUANTITY("orbit", "companion_mass", "Msun", "> 0", "M_c", NULL, "mass of a stellar companion"),
    QUANTITY("orbit", "companion_mass_ratio", "1", "> 0", "q_c", NULL, "mass of the companion over that of the star"),
    QUANTITY("orbit", "companion_mass_fraction", "1", "> 0 .. < 1", "\\mu_c", NULL, "mass of the companion over that of star and companion"),
    ON_SKY("orbit", "companion_separation", "au", "> 0", "a_c", NULL, "semi-major axis of the companion's orbit"),
    QUANTITY("orbit", "companion_eccentricity", "1", "0 .. < 1", "e_c", NULL, "eccentricity of the companion's orbit"),
    ON_SKY("orbit", "roche_lobe_radius", "au", "> 0", "r_L", NULL, "volume radius of the star's Roche lobe"),
    ON_SKY("orbit", "truncation_radius", "au", "> 0", "R_t", NULL, "where the companion cuts off the star's disc"),

    /* Gaps. */
    {.name = "viscosity_alpha", .synonyms = "alpha alpha_visc", .unit = "1", .range = "> 0", .symbol = "\\alpha", .subject = "gap",
     .meaning = "Shakura and Sunyaev's viscosity parameter of the gas, the strength of its turbulence",
     .hint = "published values run from 1e-4 to 1e-2: give a number, or viscosity_alpha = spread.log_uniform(1e-4, 1e-2)"},
    QUANTITY("gap", "thermal_gap_mass", "Mjup", "> 0", "M_{th}", "thermal_mass", "planet mass above which a gap opens against pressure"),
    QUANTITY("gap", "viscous_gap_mass", "Mjup", "> 0", "M_{visc}", NULL, "planet mass above which a gap opens against viscosity"),
    QUANTITY("gap", "crida_parameter", "1", "> 0", "\\mathcal{P}", NULL, "gap opening parameter: at most 1 opens a gap to a tenth of the surface density"),
    ON_SKY("gap", "gap_width", "au", "> 0", "\\Delta_{gap}", "width_of_gap", "full width of the gap in the gas, where its surface density is half the undisturbed one"),
    QUANTITY("gap", "gap_depth", "1", "> 0 .. 1", "\\Sigma_{min}/\\Sigma_0", NULL, "least surface density of the gas in the gap over the undisturbed one"),
    ON_SKY("gap", "gap_inner_radius", "au", "> 0", "r_{in}", NULL, "inner edge of the gap in the gas"),
    ON_SKY("gap", "gap_outer_radius", "au", "> 0", "r_{out}", NULL, "outer edge of the gap in the gas"),
    {.name = "hill_separation_factor", .synonyms = "k_hill", .unit = "1", .range = "> 0", .symbol = "k", .subject = "gap",
     .meaning = "Hill radii from a planet to the ring of millimetre dust outside it",
     .hint = "values used in print run from 4 to 8: give a number, or hill_separation_factor = spread.uniform(4, 8)"},
    ON_SKY("gap", "ring_planet_separation", "au", "> 0", "\\Delta_{ring}", NULL, "distance from the planet to the ring of millimetre dust outside it; not a gap width"),
    ON_SKY("gap", "observed_gap_width", "au", "> 0", "\\Delta_{obs}", NULL, "width of a gap as an image shows it"),
    QUANTITY("gap", "observed_gap_depth", "1", "> 0 .. < 1", "\\delta_{obs}", NULL, "least over undisturbed surface density of a gap as an image shows it"),
    QUANTITY("gap", "inferred_planet_mass", "Mjup", "> 0", "M_{p,inf}", NULL, "mass of the planet that would open the observed gap; feeds no other relation"),
    QUANTITY("gap", "pebble_isolation_mass", "Mearth", "> 0", "M_{iso}", NULL, "planet mass that stops the inward drift of pebbles"),
    ON_SKY("gap", "ring_radius", "au", "> 0", "r_{ring}", NULL, "radius of a ring in the disc"),
    ON_SKY("gap", "ring_width", "au", "> 0", "w_{ring}", NULL, "width of a ring in the disc"),

    /* Instruments. */
    QUANTITY("instrument", "bandwidth", "um", "> 0", "\\Delta\\lambda", NULL, "width in wavelength of one spectral channel"),
    QUANTITY("instrument", "spectral_resolving_power", "1", "> 0", "R", NULL, "wavelength over bandwidth"),
    QUANTITY("instrument", "projected_baseline", "m", "> 0", "B", "baseline", "separation of two elements of an array, projected on the sky"),
    QUANTITY("instrument", "shortest_baseline", "m", "> 0", "B_{min}", NULL, "shortest projected baseline of the array"),
    QUANTITY("instrument", "baseline_position_angle", "deg", "any", "\\mathrm{PA}_B", NULL, "position angle of the projected baseline, from north through east"),
    QUANTITY("instrument", "element_diameter", "m", "> 0", "D_e", NULL, "diameter of one element of the array"),
    QUANTITY("instrument", "array_resolution", "mas", "> 0", "\\theta_{arr}", "lambda/2B lambda/B", "smallest angle that the array tells apart, by the named criterion"),
    QUANTITY("instrument", "bandwidth_field", "mas", "> 0", "\\theta_{bw}", NULL, "field that the bandwidth leaves unsmeared, to the first null"),
    QUANTITY("instrument", "beam_field", "mas", "> 0", "\\theta_{beam}", NULL, "field of one element of the array"),
    QUANTITY("instrument", "array_field", "mas", "> 0", "\\theta_{field}", NULL, "field of the array, the smaller of those known"),
    QUANTITY("instrument", "recoverable_scale", "mas", "> 0", "\\theta_{max}", NULL, "largest angle that the array's shortest baseline still sees"),
    QUANTITY("instrument", "telescope_diameter", "m", "> 0", "D", NULL, "diameter of an imager's mirror"),
    QUANTITY("instrument", "inner_working_angle", "mas", ">= 0", "\\theta_{iwa}", "IWA iwa", "angle from the star inside which the imager, behind its coronagraph, sees nothing"),
    QUANTITY("instrument", "mirror_resolution", "mas", "> 0", "\\theta_{mir}", "lambda/D", "smallest angle that a mirror tells apart, by the named criterion"),
    QUANTITY("instrument", "spatial_resolution_of_array", "au", "> 0", "\\ell_{arr}", NULL, "array_resolution at the star's distance"),
    QUANTITY("instrument", "spatial_resolution_of_mirror", "au", "> 0", "\\ell_{mir}", NULL, "mirror_resolution at the star's distance"),
    QUANTITY("instrument", "elements_required", "1", "> 0", "n_{req}", NULL, "resolution elements across a structure that count as resolved"),

    /* What an array or a mirror makes of a structure. rim_radius_angle, cavity_radius_angle and ring_radius_angle exist already. */
    QUANTITY("structure", "gap_radius_angle", "mas", "> 0", "\\theta_{r,gap}", NULL, "angle on the sky from the star to the planet that opens the gap"),
    OF_STRUCTURE("size_angle", "mas", "> 0", "\\theta_{<structure>}", "<size> of the <structure> on the sky, not foreshortened"),
    OF_STRUCTURE("elements_by_array", "1", "> 0", "n_{<structure>,arr}", "resolution elements of the array across the <structure> (its <size>)"),
    VERDICT_OF_STRUCTURE("resolved_by_array", "\\mathrm{res}_{<structure>,arr}", "whether the array resolves the <structure> geometrically; not whether it is detected"),
    OF_STRUCTURE("elements_by_mirror", "1", "> 0", "n_{<structure>,mir}", "resolution elements of the mirror across the <structure> (its <size>)"),
    VERDICT_OF_STRUCTURE("resolved_by_mirror", "\\mathrm{res}_{<structure>,mir}", "whether the mirror resolves the <structure> geometrically; not whether it is detected"),

    /* Visibilities. */
    QUANTITY("visibility", "stellar_flux_fraction", "1", "0 .. 1", "f_*", "star_flux_fraction", "share of the star in the total flux in the band"),
    QUANTITY("visibility", "halo_flux_fraction", "1", "0 .. 1", "f_h", NULL, "share of over-resolved light in the total flux in the band"),
    QUANTITY("visibility", "rim_visibility", "1", "-1 .. 1", "V_{rim}", NULL, "visibility of star and thin inclined rim on the baseline, normalised to the total flux"),
    QUANTITY("visibility", "rim_squared_visibility", "1", "0 .. 1", "V^2_{rim}", NULL, "square of rim_visibility"),
    QUANTITY("visibility", "rim_visibility_drop", "1", "0 .. 1", "1 - V^2_{rim}", NULL, "how far the squared visibility is below that of a point"),
    QUANTITY("visibility", "visibility_error", "1", "> 0", "\\sigma_{V^2}", NULL, "standard error of a measured squared visibility"),
    QUANTITY("visibility", "rim_drop_significance", "1", ">= 0", "s_{rim}", NULL, "visibility drop of the rim in standard errors; a small rim is detected long before it is resolved"),

    /* The disc's own light. */
    QUANTITY("emission", "disc_inner_radius", "au", "> 0", "R_{d,in}", NULL, "inner edge of the emitting disc"),
    QUANTITY("emission", "disc_outer_radius", "au", "> 0", "R_{d,out}", NULL, "outer edge of the emitting disc"),
    QUANTITY("emission", "temperature_at_one_au", "K", "> 0", "T_1", NULL, "temperature at 1 au of a disc whose temperature is a power of the radius"),
    QUANTITY("emission", "temperature_index", "1", ">= 0", "q_T", NULL, "power with which that temperature falls"),
    QUANTITY("emission", "dust_surface_density_at_one_au", "g.cm**-2", "> 0", "\\Sigma_{d,1}", NULL, "surface density of the dust at 1 au of a disc where it is a power of the radius"),
    QUANTITY("emission", "dust_surface_density_index", "1", "any", "p", NULL, "power with which that surface density falls"),
    QUANTITY("emission", "rim_flux_density", "Jy", ">= 0", "F_{rim}", NULL, "flux density of the rim's black surface at wavelength, without extinction"),
    QUANTITY("emission", "disc_flux_density", "Jy", ">= 0", "F_{disc}", NULL, "flux density of the disc outside the rim at wavelength, without extinction"),
    QUANTITY("emission", "total_flux_density", "Jy", "> 0", "F_{tot}", "sed SED spectral_energy_distribution", "flux density of star, rim and disc at wavelength, without extinction"),
    QUANTITY("emission", "observed_flux_density", "Jy", "> 0", "F_{obs}", NULL, "flux density of star, rim and disc at wavelength, with extinction"),
    QUANTITY("emission", "observed_magnitude", "mag", "any", "m_{obs}", NULL, "magnitude of star, rim and disc in the band, with extinction"),
    QUANTITY("emission", "near_infrared_excess", "1", ">= 0", "f_{NIR}", NULL, "luminosity of the rim from 1 to 5 um over that of the star"),
    QUANTITY("emission", "correlated_magnitude", "mag", "any", "m_{corr}", NULL, "magnitude of the correlated flux of star and rim on the baseline"),
    {.name = NULL},
};
