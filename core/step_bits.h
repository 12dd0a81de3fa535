/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What the making and the running of steps agree upon: two bits beside those of the loop axes, and the width of singles. */
#ifndef LACUNA_CORE_STEP_BITS_H
#define LACUNA_CORE_STEP_BITS_H

#include "steps.h"

#define LAC_FIRST_UNIT (1u << 31) /* set in every step: at a thread's first unit everything is computed */
#define LAC_EVERY_UNIT (1u << 30) /* set in those that are computed at every unit */

static inline size_t lac_whole_lanes(size_t n) { return (n + LAC_LANES - 1) / LAC_LANES * LAC_LANES; }

#endif
