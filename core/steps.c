/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The steps of a pending value: which there are, in what order, what each depends on, and which buffers they share. */
#include "steps.h"

#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include "step_bits.h"

/* ---- the distinct values, arguments first ---- */

static bool listed(const lac_value_list *list, const lac_value *value) {
  return value->mark < list->count && list->value[value->mark] == value;
}

static lac_status append(lac_value_list *list, lac_value *value) {
  if (list->count == list->room) {
    size_t room = list->room ? 2 * list->room : 32;
    lac_value **grown = realloc(list->value, room * sizeof *grown);
    if (!grown) return LAC_NO_MEMORY;
    list->value = grown;
    list->room = room;
  }
  value->mark = list->count;
  list->value[list->count++] = value;
  return LAC_OK;
}

/* Recursion goes no deeper than LAC_MAX_DEPTH. */
lac_status lac_values_below(lac_value *root, lac_value_list *list) {
  if (listed(list, root)) return LAC_OK;
  for (size_t i = 0; i < root->count; i++) {
    lac_status status = lac_values_below(root->argument[i], list);
    if (status != LAC_OK) return status;
  }
  return append(list, root);
}

/* ---- what each step depends on ---- */

/* Loop order: the value's own, with the axis of the blocks moved to the end. */
static void order_axes(const lac_value *root, size_t along, lac_steps *steps, lac_axis **axis) {
  for (size_t i = 0; i < root->axes; i++)
    if (i != along) axis[steps->axes++] = root->axis[i];
  steps->cell_axes = steps->axes;
  if (along != LAC_NO_AXIS) axis[steps->axes++] = root->axis[along];
  steps->cells = steps->inner = 1;
  for (size_t i = 0; i < steps->axes; i++) {
    steps->length[i] = axis[i]->length;
    if (i < steps->cell_axes) steps->cells *= axis[i]->length;
    else steps->inner = axis[i]->length;
  }
  steps->blocks = (steps->inner + LAC_BLOCK - 1) / LAC_BLOCK;
  steps->width = steps->inner < LAC_BLOCK ? lac_whole_lanes(steps->inner) : LAC_BLOCK;
}

static void match_axes(const lac_steps *steps, lac_axis *const *loop, lac_step *step) {
  const lac_value *value = step->value;
  size_t stride = 1;
  step->axes = LAC_FIRST_UNIT;
  for (size_t i = value->axes; i-- > 0; stride *= value->axis[i]->length)
    for (size_t k = 0; k < steps->axes; k++)
      if (strcmp(value->axis[i]->name, loop[k]->name) == 0) {
        step->axes |= 1u << k;
        step->stride[k] = stride;
      }
  step->wide = steps->cell_axes < steps->axes && (step->axes >> steps->cell_axes & 1);
}

/* Which change at (nearly) every unit: their buffers may be shared, as they are always computed anew. */
static bool always_changes(const lac_steps *steps, const lac_step *step) {
  if (steps->cells > 1) return step->axes >> (steps->cell_axes - 1) & 1;
  return step->wide;
}

static size_t weight_of(const lac_value *value) {
  switch (value->kind) {
  case LAC_NODE_DRAWN: return 16;
  case LAC_NODE_COMPUTED: return 2;
  case LAC_NODE_OF_OBJECT: return 64;
  default: return 1;
  }
}

static void link_steps(lac_steps *steps, lac_axis *const *loop) {
  for (size_t i = 0; i < steps->count; i++) {
    lac_step *step = &steps->step[i];
    match_axes(steps, loop, step);
    step->last_use = i;
    for (size_t k = 0; k < step->value->count; k++) {
      lac_step *argument = &steps->step[step->value->argument[k]->mark];
      step->argument[k] = step->value->argument[k]->mark;
      argument->last_use = i;
      if (step->wide && !argument->wide) argument->spread_out = true;
    }
    if (always_changes(steps, step)) {
      step->axes |= LAC_EVERY_UNIT;
      if (step->wide) steps->weight += weight_of(step->value);
    }
  }
  steps->step[steps->count - 1].last_use = steps->count;
}

/* ---- which buffer each block stands in ---- */

/* Those computed at every unit pass buffers on after their last use; the others keep their own. A buffer is given back only after
   the step that reads it last has taken its own, as no output may overlap an argument. */
static lac_status share_buffers(lac_steps *steps) {
  size_t *free_buffer = malloc(2 * steps->count * sizeof *free_buffer), free_count = 0;
  if (!free_buffer) return LAC_NO_MEMORY;
  for (size_t i = 0; i < steps->count; i++) {
    lac_step *step = &steps->step[i];
    if (step->wide || step->spread_out) {
      const bool passes = (step->axes & LAC_EVERY_UNIT) != 0;
      step->buffer = passes && free_count > 0 ? free_buffer[--free_count] : steps->buffers++;
    }
    for (size_t k = 0; k < step->value->count; k++) {
      lac_step *argument = &steps->step[step->argument[k]];
      if (argument->last_use != i || !(argument->axes & LAC_EVERY_UNIT) || !(argument->wide || argument->spread_out)) continue;
      free_buffer[free_count++] = argument->buffer;
      argument->last_use = SIZE_MAX; /* an argument may stand twice */
    }
  }
  free(free_buffer);
  return LAC_OK;
}

/* Each value is kept: a user's function may store one of them meanwhile, and with that drop its arguments. */
lac_status lac_steps_make(lac_value *root, size_t along, lac_steps *steps) {
  memset(steps, 0, sizeof *steps);
  lac_value_list list = {0};
  lac_axis *loop[LAC_MAX_AXES];
  lac_status status = lac_values_below(root, &list);
  if (status == LAC_OK) {
    steps->step = calloc(list.count, sizeof *steps->step);
    if (steps->step) steps->count = list.count;
    else status = LAC_NO_MEMORY;
  }
  if (status == LAC_OK) {
    for (size_t i = 0; i < list.count; i++) steps->step[i].value = lac_value_keep(list.value[i]);
    order_axes(root, along, steps, loop);
    link_steps(steps, loop);
    status = share_buffers(steps);
  }
  free(list.value);
  if (status != LAC_OK) lac_steps_free(steps);
  return status;
}

void lac_steps_free(lac_steps *steps) {
  for (size_t i = 0; i < steps->count; i++) lac_value_drop(steps->step[i].value);
  free(steps->step);
  memset(steps, 0, sizeof *steps);
}
