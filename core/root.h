/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A root within a bracket. */
#ifndef LACUNA_CORE_ROOT_H
#define LACUNA_CORE_ROOT_H

typedef double lac_root_function(void *context, double x);

/* Where f changes its sign between low and high, to some 1e-13 of the greater end. NaN where f has the same sign at both ends, or is NaN on
 * the way. */
double lac_root_between(lac_root_function *f, void *context, double low, double high);

#endif
