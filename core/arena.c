/* SPDX-License-Identifier: GPL-3.0-or-later */
/* A list of chunks, each filled from its start, text from its end. A request larger than a chunk gets a chunk of its own size. */
#include "arena.h"

#include <stdint.h>
#include <stdlib.h>

enum { CHUNK = 65536 };

struct lac_arena_chunk {
  lac_arena_chunk *before;
  size_t used, size;
  max_align_t bytes[];
};

static lac_arena_chunk *chunk_new(lac_arena *arena, size_t size) {
  if (size < CHUNK) size = CHUNK;
  lac_arena_chunk *chunk = size < SIZE_MAX / 2 ? malloc(sizeof *chunk + size) : NULL;
  if (chunk) {
    *chunk = (lac_arena_chunk){.before = arena->chunk, .size = size};
    arena->chunk = chunk;
  } else {
    arena->failed = true;
  }
  return chunk;
}

/* The newest chunk, if it has room, or a new one. */
static lac_arena_chunk *chunk_for(lac_arena *arena, size_t size) {
  lac_arena_chunk *chunk = arena->chunk;
  return chunk && chunk->size - chunk->used >= size ? chunk : chunk_new(arena, size);
}

void *lac_arena_take(lac_arena *arena, size_t size) {
  const size_t step = _Alignof(max_align_t);
  const size_t rounded = size > SIZE_MAX - step ? SIZE_MAX : (size + step - 1) / step * step;
  lac_arena_chunk *chunk = chunk_for(arena, rounded);
  if (!chunk) return NULL;
  void *taken = (char *)chunk->bytes + chunk->used;
  chunk->used += rounded;
  return taken;
}

/* Taking from the end makes the chunk smaller. */
char *lac_arena_take_text(lac_arena *arena, size_t size) {
  lac_arena_chunk *chunk = chunk_for(arena, size);
  if (!chunk) return NULL;
  chunk->size -= size;
  return (char *)chunk->bytes + chunk->size;
}

void lac_arena_free(lac_arena *arena) {
  while (arena->chunk) {
    lac_arena_chunk *before = arena->chunk->before;
    free(arena->chunk);
    arena->chunk = before;
  }
}
