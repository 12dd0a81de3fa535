/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The list of constants as data. */
#include "lacuna/constants.h"

static const lac_constant constants[] = {
#define LAC_CONSTANT_ROW(name, value, unit, source) {#name, value, unit, source},
    LAC_CONSTANT_LIST(LAC_CONSTANT_ROW)
#undef LAC_CONSTANT_ROW
};

const lac_constant *lac_constant_at(size_t index) {
  return index < sizeof constants / sizeof constants[0] ? &constants[index] : NULL;
}
