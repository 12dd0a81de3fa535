/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A case: its givens' values, the chain that leads from them, and the values derived so far. */
#ifndef LACUNA_BINDING_CASE_H
#define LACUNA_BINDING_CASE_H

#include "binding.h"

typedef struct {
  uint64_t tag;
  int names, rows;      /* of the catalogue when the chain was settled; a user may add to it later */
  const lac_chain *chain; /* anchored as user value 1 */
  lac_value **values;   /* by id: the givens' and those derived so far; one reference each */
  bool *given;          /* by id */
  bool *asked;          /* by id: what the user has asked for, among what was derived on the way to it */
  bool remembers;       /* whether all its answers know their case, not verdicts and lengths alone */
} lac_case;

/* The case at index, its chain settled anew where the catalogue has grown; raises if it is none. */
lac_case *lac_check_case(lua_State *L, int index);

#endif
