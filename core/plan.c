/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Storing values, looking at one element, and asking a chain. The steps and their evaluation stand in steps.c and step_run.c. */
#include "lacuna/plan.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "steps.h"

static bool is_pending(const lac_value *value) { return value->kind > LAC_NODE_OBJECT; }

/* ---- users' functions ---- */

/* Elements first ... first + n - 1 of a value, in the storage order of another whose axes include its own. */
static void spread_over(const lac_value *of, const lac_value *over, size_t first, size_t n, double *out) {
  size_t stride[LAC_MAX_AXES] = {0}, index[LAC_MAX_AXES] = {0}, at = 0, step = 1;
  const double *data = of->kind == LAC_NODE_NUMBER ? &of->of.number : of->of.stored.data;
  for (size_t i = of->axes; i-- > 0; step *= of->axis[i]->length)
    for (size_t k = 0; k < over->axes; k++)
      if (strcmp(of->axis[i]->name, over->axis[k]->name) == 0) stride[k] = step;
  for (size_t k = over->axes; k-- > 0; first /= over->axis[k]->length) {
    index[k] = first % over->axis[k]->length;
    at += index[k] * stride[k];
  }
  for (size_t i = 0; i < n; i++) {
    out[i] = data[at];
    for (size_t k = over->axes; k-- > 0;) {
      at += stride[k];
      if (++index[k] < over->axis[k]->length) break;
      at -= stride[k] * index[k];
      index[k] = 0;
    }
  }
}

/* The arguments of a called value, numbers or stored. They are kept: a user's function may itself have the value stored, which drops its
   own. */
typedef struct {
  size_t count;
  lac_value *argument[LAC_MAX_ARGUMENTS];
} call_arguments;

static lac_status store_arguments(lac_work *work, const lac_value *value, call_arguments *kept) {
  lac_status status = LAC_OK;
  for (kept->count = 0; kept->count < value->count; kept->count++) kept->argument[kept->count] = lac_value_keep(value->argument[kept->count]);
  for (size_t k = 0; k < kept->count && status == LAC_OK; k++) status = lac_plan_store(work, kept->argument[k]);
  return status;
}

static lac_status call_in_pieces(lac_work *work, const lac_value *value, const call_arguments *kept, double *pieces, double *out) {
  const double *in[LAC_MAX_ARGUMENTS];
  for (size_t first = 0; first < value->size && value->kind == LAC_NODE_CALLED; first += LAC_PIECE) {
    if (work->stop || (work->poll && work->poll(work->context))) return LAC_INTERRUPTED;
    const size_t n = value->size - first < LAC_PIECE ? value->size - first : LAC_PIECE;
    for (size_t k = 0; k < kept->count; k++) {
      const lac_value *argument = kept->argument[k];
      in[k] = pieces + k * LAC_PIECE;
      if (argument->axes == value->axes) in[k] = argument->of.stored.data + first;
      else spread_over(argument, value, first, n, pieces + k * LAC_PIECE);
    }
    if (value->of.call.function(value->of.call.context, n, out + first, in) != 0) return LAC_CALLBACK_FAILED;
  }
  return LAC_OK;
}

static lac_status call_and_settle(lac_work *work, lac_value *value, const call_arguments *kept) {
  lac_buffer buffer;
  double *pieces = malloc(kept->count * LAC_PIECE * sizeof(double));
  if (!pieces) return LAC_NO_MEMORY;
  lac_status status = lac_buffer_take(work, value->size, &buffer);
  if (status == LAC_OK) {
    status = call_in_pieces(work, value, kept, pieces, buffer.data);
    if (status == LAC_OK && value->kind == LAC_NODE_CALLED) lac_value_settle(value, buffer);
    else lac_buffer_give(&buffer);
  }
  free(pieces);
  return status;
}

static lac_status store_called(lac_work *work, lac_value *value) {
  call_arguments kept;
  lac_status status = store_arguments(work, value, &kept);
  if (status == LAC_OK && value->kind == LAC_NODE_CALLED) status = call_and_settle(work, value, &kept);
  for (size_t k = 0; k < kept.count; k++) lac_value_drop(kept.argument[k]);
  return status;
}

/* The list is kept: a user's function may store values that are still to come, and with that drop their arguments. */
lac_status lac_settle_calls(lac_work *work, lac_value *value) {
  lac_value_list list = {0};
  lac_status status = lac_values_below(value, &list);
  size_t calls = 0;
  for (size_t i = 0; i < list.count && status == LAC_OK; i++)
    if (list.value[i]->kind == LAC_NODE_CALLED) list.value[calls++] = lac_value_keep(list.value[i]);
  for (size_t i = 0; i < calls; i++) {
    if (status == LAC_OK && list.value[i]->kind == LAC_NODE_CALLED) status = store_called(work, list.value[i]);
    lac_value_drop(list.value[i]);
  }
  free(list.value);
  return status;
}

/* ---- storing ---- */

lac_status lac_plan_store(lac_work *work, lac_value *value) {
  lac_status status = lac_settle_calls(work, value);
  if (status != LAC_OK || !is_pending(value)) return status;
  lac_buffer buffer;
  status = lac_buffer_take(work, value->size, &buffer);
  if (status != LAC_OK) return status;
  lac_steps steps;
  status = lac_steps_make(value, value->axes - 1, &steps);
  if (status == LAC_OK) {
    const lac_run run = {.cells = steps.cells, .shares = lac_steps_shares(work, &steps, steps.cells), .into = buffer.data};
    status = lac_steps_run(work, &steps, &run);
    lac_steps_free(&steps);
  }
  if (status == LAC_OK && is_pending(value)) lac_value_settle(value, buffer);
  else lac_buffer_give(&buffer);
  return status;
}

lac_status lac_settle_for_fold(lac_work *work, lac_value *value, const char *axis, size_t *along) {
  *along = LAC_NO_AXIS;
  for (size_t i = 0; i < value->axes; i++)
    if (strcmp(value->axis[i]->name, axis) == 0) *along = i;
  if (*along == LAC_NO_AXIS) return LAC_UNKNOWN_NAME;
  lac_status status = lac_settle_calls(work, value);
  if (status != LAC_OK || value->size > LAC_SMALL) return status;
  status = lac_plan_store(work, value);
  return status == LAC_OVER_CAP ? LAC_OK : status;
}

lac_status lac_value_without(lac_work *work, const lac_value *value, size_t along, lac_value **result) {
  lac_axis *others[LAC_MAX_AXES];
  size_t count = 0;
  for (size_t i = 0; i < value->axes; i++)
    if (i != along) others[count++] = value->axis[i];
  return lac_value_blank(work, count, others, result);
}

/* ---- one element ---- */

lac_status lac_plan_element(lac_work *work, lac_value *value, const size_t *index, double *element) {
  *element = NAN;
  if (value->size == SIZE_MAX) return LAC_TOO_MANY;
  size_t at = 0;
  for (size_t i = 0; i < value->axes; i++) {
    if (index[i] >= value->axis[i]->length) return LAC_OUT_OF_RANGE;
    at = at * value->axis[i]->length + index[i];
  }
  if (!is_pending(value)) {
    *element = lac_value_elements(value)[at];
    return LAC_OK;
  }
  lac_steps steps;
  lac_status status = lac_steps_make(value, LAC_NO_AXIS, &steps);
  if (status != LAC_OK) return status;
  double found = NAN;
  const lac_run run = {.first_cell = at, .cells = 1, .shares = 1, .into = &found};
  status = lac_steps_run(work, &steps, &run);
  if (status == LAC_OK) *element = found;
  lac_steps_free(&steps);
  return status;
}

/* ---- asking a chain ---- */

/* The scalar form, where all inputs are numbers. Returned: whether they are. */
static bool single_value(const lac_relation *relation, size_t count, lac_value *const *arguments, double *number) {
  double single[LAC_MAX_ARGUMENTS];
  for (size_t i = 0; i < count; i++) {
    if (arguments[i]->kind != LAC_NODE_NUMBER) return false;
    single[i] = arguments[i]->of.number;
  }
  *number = lac_relation_value(relation, single);
  return true;
}

static lac_status apply_row(const lac_catalogue *catalogue, int row, lac_value *const *values, lac_value **made) {
  const lac_relation *relation = lac_catalogue_row(catalogue, row);
  if (relation->kind == LAC_ASSUMED) return lac_value_number(lac_catalogue_assumed(catalogue, row), made);
  int count;
  const int *from = lac_catalogue_from(catalogue, row, &count);
  lac_value *arguments[LAC_MAX_ARGUMENTS];
  for (int i = 0; i < count; i++) {
    arguments[i] = values[from[i]];
    if (!arguments[i]) return LAC_NOT_HAD;
  }
  double number;
  if (relation->call) return lac_value_called(relation->call, relation->context, (size_t)count, arguments, made);
  if (relation->of_object) return lac_value_of_object(relation->of_object, arguments[0], (size_t)count - 1, arguments + 1, made);
  if (single_value(relation, (size_t)count, arguments, &number)) return lac_value_number(number, made);
  if (!relation->block) return LAC_NOT_HAD; /* a row of a user's in C, without a form for blocks */
  if (relation->shape) return lac_value_scaled(relation->shape, (size_t)count, arguments, made);
  return lac_value_computed(relation->block, (size_t)count, arguments, made);
}

lac_status lac_plan_ask(const lac_chain *chain, lac_value **values, int id) {
  if (values[id]) return LAC_OK;
  const lac_catalogue *catalogue = lac_chain_catalogue(chain);
  int *ids = malloc((size_t)lac_catalogue_names(catalogue) * sizeof *ids);
  if (!ids) return LAC_NO_MEMORY;
  const int steps = lac_chain_steps(chain, id, ids);
  lac_status status = steps > 0 ? LAC_OK : LAC_NOT_HAD;
  for (int i = 0; i < steps && status == LAC_OK; i++) {
    if (values[ids[i]]) continue;
    const int row = lac_chain_row(chain, ids[i]);
    status = row >= 0 ? apply_row(catalogue, row, values, &values[ids[i]]) : LAC_NOT_HAD;
  }
  free(ids);
  return status;
}
