/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Put before every file of the core by the Makefile: what the public headers declare is exported, all else stays hidden
   (-fvisibility=hidden), also what core files share among themselves. */
#pragma GCC visibility push(default)
#include "lacuna.h"
#pragma GCC visibility pop
