/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The inside of a value, shared by the files that make, store and fold values: an immutable node of
   an expression, which changes once at most, from pending to stored. And the buffers it is stored in. */
#ifndef LACUNA_CORE_VALUE_H
#define LACUNA_CORE_VALUE_H

#include "lacuna/plan.h"
#include "lacuna/quantity.h"

/* Memory for elements. work is whose bytes it counts among, NULL for what a caller brought along. */
typedef struct {
  double *data;
  size_t bytes;
  lac_work *work;
} lac_buffer;

/* Room for elements, uninitialised. With a work: LAC_OVER_CAP before anything is allocated (work->wanted says the bytes). LAC_NO_MEMORY. */
lac_status lac_buffer_take(lac_work *work, size_t elements, lac_buffer *buffer);
void lac_buffer_give(lac_buffer *buffer);

typedef enum {
  LAC_NODE_NUMBER,
  LAC_NODE_STORED,
  LAC_NODE_OBJECT,
  LAC_NODE_DRAWN,
  LAC_NODE_CLIPPED,
  LAC_NODE_COMPUTED,
  LAC_NODE_OF_OBJECT,
  LAC_NODE_CALLED
} lac_node_kind;

struct lac_value {
  size_t references;
  size_t depth; /* of the pending expression; 0 for numbers and stored values */
  size_t size;  /* SIZE_MAX where the product of the lengths overflows */
  size_t mark;  /* its place in the list that is being made (valid if that place holds this value) */
  size_t axes;
  lac_axis *axis[LAC_MAX_AXES]; /* in storage order */
  lac_node_kind kind;
  union {
    double number;
    lac_buffer stored;
    lac_spread spread; /* its samples are owned */
    lac_range range;
    lac_block_function *block;
    struct {
      const void *pointer;
      void (*drop)(const void *pointer);
    } object;
    struct {
      lac_object_function *function;
      lac_value *object;
    } of_object;
    struct {
      lac_user_function *function;
      void *context;
    } call;
  } of;
  size_t count;
  lac_value *argument[];
};

/* Argument 0 times argument 1; NaN where argument 0 is not > 0. */
lac_block_function lac_block_scaled;

/* An array value over axes in storage order, its elements not yet written: the caller fills (*value)->of.stored.data.
   A number (NaN) where there are no axes. */
lac_status lac_value_blank(lac_work *work, size_t axes, lac_axis *const *axis, lac_value **value);
/* Where the elements of a number or a stored value stand, to be written by who made it. */
double *lac_value_elements(lac_value *value);

/* Makes a pending value a stored one: the buffer is its own from now on, its arguments are dropped. */
void lac_value_settle(lac_value *value, lac_buffer buffer);

#endif
