/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The ranges of the glossary, read from their short notation. */
#ifndef LACUNA_CORE_RANGE_H
#define LACUNA_CORE_RANGE_H

#include "lacuna/catalogue.h"

/* Reads "any", "> a", ">= a", "a .. b", "> a .. b", "a .. < b", "> a .. < b". A number is in SI units, or has a unit of the dimension.
   Returned: LAC_OK, or LAC_BAD_SYNTAX. */
lac_status lac_range_read(const char *text, lac_dimension dimension, lac_range *range);

/* A single value as it stands in a table, without an error bar: in SI units, or with a unit of the dimension.
   Returned: LAC_OK, LAC_BAD_SYNTAX, LAC_UNKNOWN_UNIT, LAC_WRONG_DIMENSION. */
lac_status lac_table_value(const char *text, size_t length, lac_dimension dimension, double *value);

#endif
