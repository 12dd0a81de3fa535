/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Axes, and values as nodes of an expression. A node's axes stand in one order, by length, so that the longest is contiguous in
   memory, and so that the axes of any node are a subsequence of those of whatever is made from it. */
#include "lacuna/quantity.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "value.h"

/* ---- axes ---- */

lac_status lac_axis_new(const char *name, size_t length, const double *coordinates, lac_axis **axis) {
  *axis = NULL;
  if (length == 0 || length > SIZE_MAX / sizeof(double) || strlen(name) >= sizeof(*axis)->name) return LAC_OUT_OF_RANGE;
  lac_axis *made = calloc(1, sizeof *made);
  if (!made) return LAC_NO_MEMORY;
  made->references = 1;
  made->length = length;
  strcpy(made->name, name);
  if (coordinates) {
    made->coordinates = malloc(length * sizeof(double));
    if (!made->coordinates) {
      free(made);
      return LAC_NO_MEMORY;
    }
    memcpy(made->coordinates, coordinates, length * sizeof(double));
  }
  *axis = made;
  return LAC_OK;
}

lac_axis *lac_axis_keep(lac_axis *axis) {
  axis->references++;
  return axis;
}

void lac_axis_drop(lac_axis *axis) {
  if (!axis || --axis->references > 0) return;
  free(axis->coordinates);
  free(axis);
}

int lac_axis_same(const lac_axis *a, const lac_axis *b) {
  if (a == b) return 1;
  if (strcmp(a->name, b->name) != 0 || a->length != b->length || !a->coordinates != !b->coordinates) return 0;
  return !a->coordinates || memcmp(a->coordinates, b->coordinates, a->length * sizeof(double)) == 0;
}

/* Storage order: by length, draw last among equals, then by name. */
static int stands_before(const lac_axis *a, const lac_axis *b) {
  if (a->length != b->length) return a->length < b->length;
  const int a_draw = strcmp(a->name, "draw") == 0, b_draw = strcmp(b->name, "draw") == 0;
  return a_draw != b_draw ? b_draw : strcmp(a->name, b->name) < 0;
}

/* ---- nodes ---- */

static lac_value *node(lac_node_kind kind, size_t count) {
  lac_value *value = calloc(1, sizeof *value + count * sizeof value->argument[0]);
  if (!value) return NULL;
  value->references = 1;
  value->size = 1;
  value->kind = kind;
  return value;
}

static lac_status add_axis(lac_value *value, lac_axis *axis) {
  for (size_t i = 0; i < value->axes; i++)
    if (strcmp(value->axis[i]->name, axis->name) == 0) return lac_axis_same(value->axis[i], axis) ? LAC_OK : LAC_AXES_DIFFER;
  if (value->axes == LAC_MAX_AXES) return LAC_TOO_MANY;
  size_t at = value->axes++;
  for (; at > 0 && stands_before(axis, value->axis[at - 1]); at--) value->axis[at] = value->axis[at - 1];
  value->axis[at] = lac_axis_keep(axis);
  value->size = value->size > SIZE_MAX / axis->length ? SIZE_MAX : value->size * axis->length;
  return LAC_OK;
}

static lac_status add_argument(lac_value *value, lac_value *argument) {
  value->argument[value->count++] = lac_value_keep(argument);
  if (argument->depth + 1 > value->depth) value->depth = argument->depth + 1;
  if (value->depth > LAC_MAX_DEPTH) return LAC_TOO_MANY;
  for (size_t i = 0; i < argument->axes; i++) {
    lac_status status = add_axis(value, argument->axis[i]);
    if (status != LAC_OK) return status;
  }
  return LAC_OK;
}

/* A pending node over its arguments, without its function yet. */
static lac_status pending(lac_node_kind kind, size_t count, lac_value *const *arguments, lac_value **value) {
  *value = NULL;
  if (count > LAC_MAX_ARGUMENTS) return LAC_TOO_MANY;
  lac_value *made = node(kind, count);
  if (!made) return LAC_NO_MEMORY;
  for (size_t i = 0; i < count; i++) {
    lac_status status = add_argument(made, arguments[i]);
    if (status != LAC_OK) {
      lac_value_drop(made);
      return status;
    }
  }
  *value = made;
  return LAC_OK;
}

lac_value *lac_value_keep(lac_value *value) {
  value->references++;
  return value;
}

/* The coordinates of an axis serve as the elements of its own value: the axis owns them. */
static int borrows_from_axis(const lac_value *value) { return value->axes == 1 && value->of.stored.data == value->axis[0]->coordinates; }

static void drop_contents(lac_value *value) {
  if (value->kind == LAC_NODE_STORED && !borrows_from_axis(value)) lac_buffer_give(&value->of.stored);
  if (value->kind == LAC_NODE_OBJECT) value->of.object.drop(value->of.object.pointer);
  if (value->kind == LAC_NODE_OF_OBJECT) lac_value_drop(value->of.of_object.object);
  if (value->kind == LAC_NODE_DRAWN) free((void *)(uintptr_t)value->of.spread.samples);
  while (value->count > 0) lac_value_drop(value->argument[--value->count]);
}

/* Recursion goes no deeper than LAC_MAX_DEPTH. */
void lac_value_drop(lac_value *value) {
  if (!value || --value->references > 0) return;
  drop_contents(value);
  for (size_t i = 0; i < value->axes; i++) lac_axis_drop(value->axis[i]);
  free(value);
}

void lac_value_settle(lac_value *value, lac_buffer buffer) {
  drop_contents(value);
  value->kind = LAC_NODE_STORED;
  value->depth = 0;
  value->of.stored = buffer;
}

/* ---- makers ---- */

lac_status lac_value_number(double number, lac_value **value) {
  *value = node(LAC_NODE_NUMBER, 0);
  if (!*value) return LAC_NO_MEMORY;
  (*value)->of.number = number;
  return LAC_OK;
}

lac_status lac_value_blank(lac_work *work, size_t axes, lac_axis *const *axis, lac_value **value) {
  if (axes == 0) return lac_value_number(NAN, value);
  *value = NULL;
  lac_value *made = node(LAC_NODE_STORED, 0);
  if (!made) return LAC_NO_MEMORY;
  lac_status status = axes > LAC_MAX_AXES ? LAC_TOO_MANY : LAC_OK;
  for (size_t i = 0; i < axes && status == LAC_OK; i++) status = add_axis(made, axis[i]);
  if (status == LAC_OK && made->axes < axes) status = LAC_DUPLICATE;
  if (status == LAC_OK) status = lac_buffer_take(work, made->size, &made->of.stored);
  if (status != LAC_OK) {
    lac_value_drop(made);
    return status;
  }
  *value = made;
  return LAC_OK;
}

double *lac_value_elements(lac_value *value) { return value->kind == LAC_NODE_NUMBER ? &value->of.number : value->of.stored.data; }

/* Copies data from the caller's order of axes into storage order. */
static void arrange(lac_value *value, size_t axes, lac_axis *const *axis, const double *data) {
  size_t stride[LAC_MAX_AXES] = {0}, index[LAC_MAX_AXES] = {0};
  for (size_t i = axes, step = 1; i-- > 0; step *= axis[i]->length)
    for (size_t k = 0; k < axes; k++)
      if (value->axis[k] == axis[i]) stride[k] = step;
  size_t from = 0;
  for (size_t to = 0; to < value->size; to++) {
    value->of.stored.data[to] = data[from];
    for (size_t k = axes; k-- > 0;) {
      from += stride[k];
      if (++index[k] < value->axis[k]->length) break;
      from -= stride[k] * index[k];
      index[k] = 0;
    }
  }
}

lac_status lac_value_array(size_t axes, lac_axis *const *axis, const double *data, lac_value **value) {
  lac_status status = lac_value_blank(NULL, axes, axis, value);
  if (status != LAC_OK) return status;
  if (axes == 0) (*value)->of.number = data[0];
  else arrange(*value, axes, axis, data);
  return LAC_OK;
}

lac_status lac_value_swept(lac_axis *axis, lac_value **value) {
  *value = NULL;
  if (!axis->coordinates) return LAC_OUT_OF_RANGE;
  lac_value *made = node(LAC_NODE_STORED, 0);
  if (!made) return LAC_NO_MEMORY;
  made->of.stored = (lac_buffer){.data = axis->coordinates};
  lac_status status = add_axis(made, axis);
  if (status != LAC_OK) {
    made->of.stored.data = NULL;
    lac_value_drop(made);
    return status;
  }
  *value = made;
  return LAC_OK;
}

lac_status lac_value_drawn(lac_axis *draw, const lac_spread *spread, lac_value **value) {
  *value = NULL;
  lac_status status = lac_spread_check(spread);
  if (status != LAC_OK) return status;
  lac_value *made = node(LAC_NODE_DRAWN, 0);
  if (!made) return LAC_NO_MEMORY;
  made->depth = 1;
  made->of.spread = *spread;
  made->of.spread.samples = NULL;
  add_axis(made, draw);
  if (spread->kind == LAC_SAMPLES) {
    double *samples = malloc(spread->count * sizeof(double));
    if (!samples) {
      lac_value_drop(made);
      return LAC_NO_MEMORY;
    }
    memcpy(samples, spread->samples, spread->count * sizeof(double));
    made->of.spread.samples = samples;
  }
  *value = made;
  return LAC_OK;
}

lac_status lac_value_clipped(lac_value *of, lac_range range, lac_value **value) {
  if (of->kind == LAC_NODE_NUMBER) return lac_value_number(lac_range_holds(range, of->of.number) ? of->of.number : NAN, value);
  lac_status status = pending(LAC_NODE_CLIPPED, 1, &of, value);
  if (status == LAC_OK) (*value)->of.range = range;
  return status;
}

/* Whether all arguments are numbers; in[] points at them then. */
static int all_numbers(size_t count, lac_value *const *arguments, const double **in) {
  if (count > LAC_MAX_ARGUMENTS) return 0;
  for (size_t i = 0; i < count; i++) {
    if (arguments[i]->kind != LAC_NODE_NUMBER) return 0;
    in[i] = &arguments[i]->of.number;
  }
  return 1;
}

lac_status lac_value_computed(lac_block_function *block, size_t count, lac_value *const *arguments, lac_value **value) {
  const double *in[LAC_MAX_ARGUMENTS];
  if (all_numbers(count, arguments, in)) {
    double number = NAN;
    block(1, &number, in);
    return lac_value_number(number, value);
  }
  lac_status status = pending(LAC_NODE_COMPUTED, count, arguments, value);
  if (status == LAC_OK) (*value)->of.block = block;
  return status;
}

lac_status lac_value_scaled(lac_block_function *shape, size_t count, lac_value *const *arguments, lac_value **value) {
  *value = NULL;
  if (count < 1) return LAC_OUT_OF_RANGE;
  lac_value *factor = NULL;
  lac_status status = lac_value_computed(shape, count - 1, arguments + 1, &factor);
  if (status != LAC_OK) return status;
  status = lac_value_computed(lac_block_scaled, 2, (lac_value *[]){arguments[0], factor}, value);
  lac_value_drop(factor);
  return status;
}

lac_status lac_value_object(const void *object, void (*drop)(const void *object), lac_value **value) {
  *value = node(LAC_NODE_OBJECT, 0);
  if (!*value) {
    drop(object);
    return LAC_NO_MEMORY;
  }
  (*value)->of.object.pointer = object;
  (*value)->of.object.drop = drop;
  return LAC_OK;
}

lac_status lac_value_of_object(lac_object_function *function, lac_value *object, size_t count, lac_value *const *arguments,
                               lac_value **value) {
  const double *in[LAC_MAX_ARGUMENTS];
  *value = NULL;
  if (object->kind != LAC_NODE_OBJECT) return LAC_NOT_HAD;
  if (all_numbers(count, arguments, in)) {
    double number = NAN;
    function(object->of.object.pointer, 1, &number, in);
    return lac_value_number(number, value);
  }
  lac_status status = pending(LAC_NODE_OF_OBJECT, count, arguments, value);
  if (status != LAC_OK) return status;
  (*value)->of.of_object.function = function;
  (*value)->of.of_object.object = lac_value_keep(object);
  return LAC_OK;
}

lac_status lac_value_called(lac_user_function *call, void *context, size_t count, lac_value *const *arguments, lac_value **value) {
  const double *in[LAC_MAX_ARGUMENTS];
  *value = NULL;
  if (all_numbers(count, arguments, in)) {
    double number = NAN;
    if (call(context, 1, &number, in) != 0) return LAC_CALLBACK_FAILED;
    return lac_value_number(number, value);
  }
  lac_status status = pending(LAC_NODE_CALLED, count, arguments, value);
  if (status != LAC_OK) return status;
  (*value)->of.call.function = call;
  (*value)->of.call.context = context;
  return LAC_OK;
}

/* ---- facts ---- */

size_t lac_value_axes(const lac_value *value) { return value->axes; }

lac_axis *lac_value_axis(const lac_value *value, size_t index) { return index < value->axes ? value->axis[index] : NULL; }

size_t lac_value_size(const lac_value *value) { return value->size; }

double lac_value_as_number(const lac_value *value) { return value->kind == LAC_NODE_NUMBER ? value->of.number : (double)NAN; }

size_t lac_value_depth(const lac_value *value) { return value->depth; }

const double *lac_value_data(const lac_value *value) { return value->kind == LAC_NODE_STORED ? value->of.stored.data : NULL; }

const void *lac_value_object_pointer(const lac_value *value) { return value->kind == LAC_NODE_OBJECT ? value->of.object.pointer : NULL; }
