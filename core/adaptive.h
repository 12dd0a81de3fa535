/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Tables of a smooth function on places that lie closer where it bends more, and cubics through them. */
#ifndef LACUNA_CORE_ADAPTIVE_H
#define LACUNA_CORE_ADAPTIVE_H

#include <stdbool.h>
#include <stddef.h>

#include "lacuna/status.h"

/* At each of count places, ascending, width values. */
typedef struct {
  size_t count, width;
  double *place, *value;
} lac_table;

/* Fills values (count x width) at count places. */
typedef lac_status lac_sampler(void *context, size_t count, const double *place, double *values);
/* Whether a guess of the width values is good enough. */
typedef bool lac_agreement(size_t width, const double *guess, const double *exact);

/* Starts from so many even intervals (three or more) between low and high; halves those in whose middle the cubic through the four places
   around it doesn't agree, and then their halves, down to intervals of length `finest`. Given: table->width. As the sampler's status, or
   LAC_NO_MEMORY; the table is empty then. */
lac_status lac_table_fill(double low, double high, size_t intervals, double finest, lac_sampler *sample, lac_agreement *agrees,
                          void *context, lac_table *table);
void lac_table_free(lac_table *table);

/* The first of the four places around `at`, and the weights of the cubic through them (Lagrange). */
size_t lac_cubic_weights(size_t count, const double *place, double at, double *weight);

#endif
