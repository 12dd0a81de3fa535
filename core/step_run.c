/* SPDX-License-Identifier: GPL-3.0-or-later */
/* The evaluation of steps, unit by unit, on one thread or several. Units are dealt to threads in contiguous runs; which thread
   computes a unit changes nothing in it. */
#include <math.h>
#include <stdatomic.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#ifdef _OPENMP
#include <omp.h>
#endif

#include "clones.h"
#include "step_bits.h"

/* Below this much work (weight times elements, 0.2 to 0.5 ms) threads give little, and cost a time slice of some milliseconds each time
   another program wants their processor. */
enum { WORTH_SHARING = 1 << 21, MAX_STREAMS = 4, CACHE_LINE = 64 / sizeof(double) };

/* What one thread works with. */
typedef struct {
  const lac_steps *steps;
  double *single;    /* LAC_LANES equal elements for each narrow step */
  double *buffer;    /* blocks */
  size_t spacing;    /* from buffer to buffer */
  const double **at; /* where each step's block stands now */
  double *into;      /* where the root's block is wanted, or NULL */
  size_t index[LAC_MAX_AXES], n, padded;
  size_t streams;                   /* stored blocks that are read where they stand, */
  const double *ahead[MAX_STREAMS]; /* and what follows each */
  bool started, failed;
} thread_lane;

/* ---- one step ---- */

LAC_CLONES static void clip(size_t n, double *restrict out, const double *restrict x, lac_range range) {
  const int low = range.low_included, high = range.high_included;
  for (size_t i = 0; i < n; i++) {
    const int in_range = ((x[i] > range.low) | (low & (x[i] == range.low))) & ((x[i] < range.high) | (high & (x[i] == range.high)));
    out[i] = in_range ? x[i] : (double)NAN;
  }
}

LAC_CLONES static void fill(double *out, size_t n, double value) {
  for (size_t i = 0; i < n; i++) out[i] = value;
}

/* An object's function may be dear, and has no lanes: it gets no more elements than are wanted. */
static void of_object(const lac_value *value, size_t n, double *out, const double *const *in) {
  value->of.of_object.function(lac_value_object_pointer(value->of.of_object.object), n, out, in);
}

static size_t place(const thread_lane *lane, const lac_step *step) {
  size_t offset = 0;
  for (size_t k = 0; k < lane->steps->axes; k++) offset += lane->index[k] * step->stride[k];
  return offset;
}

static double *block_of(const thread_lane *lane, const lac_step *step) { return lane->buffer + step->buffer * lane->spacing; }

/* A step that doesn't depend on the axis of the blocks. */
static void take_single(thread_lane *lane, size_t i) {
  const lac_step *step = &lane->steps->step[i];
  const lac_value *value = step->value;
  const double *in[LAC_MAX_ARGUMENTS];
  double *out = lane->single + i * LAC_LANES, draw;
  for (size_t k = 0; k < value->count; k++) in[k] = lane->single + step->argument[k] * LAC_LANES;
  switch (value->kind) {
  case LAC_NODE_NUMBER: fill(out, LAC_LANES, value->of.number); break;
  case LAC_NODE_STORED: fill(out, LAC_LANES, value->of.stored.data[place(lane, step)]); break;
  case LAC_NODE_DRAWN:
    lac_draws(&value->of.spread, place(lane, step), 1, &draw);
    fill(out, LAC_LANES, draw);
    break;
  case LAC_NODE_CLIPPED: clip(LAC_LANES, out, in[0], value->of.range); break;
  case LAC_NODE_COMPUTED: value->of.block(LAC_LANES, out, in); break;
  case LAC_NODE_OF_OBJECT:
    of_object(value, 1, out, in);
    fill(out, LAC_LANES, out[0]);
    break;
  case LAC_NODE_OBJECT: break; /* no step: rows hold their object themselves */
  case LAC_NODE_CALLED:
    if (value->of.call.function(value->of.call.context, 1, out, in) != 0) lane->failed = true;
    fill(out, LAC_LANES, out[0]);
    break;
  }
  if (!step->spread_out) return;
  fill(block_of(lane, step), lane->padded, out[0]);
  lane->at[i] = block_of(lane, step);
}

/* Memory is idle while a block goes through its steps, and the processor while the next one comes from memory. So the next unit's
   elements are asked for meanwhile, a slice of them before each step; a wrong guess costs nothing but that. */
static void look_ahead(const thread_lane *lane, size_t i) {
  const size_t count = lane->steps->count;
  const size_t from = lane->n * i / count / CACHE_LINE * CACHE_LINE, to = lane->n * (i + 1) / count / CACHE_LINE * CACHE_LINE;
  for (size_t k = 0; k < lane->streams; k++)
    for (size_t j = from; j < to; j += CACHE_LINE) __builtin_prefetch(lane->ahead[k] + j, 0, 2);
  if (lane->into)
    for (size_t j = from; j < to; j += CACHE_LINE) __builtin_prefetch(lane->into + lane->n + j, 1, 2);
}

/* Stored elements are read where they stand if they are contiguous and whole lanes. */
static const double *stored_block(thread_lane *lane, const lac_step *step, double *out) {
  const double *data = step->value->of.stored.data + place(lane, step);
  const size_t stride = step->stride[lane->steps->cell_axes];
  if (stride == 1 && lane->n == lane->padded) {
    if (lane->streams < MAX_STREAMS && lane->index[lane->steps->cell_axes] + lane->n < lane->steps->inner)
      lane->ahead[lane->streams++] = data + lane->n;
    return data;
  }
  for (size_t j = 0; j < lane->n; j++) out[j] = data[j * stride];
  return out;
}

static void take_block(thread_lane *lane, size_t i) {
  const lac_step *step = &lane->steps->step[i];
  const lac_value *value = step->value;
  const bool straight = lane->into && i == lane->steps->count - 1 && lane->n == lane->padded;
  double *out = straight ? lane->into : block_of(lane, step);
  const double *in[LAC_MAX_ARGUMENTS];
  for (size_t k = 0; k < value->count; k++) in[k] = lane->at[step->argument[k]];
  lane->at[i] = out;
  switch (value->kind) {
  case LAC_NODE_STORED: lane->at[i] = stored_block(lane, step, out); break;
  case LAC_NODE_DRAWN: lac_draws(&value->of.spread, place(lane, step), lane->n, out); break;
  case LAC_NODE_CLIPPED: clip(lane->padded, out, in[0], value->of.range); break;
  case LAC_NODE_COMPUTED: value->of.block(lane->padded, out, in); break;
  case LAC_NODE_OF_OBJECT: of_object(value, lane->n, out, in); break;
  default: break; /* a number has no axis, calls are settled before */
  }
}

/* ---- one unit ---- */

/* Goes to a unit. Returned: the bits of what has changed. */
static unsigned move_to(thread_lane *lane, size_t cell, size_t first) {
  const lac_steps *steps = lane->steps;
  unsigned changed = LAC_EVERY_UNIT | (lane->started ? 0 : LAC_FIRST_UNIT);
  for (size_t a = steps->cell_axes; a-- > 0; cell /= steps->length[a]) {
    const size_t index = cell % steps->length[a];
    if (index != lane->index[a]) changed |= 1u << a;
    lane->index[a] = index;
  }
  if (steps->cell_axes < steps->axes) {
    if (first != lane->index[steps->cell_axes]) changed |= 1u << steps->cell_axes;
    lane->index[steps->cell_axes] = first;
  }
  lane->started = true;
  lane->n = steps->inner - first < LAC_BLOCK ? steps->inner - first : LAC_BLOCK;
  lane->padded = lac_whole_lanes(lane->n);
  return changed;
}

static const double *evaluate(thread_lane *lane, size_t cell, size_t first) {
  const lac_steps *steps = lane->steps;
  const unsigned changed = move_to(lane, cell, first);
  const bool more = first + lane->n < steps->inner;
  lane->streams = 0;
  for (size_t i = 0; i < steps->count; i++) {
    if (more) look_ahead(lane, i);
    if (!(steps->step[i].axes & changed)) continue;
    if (steps->step[i].wide) take_block(lane, i);
    else take_single(lane, i);
  }
  const lac_step *root = &steps->step[steps->count - 1];
  return root->wide ? lane->at[steps->count - 1] : lane->single + (steps->count - 1) * LAC_LANES;
}

/* ---- many units, on many threads ---- */

typedef struct {
  lac_work *work;
  const lac_steps *steps;
  const lac_run *run;
  thread_lane *lanes;
  atomic_int halted, failed;
} thread_crew;

static bool must_stop(thread_crew *crew, bool calling) {
  if (calling && crew->work->poll && crew->work->poll(crew->work->context)) atomic_store_explicit(&crew->halted, 1, memory_order_relaxed);
  if (crew->work->stop) atomic_store_explicit(&crew->halted, 1, memory_order_relaxed);
  return atomic_load_explicit(&crew->halted, memory_order_relaxed) || atomic_load_explicit(&crew->failed, memory_order_relaxed);
}

static void run_share(void *context, int share, bool calling) {
  thread_crew *crew = context;
  const lac_run *run = crew->run;
  thread_lane *lane = &crew->lanes[share];
  const size_t units = crew->steps->blocks * run->cells;
  const size_t end = lac_share_start(units, share + 1, run->shares);
  for (size_t unit = lac_share_start(units, share, run->shares); unit < end; unit++) {
    if (must_stop(crew, calling)) return;
    const size_t block = unit / run->cells, cell = unit % run->cells, first = block * LAC_BLOCK;
    lane->into = run->into ? run->into + cell * crew->steps->inner + first : NULL;
    const double *elements = evaluate(lane, run->first_cell + cell, first);
    if (lane->failed) atomic_store(&crew->failed, 1);
    else if (run->take) run->take(run->context, share, run->first_cell + cell, block, lane->n, elements);
    else if (elements != lane->into) memcpy(lane->into, elements, lane->n * sizeof(double));
  }
}

/* One piece of memory for each thread, so that no two write to one cache line. Buffers are a cache line apart from whole pages, or
   loads would wait for stores to the same place in another page. */
static lac_status start_lane(thread_lane *lane, const lac_steps *steps) {
  memset(lane, 0, sizeof *lane);
  lane->steps = steps;
  lane->spacing = steps->width + 8;
  size_t bytes = (steps->count * LAC_LANES + steps->buffers * lane->spacing) * sizeof(double) + steps->count * sizeof *lane->at;
  bytes = (bytes + 63) / 64 * 64;
  lane->single = aligned_alloc(64, bytes);
  if (!lane->single) return LAC_NO_MEMORY;
  memset(lane->single, 0, bytes);
  lane->buffer = lane->single + steps->count * LAC_LANES;
  lane->at = (const double **)(void *)(lane->buffer + steps->buffers * lane->spacing);
  return LAC_OK;
}

lac_status lac_steps_run(lac_work *work, const lac_steps *steps, const lac_run *run) {
  thread_crew crew = {.work = work, .steps = steps, .run = run, .lanes = calloc((size_t)run->shares, sizeof(thread_lane))};
  lac_status status = crew.lanes ? LAC_OK : LAC_NO_MEMORY;
  for (int i = 0; i < run->shares && status == LAC_OK; i++) status = start_lane(&crew.lanes[i], steps);
  if (status == LAC_OK) {
    lac_in_shares(run->shares, run_share, &crew);
    if (atomic_load(&crew.failed)) status = LAC_CALLBACK_FAILED;
    else if (atomic_load(&crew.halted)) status = LAC_INTERRUPTED;
  }
  for (int i = 0; crew.lanes && i < run->shares; i++) free(crew.lanes[i].single);
  free(crew.lanes);
  return status;
}

int lac_steps_shares(const lac_work *work, const lac_steps *steps, size_t cells) {
  const size_t units = steps->blocks * cells, elements = cells > SIZE_MAX / steps->inner ? SIZE_MAX : cells * steps->inner;
  if (work->threads <= 1 || units <= 1 || elements < WORTH_SHARING / (steps->weight + 1)) return 1;
  return units < (size_t)work->threads ? (int)units : work->threads;
}

#ifdef _OPENMP
void lac_in_shares(int shares, lac_share_task *task, void *context) {
  if (shares == 1) {
    task(context, 0, true);
    return;
  }
#pragma omp parallel num_threads(shares)
  for (int share = omp_get_thread_num(); share < shares; share += omp_get_num_threads()) task(context, share, omp_get_thread_num() == 0);
}
#else
void lac_in_shares(int shares, lac_share_task *task, void *context) {
  for (int share = 0; share < shares; share++) task(context, share, true);
}
#endif
