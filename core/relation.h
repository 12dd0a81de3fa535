/* SPDX-License-Identifier: GPL-3.0-or-later */
/* How a relation is written: one inline body, from which come the public function and its block form.

     LAC_RELATION(keplerian_speed, stellar_mass, radius) {
       return lac_where(stellar_mass > 0 & radius > 0, sqrt(LAC_G * stellar_mass / radius));
     }
   defines   double lac_keplerian_speed(double stellar_mass, double radius)   and a block form.

     LAC_SCALED_RELATION(hill_radius, planet_semi_major_axis, planet_star_mass_ratio) {
       return lac_where(planet_star_mass_ratio > 0, cbrt(planet_star_mass_ratio / 3));
     }
   is for a result that is the first argument (which must be > 0) times a function of the others: the body is that function,
   which a plan evaluates at the rank of the others, before the product.

   The row then says  .LAC_ROW(keplerian_speed)  or  .LAC_SCALED_ROW(hill_radius)  for its function fields.
   Bodies have no branches that call functions (compute first, choose after), so that blocks are vectorised. */
#ifndef LACUNA_CORE_RELATION_H
#define LACUNA_CORE_RELATION_H

#include <math.h>
#include <stddef.h>

#include "clones.h"
#include "lacuna/catalogue.h"
#include "lacuna/constants.h"

/* The value where the condition holds, else NaN. Conditions are joined by &, not &&: no branch.
   A NaN argument fails every comparison, so undefined stays undefined. */
static inline double lac_where(int condition, double value) { return condition ? value : (double)NAN; }

#define LAC_PASTE_(a, b) a##b
#define LAC_PASTE(a, b) LAC_PASTE_(a, b)
#define LAC_COUNT_(a, b, c, d, e, f, g, h, i, j, k, l, count, ...) count
#define LAC_COUNT(...) LAC_COUNT_(__VA_ARGS__, 12, 11, 10, 9, 8, 7, 6, 5, 4, 3, 2, 1, 0)

/* For each argument: its parameter, its block pointer, its element. */
#define LAC_EACH_1(do_, a) do_(a, 0)
#define LAC_EACH_2(do_, a, b) LAC_EACH_1(do_, a), do_(b, 1)
#define LAC_EACH_3(do_, a, b, c) LAC_EACH_2(do_, a, b), do_(c, 2)
#define LAC_EACH_4(do_, a, b, c, d) LAC_EACH_3(do_, a, b, c), do_(d, 3)
#define LAC_EACH_5(do_, a, b, c, d, e) LAC_EACH_4(do_, a, b, c, d), do_(e, 4)
#define LAC_EACH_6(do_, a, b, c, d, e, f) LAC_EACH_5(do_, a, b, c, d, e), do_(f, 5)
#define LAC_EACH_7(do_, a, b, c, d, e, f, g) LAC_EACH_6(do_, a, b, c, d, e, f), do_(g, 6)
#define LAC_EACH_8(do_, a, b, c, d, e, f, g, h) LAC_EACH_7(do_, a, b, c, d, e, f, g), do_(h, 7)
#define LAC_EACH_9(do_, a, b, c, d, e, f, g, h, i) LAC_EACH_8(do_, a, b, c, d, e, f, g, h), do_(i, 8)
#define LAC_EACH_10(do_, a, b, c, d, e, f, g, h, i, j) LAC_EACH_9(do_, a, b, c, d, e, f, g, h, i), do_(j, 9)
#define LAC_EACH_11(do_, a, b, c, d, e, f, g, h, i, j, k) LAC_EACH_10(do_, a, b, c, d, e, f, g, h, i, j), do_(k, 10)
#define LAC_EACH_12(do_, a, b, c, d, e, f, g, h, i, j, k, l) LAC_EACH_11(do_, a, b, c, d, e, f, g, h, i, j, k), do_(l, 11)
#define LAC_EACH(do_, ...) LAC_PASTE(LAC_EACH_, LAC_COUNT(__VA_ARGS__))(do_, __VA_ARGS__)

#define LAC_PARAMETER(name, index) double name
#define LAC_NAME_ALONE(name, index) name
#define LAC_ELEMENT(name, index) in[index][i]
#define LAC_ELEMENT_AFTER(name, index) in[(index) + 1][i]

#define LAC_RELATION(name, ...)                                                                  \
  LAC_INLINE double name##_body(LAC_EACH(LAC_PARAMETER, __VA_ARGS__));                             \
  double lac_##name(LAC_EACH(LAC_PARAMETER, __VA_ARGS__)) {                                        \
    return name##_body(LAC_EACH(LAC_NAME_ALONE, __VA_ARGS__));                                     \
  }                                                                                                \
  LAC_CLONES static void name##_block(size_t n, double *restrict out, const double *const *in) {   \
    for (size_t i = 0; i < n; i++) out[i] = name##_body(LAC_EACH(LAC_ELEMENT, __VA_ARGS__));       \
  }                                                                                                \
  LAC_INLINE double name##_body(LAC_EACH(LAC_PARAMETER, __VA_ARGS__))

#define LAC_SCALED_RELATION(name, scale, ...)                                                    \
  LAC_INLINE double name##_shape(LAC_EACH(LAC_PARAMETER, __VA_ARGS__));                            \
  double lac_##name(double scale, LAC_EACH(LAC_PARAMETER, __VA_ARGS__)) {                          \
    return lac_where(scale > 0, scale * name##_shape(LAC_EACH(LAC_NAME_ALONE, __VA_ARGS__)));      \
  }                                                                                                \
  LAC_CLONES static void name##_block(size_t n, double *restrict out, const double *const *in) {   \
    for (size_t i = 0; i < n; i++)                                                                 \
      out[i] = lac_where(in[0][i] > 0, in[0][i] * name##_shape(LAC_EACH(LAC_ELEMENT_AFTER, __VA_ARGS__))); \
  }                                                                                                \
  LAC_CLONES static void name##_shape_block(size_t n, double *restrict out, const double *const *in) { \
    for (size_t i = 0; i < n; i++) out[i] = name##_shape(LAC_EACH(LAC_ELEMENT, __VA_ARGS__));      \
  }                                                                                                \
  LAC_INLINE double name##_shape(LAC_EACH(LAC_PARAMETER, __VA_ARGS__))

/* The function fields of a row. */
#define LAC_ROW(name) function = (void (*)(void))lac_##name, .function_name = "lac_" #name, .block = name##_block
#define LAC_SCALED_ROW(name) LAC_ROW(name), .shape = name##_shape_block

/* Each subject's table ends with a row whose gives is NULL. */
extern const lac_relation lac_starlight_relations[], lac_planck_relations[], lac_disc_relations[], lac_rim_relations[],
    lac_orbit_relations[], lac_gap_relations[], lac_resolution_relations[], lac_brightness_relations[], lac_photometry_relations[],
    lac_dust_relations[], lac_emission_relations[], lac_disc_emission_relations[];
/* The two rows between a length and its angle, for the catalogue: <length> stands for each name that is on the sky. */
extern const lac_relation lac_angle_relations[];
extern const lac_name lac_glossary[];   /* ends with name NULL */
extern const lac_source lac_sources[];  /* ends with id NULL */

#endif
