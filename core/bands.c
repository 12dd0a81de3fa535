/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Bands: the built-in ones from published zero points, and the user's. A built-in band has a source, a user's has none: so it is known
   which of them was allocated. */
#include "bands.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "nearest.h"

#define UM 1e-6
#define JY 1e-26

/* Wavelengths and zero points as printed in the source. Widths are recalled from memory: those of 2MASS from the same paper, of
   Johnson-Cousins from Bessell 2005 (ARA&A 43, 293), of MKO the half-power widths of Tokunaga, Simons & Vacca 2002 (PASP 114, 180), of N
   and Q from Tokunaga 2000 (in Allen's Astrophysical Quantities). */
const lac_band lac_bands[] = {
    [LAC_2MASS_J] = {"2MASS J", "J", "2MASS", "cohen_2003", 1.235 * UM, 0.162 * UM, 1594 * JY},
    [LAC_2MASS_H] = {"2MASS H", "H", "2MASS", "cohen_2003", 1.662 * UM, 0.251 * UM, 1024 * JY},
    [LAC_2MASS_KS] = {"2MASS Ks", "K Ks", "2MASS", "cohen_2003", 2.159 * UM, 0.262 * UM, 666.7 * JY},
    [LAC_JOHNSON_V] = {"Johnson-Cousins V", "V", "Johnson-Cousins", "bessell_1998", 0.545 * UM, 0.084 * UM, 3636 * JY},
    [LAC_JOHNSON_B] = {"Johnson-Cousins B", "B", "Johnson-Cousins", "bessell_1998", 0.438 * UM, 0.089 * UM, 4063 * JY},
    {"Johnson-Cousins U", "U", "Johnson-Cousins", "bessell_1998", 0.36 * UM, 0.065 * UM, 1790 * JY},
    {"Johnson-Cousins R", "R", "Johnson-Cousins", "bessell_1998", 0.641 * UM, 0.158 * UM, 3064 * JY},
    {"Johnson-Cousins I", "I", "Johnson-Cousins", "bessell_1998", 0.798 * UM, 0.154 * UM, 2416 * JY},
    {"MKO J", "", "MKO", "tokunaga_vacca_2005", 1.25 * UM, 0.16 * UM, 1560 * JY},
    {"MKO H", "", "MKO", "tokunaga_vacca_2005", 1.644 * UM, 0.29 * UM, 1040 * JY},
    {"MKO Ks", "", "MKO", "tokunaga_vacca_2005", 2.149 * UM, 0.31 * UM, 670 * JY},
    {"MKO K", "", "MKO", "tokunaga_vacca_2005", 2.198 * UM, 0.34 * UM, 645 * JY},
    {"MKO L'", "L' Lp", "MKO", "tokunaga_vacca_2005", 3.754 * UM, 0.70 * UM, 249 * JY},
    {"MKO M'", "M' Mp", "MKO", "tokunaga_vacca_2005", 4.702 * UM, 0.24 * UM, 163 * JY},
    {"CIT N", "N", "CIT", "beckwith_1976", 10.1 * UM, 5.2 * UM, 37 * JY},
    {"CIT Q", "Q", "CIT", "beckwith_1976", 20 * UM, 7.8 * UM, 10 * JY},
    {.name = NULL},
};
enum { BANDS = sizeof lac_bands / sizeof lac_bands[0] - 1, LONGEST_ALIAS = 8, LONGEST_NAME = 60 };

const lac_band *lac_band_at(size_t index) { return index < BANDS ? &lac_bands[index] : NULL; }

/* A word of a list apart by spaces: its length, 0 past the last; *list is moved to its start. */
static size_t next_word(const char **list) {
  *list += strspn(*list, " ");
  return strcspn(*list, " ");
}

static int is_called(const lac_band *band, const char *name) {
  if (strcmp(band->name, name) == 0) return 1;
  const char *alias = band->aliases;
  for (size_t length; (length = next_word(&alias)) > 0; alias += length)
    if (strlen(name) == length && strncmp(alias, name, length) == 0) return 1;
  return 0;
}

const lac_band *lac_band_named(const char *name) {
  for (size_t i = 0; i < BANDS; i++)
    if (is_called(&lac_bands[i], name)) return &lac_bands[i];
  return NULL;
}

/* Twice the edits that make the text of the word, less one where the word is its beginning: "MKO L" is nearer to "MKO L'" than to "MKO J".
 */
static int far_from(const char *text, const char *word) { return 2 * lac_edits(word, text) - (strncmp(text, word, strlen(word)) == 0); }

/* To the name, its part after the system, or an alias: to the nearest of them. */
static int distance_from(const lac_band *band, const char *word) {
  const char *alias = band->aliases;
  const int whole = far_from(band->name, word), part = far_from(strrchr(band->name, ' ') + 1, word);
  int least = whole < part ? whole : part;
  for (size_t length; (length = next_word(&alias)) > 0; alias += length) {
    char one[LONGEST_ALIAS] = "";
    memcpy(one, alias, length);
    const int distance = far_from(one, word);
    if (distance < least) least = distance;
  }
  return least;
}

int lac_band_nearest(const char *word, const char **names, int max) {
  int found[BANDS], count = 0;
  if (strlen(word) > LONGEST_NAME) return 0;
  for (size_t i = 0; i < BANDS; i++) {
    const int distance = distance_from(&lac_bands[i], word);
    /* More than a third of the letters wrong (one is always forgiven) is chance. */
    if (distance > 2 && 3 * distance > 2 * (int)strlen(word)) continue;
    int at = count < max ? count++ : max;
    for (; at > 0 && found[at - 1] > distance; at--)
      if (at < max) found[at] = found[at - 1], names[at] = names[at - 1];
    if (at < max) found[at] = distance, names[at] = lac_bands[i].name;
  }
  return count;
}

/* Copies a text to *room and moves it behind. */
static const char *copy_to(char **room, const char *text) {
  char *copy = *room;
  *room += strlen(text) + 1;
  return strcpy(copy, text);
}

static int is_positive(double x) { return x > 0 && isfinite(x); }

lac_status lac_band_new(const char *name, const char *system, double wavelength, double width, double zero_point, lac_band **band) {
  *band = NULL;
  if (strcmp(system, "AB") == 0) {
    if (!isnan(zero_point)) return LAC_OUT_OF_RANGE;
    zero_point = LAC_AB_ZERO_POINT;
  }
  if (!is_positive(wavelength) || !is_positive(zero_point) || !(isnan(width) || is_positive(width))) return LAC_OUT_OF_RANGE;
  if (!name) name = system;
  lac_band *made = malloc(sizeof *made + strlen(name) + strlen(system) + 2);
  if (!made) return LAC_NO_MEMORY;
  char *room = (char *)(made + 1);
  *made = (lac_band){.wavelength = wavelength, .width = width, .zero_point = zero_point};
  made->name = copy_to(&room, name);
  made->system = copy_to(&room, system);
  *band = made;
  return LAC_OK;
}

void lac_band_drop(const lac_band *band) {
  if (band && !band->source) free((void *)(uintptr_t)band);
}
