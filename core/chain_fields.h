/* SPDX-License-Identifier: GPL-3.0-or-later */
/* What a settled chain holds. */
#ifndef LACUNA_CORE_CHAIN_FIELDS_H
#define LACUNA_CORE_CHAIN_FIELDS_H

#include "lacuna/chain.h"

struct lac_chain {
  const lac_catalogue *catalogue;
  int names, had;
  bool at_once;
  int *row;      /* of each name */
  int *order;    /* the had names, each after all it follows from */
  int *position; /* of each name in order; had where it isn't there */
};

#endif
