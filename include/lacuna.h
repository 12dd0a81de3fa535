/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Lacuna: what can be resolved around young stars. All of the public C interface. */
#ifndef LACUNA_H
#define LACUNA_H

#include "lacuna/brightness.h"
#include "lacuna/catalogue.h"
#include "lacuna/chain.h"
#include "lacuna/constants.h"
#include "lacuna/disc.h"
#include "lacuna/draws.h"
#include "lacuna/emission.h"
#include "lacuna/dust.h"
#include "lacuna/gap.h"
#include "lacuna/kernels.h"
#include "lacuna/optics.h"
#include "lacuna/orbit.h"
#include "lacuna/photometry.h"
#include "lacuna/plan.h"
#include "lacuna/planck.h"
#include "lacuna/quantity.h"
#include "lacuna/resolution.h"
#include "lacuna/rim.h"
#include "lacuna/sensitivity.h"
#include "lacuna/starlight.h"
#include "lacuna/status.h"
#include "lacuna/units.h"

#endif
