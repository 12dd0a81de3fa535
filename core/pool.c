/* SPDX-License-Identifier: GPL-3.0-or-later */
/* Memory for the elements of values. First touch of fresh pages is dearer than the arithmetic on them, so large blocks ask for
   huge pages, and some are kept for the next request. What values hold together is bounded by the cap. */
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include <sys/mman.h>

#include "value.h"

enum { LARGE = 1 << 20, HUGE_PAGE = 1 << 21, KEPT_BLOCKS = 16, KEPT_BYTES = 1 << 28 };

struct lac_pool {
  size_t count, bytes;
  struct {
    double *data;
    size_t bytes;
  } kept[KEPT_BLOCKS];
};

void lac_work_start(lac_work *work, int threads, size_t cap) {
  memset(work, 0, sizeof *work);
  work->threads = threads > 1 ? threads : 1;
  work->cap = cap;
  work->pool = calloc(1, sizeof *work->pool); /* without one nothing is kept, that is all */
}

static void forget_kept(struct lac_pool *pool) {
  while (pool && pool->count > 0) free(pool->kept[--pool->count].data);
  if (pool) pool->bytes = 0;
}

void lac_work_end(lac_work *work) {
  forget_kept(work->pool);
  free(work->pool);
  work->pool = NULL;
}

static double *fresh(size_t bytes) {
  if (bytes < LARGE) return malloc(bytes);
  double *data = aligned_alloc(HUGE_PAGE, bytes);
#ifdef MADV_HUGEPAGE
  if (data) madvise(data, bytes, MADV_HUGEPAGE);
#endif
  return data;
}

/* A kept block that is large enough, and no more than a quarter too large. */
static double *reused(struct lac_pool *pool, size_t *bytes) {
  if (!pool || *bytes < LARGE) return NULL;
  size_t best = pool->count;
  for (size_t i = 0; i < pool->count; i++) {
    size_t size = pool->kept[i].bytes;
    if (size >= *bytes && size - *bytes <= *bytes / 4 && (best == pool->count || size < pool->kept[best].bytes)) best = i;
  }
  if (best == pool->count) return NULL;
  double *data = pool->kept[best].data;
  *bytes = pool->kept[best].bytes;
  pool->bytes -= *bytes;
  pool->kept[best] = pool->kept[--pool->count];
  return data;
}

static size_t rounded(size_t elements) {
  if (elements > (SIZE_MAX - HUGE_PAGE) / sizeof(double)) return SIZE_MAX;
  size_t bytes = elements * sizeof(double);
  return bytes < LARGE ? bytes : (bytes + HUGE_PAGE - 1) / HUGE_PAGE * HUGE_PAGE;
}

static int over_cap(const lac_work *work, size_t bytes) { return work->used > work->cap || bytes > work->cap - work->used; }

lac_status lac_buffer_take(lac_work *work, size_t elements, lac_buffer *buffer) {
  size_t bytes = rounded(elements);
  if (work && over_cap(work, bytes)) {
    if (work->collect) work->collect(work->context);
    if (over_cap(work, bytes)) {
      work->wanted = bytes;
      return LAC_OVER_CAP;
    }
  }
  if (bytes == SIZE_MAX) return LAC_NO_MEMORY;
  struct lac_pool *pool = work ? work->pool : NULL;
  size_t held = bytes;
  double *data = reused(pool, &held);
  if (!data) data = fresh(held);
  if (!data && pool && pool->count > 0) {
    forget_kept(pool);
    data = fresh(held);
  }
  if (!data) return LAC_NO_MEMORY;
  *buffer = (lac_buffer){data, held, work};
  if (work) work->used += held;
  return LAC_OK;
}

void lac_buffer_give(lac_buffer *buffer) {
  if (!buffer->data) return;
  lac_work *work = buffer->work;
  struct lac_pool *pool = work ? work->pool : NULL;
  if (work) work->used -= buffer->bytes;
  if (pool && buffer->bytes >= LARGE && pool->count < KEPT_BLOCKS && buffer->bytes <= KEPT_BYTES - pool->bytes) {
    pool->kept[pool->count].data = buffer->data;
    pool->kept[pool->count++].bytes = buffer->bytes;
    pool->bytes += buffer->bytes;
  } else {
    free(buffer->data);
  }
  *buffer = (lac_buffer){0};
}
