/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The gas density at the rim of a disc that is given: where the dust sublimates depends on the density there, and the density on where that
   is. At the solution hold together the sublimation temperature at the density (Isella & Natta 2005), the balance of a grain in the open,
   the surface density of the self-similar disc at that radius, and its scale height for gas as warm as the grains. */
#include "grains.h"
#include "lacuna/disc.h"
#include "lacuna/rim.h"
#include "root.h"

typedef struct {
  const lac_dust *dust; /* NULL: grey grains */
  double grain_size, heating_luminosity, effective_temperature, stellar_mass, disc_mass, characteristic_radius, surface_density_index,
      mean_molecular_weight;
} rim_of_disc;

/* ln of the density that the disc has where grains sublimate at a density, over that density. As the density rises by e the temperature
   rises by 2 % and the radius falls by 4 %, so the surplus falls throughout: one root. */
static double surplus(void *context, double ln_density) {
  const rim_of_disc *d = context;
  const double temperature = lac_sublimation_temperature_isella_natta_2005(exp(ln_density));
  const double efficiency = d->dust ? lac_dust_cooling_efficiency(d->dust, d->grain_size, temperature, d->effective_temperature) : 1;
  const double radius = lac_sublimation_radius_monnier_2002(d->heating_luminosity, temperature, 1 / efficiency);
  const double surface_density = lac_surface_density_self_similar(d->disc_mass, d->characteristic_radius, d->surface_density_index, radius);
  const double height =
      lac_scale_height(lac_sound_speed(temperature, d->mean_molecular_weight), lac_keplerian_frequency(d->stellar_mass, radius));
  return log(lac_gas_density(surface_density, height)) - ln_density;
}

/* From a vacuum to rock, in kg m^-3. */
static double solve(rim_of_disc *disc) { return exp(lac_root_between(surplus, disc, log(1e-40), log(1e4))); }

void lac_rim_gas_density_of_dust(const void *dust, size_t n, double *restrict out, const double *const *in) {
  for (size_t i = 0; i < n; i++) {
    rim_of_disc disc = {dust, in[0][i], in[1][i], in[2][i], in[3][i], in[4][i], in[5][i], in[6][i], in[7][i]};
    out[i] = solve(&disc);
  }
}

double lac_solved_grey_rim(double heating_luminosity, double stellar_mass, double disc_mass, double characteristic_radius,
                           double surface_density_index, double mean_molecular_weight) {
  rim_of_disc disc = {.heating_luminosity = heating_luminosity,
                      .stellar_mass = stellar_mass,
                      .disc_mass = disc_mass,
                      .characteristic_radius = characteristic_radius,
                      .surface_density_index = surface_density_index,
                      .mean_molecular_weight = mean_molecular_weight};
  return solve(&disc);
}
