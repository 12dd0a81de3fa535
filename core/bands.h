/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The built-in bands by number, for relations that name a band. */
#ifndef LACUNA_CORE_BANDS_H
#define LACUNA_CORE_BANDS_H

#include "lacuna/photometry.h"

enum { LAC_2MASS_J, LAC_2MASS_H, LAC_2MASS_KS, LAC_JOHNSON_V, LAC_JOHNSON_B };
extern const lac_band lac_bands[]; /* ends with name NULL */

#endif
