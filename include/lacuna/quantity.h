/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Values: a number, or one number for each point of one axis or several. Axes have names; values
   combine axis by axis, matched by name. A value with axes stays pending (as the expression that gives it) until it is needed. */
#ifndef LACUNA_QUANTITY_H
#define LACUNA_QUANTITY_H

#include <stddef.h>

#include "lacuna/catalogue.h"
#include "lacuna/draws.h"
#include "lacuna/status.h"

#ifdef __cplusplus
extern "C" {
#endif

enum { LAC_MAX_AXES = 6, LAC_MAX_DEPTH = 256 };

/* An axis: its name, its length and (except draw's) its coordinates, SI. Shared and immutable; not for several threads at once. */
typedef struct lac_axis {
  size_t references, length;
  double *coordinates; /* NULL for draw */
  char name[LAC_MAX_NAME + 1];
} lac_axis;

typedef struct lac_value lac_value;

/* New axis. Coordinates are copied (NULL: none). LAC_NO_MEMORY; LAC_OUT_OF_RANGE for length 0 or a name too long. */
lac_status lac_axis_new(const char *name, size_t length, const double *coordinates, lac_axis **axis);
lac_axis *lac_axis_keep(lac_axis *axis);
void lac_axis_drop(lac_axis *axis);
/* Whether two axes of one name are the same: length and coordinates. */
int lac_axis_same(const lac_axis *a, const lac_axis *b);

/* Makers; each result holds one reference, given back by lac_value_drop. Axes and arguments are kept by the value.
   lac_value_array: one element for each point of the axes, copied; data in the order in which the axes are given, the last one
   contiguous (the coordinates of an axis are free to differ from the data along it). No axes: the number data[0].
   lac_value_swept: an axis's own coordinates, not copied; LAC_OUT_OF_RANGE if it has none.
   lac_value_drawn: a spread along the axis draw; samples are copied.
   lac_value_clipped: out-of-range elements become NaN (undefined).
   lac_value_computed: a block function of count arguments.
   lac_value_scaled: argument 0 times shape(the other arguments), undefined where argument 0 is not > 0; shape is evaluated over the
   axes of its own arguments alone.
   lac_value_object: an object, taken over: drop is called when its last reference goes (also where an error is returned).
   lac_value_of_object: a function of an object and count arguments.
   lac_value_called: a user's function, elementwise, on the calling thread, in pieces; context must outlive the value.
   Where all arguments are numbers, the result is a number, at once.
   Errors: LAC_NO_MEMORY; LAC_AXES_DIFFER: two arguments have axes of one name that are not the same; LAC_DUPLICATE: an axis given twice;
   LAC_TOO_MANY: more than LAC_MAX_AXES or LAC_MAX_ARGUMENTS, or an expression deeper than LAC_MAX_DEPTH: store the deepest argument
   (lac_plan_store) and try again; LAC_OUT_OF_RANGE: see lac_spread_check; LAC_CALLBACK_FAILED. *value is NULL then. */
lac_status lac_value_number(double number, lac_value **value);
lac_status lac_value_array(size_t axes, lac_axis *const *axis, const double *data, lac_value **value);
lac_status lac_value_swept(lac_axis *axis, lac_value **value);
lac_status lac_value_drawn(lac_axis *draw, const lac_spread *spread, lac_value **value);
lac_status lac_value_clipped(lac_value *of, lac_range range, lac_value **value);
lac_status lac_value_computed(lac_block_function *block, size_t count, lac_value *const *arguments, lac_value **value);
lac_status lac_value_scaled(lac_block_function *shape, size_t count, lac_value *const *arguments, lac_value **value);
lac_status lac_value_object(const void *object, void (*drop)(const void *object), lac_value **value);
lac_status lac_value_of_object(lac_object_function *function, lac_value *object, size_t count, lac_value *const *arguments, lac_value **value);
lac_status lac_value_called(lac_user_function *call, void *context, size_t count, lac_value *const *arguments, lac_value **value);

lac_value *lac_value_keep(lac_value *value);
void lac_value_drop(lac_value *value);

/* Facts: axes in storage order (the longest last, draw last among equals), number of elements, number itself (NaN if it has axes),
   depth of the pending expression, whether it is stored, its data then (else NULL; storage order, last axis contiguous). */
size_t lac_value_axes(const lac_value *value);
lac_axis *lac_value_axis(const lac_value *value, size_t index);
size_t lac_value_size(const lac_value *value); /* SIZE_MAX where the product overflows */
double lac_value_as_number(const lac_value *value);
size_t lac_value_depth(const lac_value *value);
const double *lac_value_data(const lac_value *value);
const void *lac_value_object_pointer(const lac_value *value); /* NULL if it is no object */

/* The elementary block functions that arithmetic is made of. Comparisons, logical words, minimum and maximum are NaN where an
   argument is; logarithms are NaN unless their argument is > 0; otherwise as in C. Angles in radians. */
lac_block_function lac_block_add, lac_block_subtract, lac_block_multiply, lac_block_divide, lac_block_power, lac_block_negate, lac_block_above,
    lac_block_below, lac_block_and, lac_block_or, lac_block_not, lac_block_minimum, lac_block_maximum, lac_block_absolute, lac_block_root,
    lac_block_exp, lac_block_log, lac_block_log10, lac_block_sin, lac_block_cos, lac_block_tan;

#ifdef __cplusplus
}
#endif

#endif
